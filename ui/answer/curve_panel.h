// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <memory>
#include <optional>

#include "ui/answer/concentration_ticker.h"
#include "ui/answer/curve_layer.h"

namespace chronodrome::ui::answer {

/// The colour of a measure's curve: its channel's on the screen, black for what belongs to none, and on
/// paper.
QColor curveColor(const session::SessionResult& result, const std::string& measure, const look::Theme& theme);

/// Sets a plot up as the panel of a curve: axes, titles, layer. The plot owns what is put into it.
class CurvePanel {
public:
  explicit CurvePanel(QCustomPlot& plot);

  void show(const session::CurveView& view, const look::Theme& theme, const QColor& color);
  void clear();
  /// Fits labels and legend to the size; call before a replot whenever it has changed.
  void arrange(QSize size);

  [[nodiscard]] const std::optional<session::CurveView>& view() const { return view_; }
  [[nodiscard]] CurveLayer& layer() { return *layer_; }
  [[nodiscard]] const CurveLayer& layer() const { return *layer_; }

private:
  QCustomPlot& plot_;
  CurveLayer* layer_;
  QSharedPointer<ConcentrationTicker> concentrations_;
  std::optional<session::CurveView> view_;
  look::Theme theme_;
  QColor color_;
};

} // namespace chronodrome::ui::answer
