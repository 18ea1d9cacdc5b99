// Chronodrome, GPL-3.0-or-later.
#include "activation/acceptance.h"

#include <algorithm>
#include <cmath>
#include <optional>

#include "numerics/robust.h"

namespace chronodrome::activation {
namespace {

constexpr double kFast_s = 2.0;
constexpr double kSlow_s = 5.0;
constexpr std::size_t kFewBeats = 5;
constexpr double kShareOfLargest = 0.2;
constexpr double kLoneRatio = 5.0;
constexpr Seconds kStepNeighbours{10.0};
constexpr double kStepSds = 8.0;
constexpr double kStepShare = 0.6;

/// Candidates within +-half samples of the i-th, in its own run, as an index range.
class Neighbours {
public:
  Neighbours(const std::vector<Candidate>& candidates, double half) : candidates_(candidates), half_(half) {}
  void move_to(std::size_t i) {
    const auto outside = [&](std::size_t k) {
      return candidates_[k].run != candidates_[i].run ||
             std::abs(static_cast<double>(candidates_[k].peak) - static_cast<double>(candidates_[i].peak)) >
                 half_;
    };
    while (first < i && outside(first))
      ++first;
    end = std::max(end, i + 1);
    while (end < candidates_.size() && !outside(end))
      ++end;
  }
  std::size_t first = 0;
  std::size_t end = 0;

private:
  const std::vector<Candidate>& candidates_;
  double half_;
};

/// Heights of the strong candidates of a window.
std::vector<double> strong_heights(const std::vector<Candidate>& candidates, const Neighbours& window,
                                   double noise, const ActivationSettings& settings) {
  std::vector<double> heights;
  double largest = 0.0;
  double second = 0.0;
  for (std::size_t k = window.first; k < window.end; ++k) {
    const double height = static_cast<double>(candidates[k].height);
    if (height <= settings.strong_ratio * noise) continue;
    heights.push_back(height);
    if (height > largest) {
      second = largest;
      largest = height;
    } else {
      second = std::max(second, height);
    }
  }
  const double reference = heights.size() > 1 ? second : largest;
  std::erase_if(heights, [&](double h) { return h < kShareOfLargest * reference; });
  return heights;
}

} // namespace

std::vector<Candidate> accept_beats(const std::vector<Candidate>& candidates, Hertz rate, bool is_slow,
                                    const ActivationSettings& settings) {
  std::vector<Candidate> accepted;
  Neighbours fast(candidates, kFast_s * rate.value());
  Neighbours slow(candidates, kSlow_s * rate.value());
  for (std::size_t i = 0; i < candidates.size(); ++i) {
    fast.move_to(i);
    slow.move_to(i);
    const Candidate& candidate = candidates[i];
    double noise = static_cast<double>(candidate.noise);
    std::vector<double> strong;
    if (!is_slow) strong = strong_heights(candidates, fast, noise, settings);
    if (strong.size() < kFewBeats) {
      noise = static_cast<double>(candidate.slow_noise);
      strong = strong_heights(candidates, slow, noise, settings);
    }
    if (strong.empty()) continue;
    const double height = static_cast<double>(candidate.height);
    if (strong.size() == 1 && height < kLoneRatio * noise) continue;
    const double level = numerics::median(strong);
    const double threshold =
        std::max(noise + settings.threshold_share * (level - noise), settings.noise_ratio * noise);
    if (height <= threshold) continue;
    accepted.push_back(candidate);
    accepted.back().noise = static_cast<float>(noise);
    accepted.back().level = static_cast<float>(level);
  }
  return accepted;
}

std::vector<Seconds> take_out_steps(std::vector<Candidate>& candidates, Hertz rate) {
  std::vector<Seconds> steps;
  std::vector<char> is_step(candidates.size(), 0);
  Neighbours window(candidates, kStepNeighbours.value() * rate.value());
  std::vector<double> shifts;
  for (std::size_t i = 0; i < candidates.size(); ++i) {
    window.move_to(i);
    const double shift = static_cast<double>(candidates[i].baseline_shift);
    if (std::abs(shift) < kStepShare * static_cast<double>(candidates[i].amplitude)) continue;
    shifts.clear();
    for (std::size_t k = window.first; k < window.end; ++k) {
      if (k != i) shifts.push_back(static_cast<double>(candidates[k].baseline_shift));
    }
    const double usual = shifts.empty() ? 0.0 : numerics::median(shifts);
    const double scatter = shifts.size() < 3 ? 0.0 : numerics::mad_sd(shifts);
    if (std::abs(shift - usual) <= kStepSds * scatter) continue;
    if (std::abs(shift - usual) < kStepShare * static_cast<double>(candidates[i].amplitude)) continue;
    is_step[i] = 1;
    steps.push_back(candidates[i].time);
  }
  std::size_t next = 0;
  std::erase_if(candidates, [&](const Candidate&) { return is_step[next++] != 0; });
  return steps;
}

} // namespace chronodrome::activation
