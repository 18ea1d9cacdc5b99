// Chronodrome, GPL-3.0-or-later.
#include "conditioning/anchors.h"

#include <algorithm>
#include <cmath>

namespace chronodrome::conditioning {
namespace {

constexpr double kReach_s = 0.5;
constexpr double kLongest_s = 0.75;
constexpr double kDead_s = 8.0;

class Jumps {
public:
  Jumps(std::span<const double> samples, std::span<const std::uint8_t> bad) : samples_(samples), bad_(bad) {}
  [[nodiscard]] std::size_t size() const { return samples_.size(); }
  /// Jump into sample i; 0 where either end is bad.
  [[nodiscard]] double at(std::size_t i) const {
    if (i == 0 || bad_[i] != 0 || bad_[i - 1] != 0) return 0.0;
    return std::abs(samples_[i] - samples_[i - 1]);
  }
  [[nodiscard]] std::size_t largest(std::size_t first, std::size_t end) const {
    std::size_t best = first;
    double height = at(first);
    for (std::size_t i = first + 1; i < end; ++i) {
      const double jump = at(i);
      if (jump > height) best = i, height = jump;
    }
    return best;
  }

private:
  std::span<const double> samples_;
  std::span<const std::uint8_t> bad_;
};

/// Samples whose jump no other within `reach` exceeds; of equal ones none. Such a sample is the largest of
/// its cell of `reach` samples, so that only those are looked at.
std::vector<std::size_t> anchors_of(const Jumps& jumps, std::size_t reach) {
  std::vector<std::size_t> found;
  for (std::size_t cell = 0; cell < jumps.size(); cell += reach) {
    const std::size_t end = std::min(jumps.size(), cell + reach);
    const std::size_t best = jumps.largest(cell, end);
    const double height = jumps.at(best);
    if (height <= 0.0) continue;
    const std::size_t low = best > reach ? best - reach : 0;
    const std::size_t high = std::min(jumps.size(), best + reach + 1);
    bool is_largest = true;
    for (std::size_t i = low; is_largest && i < high; ++i)
      is_largest = i == best || jumps.at(i) < height;
    if (is_largest) found.push_back(best);
  }
  return found;
}

} // namespace

std::vector<std::size_t> divide(std::span<const double> samples, std::span<const std::uint8_t> bad,
                                Hertz rate, std::size_t offset) {
  const double fs = rate.value();
  const auto reach = std::max<std::size_t>(1, static_cast<std::size_t>(std::llround(kReach_s * fs)));
  const auto dead = static_cast<std::size_t>(std::llround(kDead_s * fs));
  std::vector<std::size_t> fixed = {0};
  std::vector<std::size_t> anchors = anchors_of(Jumps(samples, bad), reach);
  anchors.push_back(samples.size());
  for (const std::size_t anchor : anchors) {
    if (dead > 1 && anchor - fixed.back() > dead) {
      const std::size_t stride = dead / 2;
      const std::size_t from = fixed.back();
      for (std::size_t at = ((from + offset) / stride + 1) * stride - offset; at < anchor; at += stride)
        if (at > fixed.back() + reach && anchor - at > reach) fixed.push_back(at);
    }
    if (anchor > fixed.back()) fixed.push_back(anchor);
  }
  std::vector<std::size_t> borders = {0};
  for (std::size_t k = 1; k < fixed.size(); ++k) {
    const std::size_t gap = fixed[k] - fixed[k - 1];
    const auto parts = std::max<std::size_t>(
        1, static_cast<std::size_t>(std::ceil(static_cast<double>(gap) / (kLongest_s * fs))));
    for (std::size_t part = 1; part <= parts; ++part) {
      const std::size_t border = fixed[k - 1] + (gap * part + parts / 2) / parts;
      if (border > borders.back()) borders.push_back(border);
    }
  }
  return borders;
}

} // namespace chronodrome::conditioning
