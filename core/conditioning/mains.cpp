// Chronodrome, GPL-3.0-or-later.
#include "conditioning/mains.h"

#include <algorithm>
#include <array>
#include <cmath>

#include "conditioning/anchors.h"
#include "conditioning/harmonics.h"
#include "conditioning/mains_presence.h"

namespace chronodrome::conditioning {
namespace {

constexpr double kGroupRate_hz = 1000.0; // samples are averaged down to about this rate before a fit

constexpr std::size_t kSampled = 200; // jumps that the limit of a stretch is taken from

/// Jumps above this belong to activations: the larger of a quantile and so many medians. `jumps` is
/// reordered.
double steepness_limit(std::vector<double>& jumps, const MainsSettings& settings) {
  const std::size_t last = jumps.size() - 1;
  const auto at = [&](double share) {
    return jumps.begin() + static_cast<std::ptrdiff_t>(share * static_cast<double>(last));
  };
  const auto middle = at(0.5);
  std::nth_element(jumps.begin(), middle, jumps.end());
  const double median = *middle;
  const auto upper = at(settings.mask_quantile);
  if (upper > middle) {
    std::nth_element(middle, upper, jumps.end());
  } else {
    std::nth_element(jumps.begin(), upper, middle + 1);
  }
  return std::max(*upper, settings.mask_medians * median);
}

/// Steep samples of each stretch with a margin, and the unusable ones: what may not enter a fit.
std::vector<std::uint8_t> mask_of(std::span<const double> samples, std::span<const std::uint8_t> unusable,
                                  std::span<const std::size_t> borders, Hertz rate, std::size_t grouping,
                                  const MainsSettings& settings) {
  std::vector<std::uint8_t> masked(unusable.begin(), unusable.end());
  const auto margin =
      static_cast<std::size_t>(std::llround(settings.mask_margin.value() * rate.value())) + grouping / 2;
  std::vector<double> jumps;
  std::vector<double> some;
  for (std::size_t k = 0; k + 1 < borders.size(); ++k) {
    jumps.clear();
    for (std::size_t i = borders[k]; i + 2 * grouping <= borders[k + 1]; i += grouping)
      jumps.push_back(std::abs(samples[i + grouping] - samples[i]));
    if (jumps.size() < 8) continue;
    const std::size_t stride = jumps.size() / kSampled + 1;
    some.clear();
    for (std::size_t g = 0; g < jumps.size(); g += stride)
      some.push_back(jumps[g]);
    const double limit = steepness_limit(some, settings);
    for (std::size_t g = 0; g < jumps.size(); ++g) {
      if (jumps[g] <= limit) continue;
      const std::size_t at = borders[k] + g * grouping;
      const std::size_t low = at > margin ? at - margin : 0;
      const std::size_t high = std::min(samples.size(), at + grouping + margin + 1);
      std::fill(masked.begin() + static_cast<std::ptrdiff_t>(low),
                masked.begin() + static_cast<std::ptrdiff_t>(high), std::uint8_t{1});
    }
  }
  return masked;
}

/// A border and the stretches to either side: where the hum is fitted.
struct Block {
  std::size_t left = 0, border = 0, right = 0;
};

class HumRemover {
public:
  HumRemover(std::span<double> samples, std::span<const std::uint8_t> unusable, Hertz rate,
             std::size_t offset, const MainsSettings& settings)
      : samples_(samples), unusable_(unusable), rate_(rate), settings_(settings),
        grouping_(std::max<std::size_t>(1, static_cast<std::size_t>(rate.value() / kGroupRate_hz))),
        borders_(divide(samples, unusable, rate, offset)),
        masked_(mask_of(samples, unusable, borders_, rate, grouping_, settings)),
        frequency_(hum_frequencies(samples, masked_, borders_, rate, grouping_, settings)) {}

  std::vector<HumStretch> run() {
    if (std::any_of(frequency_.begin(), frequency_.end(), [](double f) { return f > 0.0; })) {
      fit();
      return subtract();
    }
    std::vector<HumStretch> untouched;
    for (std::size_t k = 0; k + 1 < borders_.size(); ++k)
      untouched.push_back({borders_[k], borders_[k + 1], 0.0, 0.0});
    return untouched;
  }

private:
  [[nodiscard]] Block block_at(std::size_t b) const {
    return {borders_[b > 0 ? b - 1 : 0], borders_[b], borders_[std::min(b + 1, borders_.size() - 1)]};
  }

  /// Frequency of a block: the mean of the stretches beside its border that hum.
  [[nodiscard]] double frequency_at(std::size_t b) const {
    double sum = 0.0;
    int count = 0;
    for (const std::size_t k : {b - 1, b}) { // b - 1 wraps beyond the end where there is none
      if (k < frequency_.size() && frequency_[k] > 0.0) sum += frequency_[k], ++count;
    }
    return count > 0 ? sum / count : 0.0;
  }

  void fit() {
    fits_.resize(borders_.size());
    for (std::size_t b = 0; b < borders_.size(); ++b) {
      const double f = frequency_at(b);
      if (f <= 0.0) continue;
      std::vector<int> numbers;
      for (const int number : settings_.harmonics) {
        if (number * f < 0.45 * rate_.value() / static_cast<double>(grouping_)) numbers.push_back(number);
      }
      if (numbers.empty()) continue;
      const Block block = block_at(b);
      const std::array<FitSamples, 2> parts = {part(block.left, block.border),
                                               part(block.border, block.right)};
      fits_[b] =
          fit_harmonics(parts, f / rate_.value(), numbers, grouping_, static_cast<double>(block.border));
    }
  }

  [[nodiscard]] FitSamples part(std::size_t first, std::size_t end) const {
    return {samples_.subspan(first, end - first), std::span(masked_).subspan(first, end - first),
            static_cast<double>(first)};
  }

  /// Where one border's fit failed, its neighbour's carries the whole stretch.
  std::vector<HumStretch> subtract() {
    std::vector<HumStretch> stretches;
    std::vector<double> hum;
    for (std::size_t k = 0; k + 1 < borders_.size(); ++k) {
      const std::size_t first = borders_[k];
      hum.assign(borders_[k + 1] - first, 0.0);
      const bool left = fits_[k].solved;
      const bool right = fits_[k + 1].solved;
      const bool here = frequency_[k] > 0.0;
      if (here) {
        add_hum(fits_[k], static_cast<double>(first), 1.0, right ? 0.0 : 1.0, hum);
        add_hum(fits_[k + 1], static_cast<double>(first), left ? 0.0 : 1.0, 1.0, hum);
      }
      double power = 0.0;
      for (std::size_t i = 0; i < hum.size(); ++i) {
        samples_[first + i] -= hum[i];
        power += hum[i] * hum[i];
      }
      const bool removed = here && (left || right);
      stretches.push_back({first, borders_[k + 1], removed ? frequency_[k] : 0.0,
                           std::sqrt(power / static_cast<double>(hum.size()))});
    }
    return stretches;
  }

  std::span<double> samples_;
  std::span<const std::uint8_t> unusable_;
  Hertz rate_;
  const MainsSettings& settings_;
  std::size_t grouping_;
  std::vector<std::size_t> borders_;
  std::vector<std::uint8_t> masked_;
  std::vector<double> frequency_;
  std::vector<HarmonicFit> fits_;
};

} // namespace

std::optional<Error> MainsSettings::check() const {
  const auto wrong = [](const char* what, const char* remedy) {
    return Error{ErrorCode::bad_usage, "", {}, what, remedy};
  };
  if (harmonics.empty() || harmonics.size() > 8 ||
      std::any_of(harmonics.begin(), harmonics.end(), [](int k) { return k < 1; })) {
    return wrong("the list of mains harmonics must hold one to eight multiples, each 1 or more",
                 "leave it out for 1, 2, 3 and 5");
  }
  if (!(presence_ratio > 1.0))
    return wrong("conditioning.mains_presence_ratio must exceed 1", "leave it out for 4");
  if (!(mask_quantile > 0.0 && mask_quantile < 1.0))
    return wrong("conditioning.mains_mask_quantile must lie between 0 and 1", "leave it out for 0.88");
  if (!(mask_medians > 0.0) || mask_margin < Seconds(0.0)) {
    return wrong(
        "conditioning.mains_mask_medians must exceed 0 and conditioning.mains_mask_margin_s not be negative",
        "leave them out for 4 and 0.004 s");
  }
  return std::nullopt;
}

std::vector<HumStretch> remove_hum(std::span<double> samples, std::span<const std::uint8_t> unusable,
                                   Hertz rate, std::size_t offset, const MainsSettings& settings) {
  if (samples.empty()) return {};
  if (settings.nominal == MainsChoice::off || samples.size() < 32) return {{0, samples.size(), 0.0, 0.0}};
  return HumRemover(samples, unusable, rate, offset, settings).run();
}

} // namespace chronodrome::conditioning
