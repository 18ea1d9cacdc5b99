// Chronodrome, GPL-3.0-or-later.
#include "conduction/dissociation.h"

#include <algorithm>
#include <array>
#include <cmath>
#include <numbers>

namespace chronodrome::conduction {
namespace {

constexpr std::array<std::size_t, 4> kLengths = {6, 10, 20, 40};
constexpr double kShortScatter = 0.6; // of the usual limit, for the shortest stretch

/// One beat of `to` in the cycle of `from` that holds it.
struct Phase {
  double cosine = 0.0, sine = 0.0;
  double cycle = 0.0;    ///< of `from`
  double interval = 0.0; ///< since the `to` before
  bool usable = false;   ///< has a cycle that can be read
  bool joins = false;    ///< ... and so is the interval since the `to` before
};

std::vector<Phase> phases_of(std::span<const double> from, std::span<const double> to,
                             std::span<const recording::Span> unreadable) {
  std::vector<Phase> phases(to.size());
  for (std::size_t j = 0; j < to.size(); ++j) {
    Phase& phase = phases[j];
    if (j > 0) {
      phase.interval = to[j] - to[j - 1];
      phase.joins = !meets_any(unreadable, to[j - 1], to[j]);
    }
    const auto next = std::upper_bound(from.begin(), from.end(), to[j]);
    if (next == from.begin() || next == from.end()) continue;
    const double start = *(next - 1);
    phase.cycle = *next - start;
    phase.usable = !meets_any(unreadable, start, *next);
    const double angle = 2.0 * std::numbers::pi * (to[j] - start) / phase.cycle;
    phase.cosine = std::cos(angle);
    phase.sine = std::sin(angle);
  }
  return phases;
}

bool is_dissociated(std::span<const Phase> beats, const ConductionSettings& settings) {
  double c = 0.0, s = 0.0, cycles = 0.0, sum = 0.0, squares = 0.0;
  for (std::size_t k = 0; k < beats.size(); ++k) {
    if (!beats[k].usable || (k > 0 && !beats[k].joins)) return false;
    c += beats[k].cosine;
    s += beats[k].sine;
    cycles += beats[k].cycle;
    if (k > 0) sum += beats[k].interval;
  }
  const double n = static_cast<double>(beats.size());
  const double mean = sum / (n - 1.0);
  for (std::size_t k = 1; k < beats.size(); ++k)
    squares += (beats[k].interval - mean) * (beats[k].interval - mean);
  const double limit = settings.dissociation_scatter * (beats.size() == kLengths[0] ? kShortScatter : 1.0);
  if (std::sqrt(squares / (n - 2.0)) >= limit * mean) return false;
  if (mean < settings.dissociation_ratio * cycles / n) return false;
  return std::hypot(c, s) / n < std::sqrt(3.0 / n);
}

} // namespace

std::vector<recording::Span>
unreadable_of(std::initializer_list<const activation::ChannelActivations*> channels) {
  std::vector<recording::Span> spans;
  for (const auto* channel : channels) {
    for (const auto& stretch : channel->unreadable)
      spans.push_back(stretch.span);
  }
  std::sort(spans.begin(), spans.end(),
            [](const recording::Span& x, const recording::Span& y) { return x.start < y.start; });
  std::vector<recording::Span> joined;
  for (const recording::Span& span : spans) {
    if (!joined.empty() && span.start <= joined.back().end) {
      joined.back().end = std::max(joined.back().end, span.end);
    } else {
      joined.push_back(span);
    }
  }
  return joined;
}

bool meets_any(std::span<const recording::Span> stretches, double a, double b) {
  const auto stretch =
      std::partition_point(stretches.begin(), stretches.end(),
                           [&](const recording::Span& span) { return span.end.value() <= std::min(a, b); });
  return stretch != stretches.end() && stretch->start.value() < std::max(a, b);
}

std::vector<char> dissociated_beats(std::span<const double> from, std::span<const double> to,
                                    std::span<const recording::Span> unreadable,
                                    const ConductionSettings& settings) {
  std::vector<char> found(to.size(), 0);
  const std::vector<Phase> phases = phases_of(from, to, unreadable);
  for (const std::size_t length : kLengths) {
    for (std::size_t start = 0; start + length <= phases.size(); ++start) {
      if (!is_dissociated(std::span(phases).subspan(start, length), settings)) continue;
      std::fill_n(found.begin() + static_cast<std::ptrdiff_t>(start), length, char{1});
    }
  }
  return found;
}

} // namespace chronodrome::conduction
