// Chronodrome, GPL-3.0-or-later.
#include "conditioning/conditioning.h"

#include <algorithm>
#include <cmath>
#include <utility>

#include "base/number_text.h"
#include "conditioning/block_maker.h"
#include "conditioning/still_watch.h"
#include "numerics/robust.h"

namespace chronodrome::conditioning {
namespace {

constexpr Seconds kShortestRun{0.25};

std::vector<UnreadableRange> in_order(std::vector<UnreadableRange> ranges) {
  std::stable_sort(ranges.begin(), ranges.end(),
                   [](const auto& a, const auto& b) { return a.span.start < b.span.start; });
  std::vector<UnreadableRange> found;
  for (auto& range : ranges) {
    if (!found.empty() && range.span.start <= found.back().span.end) {
      auto& last = found.back();
      if (range.span.end > last.span.end) {
        // Of two that overlap, each keeps its own reason.
        if (range.reason == last.reason) {
          last.span.end = range.span.end;
          continue;
        }
        range.span.start = last.span.end;
        found.push_back(range);
      }
    } else if (range.span.end > range.span.start) {
      found.push_back(range);
    }
  }
  return found;
}

class ChannelConditioner {
public:
  ChannelConditioner(const recording::Channel& channel, const ConditioningSettings& settings,
                     const std::function<void(const ConditionedBlock&)>& receive, const Proceed& proceed)
      : channel_(channel), settings_(settings), receive_(receive), proceed_(proceed),
        maker_(channel, settings) {}

  Result<ConditioningReport> run() {
    for (const recording::Span& gap : channel_.time_base().gaps())
      add({gap.start + channel_.skew, gap.end + channel_.skew}, "gap");
    const auto& runs = channel_.time_base().runs();
    for (std::size_t r = 0; r < runs.size(); ++r) {
      if (!pass_run(r, runs[r])) return stopped();
    }
    if (!may_proceed()) return stopped();
    ConditioningReport report;
    report.unreadable = in_order(std::move(unreadable_));
    report.warnings = maker_.warnings();
    if (!frequencies_.empty()) report.mains_hz = numerics::median(frequencies_);
    if (channel_.time_base().size() > 0)
      report.hummed_share = static_cast<double>(hummed_) / static_cast<double>(channel_.time_base().size());
    report.method = maker_.method();
    return report;
  }

private:
  bool may_proceed() { return !proceed_ || proceed_(std::exchange(passed_, 0)); }

  /// False: stopped before its end.
  bool pass_run(std::size_t index, const recording::Run& run) {
    const double fs = channel_.time_base().rate().value();
    if (static_cast<double>(run.count) < std::max(32.0, kShortestRun.value() * fs)) {
      add_samples(run.first, run.first + run.count, "short");
      passed_ += run.count;
      return true;
    }
    const auto core = std::max(settings_.block_samples, static_cast<std::size_t>(90.0 * fs));
    StillWatch still(channel_.time_base().rate(), run.first, run.count);
    for (std::size_t at = 0; at < run.count; at += core) {
      if (!may_proceed()) return false;
      const ConditionedBlock& block = maker_.make(index, at, std::min(run.count, at + core), still);
      for (const SampleRange& bad : maker_.saturated())
        add_samples(std::max(bad.first, block.core_first), std::min(bad.end, block.core_end), "saturation");
      keep_hum(block);
      receive_(block);
      passed_ += block.core_end - block.core_first;
    }
    for (const SampleRange& flat : still.flat_lines())
      add_samples(flat.first, flat.end, "flat");
    return true;
  }

  void keep_hum(const ConditionedBlock& block) {
    for (const HumStretch& stretch : block.hum) {
      const std::size_t first = std::max(stretch.first, block.core_first);
      const std::size_t end = std::min(stretch.end, block.core_end);
      if (end <= first || stretch.frequency_hz <= 0.0) continue;
      hummed_ += end - first;
      frequencies_.push_back(stretch.frequency_hz);
    }
  }

  void add(recording::Span span, const char* reason) { unreadable_.push_back({span, reason}); }

  /// Samples first ... end - 1 of one run.
  void add_samples(std::size_t first, std::size_t end, const char* reason) {
    if (end <= first) return;
    const Seconds period = period_of(channel_.time_base().rate());
    add({channel_.time_at(static_cast<double>(first)),
         channel_.time_at(static_cast<double>(end - 1)) + period},
        reason);
  }

  const recording::Channel& channel_;
  const ConditioningSettings& settings_;
  const std::function<void(const ConditionedBlock&)>& receive_;
  const Proceed& proceed_;
  std::size_t passed_ = 0; ///< samples since the caller was asked last
  BlockMaker maker_;
  std::vector<UnreadableRange> unreadable_;
  std::vector<double> frequencies_;
  std::size_t hummed_ = 0;
};

} // namespace

std::optional<Error> ConditioningSettings::check() const {
  const auto wrong = [](const char* what, const char* remedy) {
    return Error{ErrorCode::bad_usage, "", {}, what, remedy};
  };
  if (auto error = mains.check()) return error;
  if (timing_low_pass < Hertz(0.0))
    return wrong("conditioning.timing_low_pass_hz must not be negative",
                 "leave it out for 400 Hz, or set 0 for none");
  if ((detection_high_pass && !(*detection_high_pass > Hertz(0.0))) ||
      (mechanical_low_pass && !(*mechanical_low_pass > Hertz(0.0)))) {
    return wrong("conditioning.detection_high_pass_hz and conditioning.mechanical_low_pass_hz must exceed 0",
                 "leave them out for the values of the species");
  }
  if (!(longest_clip > Seconds(0.0)) || clip_recovery < Seconds(0.0)) {
    return wrong("conditioning.longest_clip_s must exceed 0 and conditioning.clip_recovery_s not be negative",
                 "leave them out for 0.1 s and 0.05 s");
  }
  if (context < Seconds(15.0))
    return wrong("conditioning.context_s must be 15 or more", "leave it out for 15 s");
  if (block_samples == 0) return wrong("conditioning.block_samples must exceed 0", "leave it out");
  return std::nullopt;
}

Error stopped() {
  return {ErrorCode::cancelled,
          "",
          {},
          "the work was stopped before its end",
          "start it again when it is wanted"};
}

Result<ConditioningReport> condition(const recording::Channel& channel, const ConditioningSettings& settings,
                                     const std::function<void(const ConditionedBlock&)>& receive,
                                     const Proceed& proceed) {
  if (auto error = settings.check()) return *error;
  if (channel.time_base().size() == 0) {
    return Error{ErrorCode::not_enough_data,
                 "",
                 {},
                 "channel " + channel.label + " holds no samples",
                 "choose another source for the channel"};
  }
  return ChannelConditioner(channel, settings, receive, proceed).run();
}

} // namespace chronodrome::conditioning
