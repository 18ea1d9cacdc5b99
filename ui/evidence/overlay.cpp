// Chronodrome, GPL-3.0-or-later.
#include "ui/evidence/overlay.h"

#include <algorithm>
#include <cmath>

#include "ui/evidence/evidence_figure.h"
#include "ui/evidence/mark_drawing.h"
#include "ui/evidence/words.h"
#include "ui/look/plot_style.h"

namespace chronodrome::ui::evidence {
namespace {

/// Draws one overlay over one figure.
class OverlayDrawing {
public:
  OverlayDrawing(QCPPainter& painter, const EvidenceFigure& figure)
      : painter_(painter), figure_(figure), overlay_(figure.overlay()), theme_(figure.theme()),
        time_(figure.timeFrame()), top_(figure.rowFrame(0).rect.top()),
        bottom_(figure.rowFrame(figure.scene().rows() - 1).rect.bottom()) {}

  void draw() {
    painter_.setAntialiasing(false);
    painter_.setFont(theme_.font(look::TextSize::small));
    activeRow();
    if (overlay_.selection) selection(*overlay_.selection);
    if (overlay_.chosen) chosen(*overlay_.chosen);
    // Chips stand on the outer sides, so that neither hides the other.
    const bool is_first = !overlay_.second || !overlay_.reference || *overlay_.reference <= *overlay_.second;
    if (overlay_.reference)
      cursor(*overlay_.reference, QStringLiteral("reference"), Qt::DashLine, is_first ? -1 : 1);
    if (overlay_.second) {
      const QString name = overlay_.is_pinned ? QStringLiteral("second") : QString();
      cursor(*overlay_.second, name, Qt::SolidLine, is_first ? 1 : -1);
    }
    if (overlay_.move) move(*overlay_.move);
  }

private:
  [[nodiscard]] bool shows(Seconds time) const { return time >= time_.start && time <= time_.end; }

  void activeRow() {
    if (overlay_.active_row < 0 || overlay_.active_row >= figure_.scene().rows()) return;
    const QRectF rect = figure_.rowFrame(overlay_.active_row).rect;
    painter_.fillRect(QRectF(0.0, rect.top(), 3.0, rect.height()), theme_.accent);
  }

  void selection(const Overlay::Selection& selection) {
    const QRectF row = selection.row < 0 ? QRectF(time_.left, top_, time_.width, bottom_ - top_)
                                         : figure_.rowFrame(selection.row).rect;
    const double left = std::clamp(time_.xOf(selection.start), row.left(), row.right());
    const double right = std::clamp(time_.xOf(selection.end), row.left(), row.right());
    const QRectF box(left, row.top(), right - left, row.height());
    QColor fill = theme_.accent;
    fill.setAlphaF(0.16F);
    painter_.fillRect(box, fill);
    painter_.setPen(look::thinPen(theme_.accent));
    painter_.drawLine(box.topLeft(), box.bottomLeft());
    painter_.drawLine(box.topRight(), box.bottomRight());
    drawChip(painter_, QRectF(box.left(), box.bottom() - 20.0, box.width(), 18.0),
             millisecondsText(selection.end - selection.start), theme_.on_accent, theme_.accent);
  }

  void chosen(const Overlay::Mark& mark) {
    if (!shows(mark.time) || mark.row >= figure_.scene().rows()) return;
    const QRectF rect = figure_.rowFrame(mark.row).rect;
    const double x = std::round(time_.xOf(mark.time));
    painter_.setPen(look::thickPen(theme_.accent));
    painter_.drawLine(QPointF(x, rect.top() + kGlyph + 4.0), QPointF(x, rect.bottom()));
    painter_.setBrush(Qt::NoBrush);
    painter_.setAntialiasing(true);
    painter_.drawRoundedRect(QRectF(x - kGlyph + 0.5, rect.top() - 3.0, 2.0 * kGlyph, kGlyph + 6.0), 3.0,
                             3.0);
    painter_.setAntialiasing(false);
  }

  /// `side`: -1: the chip stands left of the line, 1: right of it.
  void cursor(Seconds time, const QString& name, Qt::PenStyle style, int side) {
    if (!shows(time)) return;
    const double x = std::round(time_.xOf(time));
    painter_.setPen(look::thinPen(theme_.accent, style));
    painter_.drawLine(QPointF(x, top_ - 20.0), QPointF(x, bottom_ + 4.0));
    if (name.isEmpty()) return;
    const QString text = name + QLatin1Char(' ') + cursorTimeText(time);
    const double width = QFontMetricsF(painter_.font()).horizontalAdvance(text) + look::kUnit + 2.0;
    double left = side < 0 ? x - width : x + 1.0;
    if (left < 0.0) left = x + 1.0;
    if (left + width > time_.right() + look::kUnit) left = x - width;
    drawChip(painter_, QRectF(left, top_ - 21.0, width, 18.0), text, theme_.on_accent, theme_.accent);
  }

  void move(const Overlay::Move& move) {
    const QRectF rect = figure_.rowFrame(move.row).rect;
    const double x = std::round(time_.xOf(move.to));
    const double before = std::round(time_.xOf(move.from));
    painter_.setPen(look::thinPen(theme_.accent, Qt::DotLine));
    painter_.drawLine(QPointF(before, rect.top()), QPointF(before, rect.bottom()));
    painter_.setPen(look::thickPen(theme_.accent));
    painter_.drawLine(QPointF(x, rect.top()), QPointF(x, rect.bottom()));
    drawGlyph(painter_, QPointF(x + 0.5, rect.top()), activation::Origin::moved, theme_.accent);
    QString text = millisecondsText(move.to - move.from);
    if (move.to > move.from) text.prepend(QLatin1Char('+'));
    const double width = QFontMetricsF(painter_.font()).horizontalAdvance(text) + look::kUnit;
    const double left = x + 6.0 + width > time_.right() ? x - 6.0 - width : x + 6.0;
    drawChip(painter_, QRectF(left, rect.top() + kGlyph + 2.0, width, 18.0), text, theme_.on_accent,
             theme_.accent);
  }

  QCPPainter& painter_;
  const EvidenceFigure& figure_;
  const Overlay& overlay_;
  const look::Theme& theme_;
  TimeFrame time_;
  double top_, bottom_;
};

} // namespace

void drawOverlay(QCPPainter& painter, const EvidenceFigure& figure) {
  if (figure.scene().rows() > 0) OverlayDrawing(painter, figure).draw();
}

} // namespace chronodrome::ui::evidence
