// Chronodrome, GPL-3.0-or-later.
#include "activation/upstroke.h"

#include <algorithm>
#include <cmath>
#include <optional>

#include "activation/slope.h"

namespace chronodrome::activation {
namespace {

constexpr double kLowShare = 0.35;     // of the height: the crossing is a straight line fitted from here ...
constexpr double kHighShare = 0.65;    // ... to here
constexpr double kTopShare = 0.7;      // of the largest slope: the summit is a parabola fitted down to here
constexpr std::size_t kFewest = 4;     // neighbours beside the contraction itself
constexpr std::size_t kMostASide = 12; // more would only smear a shape that changes

/// Value between samples by the cubic through four of them. Requires: 1 <= position < size - 2.
double between(std::span<const double> x, double position) {
  const auto n = static_cast<std::size_t>(position);
  const double u = position - static_cast<double>(n);
  const double a = x[n - 1], b = x[n], c = x[n + 1], d = x[n + 2];
  return b + 0.5 * u * (c - a + u * (2.0 * a - 5.0 * b + 4.0 * c - d + u * (3.0 * (b - c) + d - a)));
}

/// Where the upstroke passes half of its height: a straight line fitted to the samples about it.
std::optional<double> crossing_of(std::span<const double> x, const Twitch& twitch) {
  const double height = twitch.peak - twitch.foot;
  const auto foot = static_cast<std::size_t>(std::max(0.0, twitch.foot_at));
  const auto peak =
      std::min(x.size() - 1, static_cast<std::size_t>(std::max(0.0, std::ceil(twitch.peak_at))));
  if (!(height > 0.0) || peak <= foot) return std::nullopt;
  const auto level = [&](double share) { return twitch.foot + share * height; };
  std::size_t after = foot + 1;
  while (after < peak && x[after] < level(0.5))
    ++after;
  std::size_t low = after - 1;
  std::size_t high = after;
  while (low > foot && x[low - 1] < x[low] && x[low - 1] >= level(kLowShare))
    --low;
  while (high < peak && x[high + 1] > x[high] && x[high + 1] <= level(kHighShare))
    ++high;
  double sum_n = 0.0, sum_x = 0.0, sum_nn = 0.0, sum_nx = 0.0;
  const auto count = static_cast<double>(high - low + 1);
  for (std::size_t n = low; n <= high; ++n) {
    const auto at = static_cast<double>(n - low);
    sum_n += at, sum_x += x[n], sum_nn += at * at, sum_nx += at * x[n];
  }
  const double slope = (count * sum_nx - sum_n * sum_x) / (count * sum_nn - sum_n * sum_n);
  if (!(slope > 0.0)) return std::nullopt;
  return static_cast<double>(low) + (sum_n + (level(0.5) * count - sum_x) / slope) / count;
}

/// Summit of a bump: vertex of the parabola fitted to the values about its largest one that reach kTopShare
/// of it.
std::optional<double> summit_of(std::span<const double> bump) {
  const auto top = static_cast<std::size_t>(std::max_element(bump.begin(), bump.end()) - bump.begin());
  if (top == 0 || top + 1 >= bump.size()) return std::nullopt;
  std::size_t low = top - 1;
  std::size_t high = top + 1;
  while (low > 0 && bump[low - 1] >= kTopShare * bump[top])
    --low;
  while (high + 1 < bump.size() && bump[high + 1] >= kTopShare * bump[top])
    ++high;
  // Least squares of a + b u + c u^2 about the middle of the stretch, where the odd sums vanish.
  const double middle = 0.5 * static_cast<double>(low + high);
  double s0 = 0.0, s2 = 0.0, s4 = 0.0, y0 = 0.0, y1 = 0.0, y2 = 0.0;
  for (std::size_t n = low; n <= high; ++n) {
    const double u = static_cast<double>(n) - middle;
    s0 += 1.0, s2 += u * u, s4 += u * u * u * u;
    y0 += bump[n], y1 += u * bump[n], y2 += u * u * bump[n];
  }
  const double b = y1 / s2;
  const double c = (s0 * y2 - s2 * y0) / (s0 * s4 - s2 * s2);
  const double reach = 0.5 * static_cast<double>(high - low);
  if (!(c < 0.0)) return static_cast<double>(top);
  return middle + std::clamp(-0.5 * b / c, -reach, reach);
}

class Timer {
public:
  Timer(std::span<const double> x, std::span<const Twitch> twitches, Hertz rate)
      : x_(x), twitches_(twitches), reach_(kUpstrokeNeighbours.value() * rate.value()) {
    for (const Twitch& twitch : twitches)
      crossings_.push_back(crossing_of(x, twitch));
  }

  double time(std::size_t i) {
    const double own = twitches_[i].rise_at;
    if (!crossings_[i]) return own;
    gather(i);
    if (members_.size() < kFewest + 1) return own;
    // From foot to peak of this contraction, and one sample more for the derivative.
    const double before = *crossings_[i] - twitches_[i].foot_at;
    const double behind = twitches_[i].peak_at - *crossings_[i];
    const auto half = static_cast<std::ptrdiff_t>(std::ceil(std::max({before, behind, 2.0}))) + 1;
    lay_over(half);
    std::vector<double> slope(static_cast<std::size_t>(2 * half - 1));
    for (std::size_t n = 0; n < slope.size(); ++n)
      slope[n] = average_[n + 2] - average_[n];
    const auto summit = summit_of(slope);
    return summit ? *crossings_[i] + *summit - static_cast<double>(half - 1) : own;
  }

private:
  [[nodiscard]] bool is_comparable(std::size_t i, std::size_t k) const {
    const double ratio = twitches_[k].rate_of_rise / twitches_[i].rate_of_rise;
    return crossings_[k] && ratio >= 0.5 && ratio <= 2.0;
  }

  void gather(std::size_t i) {
    members_.assign(1, i);
    const auto add = [&](std::size_t k, std::size_t& taken) {
      if (taken < kMostASide && is_comparable(i, k)) members_.push_back(k), ++taken;
    };
    std::size_t taken = 0;
    for (std::size_t k = i; k-- > 0 && twitches_[i].rise_at - twitches_[k].rise_at <= reach_;)
      add(k, taken);
    taken = 0;
    for (std::size_t k = i + 1; k < twitches_.size() && twitches_[k].rise_at - twitches_[i].rise_at <= reach_;
         ++k)
      add(k, taken);
    std::sort(members_.begin(), members_.end());
  }

  /// Average of the members, -half ... half samples about their crossings, foot 0 and height 1.
  void lay_over(std::ptrdiff_t half) {
    average_.assign(static_cast<std::size_t>(2 * half + 1), 0.0);
    for (const std::size_t k : members_) {
      const double centre = *crossings_[k];
      const double scale = 1.0 / (twitches_[k].peak - twitches_[k].foot);
      for (std::ptrdiff_t j = -half; j <= half; ++j) {
        const double at =
            std::clamp(centre + static_cast<double>(j), 1.0, static_cast<double>(x_.size()) - 3.0);
        average_[static_cast<std::size_t>(j + half)] += scale * (between(x_, at) - twitches_[k].foot);
      }
    }
  }

  std::span<const double> x_;
  std::span<const Twitch> twitches_;
  double reach_;
  std::vector<std::optional<double>> crossings_;
  std::vector<std::size_t> members_;
  std::vector<double> average_;
};

} // namespace

std::vector<double> time_upstrokes(std::span<const double> x, std::span<const Twitch> twitches, Hertz rate) {
  std::vector<double> times;
  if (x.size() < 5) {
    for (const Twitch& twitch : twitches)
      times.push_back(twitch.rise_at);
    return times;
  }
  Timer timer(x, twitches, rate);
  for (std::size_t i = 0; i < twitches.size(); ++i)
    times.push_back(timer.time(i));
  return times;
}

} // namespace chronodrome::activation
