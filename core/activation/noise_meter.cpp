// Chronodrome, GPL-3.0-or-later.
#include "activation/noise_meter.h"

#include <algorithm>
#include <cmath>

#include "numerics/robust.h"

namespace chronodrome::activation {
namespace {

constexpr double kValuesAWindow = 1500.0; // enough for a robust SD to 3 %

} // namespace

NoiseMeter::NoiseMeter(const recording::Channel& channel)
    : channel_(channel),
      stride_(std::max<std::size_t>(1, static_cast<std::size_t>(channel.time_base().rate().value() *
                                                                kQualityWindow.value() / kValuesAWindow))) {}

std::size_t NoiseMeter::begin_window(const conditioning::ConditionedBlock& block, std::size_t i,
                                     std::size_t high) {
  const double fs = channel_.time_base().rate().value();
  const double time = channel_.time_base().time_at(static_cast<double>(block.first + i)).value();
  const auto window =
      static_cast<std::size_t>(std::max(0.0, std::floor(time / kQualityWindow.value() + 1e-9)));
  if (!open_ || window != current_.window) {
    close();
    current_ = {};
    current_.window = window;
    open_ = true;
  }
  const double left = (static_cast<double>(window) + 1.0) * kQualityWindow.value() - time;
  const auto count = static_cast<std::size_t>(std::max(1.0, std::ceil(left * fs - 1e-6)));
  return std::min(high, i + count);
}

void NoiseMeter::add_hum(const conditioning::ConditionedBlock& block, std::size_t i, std::size_t end) {
  for (const conditioning::HumStretch& hum : block.hum) {
    if (hum.frequency_hz <= 0.0) continue;
    const std::size_t first = std::max(hum.first, block.first + i);
    const std::size_t last = std::min(hum.end, block.first + end);
    if (last > first) current_.mains_power += hum.rms * hum.rms * static_cast<double>(last - first);
  }
}

void NoiseMeter::close() {
  if (open_) {
    current_.noise_sd = values_.size() < 2 ? 0.0 : numerics::mad_sd(values_);
    windows_.push_back(current_);
  }
  values_.clear();
  open_ = false;
}

std::vector<WindowNoise> NoiseMeter::finish() {
  close();
  return std::move(windows_);
}

} // namespace chronodrome::activation
