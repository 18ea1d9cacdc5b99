// Chronodrome, GPL-3.0-or-later.
#include "ui/answer/concentration_ticker.h"

#include <cmath>

#include "ui/look/number_text.h"

namespace chronodrome::ui::answer {

QVector<double> ConcentrationTicker::createTickVector(double, const QCPRange&) {
  QVector<double> ticks;
  if (axis_.zero) ticks.push_back(*axis_.zero);
  for (const session::ConcentrationTick& tick : axis_.ticks) {
    if (tick.is_decade) ticks.push_back(tick.position);
  }
  return ticks;
}

int ConcentrationTicker::getSubTickCount(double) {
  return 1; // a count above 0 is what makes the axis ask for them
}

QVector<double> ConcentrationTicker::createSubTickVector(int, const QVector<double>&) {
  QVector<double> ticks;
  for (const session::ConcentrationTick& tick : axis_.ticks) {
    if (!tick.is_decade) ticks.push_back(tick.position);
  }
  return ticks;
}

QVector<QString> ConcentrationTicker::createLabelVector(const QVector<double>& ticks, const QLocale&, QChar,
                                                        int) {
  QVector<QString> labels;
  for (const double tick : ticks) {
    if (axis_.zero && tick == *axis_.zero) {
      labels.push_back(QStringLiteral("0"));
      continue;
    }
    const auto power = static_cast<int>(std::lround(tick));
    const bool labelled = ((power % stride_) + stride_) % stride_ == 0;
    const double concentration = power < 0 ? 1.0 / std::pow(10.0, -power) : std::pow(10.0, power);
    labels.push_back(labelled ? look::concentrationText(Molar(concentration)) : QString());
  }
  return labels;
}

} // namespace chronodrome::ui::answer
