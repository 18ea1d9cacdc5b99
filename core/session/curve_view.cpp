// Chronodrome, GPL-3.0-or-later.
#include "session/curve_view.h"

#include <algorithm>
#include <array>
#include <set>
#include <string_view>

#include "pharmacology/model.h"
#include "session/curve_series.h"

namespace chronodrome::session {

namespace {

using pharmacology::Estimate;

/// The order of the table: what the experiment was made for first.
std::size_t rank_of(const std::string& name) {
  static constexpr std::array<std::string_view, 12> order{"pec50", "ec50",       "extremum",  "inflection",
                                                          "nh",    "asymmetry",  "fraction_", "basal",
                                                          "emax",  "effect_max", "effect_1",  "effect_2"};
  for (std::size_t i = 0; i < order.size(); ++i) {
    if (name.rfind(order[i], 0) == 0) return i;
  }
  return order.size();
}

std::string unit_of(const pharmacology::CurveFit& fit, const std::string& name, const std::string& response) {
  for (const pharmacology::ModelMeaning& model : pharmacology::model_meanings()) {
    if (model.name != fit.model) continue;
    for (const auto& list : {model.parameters, model.derived}) {
      for (const pharmacology::ParameterMeaning& one : list) {
        if (one.name != name) continue;
        if (one.unit == "response") return response;
        if (one.unit == "response L/mol") return response == "1" ? "L/mol" : response + " L/mol";
        return std::string(one.unit);
      }
    }
  }
  return "1";
}

/// basal and emax are places on the axis of the response, effects and the slope are differences.
Estimate converted(const std::string& name, const Estimate& estimate, const FormScale& scale) {
  const bool is_place = name == "basal" || name == "emax";
  const bool is_difference = name.rfind("effect_", 0) == 0 || name == "slope";
  if (!is_place && !is_difference) return estimate;
  const auto shown = [&](const std::optional<double>& value) -> std::optional<double> {
    if (!value) return std::nullopt;
    return is_place ? scale.value(*value) : scale.difference(*value);
  };
  Estimate result = estimate;
  result.estimate = shown(estimate.estimate);
  result.ci_low = shown(estimate.ci_low);
  result.ci_high = shown(estimate.ci_high);
  if (estimate.se) result.se = scale.difference(*estimate.se);
  return result;
}

void add_rows(std::vector<ParameterRow>& rows, const pharmacology::CurveFit& fit, const std::string& unit,
              const FormScale& scale) {
  const std::size_t first = rows.size();
  const bool is_censored = fit.likelihood == "censored";
  for (const auto* list : {&fit.parameters, &fit.derived}) {
    for (const pharmacology::NamedEstimate& one : *list) {
      if (!one.value.estimate && !one.value.ci_low && !one.value.ci_high) continue;
      // Beside the main fit: what the limits change.
      if (is_censored && one.name != "pec50" && one.name != "emax") continue;
      rows.push_back({one.name, unit_of(fit, one.name, unit), converted(one.name, one.value, scale),
                      fit.n_points, is_censored});
    }
  }
  std::stable_sort(rows.begin() + static_cast<std::ptrdiff_t>(first), rows.end(),
                   [](const auto& a, const auto& b) { return rank_of(a.name) < rank_of(b.name); });
}

} // namespace

std::vector<ParameterRow> parameter_rows(const CurveSeries& series, const std::string& unit,
                                         const FormScale& scale) {
  std::vector<ParameterRow> rows;
  add_rows(rows, series.fit, unit, scale);
  if (series.censored) add_rows(rows, *series.censored, unit, scale);
  return rows;
}

std::vector<int> curves_with(const SessionResult& result, const std::string& measure) {
  std::set<int> curves;
  for (const response::Response& row : result.responses.rows) {
    if (row.measure == measure) curves.insert(row.curve);
  }
  return {curves.begin(), curves.end()};
}

bool can_be_expressed(const SessionResult& result, int curve, const std::string& measure, ResponseForm form) {
  return form_scale(result, curve, measure, form).has_value();
}

std::optional<CurveView> curve_view(const SessionResult& result, int curve, const std::string& measure,
                                    ResponseForm form) {
  const std::vector<int> curves = curves_with(result, measure);
  if (std::find(curves.begin(), curves.end(), curve) == curves.end()) return std::nullopt;
  CurveView view;
  view.measure = measure;
  view.form = can_be_expressed(result, curve, measure, form) ? form : ResponseForm::absolute;
  const FormScale scale = *form_scale(result, curve, measure, view.form);
  view.chosen = series_of(result, curve, measure, scale);
  view.unit = view.form == ResponseForm::percent_of_control
                  ? "%"
                  : result.responses.rows[view.chosen.points.front().row].unit;
  std::vector<FormScale> scales;
  for (const int number : curves) {
    const auto its = form_scale(result, number, measure, view.form);
    if (number == curve || !its) continue;
    view.others.push_back(series_of(result, number, measure, *its));
    scales.push_back(*its);
  }
  std::vector<const CurveSeries*> shown{&view.chosen};
  for (const CurveSeries& other : view.others)
    shown.push_back(&other);
  view.axis = concentration_axis(shown);
  add_line(view.chosen, result, measure, scale, view.axis);
  for (std::size_t i = 0; i < view.others.size(); ++i)
    add_line(view.others[i], result, measure, scales[i], view.axis);
  set_response_range(view);
  view.weak_points = weak_points(result, view.chosen);
  view.parameters = parameter_rows(view.chosen, view.unit, scale);
  return view;
}

} // namespace chronodrome::session
