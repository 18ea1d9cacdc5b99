// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <cstddef>
#include <optional>
#include <string>
#include <vector>

#include "activation/activation.h"
#include "base/quantity.h"
#include "base/result.h"
#include "conduction/conduction.h"
#include "document/session_file.h"
#include "protocol/curve_plan.h"
#include "recording/recording.h"

namespace chronodrome::response {

enum class Status { ok, not_steady, censored, arrested, unreadable, excluded };
std::string name_of(Status status);

/// The value of one measure at one bath concentration.
struct Response {
  int curve = 0;
  std::string agent, background;
  Molar concentration;
  std::string measure; ///< `rate:RA`, `delay:AV` ...
  std::string unit;
  std::optional<double> value; ///< only where status is ok or not_steady
  std::optional<double> sem;   ///< over beats, corrected for lag-1 correlation; never an n of preparations
  std::size_t n_beats = 0;
  Seconds window_start, window_end;
  Status status = Status::ok;
  std::optional<double> limit; ///< for censored, and for a rate that is arrested
  std::string limit_side;      ///< "at_least" or "at_most"
  /// Read from conducted beats while others were blocked, or of a chamber that was not driven beat by beat.
  bool is_selected = false;
  bool is_placed = false;         ///< the window was placed by hand; the first of the flags says so too
  std::vector<std::string> flags; ///< in words, for the summary
};

struct Responses {
  std::vector<Response> rows;    ///< by curve, measure (session order), concentration in order of time
  std::vector<Warning> warnings; ///< windows placed by hand that have no effect, and why
};

/// A channel as the stages before left it.
struct ChannelInput {
  const activation::ChannelActivations* activations = nullptr;
  recording::Role role = recording::Role::other;
  std::string unit;
};

/// A pathway; both its channels must be among the channels.
struct PathwayInput {
  const conduction::PathwayDelays* delays = nullptr;
  std::optional<Metres> distance; ///< between the electrodes
};

/// A flow channel as means over short equal times (1 s is usual). Same length, times rising.
struct FlowSeries {
  std::string channel; ///< label
  std::string unit;    ///< `mL/min`, or the channel's own
  std::vector<Seconds> times;
  std::vector<double> values;
};

/// A stretch that the user or the drug log takes out.
struct Exclusion {
  std::string channel; ///< label; empty: all channels
  recording::Span span;
};

struct Inputs {
  const protocol::CurvePlan* plan = nullptr; ///< its own exclusions count for all channels
  std::vector<ChannelInput> channels;
  std::vector<PathwayInput> pathways;
  std::vector<FlowSeries> flows;
  std::vector<Exclusion> excluded;
  std::vector<std::string> measures;          ///< in the session's order
  std::vector<document::WindowChoice> placed; ///< by hand; each replaces the rule's window of its step
  Seconds end;                                ///< of the recording: no placed window reaches beyond it
};

/// How the value of a step is read. Exposed as `response.window_s`, `response.window_beats` ...
struct Settings {
  Seconds window{30.0};             ///< at the end of the step, at least
  double window_beats = 20.0;       ///< ... or this many beats, whichever is longer
  double max_share = 0.4;           ///< of the step that the window may take
  double steady_tolerance = 0.01;   ///< change between windows that counts as none, as a share of the value
  double steady_range_share = 0.02; ///< ... as a share of the curve's response range so far
  double steady_standard_errors = 2.0;  ///< ... in standard errors of the difference
  double most_lost = 0.5;               ///< share of a window that may be unreadable or excluded, together
  Seconds silence{5.0};                 ///< at either end of a window, without a beat, that is said
  double silence_cycles = 6.0;          ///< ... and at least this many cycles
  std::size_t complete_block_beats = 5; ///< beats unconducted in a row that are complete block
  Seconds complete_block_time{2.0};     ///< ... or at least two of them that last longer than this

  /// Error: bad_usage, naming the setting and its range.
  [[nodiscard]] std::optional<Error> check() const;
};

/// One response for every step of every curve and every measure.
///
/// Window: the last max(`window`, `window_beats` cycles) of the step, at most `max_share` of it. The cycle is
/// the median of the last 20 intervals of the step, so that a heart that has stopped does not stretch its
/// window back into the time when it still beat. For pathways the beats are those of `from`. A window that
/// was placed by hand (placed_windows.h) stands instead, clipped to the recording; all else is read from it
/// as from the rule's, and the plateau test ends where it ends.
///
/// Values (n_beats in brackets):
/// - `rate`, bpm: 60 times the number of intervals over their sum, which is 60 (N - 1)/(t_N - t_1) where all
/// N
///   activations count; intervals that cross an unreadable or excluded stretch do not (N).
/// - `delay`, ms: median over conducted beats (their number). `velocity`, m/s: distance over the absolute
/// value
///   of that median, the apparent velocity along the line between the electrodes; positive whichever of them
///   leads.
/// - `conducted`, 1: conducted activations of `from` over all attempts (all). An attempt is an activation of
///   `from` that could conduct and whose answer could be seen: rows with `answer_unseen` and retrograde ones
///   are none.
/// - `force`, `pressure`: median of the developed value; `dpdt_max`: median of the steepest rise (beats).
/// - `flow`: mean (0).
/// sem: of the mean with the lag-1 correction of numerics::sem_of_correlated; for the rate carried over from
/// the intervals' mean by the delta method; for medians times sqrt(pi / 2), which holds for normal scatter;
/// for the velocity carried over from the delay.
///
/// Status: `excluded` or `unreadable` where both together take more than `most_lost` of the window (the name
/// of the larger part); `unreadable` also for a pathway without an attempt whose channels beat, and for a
/// delay of none conducted out of too few attempts to say block; `arrested` without a beat (limit for the
/// rate: at_most 60/T, T the longest silence of the window that nothing lost breaks, for a beat may lie in a
/// hole); `censored` for delay and velocity where complete block stands in the window (limit:
/// the longest conducted delay of the whole recording, a convention) and for the rate with a single beat (T
/// as before); `not_steady` where the last three equal windows still drift (plateau.h) or a silence ends or
/// begins the window; otherwise `ok`. Whatever else weakens a value stands in its flags, in words; the flag
/// of a delay or velocity read from a window in which some attempts failed begins with "conducted beats
/// only".
///
/// Complete block: `complete_block_beats` blocked attempts in a row, or at least two whose time from the
/// first to the last, with one running cycle of `from` (or less, if the next activation or the end of the
/// window comes first), exceeds `complete_block_time`. Only neighbours stand in a row: an activation of
/// `from` that is no attempt ends it.
///
/// Requires: plan and every pointer set; marks, rows and stretches in order of time; `end` where windows are
/// placed.
/// Errors: bad_usage (settings; a measure that names no channel, pathway or flow series of the inputs).
Result<Responses> compute(const Inputs& inputs, const Settings& settings);

} // namespace chronodrome::response
