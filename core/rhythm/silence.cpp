// Chronodrome, GPL-3.0-or-later.
#include "rhythm/silence.h"

#include <algorithm>

#include "base/number_text.h"
#include "numerics/robust.h"

namespace chronodrome::rhythm {
namespace {

/// The parts of [from, to] that can be read, in order.
std::vector<recording::Span> readable_parts(const activation::ChannelActivations& chamber, Seconds from,
                                            Seconds to) {
  std::vector<recording::Span> parts;
  Seconds reached = from;
  for (const auto& bad : chamber.unreadable) {
    if (bad.span.end <= reached) continue;
    if (bad.span.start >= to) break;
    if (bad.span.start > reached) parts.push_back({reached, bad.span.start});
    reached = std::max(reached, bad.span.end);
  }
  if (reached < to) parts.push_back({reached, to});
  return parts;
}

class SilenceReader {
public:
  SilenceReader(const activation::ChannelActivations& chamber, bool is_atrial, Seconds end,
                const RhythmSettings& settings)
      : chamber_(chamber), is_atrial_(is_atrial), end_(end), settings_(settings) {}

  std::vector<Episode> read() {
    const auto& marks = chamber_.marks;
    if (marks.empty()) {
      judge(Seconds(0.0), end_, 0.0, false);
      return std::move(found_);
    }
    judge(Seconds(0.0), marks.front().time, opening_cycle(0), false);
    for (std::size_t i = 1; i < marks.size(); ++i) {
      const Seconds from = marks[i - 1].time;
      const Seconds to = marks[i].time;
      judge(from, to, running_.size() < 3 ? opening_cycle(i - 1) : running_cycle(), true);
      if (is_readable(from, to)) {
        running_.push_back((to - from).value());
      } else {
        running_.clear(); // what lies behind a loss is judged by its own cycles
      }
    }
    judge(marks.back().time, end_, running_cycle(), false);
    return std::move(found_);
  }

private:
  [[nodiscard]] bool is_readable(Seconds from, Seconds to) const {
    const auto parts = readable_parts(chamber_, from, to);
    return parts.size() == 1 && parts[0].start == from && parts[0].end == to;
  }

  /// Median of the last intervals, long ones included: a heart that has become slow is slow, not pausing.
  [[nodiscard]] double running_cycle() const {
    if (running_.empty()) return 0.0;
    return numerics::median(std::span(running_).last(std::min(running_.size(), settings_.running_beats)));
  }

  /// Where too few intervals precede: median of the readable intervals that follow mark `from`.
  [[nodiscard]] double opening_cycle(std::size_t from) const {
    std::vector<double> cycles;
    for (std::size_t i = from + 1; i < chamber_.marks.size() && cycles.size() < settings_.running_beats;
         ++i) {
      const Seconds start = chamber_.marks[i - 1].time;
      if (!is_readable(start, chamber_.marks[i].time)) break;
      cycles.push_back((chamber_.marks[i].time - start).value());
    }
    return cycles.empty() ? 0.0 : numerics::median(cycles);
  }

  /// Each part of a silence that can be read is judged alone: a beat may lie where nothing can be seen.
  void judge(Seconds from, Seconds to, double cycle, bool between_beats) {
    const double limit = std::max(settings_.arrest_shortest.value(), settings_.arrest_cycles * cycle);
    const auto parts = readable_parts(chamber_, from, to);
    for (const auto& part : parts) {
      const double length = (part.end - part.start).value();
      const bool whole = parts.size() == 1 && part.start == from && part.end == to;
      if (length > limit) {
        add(part, "arrest", length, cycle, ";limit_ms=" + fixed_text(limit * 1e3, 1));
      } else if (whole && between_beats && is_atrial_ && cycle > 0.0 &&
                 length > settings_.pause_ratio * cycle) {
        // A ventricular pause below the arrest limit is what block rows describe.
        add(part, "sinus_pause", length, cycle, ";ratio=" + fixed_text(length / cycle, 2));
      }
    }
  }

  void add(const recording::Span& span, const std::string& kind, double length, double cycle,
           const std::string& numbers) {
    std::string detail = std::string("chamber=") + (is_atrial_ ? "atrial" : "ventricular") +
                         ";channel=" + chamber_.channel + ";silence_ms=" + fixed_text(length * 1e3, 1);
    if (cycle > 0.0) detail += ";running_cycle_ms=" + fixed_text(cycle * 1e3, 1);
    found_.push_back({span.start, span.end, kind, detail + numbers});
  }

  const activation::ChannelActivations& chamber_;
  bool is_atrial_;
  Seconds end_;
  const RhythmSettings& settings_;
  std::vector<double> running_;
  std::vector<Episode> found_;
};

} // namespace

std::vector<Episode> find_silence(const activation::ChannelActivations& chamber, bool is_atrial, Seconds end,
                                  const RhythmSettings& settings) {
  return SilenceReader(chamber, is_atrial, end, settings).read();
}

} // namespace chronodrome::rhythm
