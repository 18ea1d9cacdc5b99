// Chronodrome, GPL-3.0-or-later.
#include "ui/answer/paint.h"

#include "ui/answer/curve_panel.h"
#include "ui/answer/words.h"

namespace chronodrome::ui::answer {

void paintCurve(QCPPainter& painter, QSize size, const session::SessionResult& result, int curve,
                const std::string& measure, const look::Theme& theme, session::ResponseForm form) {
  const auto view = session::curve_view(result, curve, measure, form);
  if (!view) return;
  QCustomPlot plot;
  CurvePanel panel(plot);
  panel.show(*view, theme, curveColor(result, measure, theme));
  panel.arrange(size);
  painter.setMode(QCPPainter::pmVectorized);
  plot.toPainter(&painter, size.width(), size.height());
}

QString curveCaption(const session::SessionResult& result, int curve, const std::string& measure,
                     session::ResponseForm form) {
  const auto view = session::curve_view(result, curve, measure, form);
  return view ? captionText(*view) : QString();
}

QString curveAnswer(const session::SessionResult& result, int curve, const std::string& measure) {
  const auto view = session::curve_view(result, curve, measure);
  return view ? answerText(*view) : QString();
}

} // namespace chronodrome::ui::answer
