// Chronodrome, GPL-3.0-or-later.
#include "conditioning/stretch.h"

#include <algorithm>
#include <cmath>
#include <vector>

#include "conditioning/block_maker.h"
#include "conditioning/still_watch.h"
#include "recording/stores.h"

namespace chronodrome::conditioning {
namespace {

// condition() leaves shorter runs out as well.
constexpr Seconds kShortestRun{0.25};

bool is_short(const recording::Run& run, Hertz rate) {
  return static_cast<double>(run.count) < std::max(32.0, kShortestRun.value() * rate.value());
}

/// Samples of a stretch, run after run, as they pile up.
struct Pile {
  std::vector<double> samples;
  std::vector<recording::Run> runs;
};

void prepare_run(BlockMaker& maker, const recording::Channel& channel, std::size_t index, std::size_t first,
                 std::size_t end, Pile& pile) {
  const recording::Run& run = channel.time_base().runs()[index];
  StillWatch still(channel.time_base().rate(), run.first, run.count);
  const ConditionedBlock& block = maker.make(index, first - run.first, end - run.first, still);
  const auto low = static_cast<std::ptrdiff_t>(block.core_first - block.first);
  const auto high = static_cast<std::ptrdiff_t>(block.core_end - block.first);
  pile.runs.push_back(
      {pile.samples.size(), end - first, channel.time_base().time_at(static_cast<double>(first))});
  pile.samples.insert(pile.samples.end(), block.timing.begin() + low, block.timing.begin() + high);
}

recording::Channel channel_of(const recording::Channel& like, Pile pile) {
  recording::Signal signal;
  signal.source = like.raw().source;
  signal.source_as_written = like.raw().source_as_written;
  signal.unit = like.unit;
  signal.time_base = recording::TimeBase(like.time_base().rate(), std::move(pile.runs));
  signal.samples = recording::store_of(std::move(pile.samples));
  signal.envelope = recording::Envelope::of(*signal.samples);
  auto holder = std::make_shared<recording::Recording>();
  holder->duration = signal.time_base.end();
  holder->signals.push_back(std::move(signal));
  recording::Channel channel = like;
  channel.recording = std::move(holder);
  channel.signal = 0;
  channel.gain = 1.0;
  channel.offset = 0.0;
  return channel;
}

} // namespace

Result<recording::Channel> condition_stretch(const recording::Channel& channel,
                                             const ConditioningSettings& settings, Seconds from, Seconds to) {
  if (auto error = settings.check()) return *error;
  if (!(to > from) || to - from > kLongestStretch + Seconds(1e-6)) {
    return Error{ErrorCode::bad_usage,
                 "",
                 {},
                 "a stretch to be filtered must last more than 0 s and at most 60 s",
                 "choose a shorter stretch"};
  }
  const recording::TimeBase& base = channel.time_base();
  const std::size_t first = base.first_at_or_after(from - channel.skew);
  const std::size_t end = base.first_at_or_after(to - channel.skew);
  Pile pile;
  if (first < end) {
    BlockMaker maker(channel, settings);
    for (std::size_t r = base.run_of(first); r < base.runs().size(); ++r) {
      const recording::Run& run = base.runs()[r];
      if (run.first >= end) break;
      if (is_short(run, base.rate())) continue;
      prepare_run(maker, channel, r, std::max(first, run.first), std::min(end, run.first + run.count), pile);
    }
  }
  if (pile.samples.empty()) {
    return Error{ErrorCode::not_enough_data,
                 "",
                 {},
                 "channel " + channel.label + " holds no sample that can be filtered in this stretch",
                 "choose another stretch"};
  }
  return channel_of(channel, std::move(pile));
}

} // namespace chronodrome::conditioning
