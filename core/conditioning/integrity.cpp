// Chronodrome, GPL-3.0-or-later.
#include "conditioning/integrity.h"

#include <algorithm>
#include <cmath>

#include "numerics/robust.h"

namespace chronodrome::conditioning {
namespace {

constexpr std::size_t kBlock = 256;

std::size_t samples_in(double seconds, Hertz rate) {
  return static_cast<std::size_t>(std::llround(seconds * rate.value()));
}

/// Minimum and maximum of any range: whole blocks are known, the rest is looked at.
class Extremes {
public:
  explicit Extremes(std::span<const double> samples) : samples_(samples) {
    for (std::size_t at = 0; at < samples.size(); at += kBlock)
      blocks_.push_back(of(samples.subspan(at, std::min(kBlock, samples.size() - at))));
  }

  [[nodiscard]] std::array<double, 2> within(std::size_t first, std::size_t end) const {
    std::array<double, 2> found = {samples_[first], samples_[first]};
    const auto widen = [&](const std::array<double, 2>& other) {
      found = {std::min(found[0], other[0]), std::max(found[1], other[1])};
    };
    while (first < end && first % kBlock != 0)
      widen({samples_[first], samples_[first]}), ++first;
    for (; first + kBlock <= end; first += kBlock)
      widen(blocks_[first / kBlock]);
    for (; first < end; ++first)
      widen({samples_[first], samples_[first]});
    return found;
  }

private:
  static std::array<double, 2> of(std::span<const double> block) {
    const auto [low, high] = std::minmax_element(block.begin(), block.end());
    return {*low, *high};
  }

  std::span<const double> samples_;
  std::vector<std::array<double, 2>> blocks_;
};

std::vector<SampleRange> at_rails(std::span<const double> samples, double step, std::array<double, 2> rails) {
  const double low = std::min(rails[0], rails[1]) + step;
  const double high = std::max(rails[0], rails[1]) - step;
  std::vector<SampleRange> found;
  std::size_t i = 0;
  while (i < samples.size()) {
    std::size_t j = i;
    while (j < samples.size() && (samples[j] <= low || samples[j] >= high))
      ++j;
    if (j - i >= 2) found.push_back({i, j});
    i = std::max(j, i + 1);
  }
  return found;
}

struct Plateau {
  SampleRange range;
  double value = 0.0;
  bool high = false;
};

/// Runs of equal samples that both neighbours look up to, or down to, and that are reached by a jump.
std::vector<Plateau> steep_plateaus(std::span<const double> samples, double step) {
  std::vector<Plateau> found;
  const double same = 0.5 * step;
  std::size_t i = 1;
  while (i + 1 < samples.size()) {
    if (std::abs(samples[i + 1] - samples[i]) > same) {
      ++i;
      continue;
    }
    std::size_t j = i + 1;
    while (j < samples.size() && std::abs(samples[j] - samples[i]) <= same)
      ++j;
    const double before = samples[i - 1] - samples[i];
    const double after = j < samples.size() ? samples[j] - samples[i] : before;
    const bool steep = std::max(std::abs(before), std::abs(after)) >= 3.0 * step;
    if (j - i >= 3 && steep && before * after > 0.0) found.push_back({{i, j}, samples[i], before < 0.0});
    i = j;
  }
  return found;
}

} // namespace

double smallest_step(std::span<const double> samples) {
  double step = 0.0;
  for (std::size_t i = 1; i < samples.size(); ++i) {
    const double difference = std::abs(samples[i] - samples[i - 1]);
    if (difference > 0.0 && (step == 0.0 || difference < step)) step = difference;
  }
  return step;
}

std::vector<SampleRange> find_clipping(std::span<const double> samples, Hertz rate, double step,
                                       const std::optional<std::array<double, 2>>& rails) {
  if (rails && (*rails)[0] != (*rails)[1]) return at_rails(samples, step, *rails);
  std::vector<Plateau> plateaus = steep_plateaus(samples, step);
  if (plateaus.empty()) return {};
  const Extremes extremes(samples);
  const std::size_t reach = samples_in(5.0, rate);
  std::erase_if(plateaus, [&](const Plateau& p) {
    const std::size_t first = p.range.first > reach ? p.range.first - reach : 0;
    const auto [low, high] = extremes.within(first, std::min(samples.size(), p.range.end + reach));
    return p.high ? high > p.value + 0.5 * step : low < p.value - 0.5 * step;
  });
  std::vector<SampleRange> found;
  for (std::size_t i = 0; i < plateaus.size(); ++i) {
    const auto twin = [&](std::size_t other) {
      return plateaus[other].high == plateaus[i].high &&
             std::abs(plateaus[other].value - plateaus[i].value) <= 0.5 * step;
    };
    bool again = false;
    for (std::size_t k = i; !again && k-- > 0 && plateaus[k].range.end + reach >= plateaus[i].range.first;)
      again = twin(k);
    for (std::size_t k = i + 1;
         !again && k < plateaus.size() && plateaus[k].range.first <= plateaus[i].range.end + reach; ++k)
      again = twin(k);
    if (again) found.push_back(plateaus[i].range);
  }
  return found;
}

std::vector<SampleRange> find_still_stretches(std::span<const double> samples, Hertz rate, double step) {
  const std::size_t shortest = std::max<std::size_t>(3, samples_in(0.2, rate));
  const double allowed = 2.0 * step * (1.0 + 1e-9);
  std::vector<SampleRange> found;
  std::size_t i = 0;
  while (i < samples.size()) {
    double low = samples[i];
    double high = samples[i];
    std::size_t j = i + 1;
    for (; j < samples.size(); ++j) {
      low = std::min(low, samples[j]);
      high = std::max(high, samples[j]);
      if (high - low > allowed) break;
    }
    if (j - i >= shortest) {
      found.push_back({i, j});
      i = j;
      continue;
    }
    // Start again behind the last sample that is too far from the one that broke the stretch.
    if (j >= samples.size()) break;
    std::size_t k = j;
    while (k > i && std::abs(samples[k - 1] - samples[j]) <= allowed)
      --k;
    i = std::max(k, i + 1);
  }
  return joined(std::move(found));
}

double quiet_range(std::span<const double> samples, Hertz rate) {
  const std::size_t length = std::max<std::size_t>(3, samples_in(0.05, rate));
  std::vector<double> ranges;
  for (std::size_t at = 0; at + length <= samples.size(); at += length) {
    const auto part = samples.subspan(at, length);
    const auto [low, high] = std::minmax_element(part.begin(), part.end());
    ranges.push_back(*high - *low);
  }
  return ranges.size() < 4 ? 0.0 : numerics::quantile(ranges, 0.1);
}

std::vector<SampleRange> joined(std::vector<SampleRange> ranges) {
  std::sort(ranges.begin(), ranges.end(),
            [](const SampleRange& a, const SampleRange& b) { return a.first < b.first; });
  std::vector<SampleRange> found;
  for (const SampleRange& range : ranges) {
    if (!found.empty() && range.first <= found.back().end) {
      found.back().end = std::max(found.back().end, range.end);
    } else {
      found.push_back(range);
    }
  }
  return found;
}

} // namespace chronodrome::conditioning
