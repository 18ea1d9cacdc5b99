// Chronodrome, GPL-3.0-or-later.
#pragma once

#include "ui/look/custom_plot.h"

#include "session/curve_view.h"

namespace chronodrome::ui::answer {

/// Ticks of the concentration axis: powers of ten with their concentration as text, three times a power of
/// ten as short ticks without, and `0` where the control stands.
class ConcentrationTicker : public QCPAxisTicker {
public:
  void setAxis(const session::ConcentrationAxis& axis) { axis_ = axis; }
  /// Labels only every n-th power of ten, so that they do not touch.
  void setStride(int every) { stride_ = every; }

protected:
  QVector<double> createTickVector(double tickStep, const QCPRange& range) override;
  QVector<double> createSubTickVector(int subTickCount, const QVector<double>& ticks) override;
  QVector<QString> createLabelVector(const QVector<double>& ticks, const QLocale& locale, QChar formatChar,
                                     int precision) override;
  int getSubTickCount(double tickStep) override;

private:
  session::ConcentrationAxis axis_;
  int stride_ = 1;
};

} // namespace chronodrome::ui::answer
