// Chronodrome, GPL-3.0-or-later.
#include "ui/look/plot_style.h"

#include <algorithm>
#include <array>
#include <cmath>

#include "base/number_text.h"

namespace chronodrome::ui::look {
namespace {

/// Decimals that write every multiple of a step as it is: one for 0.5, two for 0.25.
int decimalsOf(double step) {
  const int first = std::clamp(static_cast<int>(-std::floor(std::log10(step) + 1e-9)), 0, 9);
  const double scaled = step * std::pow(10.0, first);
  return std::abs(scaled - std::round(scaled)) < 1e-6 * scaled ? first : std::min(first + 1, 9);
}

} // namespace

QPen thinPen(const QColor& color, Qt::PenStyle style) {
  QPen pen(color, kThin, style);
  pen.setCosmetic(true);
  return pen;
}

QPen thickPen(const QColor& color, Qt::PenStyle style) {
  return QPen(color, kThick, style, Qt::RoundCap, Qt::RoundJoin);
}

void dress(QCustomPlot& plot, const Theme& theme) {
  plot.setBackground(QBrush(theme.surface));
  plot.setNoAntialiasingOnDrag(true);
  plot.setNotAntialiasedElements(QCP::aeAll);
  plot.setPlottingHints(QCP::phFastPolylines | QCP::phCacheLabels);
  plot.setFont(theme.font(TextSize::small));
  for (auto* rect : plot.axisRects())
    dress(*rect, theme);
}

void dress(QCPAxisRect& rect, const Theme& theme) {
  rect.setBackground(QBrush(Qt::NoBrush));
  for (auto* axis : rect.axes()) {
    axis->setBasePen(thinPen(theme.line));
    axis->setTickPen(thinPen(theme.line));
    axis->setSubTickPen(thinPen(theme.line));
    axis->setTickLabelColor(theme.text_quiet);
    axis->setTickLabelFont(theme.font(TextSize::small));
    axis->setLabelColor(theme.text);
    axis->setLabelFont(theme.font(TextSize::small));
    axis->setTickLength(0, 4);
    axis->setSubTickLength(0, 2);
    axis->setTickLabelPadding(4);
    axis->setLabelPadding(4);
    axis->grid()->setPen(thinPen(theme.grid));
    axis->grid()->setSubGridVisible(false);
    axis->grid()->setZeroLinePen(Qt::NoPen);
  }
}

double TimeTicker::getTickStep(const QCPRange& range) {
  const double wanted = range.size() / (tickCount() + 1e-10);
  static constexpr std::array<double, 17> steps{1,   2,   5,    10,   15,   30,    60,    120,  300,
                                                600, 900, 1800, 3600, 7200, 14400, 43200, 86400};
  if (wanted < 1.0) {
    step_ = getMantissa(wanted);
    const double power = wanted / step_;
    step_ = power * (step_ <= 1.0 ? 1.0 : step_ <= 2.0 ? 2.0 : step_ <= 5.0 ? 5.0 : 10.0);
  } else {
    const auto* at = std::lower_bound(steps.begin(), steps.end(), wanted);
    step_ = at == steps.end() ? steps.back() : *at;
  }
  return step_;
}

int TimeTicker::getSubTickCount(double tickStep) {
  if (tickStep < 1.0) return QCPAxisTicker::getSubTickCount(tickStep);
  const int whole = static_cast<int>(std::lround(tickStep));
  if (whole % 3 == 0 && whole != 3) return whole % 9 == 0 ? 2 : whole == 15 || whole == 900 ? 2 : 5;
  return whole % 5 == 0 ? 4 : 1;
}

QString TimeTicker::getTickLabel(double tick, const QLocale&, QChar, int) {
  const double seconds = std::abs(tick);
  const int decimals = step_ < 1.0 ? decimalsOf(step_) : 0;
  const double scale = std::pow(10.0, decimals);
  const auto whole = static_cast<long long>(std::floor(std::round(seconds * scale) / scale + 1e-12));
  const double rest = std::max(0.0, std::round(seconds * scale) / scale - static_cast<double>(whole));
  QString text = tick < -0.5 / scale ? QStringLiteral("\u2212") : QString();
  const auto pad = [](long long part) { return QStringLiteral("%1").arg(part, 2, 10, QLatin1Char('0')); };
  if (whole >= 3600)
    text += QString::number(whole / 3600) + QLatin1Char(':') + pad(whole % 3600 / 60) + QLatin1Char(':');
  else
    text += QString::number(whole / 60) + QLatin1Char(':');
  text += pad(whole % 60);
  if (decimals > 0) text += QString::fromStdString(fixed_text(rest, decimals)).mid(1);
  return text;
}

double NumberTicker::getTickStep(const QCPRange& range) {
  step_ = QCPAxisTicker::getTickStep(range);
  return step_;
}

QString NumberTicker::getTickLabel(double tick, const QLocale&, QChar, int) {
  if (std::abs(tick) < step_ * 1e-6) tick = 0.0;
  const bool huge = std::abs(tick) >= 1e6 || (tick != 0.0 && step_ < 1e-6);
  QString text = QString::fromStdString(huge ? number_text(tick, 4) : fixed_text(tick, decimalsOf(step_)));
  if (text.startsWith(QLatin1Char('-'))) text.replace(0, 1, QStringLiteral("\u2212"));
  return text;
}

} // namespace chronodrome::ui::look
