// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <optional>
#include <span>

#include "ui/evidence/frame.h"

#include "activation/activation.h"
#include "document/session_file.h"
#include "ui/evidence/scene.h"

namespace chronodrome::ui::evidence {

/// Marks that are nearer than this stand as ticks alone, in pixels.
inline constexpr double kMarksApart = 8.0;
/// Height of what stands at the top of a row for a mark.
inline constexpr double kGlyph = 8.0;

/// Marks within the frame: first index and one past the last.
std::pair<std::size_t, std::size_t> marksWithin(std::span<const activation::Activation> marks,
                                                const TimeFrame& time);

/// Mean distance of neighbouring marks within the frame, in pixels; large for one mark or none.
double marksApart(std::span<const activation::Activation> marks, const TimeFrame& time);

/// Origin by shape: a detected mark is a triangle, an added one a filled circle, a moved one a diamond.
void drawGlyph(QCPPainter& painter, const QPointF& top, activation::Origin origin, const QColor& color);

/// The lines of a row's marks: they go beneath the trace, whose steepest part would be hidden by them.
void drawMarkLines(QCPPainter& painter, const RowFrame& row, std::span<const activation::Activation> marks,
                   const QColor& color, const look::Theme& theme);

/// The shapes of a row's marks at its top; ticks where marks are too near for shapes.
void drawMarks(QCPPainter& painter, const RowFrame& row, std::span<const activation::Activation> marks,
               const QColor& color, const look::Theme& theme);

/// A correction that the next result will hold: open shapes, a cross for a deleted mark.
void drawPending(QCPPainter& painter, const RowFrame& row, const Pending& pending, const QColor& color);

} // namespace chronodrome::ui::evidence
