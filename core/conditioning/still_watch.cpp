// Chronodrome, GPL-3.0-or-later.
#include "conditioning/still_watch.h"

#include <algorithm>
#include <cmath>

namespace chronodrome::conditioning {
namespace {

/// Noise that moves by less than this many steps cannot be told from the converter's own.
constexpr double kLivelySteps = 6.0;
constexpr double kBeside_s = 5.0;

} // namespace

void StillWatch::look_at(std::span<const double> raw, std::size_t first, std::size_t core_first,
                         std::size_t core_end, double step) {
  const auto reach = static_cast<std::size_t>(std::llround(kBeside_s * rate_.value()));
  for (const SampleRange& found : find_still_stretches(raw, rate_, step)) {
    Still still{{found.first + first, found.end + first}, 0.0, 0.0, step};
    if (still.range.end <= core_first || still.range.first >= core_end) continue;
    const std::size_t before = found.first > reach ? found.first - reach : 0;
    still.quiet_before = quiet_range(raw.subspan(before, found.first - before), rate_);
    still.quiet_after = quiet_range(raw.subspan(found.end, std::min(reach, raw.size() - found.end)), rate_);
    if (!stills_.empty() && still.range.first <= stills_.back().range.end) {
      // The rest of a stretch that began in an earlier block.
      stills_.back().range.end = std::max(stills_.back().range.end, still.range.end);
      stills_.back().quiet_after = still.quiet_after;
      stills_.back().quiet_before = std::max(stills_.back().quiet_before, still.quiet_before);
    } else {
      stills_.push_back(still);
    }
  }
}

std::vector<SampleRange> StillWatch::flat_lines() const {
  std::vector<SampleRange> flat;
  for (const Still& still : stills_) {
    const bool lively_beside = std::max(still.quiet_before, still.quiet_after) > kLivelySteps * still.step &&
                               still.quiet_before + still.quiet_after > 0.0;
    const bool whole_run =
        still.range.first <= run_first_ && still.range.end >= run_first_ + run_count_ && run_count_ > 1;
    if (lively_beside || whole_run) flat.push_back(still.range);
  }
  return flat;
}

} // namespace chronodrome::conditioning
