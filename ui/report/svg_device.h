// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <memory>

#include <QPaintDevice>
#include <QSize>
#include <QString>

namespace chronodrome::ui::report {

/// A surface whose painting becomes the inside of an <svg> element: shapes as vectors, text as text, and clip
/// rectangles kept, without which lines would run out of their plots (QSvgGenerator drops them). Knows what
/// figures use: plain pens and brushes, opacity, rectangles as clips; a brush with a pattern is filled plain.
class SvgDevice : public QPaintDevice {
public:
  explicit SvgDevice(QSize size);
  ~SvgDevice() override;

  [[nodiscard]] QPaintEngine* paintEngine() const override;
  /// What was painted. Requires: no painter is active.
  [[nodiscard]] QString content() const;

protected:
  int metric(PaintDeviceMetric metric) const override;

private:
  class Engine;
  QSize size_;
  std::unique_ptr<Engine> engine_;
};

} // namespace chronodrome::ui::report
