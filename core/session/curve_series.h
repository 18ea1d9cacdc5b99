// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <optional>
#include <string>

#include "session/curve_view.h"

// The parts of a CurveView, each made from a result; curve_view() puts them together.
namespace chronodrome::session {

/// From the absolute response to the form that is shown: shown = scale (response - origin).
struct FormScale {
  double origin = 0.0;
  double scale = 1.0;

  [[nodiscard]] double value(double response) const { return scale * (response - origin); }
  [[nodiscard]] double difference(double of_responses) const { return scale * of_responses; }
};

/// Nothing where the form cannot be taken, see can_be_expressed().
std::optional<FormScale> form_scale(const SessionResult& result, int curve, const std::string& measure,
                                    ResponseForm form);

/// Points, fits and EC50 of a curve, without its line. Requires: the curve has responses of the measure.
CurveSeries series_of(const SessionResult& result, int curve, const std::string& measure,
                      const FormScale& scale);

/// Line, band and level at zero, from the left end of the axis' scale to its right end.
void add_line(CurveSeries& series, const SessionResult& result, const std::string& measure,
              const FormScale& scale, const ConcentrationAxis& axis);

/// The axis that holds all points of these curves.
ConcentrationAxis concentration_axis(const std::vector<const CurveSeries*>& curves);

/// Sets the ends of the response axis: all points with their errors and bounds, the lines inside the
/// concentrations tested, and the chosen curve's band as far as it does not dwarf them.
void set_response_range(CurveView& view);

/// Flags of the chosen fit and what is said of its single responses.
std::vector<WeakPoint> weak_points(const SessionResult& result, const CurveSeries& series);

/// Parameters of the chosen fits, the EC50 first.
std::vector<ParameterRow> parameter_rows(const CurveSeries& series, const std::string& unit,
                                         const FormScale& scale);

} // namespace chronodrome::session
