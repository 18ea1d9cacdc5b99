// Chronodrome, GPL-3.0-or-later.
#include "conduction/retrograde.h"

#include <algorithm>
#include <cmath>

#include "numerics/robust.h"

namespace chronodrome::conduction {
namespace {

constexpr std::size_t kRun = 3;
constexpr double kEarly = 0.9;
constexpr std::size_t kRunning = 8; // cycles whose median is the running one

} // namespace

double usual_retrograde_delay(std::span<const double> from, std::span<const double> to, double usual,
                              const DelayWindow& window) {
  std::vector<double> found;
  std::vector<double> run;
  const auto close = [&] {
    if (run.size() >= kRun) found.insert(found.end(), run.begin(), run.end());
    run.clear();
  };
  for (const double t : to) {
    const auto before = std::lower_bound(from.begin(), from.end(), t - 1.5 * usual);
    const bool has_cause = before != from.end() && *before <= t - 0.5 * usual;
    const auto next = std::lower_bound(from.begin(), from.end(), t + window.shortest.value());
    const bool follows = next != from.end() && *next <= t + window.longest.value();
    if (has_cause || !follows) {
      close();
      continue;
    }
    const double delay = *next - t;
    if (!run.empty() && std::abs(delay - run.back()) > std::max(5e-3, 0.1 * run.back())) close();
    run.push_back(delay);
  }
  close();
  if (!found.empty()) return numerics::median(found);
  return std::clamp(1.2 * usual, window.shortest.value(), window.longest.value());
}

void undo_unlikely_retrograde(std::span<const double> from, std::span<const double> to,
                              std::vector<std::optional<std::size_t>>& partner) {
  const auto is_back = [&](std::size_t i) { return partner[i] && to[*partner[i]] < from[i]; };
  // Beats of `to` with a retrograde link, so that runs of them can be seen.
  std::vector<char> back(to.size(), 0);
  for (std::size_t i = 0; i < from.size(); ++i) {
    if (is_back(i)) back[*partner[i]] = 1;
  }
  const auto stands_in_run = [&](std::size_t j) {
    std::size_t first = j;
    std::size_t end = j + 1;
    while (first > 0 && back[first - 1] != 0 && j - first < kRun)
      --first;
    while (end < to.size() && back[end] != 0 && end - j < kRun)
      ++end;
    return end - first >= kRun;
  };
  std::vector<std::size_t> undone;
  std::vector<double> running;
  for (std::size_t i = 0; i < from.size(); ++i) {
    if (is_back(i) && !stands_in_run(*partner[i])) {
      const std::size_t known = std::min(running.size(), kRunning);
      const double cycle = known < 3 ? 0.0 : numerics::median(std::span(running).last(known));
      if (i == 0 || cycle <= 0.0 || from[i] - from[i - 1] >= kEarly * cycle) undone.push_back(i);
    }
    if (i > 0) running.push_back(from[i] - from[i - 1]);
  }
  for (const std::size_t i : undone)
    partner[i].reset();
}

} // namespace chronodrome::conduction
