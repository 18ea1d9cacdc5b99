// Chronodrome, GPL-3.0-or-later.
#include "session/curve_series.h"

#include <algorithm>
#include <cmath>

#include "pharmacology/fit.h"

namespace chronodrome::session {

namespace {

using response::Response;
using response::Status;

constexpr double kGridStep = 0.02; // decades; a Hill curve bends over about one

bool is_of(const Response& row, int curve, const std::string& measure) {
  return row.curve == curve && row.measure == measure;
}

std::optional<double> control_of(const SessionResult& result, int curve, const std::string& measure) {
  for (const Response& row : result.responses.rows) {
    if (is_of(row, curve, measure) && row.concentration.value() == 0.0 && row.value) return row.value;
  }
  return std::nullopt;
}

PlottedPoint point_of(const SessionResult& result, std::size_t index, const FormScale& scale) {
  const Response& row = result.responses.rows[index];
  PlottedPoint point;
  point.row = index;
  point.concentration = row.concentration;
  if (row.concentration.value() > 0.0) point.position = std::log10(row.concentration.value());
  point.status = row.status;
  if (row.value) point.value = scale.value(*row.value);
  if (row.value && row.sem) point.sem = scale.difference(*row.sem);
  if (!row.value && row.limit) point.bound = scale.value(*row.limit);
  point.is_at_least = row.limit_side != "at_most";
  point.n_beats = row.n_beats;
  point.window_start = row.window_start;
  point.window_end = row.window_end;
  point.is_selected = row.is_selected;
  point.is_placed = row.is_placed;
  return point;
}

void take_fits(CurveSeries& series, const SessionResult& result, const std::string& measure) {
  for (const FittedCurve& fitted : result.curves) {
    if (fitted.curve != series.curve || fitted.measure != measure) continue;
    if (fitted.fit.likelihood == "censored") {
      series.censored = fitted.fit;
    } else {
      series.fit = fitted.fit;
    }
  }
  const auto turned = [](const std::optional<double>& negative_log) -> std::optional<double> {
    return negative_log ? std::optional(-*negative_log) : std::nullopt;
  };
  for (const pharmacology::NamedEstimate& one : series.fit.parameters) {
    const pharmacology::Estimate& value = one.value;
    if (one.name.rfind("pec50", 0) != 0 || !(value.estimate || value.ci_low || value.ci_high)) continue;
    series.ec50.push_back({one.name, turned(value.estimate), turned(value.ci_high), turned(value.ci_low)});
  }
}

/// Responses that the main fit was made of, in its own unit.
std::vector<pharmacology::CurvePoint> fitted_points(const SessionResult& result, const CurveSeries& series) {
  std::vector<pharmacology::CurvePoint> points;
  for (const PlottedPoint& point : series.points) {
    const Response& row = result.responses.rows[point.row];
    const bool measured = row.status == Status::ok || row.status == Status::not_steady;
    if (measured && row.value) points.push_back({row.concentration, *row.value});
  }
  return points;
}

/// Ends of the concentrations that the fit rests on, as log10; nothing if all are 0.
std::optional<std::pair<double, double>> tested(const std::vector<pharmacology::CurvePoint>& points) {
  std::optional<std::pair<double, double>> ends;
  for (const pharmacology::CurvePoint& point : points) {
    if (!(point.concentration.value() > 0.0)) continue;
    const double x = std::log10(point.concentration.value());
    if (!ends) ends = {x, x};
    ends->first = std::min(ends->first, x);
    ends->second = std::max(ends->second, x);
  }
  return ends;
}

std::optional<LinePiece> piece(const pharmacology::CurveFit& fit,
                               const std::vector<pharmacology::CurvePoint>& points, const FormScale& scale,
                               double from, double to, bool is_inside) {
  LinePiece line;
  line.is_inside = is_inside;
  std::vector<Molar> at;
  const auto steps = static_cast<int>(std::ceil((to - from) / kGridStep));
  for (int i = 0; i <= steps; ++i) {
    const double x = i == steps ? to : from + i * kGridStep;
    const auto response = pharmacology::fitted_response(fit, Molar(std::pow(10.0, x)));
    if (!response || !std::isfinite(*response)) return std::nullopt;
    line.position.push_back(x);
    line.response.push_back(scale.value(*response));
    at.emplace_back(std::pow(10.0, x));
  }
  for (const pharmacology::BandLimits& limits : pharmacology::confidence_band(fit, points, at))
    line.band.push_back({scale.value(limits.low), scale.value(limits.high)});
  return line;
}

} // namespace

std::optional<FormScale> form_scale(const SessionResult& result, int curve, const std::string& measure,
                                    ResponseForm form) {
  if (form == ResponseForm::absolute) return FormScale{};
  const std::optional<double> control = control_of(result, curve, measure);
  if (!control) return std::nullopt;
  if (form == ResponseForm::change_from_control) return FormScale{*control, 1.0};
  if (!(*control > 0.0) || !std::isfinite(100.0 / *control)) return std::nullopt;
  return FormScale{0.0, 100.0 / *control};
}

CurveSeries series_of(const SessionResult& result, int curve, const std::string& measure,
                      const FormScale& scale) {
  CurveSeries series;
  series.curve = curve;
  for (std::size_t i = 0; i < result.responses.rows.size(); ++i) {
    const Response& row = result.responses.rows[i];
    if (!is_of(row, curve, measure)) continue;
    series.agent = row.agent;
    series.points.push_back(point_of(result, i, scale));
  }
  std::stable_sort(series.points.begin(), series.points.end(), [](const auto& a, const auto& b) {
    return a.concentration.value() < b.concentration.value();
  });
  for (const protocol::Curve& planned : result.plan.curves) {
    if (planned.number == curve) series.background = planned.background_agents;
  }
  take_fits(series, result, measure);
  return series;
}

void add_line(CurveSeries& series, const SessionResult& result, const std::string& measure,
              const FormScale& scale, const ConcentrationAxis& axis) {
  const auto points = fitted_points(result, series);
  const auto ends = tested(points);
  if (!ends) return;
  const double parts[4] = {std::min(axis.log_low, ends->first), ends->first, ends->second,
                           std::max(axis.high, ends->second)};
  for (int i = 0; i < 3; ++i) {
    const bool is_inside = i == 1;
    if (!is_inside && !(parts[i] < parts[i + 1])) continue;
    const auto line = piece(series.fit, points, scale, parts[i], parts[i + 1], is_inside);
    if (!line) return series.line.clear();
    series.line.push_back(*line);
  }
  const Molar none(0.0);
  const auto level = pharmacology::fitted_response(series.fit, none);
  if (!level || !control_of(result, series.curve, measure)) return;
  series.zero = ZeroLevel{scale.value(*level), {}};
  const auto band = pharmacology::confidence_band(series.fit, points, {&none, 1});
  if (!band.empty())
    series.zero->band = pharmacology::BandLimits{scale.value(band[0].low), scale.value(band[0].high)};
}

} // namespace chronodrome::session
