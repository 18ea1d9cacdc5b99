// Chronodrome, GPL-3.0-or-later.
#pragma once

#include "ui/look/custom_plot.h"

#include <functional>
#include <utility>

namespace chronodrome::ui::evidence {

/// Calls a function when its layer is drawn: plain painter code within QCustomPlot's layers and buffers.
class Artist : public QCPLayerable {
  Q_OBJECT
public:
  Artist(QCustomPlot* plot, const QString& layer, std::function<void(QCPPainter&)> paint)
      : QCPLayerable(plot, layer), paint_(std::move(paint)) {}

protected:
  void applyDefaultAntialiasingHint(QCPPainter* painter) const override { painter->setAntialiasing(false); }
  void draw(QCPPainter* painter) override { paint_(*painter); }

private:
  std::function<void(QCPPainter&)> paint_;
};

} // namespace chronodrome::ui::evidence
