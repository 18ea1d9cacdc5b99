// Chronodrome, GPL-3.0-or-later.
#include "response/response.h"

#include <algorithm>
#include <array>
#include <cmath>

#include "base/number_text.h"
#include "numerics/robust.h"
#include "response/measurement.h"
#include "response/placed_windows.h"
#include "response/plateau.h"
#include "response/window.h"

namespace chronodrome::response {
namespace {

using recording::Span;

/// Values that each of the three windows of a plateau test needs.
constexpr std::size_t kFewestValues = 3;

std::string in_seconds(Seconds time) {
  return number_text(time.value(), 4) + " s";
}

/// Reads the steps of one curve with one measure.
class StepReader {
public:
  StepReader(const protocol::Curve& curve, const std::string& measure, const Measurement& measurement,
             const std::vector<protocol::Stretch>& paced, const Settings& settings)
      : curve_(curve), measure_(measure), measurement_(measurement), paced_(paced), settings_(settings) {}

  Response read(const protocol::Step& step, const std::optional<PlacedWindow>& placed) {
    Response row;
    row.curve = curve_.number;
    row.agent = curve_.agent;
    row.background = curve_.background;
    row.concentration = step.concentration;
    row.measure = measure_;
    row.unit = measurement_.unit;
    const Window window =
        placed ? Window{placed->span, {}, false} : window_of(step, measurement_.beats, settings_);
    row.window_start = window.span.start;
    row.window_end = window.span.end;
    if (placed) tell_of_placing(*placed, step, row);
    if (window.span.end <= window.span.start) {
      row.status = Status::unreadable;
      row.flags.push_back(step.concentration.value() == 0.0
                              ? "nothing was recorded before the first addition"
                              : "the step was over before the agent reached the tissue");
      return row;
    }
    if (window.cut) {
      row.flags.push_back("window cut from " + in_seconds(window.wanted) + " to " +
                          in_seconds(window.span.end - window.span.start) + ": the step lasted " +
                          in_seconds(step.end - step.start));
    }
    tell_of_pacing(window.span, row);
    if (!is_lost(window.span, row)) take(measurement_.read(window.span), step, window.span, row);
    return row;
  }

private:
  static void tell_of_placing(const PlacedWindow& placed, const protocol::Step& step, Response& row) {
    row.is_placed = true;
    row.flags.push_back("window placed by hand");
    if (placed.clipped) row.flags.push_back("the window reached beyond the recording and is cut");
    if (placed.span.start < step.start || placed.span.end > step.end) {
      row.flags.push_back("the window reaches beyond its step, which runs from " + in_seconds(step.start) +
                          " to " + in_seconds(step.end));
    }
  }

  /// Sets the status of a window that is mostly excluded or unreadable, taken together; flags any part.
  bool is_lost(const Span& span, Response& row) const {
    const double length = (span.end - span.start).value();
    const double out = covered(measurement_.excluded, span.start, span.end).value() / length;
    const double bad = covered(measurement_.unreadable, span.start, span.end).value() / length;
    std::vector<Span> losses = measurement_.excluded;
    losses.insert(losses.end(), measurement_.unreadable.begin(), measurement_.unreadable.end());
    const double lost = covered(merged(std::move(losses)), span.start, span.end).value() / length;
    const auto percent = [](double share) { return number_text(100.0 * share, 3) + " % of the window "; };
    if (out > 0.0) row.flags.push_back(percent(out) + "is excluded");
    if (bad > 0.0) row.flags.push_back(percent(bad) + "cannot be read");
    if (lost <= settings_.most_lost) return false;
    row.status = out > bad ? Status::excluded : Status::unreadable;
    return true;
  }

  void take(const Reading& reading, const protocol::Step& step, const Span& span, Response& row) {
    row.n_beats = reading.n_beats;
    row.limit = reading.limit;
    row.limit_side = reading.limit_side;
    row.is_selected = reading.is_selected;
    row.flags.insert(row.flags.end(), reading.flags.begin(), reading.flags.end());
    switch (reading.absence) {
    case Reading::Absence::no_beat:
      row.status = Status::arrested;
      row.flags.push_back("no beat in the window");
      return;
    case Reading::Absence::one_beat:
      row.status = reading.limit ? Status::censored : Status::unreadable;
      row.flags.push_back(reading.limit ? "a single beat in the window: no interval to read a rate from"
                                        : "no interval in the window is whole");
      return;
    case Reading::Absence::blocked:
      row.status = Status::censored;
      return;
    case Reading::Absence::no_samples:
    case Reading::Absence::untested:
      row.status = Status::unreadable;
      return;
    case Reading::Absence::none:
      break;
    }
    row.value = reading.value;
    row.sem = reading.sem;
    lowest_ = std::min(lowest_.value_or(*row.value), *row.value);
    highest_ = std::max(highest_.value_or(*row.value), *row.value);
    row.status = Status::ok;
    tell_of_silence(span, row);
    test_plateau(step, span, row);
  }

  /// A silence at an end of the window is part of no interval, so the value knows nothing of it.
  void tell_of_silence(const Span& span, Response& row) const {
    const auto beats = within(measurement_.beats, span);
    if (beats.size() < 2) return;
    std::vector<double> intervals;
    for (std::size_t i = 1; i < beats.size(); ++i)
      intervals.push_back(beats[i] - beats[i - 1]);
    const Seconds limit =
        std::max(settings_.silence, Seconds(settings_.silence_cycles * numerics::median(intervals)));
    const auto silence = [&](Seconds from, Seconds to) {
      return to - from - covered(measurement_.unreadable, from, to) -
             covered(measurement_.excluded, from, to);
    };
    const Seconds before = silence(span.start, Seconds(beats.front()));
    const Seconds after = silence(Seconds(beats.back()), span.end);
    if (before > limit) row.flags.push_back("no beat in the first " + in_seconds(before) + " of the window");
    if (after > limit) row.flags.push_back("no beat in the last " + in_seconds(after) + " of the window");
    if (measurement_.beats_are_counted && (before > limit || after > limit)) row.status = Status::not_steady;
  }

  void test_plateau(const protocol::Step& step, const Span& span, Response& row) const {
    // The three end with the window: with the step, unless a hand has placed it.
    const Seconds length = std::min(span.end - span.start, (span.end - step.start) / 3.0);
    std::array<double, 3> means{};
    std::array<double, 3> errors{};
    for (std::size_t k = 0; k < 3; ++k) {
      const Span part{span.end - length * static_cast<double>(3 - k),
                      span.end - length * static_cast<double>(2 - k)};
      const Reading reading = measurement_.read(part);
      if (!reading.value || reading.n_values < kFewestValues) {
        row.flags.push_back("too few values for a plateau test");
        return;
      }
      means[k] = *reading.value;
      errors[k] = reading.sem.value_or(0.0);
    }
    const double tolerance = std::max({settings_.steady_tolerance * std::abs(means[2]),
                                       settings_.steady_range_share * (*highest_ - *lowest_),
                                       settings_.steady_standard_errors * std::hypot(errors[1], errors[2])});
    const Plateau plateau = assess_plateau(means, tolerance);
    if (plateau.steady) return;
    row.status = Status::not_steady;
    const auto with_unit = [&](double value) { return number_text(value, 4) + " " + row.unit; };
    if (plateau.remaining) {
      row.flags.push_back("not at steady state: estimated remaining change " + with_unit(*plateau.remaining) +
                          ", towards " + with_unit(*plateau.asymptote));
    } else {
      row.flags.push_back("not at steady state: changed by " + with_unit(plateau.drift) + " in the last " +
                          in_seconds(length) + " and does not slow down");
    }
  }

  void tell_of_pacing(const Span& span, Response& row) const {
    for (const auto& train : paced_) {
      const bool begins = train.start > span.start && train.start < span.end;
      const bool stops = train.end > span.start && train.end < span.end;
      if (begins || stops) row.flags.push_back("pacing begins or stops inside the window");
    }
  }

  const protocol::Curve& curve_;
  const std::string& measure_;
  const Measurement& measurement_;
  const std::vector<protocol::Stretch>& paced_;
  const Settings& settings_;
  std::optional<double> lowest_, highest_; // values of the curve so far
};

std::optional<Error> out_of_range(const char* key, const char* range) {
  return Error{ErrorCode::bad_usage,
               "",
               {},
               std::string("the setting response.") + key + " is out of range",
               std::string("use ") + range};
}

bool is_within(double value, double lowest, double highest) {
  return value >= lowest && value <= highest; // false for NaN
}

} // namespace

std::string name_of(Status status) {
  switch (status) {
  case Status::ok:
    return "ok";
  case Status::not_steady:
    return "not_steady";
  case Status::censored:
    return "censored";
  case Status::arrested:
    return "arrested";
  case Status::unreadable:
    return "unreadable";
  case Status::excluded:
    return "excluded";
  }
  return "";
}

std::optional<Error> Settings::check() const {
  if (!is_within(window.value(), 0.1, 3600.0)) return out_of_range("window_s", "0.1 to 3600 s");
  if (!is_within(window_beats, 0.0, 10000.0)) return out_of_range("window_beats", "0 to 10000 beats");
  if (!is_within(max_share, 0.01, 1.0)) return out_of_range("max_share", "0.01 to 1");
  if (!is_within(steady_tolerance, 0.0, 1.0)) return out_of_range("steady_tolerance", "0 to 1");
  if (!is_within(steady_range_share, 0.0, 1.0)) return out_of_range("steady_range_share", "0 to 1");
  if (!is_within(steady_standard_errors, 0.0, 10.0)) return out_of_range("steady_standard_errors", "0 to 10");
  if (!is_within(most_lost, 0.0, 0.99)) return out_of_range("most_lost", "0 to 0.99");
  if (!is_within(silence.value(), 0.1, 3600.0)) return out_of_range("silence_s", "0.1 to 3600 s");
  if (!is_within(silence_cycles, 1.0, 1000.0)) return out_of_range("silence_cycles", "1 to 1000 cycles");
  if (complete_block_beats < 1 || complete_block_beats > 1000)
    return out_of_range("complete_block_beats", "1 to 1000 beats");
  if (!is_within(complete_block_time.value(), 0.1, 3600.0))
    return out_of_range("complete_block_s", "0.1 to 3600 s");
  return std::nullopt;
}

Result<Responses> compute(const Inputs& inputs, const Settings& settings) {
  if (const auto fault = settings.check()) return *fault;
  std::vector<std::unique_ptr<Measurement>> measurements;
  for (const auto& measure : inputs.measures) {
    auto measurement = measurement_of(measure, inputs, settings);
    if (!measurement) return measurement.error();
    measurements.push_back(std::move(*measurement));
  }
  const PlacedWindows placed(*inputs.plan, inputs.placed, inputs.measures, inputs.end);
  Responses responses;
  responses.warnings = placed.warnings();
  for (std::size_t c = 0; c < inputs.plan->curves.size(); ++c) {
    const auto& curve = inputs.plan->curves[c];
    for (std::size_t m = 0; m < measurements.size(); ++m) {
      StepReader reader(curve, inputs.measures[m], *measurements[m], inputs.plan->paced, settings);
      for (std::size_t s = 0; s < curve.steps.size(); ++s)
        responses.rows.push_back(reader.read(curve.steps[s], placed.of(c, s, inputs.measures[m])));
    }
  }
  return responses;
}

} // namespace chronodrome::response
