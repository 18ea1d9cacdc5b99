// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <QColor>
#include <QFont>
#include <QPalette>
#include <QString>

#include "recording/recording.h"

namespace chronodrome::ui::look {

/// Light and dark follow the system; paper is what is printed and exported, whatever the window shows.
enum class Mode { light, dark, paper };

enum class TextSize { small, normal, large };

/// Every colour, type size and line weight of the program. Nothing outside ui/look names a colour.
/// Contrast (WCAG 2.1, 1.4.3 and 1.4.11): text 4.5:1 and data 3:1 against `surface`, held by a test.
/// Colours of roles are those of Okabe & Ito (2008), darkened or lightened to the contrast. Colour never
/// carries meaning alone.
struct Theme {
  Mode mode = Mode::light;
  QColor window;      ///< behind everything
  QColor surface;     ///< of plots, tables, fields
  QColor raised;      ///< of bars and buttons
  QColor line;        ///< hairlines between parts
  QColor grid;        ///< of plots, fainter than `line`
  QColor text;        ///< what is read
  QColor text_quiet;  ///< units, hints, axis numbers
  QColor data;        ///< the darkest thing on the screen: signals and points without a role
  QColor accent;      ///< what the user touches: cursors, handles, the chosen step, focus
  QColor accent_fill; ///< the same, as a ground under data
  QColor on_accent;   ///< text on `accent`
  QColor plateau;     ///< ground of a plateau's band
  QColor agent;       ///< the bath's staircase
  QColor agent_fill;
  QColor excluded; ///< hatching of what is left out or cannot be read
  QColor caution;  ///< a flag or warning
  QColor fault;    ///< an error

  /// Of a channel's role: the same in traces, trends, marks and curves.
  [[nodiscard]] QColor of(recording::Role role) const;
  /// Of the text sizes; families differ between screen and paper.
  [[nodiscard]] QFont font(TextSize size, bool bold = false) const;
  [[nodiscard]] QPalette palette() const;

  static const Theme& of(Mode mode);
};

/// The grid that everything is laid out on, in device-independent pixels.
inline constexpr int kUnit = 8;
/// The two line weights. Traces are always the thin one and cosmetic: a wider pen costs a hundred times more.
inline constexpr int kThin = 1;
inline constexpr int kThick = 2;

/// `share` (0 to 1) of `color`, the rest of `ground`. Opaque: transparent pens are slow, and print
/// differently.
QColor blended(const QColor& color, const QColor& ground, double share);

/// Ratio of luminances, 1 to 21 (WCAG 2.1, definition of contrast ratio).
double contrast(const QColor& a, const QColor& b);

/// Rules for the widgets of a window, beside the palette.
QString styleSheet(const Theme& theme);

/// Mode that the system asks for (the default palette's brightness).
Mode systemMode();

} // namespace chronodrome::ui::look
