// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <cstddef>
#include <optional>
#include <string>
#include <vector>

#include "base/quantity.h"
#include "pharmacology/band.h"
#include "pharmacology/curve_fit.h"
#include "protocol/bath_timeline.h"
#include "response/response.h"
#include "session/session_result.h"

namespace chronodrome::session {

/// How responses are expressed at the axis. Fits are always of the absolute response; the others are straight
/// lines of it, so that EC50, slope and their intervals stay what they are and basal, Emax and their limits
/// are converted. The control is each curve's own measured response at concentration 0, taken as known.
enum class ResponseForm {
  absolute,            ///< in the unit of the measure
  change_from_control, ///< response - control, in the unit of the measure
  percent_of_control,  ///< 100 response / control; only where the control is above 0
};

/// One response as it is drawn.
struct PlottedPoint {
  std::size_t row = 0; ///< in SessionResult::responses
  Molar concentration;
  std::optional<double> position; ///< log10 of the concentration; nothing for 0
  response::Status status = response::Status::ok;
  std::optional<double> value, sem; ///< sem over beats, never over preparations
  std::optional<double> bound;      ///< where only a limit is known
  bool is_at_least = false;         ///< side of the bound: the response is that or more
  std::size_t n_beats = 0;
  Seconds window_start, window_end;
  bool is_selected = false; ///< read from beats that are not all of them, see response::Response
  bool is_placed = false;   ///< the user has placed the window
};

/// A part of the fitted line: positions are log10 concentrations, rising.
struct LinePiece {
  bool is_inside = false; ///< of the concentrations tested; else it is a prediction
  std::vector<double> position, response;
  std::vector<pharmacology::BandLimits> band; ///< as long as the others, or empty: there is none
};

/// The fitted response without agonist.
struct ZeroLevel {
  double response = 0.0;
  std::optional<pharmacology::BandLimits> band;
};

/// An EC50 on the concentration axis, as log10; a missing limit is open.
struct PlottedInterval {
  std::string parameter; ///< `pec50`, `pec50_1` ...
  std::optional<double> estimate, low, high;
};

/// One curve with its fit.
struct CurveSeries {
  int curve = 0;
  std::string agent;
  std::vector<protocol::AgentLevel> background;
  std::vector<PlottedPoint> points;               ///< by concentration, the control first
  std::vector<LinePiece> line;                    ///< below, inside, above; empty: no finite curve
  std::optional<ZeroLevel> zero;                  ///< where the control was measured and there is a curve
  std::vector<PlottedInterval> ec50;              ///< empty: the model or the fit has none
  pharmacology::CurveFit fit;                     ///< of the measured responses, in the unit of the measure
  std::optional<pharmacology::CurveFit> censored; ///< with the limits, where there are any
};

struct ConcentrationTick {
  double position = 0.0; ///< log10
  Molar concentration;
  bool is_decade = false; ///< a power of ten; the others are three times one
};

/// The axis of log10 concentration. The control stands left of a break, at no concentration.
struct ConcentrationAxis {
  double low = 0.0, high = 0.0;   ///< ends of the axis
  double log_low = 0.0;           ///< where the part with a scale begins
  std::optional<double> zero;     ///< where the control stands
  std::optional<double> break_at; ///< where the axis is broken
  std::vector<ConcentrationTick> ticks;
};

/// Where in the recording something can be seen, and the step it belongs to (nothing: the whole curve).
struct CurvePlace {
  Seconds start, end;
  std::optional<Molar> concentration;
};

/// Something that weakens the answer.
struct WeakPoint {
  std::string flag;    ///< of the closed list (pharmacology/flags.h); empty: of single responses
  std::string what;    ///< in words, for this curve
  std::string meaning; ///< what the flag means; empty without one
  std::string advice;  ///< what to do; empty: nothing
  std::vector<CurvePlace> places;
};

/// A parameter for the table, converted to the form of the view.
struct ParameterRow {
  std::string name; ///< as pharmacology::ModelMeaning lists it
  std::string unit; ///< `1`, `mol/L`, the measure's, or `%`
  pharmacology::Estimate value;
  std::size_t n = 0;        ///< responses in the fit
  bool is_censored = false; ///< of the fit that also takes the limits
};

/// All that a panel of one curve shows, as plain values.
struct CurveView {
  std::string measure, unit; ///< unit of the axis: the measure's, or `%`
  ResponseForm form = ResponseForm::absolute;
  CurveSeries chosen;
  std::vector<CurveSeries> others; ///< of the same measure, by number
  ConcentrationAxis axis;
  double response_low = 0.0, response_high = 1.0; ///< ends of the response axis, low < high
  std::vector<WeakPoint> weak_points;             ///< flags of the fit, gravest first, then single responses
  std::vector<ParameterRow> parameters;           ///< those with an estimate or a limit
};

/// Numbers of the curves that have responses of the measure, in order.
std::vector<int> curves_with(const SessionResult& result, const std::string& measure);

/// False where the curve has no measured control, or one that no percentage can be taken of.
bool can_be_expressed(const SessionResult& result, int curve, const std::string& measure, ResponseForm form);

/// The panel of a curve and measure; nothing if there are no such responses. A form that cannot be taken
/// falls back to the absolute response (`form` of the view says so); other curves that cannot take it are
/// left out.
std::optional<CurveView> curve_view(const SessionResult& result, int curve, const std::string& measure,
                                    ResponseForm form = ResponseForm::absolute);

} // namespace chronodrome::session
