// Chronodrome, GPL-3.0-or-later.
#include "ui/answer/curve_panel.h"

#include <QFontMetrics>

#include "document/measure.h"
#include "ui/answer/words.h"
#include "ui/look/plot_style.h"

namespace chronodrome::ui::answer {
namespace {

using look::TextSize;

/// Thin lines of the axes as ink: dress() makes them cosmetic, which is a hairline on paper.
void ink(QCPAxis& axis, const look::Theme& theme) {
  const QColor line = theme.mode == look::Mode::paper ? theme.text : theme.line;
  axis.setBasePen(inkPen(line));
  axis.setTickPen(inkPen(line));
  axis.setSubTickPen(inkPen(line));
  axis.grid()->setPen(theme.mode == look::Mode::paper ? QPen(Qt::NoPen) : inkPen(theme.grid));
}

} // namespace

QColor curveColor(const session::SessionResult& result, const std::string& measure,
                  const look::Theme& theme) {
  const auto parsed = document::measure_named(measure);
  if (theme.mode == look::Mode::paper || !parsed || document::is_of_pathway(parsed->kind)) return theme.data;
  for (const recording::Channel& channel : result.channels) {
    if (channel.label == parsed->label) return theme.of(channel.role);
  }
  return theme.data;
}

CurvePanel::CurvePanel(QCustomPlot& plot)
    : plot_(plot), layer_(new CurveLayer(&plot)), concentrations_(new ConcentrationTicker) {
  plot_.xAxis->setTicker(concentrations_);
  plot_.yAxis->setTicker(QSharedPointer<look::NumberTicker>::create());
  plot_.xAxis->grid()->setVisible(false);
  plot_.axisRect()->setAutoMargins(QCP::msLeft | QCP::msBottom);
}

void CurvePanel::show(const session::CurveView& view, const look::Theme& theme, const QColor& color) {
  view_ = view;
  theme_ = theme;
  color_ = color;
  look::dress(plot_, theme);
  // A curve has some hundred lines, which may be smooth.
  plot_.setPlottingHints(QCP::phNone);
  for (QCPAxis* axis : {plot_.xAxis, plot_.yAxis})
    ink(*axis, theme);
  concentrations_->setAxis(view_->axis);
  plot_.xAxis->setRange(view_->axis.low, view_->axis.high);
  plot_.yAxis->setRange(view_->response_low, view_->response_high);
  plot_.xAxis->setLabel(concentrationTitle(*view_));
  plot_.yAxis->setLabel(responseTitle(*view_));
  layer_->setView(&*view_, theme_, color);
  layer_->setVisible(true);
}

void CurvePanel::clear() {
  view_.reset();
  layer_->setView(nullptr, theme_, {});
  layer_->setVisible(false);
}

void CurvePanel::arrange(QSize size) {
  if (!view_) return;
  const QFont font = theme_.font(TextSize::small);
  const QFontMetrics metrics(font);
  const int left = 6 * look::kUnit; // about what the numbers of the response take
  const int width = std::max(1, size.width() - left - look::kUnit);
  const double decade = width / (view_->axis.high - view_->axis.low);
  const int label = metrics.horizontalAdvance(QStringLiteral("100\u00A0nM")) + look::kUnit;
  concentrations_->setStride(std::max(1, static_cast<int>(std::ceil(label / decade))));
  auto legend = legendOf(*view_, theme_, color_);
  const int height = legendHeight(legend, font, width);
  layer_->setLegend(std::move(legend));
  plot_.axisRect()->setMargins({0, height > 0 ? height + 2 * look::kUnit : look::kUnit, look::kUnit, 0});
  // Some five numbers at the response axis, whatever its height.
  plot_.yAxis->ticker()->setTickCount(std::clamp(size.height() / 56, 3, 7));
}

} // namespace chronodrome::ui::answer
