// Chronodrome, GPL-3.0-or-later.
#include <catch2/catch.hpp>

#include <algorithm>
#include <cmath>

#include "pharmacology/fit.h"
#include "session/curve_view.h"
#include "session/curves.h"

using namespace chronodrome;
using namespace chronodrome::session;
using Catch::Matchers::WithinAbs;
using Catch::Matchers::WithinRel;
using response::Response;
using response::Status;

namespace {

Response step(int curve, double concentration, double value, Status status = Status::ok) {
  Response row;
  row.curve = curve;
  row.agent = "carbachol";
  row.concentration = Molar(concentration);
  row.measure = "rate:RA";
  row.unit = "bpm";
  row.n_beats = 40;
  row.status = status;
  if (status == Status::ok || status == Status::not_steady) {
    row.value = value;
    row.sem = 0.5;
  }
  return row;
}

/// Responses get windows of 30 s every 100 s in the order given, then the fits.
SessionResult result_of(std::vector<Response> rows) {
  SessionResult result;
  double time = 100.0;
  for (Response& row : rows) {
    row.window_start = Seconds(time - 30.0);
    row.window_end = Seconds(time);
    time += 100.0;
  }
  result.responses.rows = std::move(rows);
  result.session.measures = {"rate:RA"};
  result.curves = fit_curves(result.responses, "P", pharmacology::Model::hill, {}, 1);
  return result;
}

std::vector<Response> slowing(int curve = 1) {
  return {step(curve, 0, 200.0),    step(curve, 1e-9, 199.1), step(curve, 1e-8, 191.0),
          step(curve, 1e-7, 150.6), step(curve, 1e-6, 108.3), step(curve, 1e-5, 101.5),
          step(curve, 1e-4, 99.8)};
}

const WeakPoint* weak(const CurveView& view, const std::string& flag) {
  for (const WeakPoint& one : view.weak_points) {
    if (one.flag == flag) return &one;
  }
  return nullptr;
}

const ParameterRow* parameter(const CurveView& view, const std::string& name) {
  for (const ParameterRow& one : view.parameters) {
    if (one.name == name) return &one;
  }
  return nullptr;
}

} // namespace

TEST_CASE("a view holds every response as a point with its error, beats and window", "[session][curve]") {
  auto rows = slowing();
  rows[3].is_selected = true;
  rows[4].status = Status::not_steady;
  const SessionResult result = result_of(rows);
  const auto view = curve_view(result, 1, "rate:RA");
  REQUIRE(view);
  REQUIRE(view->chosen.points.size() == 7);
  CHECK_FALSE(view->chosen.points[0].position);
  CHECK_THAT(view->chosen.points[1].position.value(), WithinAbs(-9.0, 1e-12));
  const PlottedPoint& third = view->chosen.points[3];
  CHECK(third.value == 150.6);
  CHECK(third.sem == 0.5);
  CHECK(third.n_beats == 40);
  CHECK(third.is_selected);
  CHECK(third.window_start.value() == 370.0);
  CHECK(third.window_end.value() == 400.0);
  CHECK(third.row == 3);
  CHECK(view->chosen.points[4].status == Status::not_steady);
  CHECK(view->unit == "bpm");
  CHECK_FALSE(curve_view(result, 2, "rate:RA"));
  CHECK_FALSE(curve_view(result, 1, "rate:RV"));
}

TEST_CASE("points stand by concentration, whatever the order of additions", "[session][curve]") {
  auto rows = slowing();
  std::swap(rows[0], rows[5]);
  const auto view = curve_view(result_of(rows), 1, "rate:RA");
  REQUIRE(view);
  for (std::size_t i = 1; i < view->chosen.points.size(); ++i)
    CHECK(view->chosen.points[i - 1].concentration < view->chosen.points[i].concentration);
}

TEST_CASE("the line is inside the concentrations tested or outside them, without a gap", "[session][curve]") {
  const SessionResult result = result_of(slowing());
  const auto view = curve_view(result, 1, "rate:RA");
  REQUIRE(view);
  REQUIRE(view->chosen.line.size() == 3);
  const auto& [below, inside, above] =
      std::tie(view->chosen.line[0], view->chosen.line[1], view->chosen.line[2]);
  CHECK_FALSE(below.is_inside);
  CHECK(inside.is_inside);
  CHECK_FALSE(above.is_inside);
  CHECK_THAT(inside.position.front(), WithinAbs(-9.0, 1e-12));
  CHECK_THAT(inside.position.back(), WithinAbs(-4.0, 1e-12));
  CHECK(below.position.back() == inside.position.front());
  CHECK(below.response.back() == inside.response.front());
  CHECK(above.position.front() == inside.position.back());
  CHECK_THAT(above.position.back(), WithinAbs(view->axis.high, 1e-12));
  CHECK_THAT(below.position.front(), WithinAbs(view->axis.log_low, 1e-12));
  REQUIRE(inside.band.size() == inside.position.size());
  for (std::size_t i = 0; i < inside.band.size(); ++i) {
    CHECK(inside.band[i].low < inside.response[i]);
    CHECK(inside.response[i] < inside.band[i].high);
  }
  // The fitted level of the control is basal, with its interval by the delta method.
  REQUIRE(view->chosen.zero);
  CHECK(view->chosen.zero->response == view->chosen.fit.find("basal")->estimate.value());
  REQUIRE(view->chosen.zero->band);
}

TEST_CASE("the EC50 turns its sides over: the higher pEC50 is the lower concentration", "[session][curve]") {
  const auto view = curve_view(result_of(slowing()), 1, "rate:RA");
  REQUIRE(view);
  REQUIRE(view->chosen.ec50.size() == 1);
  const pharmacology::Estimate& pec50 = *view->chosen.fit.find("pec50");
  CHECK(view->chosen.ec50[0].low.value() == -pec50.ci_high.value());
  CHECK(view->chosen.ec50[0].high.value() == -pec50.ci_low.value());
  CHECK(view->chosen.ec50[0].estimate.value() == -pec50.estimate.value());
}

TEST_CASE("a plateau that was not reached leaves its side open and points to the highest step",
          "[session][curve]") {
  const SessionResult result = result_of({step(1, 0, 200.0), step(1, 1e-9, 199.5), step(1, 1e-8, 199.0),
                                          step(1, 1e-7, 197.1), step(1, 1e-6, 192.5), step(1, 1e-5, 180.3)});
  const auto view = curve_view(result, 1, "rate:RA");
  REQUIRE(view);
  REQUIRE(view->chosen.fit.has_flag("upper_plateau_open"));
  CHECK(view->chosen.ec50[0].low);
  CHECK_FALSE(view->chosen.ec50[0].high);
  const WeakPoint* open = weak(*view, "upper_plateau_open");
  REQUIRE(open);
  REQUIRE(open->places.size() == 1);
  CHECK(open->places[0].concentration == Molar(1e-5));
  CHECK(open->places[0].start.value() == 570.0);
  CHECK(open->places[0].end.value() == 600.0);
  CHECK_FALSE(open->meaning.empty());
  CHECK_FALSE(open->advice.empty());
  CHECK(open->what.find("plateau") != std::string::npos);
}

TEST_CASE("the axis has ticks at 1 and 3, and the control beyond a break", "[session][curve]") {
  const auto view = curve_view(result_of(slowing()), 1, "rate:RA");
  REQUIRE(view);
  const ConcentrationAxis& axis = view->axis;
  REQUIRE(axis.zero);
  REQUIRE(axis.break_at);
  CHECK(axis.low < *axis.zero);
  CHECK(*axis.zero < *axis.break_at);
  CHECK(*axis.break_at < axis.log_low);
  CHECK(axis.log_low < -9.0);
  CHECK(axis.high > -4.0);
  std::vector<double> decades;
  for (const ConcentrationTick& tick : axis.ticks) {
    CHECK_THAT(std::log10(tick.concentration.value()), WithinAbs(tick.position, 1e-12));
    if (tick.is_decade) decades.push_back(tick.concentration.value());
  }
  CHECK(decades == std::vector<double>{1e-9, 1e-8, 1e-7, 1e-6, 1e-5, 1e-4});
  CHECK(axis.ticks.size() == 12); // 1 to 100000 nM with their threes

  SECTION("without a control there is nothing to break off") {
    auto rows = slowing();
    rows.erase(rows.begin());
    const auto without = curve_view(result_of(rows), 1, "rate:RA");
    REQUIRE(without);
    CHECK_FALSE(without->axis.zero);
    CHECK_FALSE(without->axis.break_at);
    CHECK(without->axis.low == without->axis.log_low);
    CHECK_FALSE(without->chosen.zero);
  }
}

TEST_CASE("change and percentage are lines of the absolute response", "[session][curve]") {
  const SessionResult result = result_of(slowing());
  const auto absolute = curve_view(result, 1, "rate:RA");
  const auto change = curve_view(result, 1, "rate:RA", ResponseForm::change_from_control);
  const auto percent = curve_view(result, 1, "rate:RA", ResponseForm::percent_of_control);
  REQUIRE((absolute && change && percent));
  CHECK(change->chosen.points[0].value == 0.0);
  CHECK_THAT(change->chosen.points[3].value.value(), WithinAbs(150.6 - 200.0, 1e-12));
  CHECK(change->chosen.points[3].sem == 0.5);
  CHECK_THAT(percent->chosen.points[3].value.value(), WithinRel(75.3, 1e-12));
  CHECK_THAT(percent->chosen.points[3].sem.value(), WithinRel(0.25, 1e-12));
  CHECK(percent->unit == "%");
  for (const auto& view : {change, percent}) {
    CHECK(parameter(*view, "pec50")->value.estimate == parameter(*absolute, "pec50")->value.estimate);
    CHECK(parameter(*view, "nh")->value.ci_low == parameter(*absolute, "nh")->value.ci_low);
  }
  const auto emax = [](const CurveView& view) { return parameter(view, "emax")->value; };
  CHECK_THAT(emax(*change).estimate.value(), WithinAbs(emax(*absolute).estimate.value() - 200.0, 1e-9));
  CHECK_THAT(emax(*percent).ci_high.value(), WithinRel(emax(*absolute).ci_high.value() / 2.0, 1e-12));
  CHECK_THAT(emax(*percent).se.value(), WithinRel(emax(*absolute).se.value() / 2.0, 1e-12));
  const auto effect = [](const CurveView& view) { return parameter(view, "effect_max")->value; };
  CHECK(effect(*change).estimate == effect(*absolute).estimate);
  CHECK_THAT(effect(*percent).estimate.value(), WithinRel(effect(*absolute).estimate.value() / 2.0, 1e-12));
  CHECK_THAT(percent->chosen.line[1].response[7],
             WithinRel(absolute->chosen.line[1].response[7] / 2.0, 1e-12));
  CHECK_THAT(percent->chosen.line[1].band[7].low,
             WithinRel(absolute->chosen.line[1].band[7].low / 2.0, 1e-12));
}

TEST_CASE("a curve without a control to compare with stays absolute", "[session][curve]") {
  auto rows = slowing();
  rows[0] = step(1, 0, 0.0, Status::unreadable);
  const SessionResult result = result_of(rows);
  CHECK_FALSE(can_be_expressed(result, 1, "rate:RA", ResponseForm::percent_of_control));
  CHECK_FALSE(can_be_expressed(result, 1, "rate:RA", ResponseForm::change_from_control));
  const auto view = curve_view(result, 1, "rate:RA", ResponseForm::percent_of_control);
  REQUIRE(view);
  CHECK(view->form == ResponseForm::absolute);
  CHECK(view->unit == "bpm");
}

TEST_CASE("a response known only as a limit is a bound, not a value", "[session][curve]") {
  auto rows = slowing();
  rows[6] = step(1, 1e-4, 0.0, Status::arrested);
  rows[6].limit = 4.0;
  rows[6].limit_side = "at_most";
  rows.push_back(step(1, 3e-4, 0.0, Status::excluded));
  const SessionResult result = result_of(rows);
  const auto view = curve_view(result, 1, "rate:RA");
  REQUIRE(view);
  const PlottedPoint& arrested = view->chosen.points[6];
  CHECK_FALSE(arrested.value);
  CHECK(arrested.bound == 4.0);
  CHECK_FALSE(arrested.is_at_least);
  CHECK_FALSE(view->chosen.points[7].bound);
  CHECK(view->response_low < 4.0);
  // The main fit rests on what was measured: the line is solid only there.
  CHECK_THAT(view->chosen.line[1].position.back(), WithinAbs(-5.0, 1e-12));
  REQUIRE(view->chosen.censored);
  const auto censored = std::count_if(view->parameters.begin(), view->parameters.end(),
                                      [](const ParameterRow& row) { return row.is_censored; });
  CHECK(censored <= 2);
  CHECK(parameter(*view, "pec50")->n == 6);
  const auto said =
      std::find_if(view->weak_points.begin(), view->weak_points.end(), [](const WeakPoint& one) {
        return one.flag.empty() && one.places.front().concentration == Molar(3e-4);
      });
  REQUIRE(said != view->weak_points.end());
  CHECK(said->what == "left out");
}

TEST_CASE("selected beats, an undetermined slope and single steps lead to their places", "[session][curve]") {
  auto rows = slowing();
  rows[5].is_selected = true;
  rows[5].flags = {"conducted beats only: 20 of 40"};
  rows[6].is_selected = true;
  rows[6].flags = {"conducted beats only: 20 of 40"};
  const SessionResult result = result_of(rows);
  const auto view = curve_view(result, 1, "rate:RA");
  REQUIRE(view);
  const WeakPoint* selected = weak(*view, "selected_beats");
  REQUIRE(selected);
  REQUIRE(selected->places.size() == 2);
  CHECK(selected->places[0].concentration == Molar(1e-5));
  // What is said of two steps alike is said once.
  REQUIRE(view->weak_points.back().flag.empty());
  CHECK(view->weak_points.back().places.size() == 2);

  const SessionResult sudden =
      result_of({step(1, 0, 200.1), step(1, 1e-9, 199.9), step(1, 1e-8, 200.2), step(1, 1e-7, 199.8),
                 step(1, 1e-6, 100.1), step(1, 1e-5, 99.9), step(1, 1e-4, 100.2)});
  const auto steep = curve_view(sudden, 1, "rate:RA");
  REQUIRE(steep);
  const WeakPoint* slope = weak(*steep, "slope_undetermined");
  REQUIRE(slope);
  REQUIRE(slope->places.size() == 2);
  CHECK(slope->places[0].concentration == Molar(1e-7));
  CHECK(slope->places[1].concentration == Molar(1e-6));
}

TEST_CASE("a declined fit has points and a reason, but no line and no number", "[session][curve]") {
  const SessionResult result = result_of({step(1, 0, 200.0), step(1, 1e-8, 190.0), step(1, 1e-7, 150.0)});
  const auto view = curve_view(result, 1, "rate:RA");
  REQUIRE(view);
  CHECK(view->chosen.points.size() == 3);
  CHECK(view->chosen.line.empty());
  CHECK(view->chosen.ec50.empty());
  CHECK(view->parameters.empty());
  const WeakPoint* declined = weak(*view, "declined");
  REQUIRE(declined);
  REQUIRE(declined->places.size() == 1);
  CHECK_FALSE(declined->places[0].concentration); // the whole curve
  CHECK(declined->places[0].start.value() == 70.0);
  CHECK(declined->places[0].end.value() == 300.0);
  // few_points would only say a part of it again.
  REQUIRE(view->chosen.fit.has_flag("few_points"));
  CHECK_FALSE(weak(*view, "few_points"));
}

TEST_CASE("no response is drawn as its mean", "[session][curve]") {
  const SessionResult result = result_of({step(1, 0, 200.0), step(1, 1e-9, 201.0), step(1, 1e-8, 199.0),
                                          step(1, 1e-7, 200.5), step(1, 1e-6, 199.5), step(1, 1e-5, 200.2)});
  const auto view = curve_view(result, 1, "rate:RA");
  REQUIRE(view);
  REQUIRE(view->chosen.fit.has_flag("no_response"));
  REQUIRE(view->chosen.line.size() == 3);
  CHECK(view->chosen.line[1].response.front() == view->chosen.line[1].response.back());
  CHECK_FALSE(view->chosen.line[1].band.empty());
  REQUIRE(view->parameters.size() == 1);
  CHECK(view->parameters[0].name == "basal");
}

TEST_CASE("other curves of the measure stand beside, on the same axes", "[session][curve]") {
  auto rows = slowing(1);
  auto second = slowing(2);
  for (Response& row : second)
    row.concentration = Molar(row.concentration.value() * 100.0);
  rows.insert(rows.end(), second.begin(), second.end());
  SessionResult result = result_of(rows);
  protocol::Curve planned;
  planned.number = 2;
  planned.background_agents = {{"atropine", Molar(1e-7)}};
  result.plan.curves = {planned};
  CHECK(curves_with(result, "rate:RA") == std::vector<int>{1, 2});
  const auto view = curve_view(result, 1, "rate:RA");
  REQUIRE(view);
  REQUIRE(view->others.size() == 1);
  CHECK(view->others[0].curve == 2);
  REQUIRE(view->others[0].background.size() == 1);
  CHECK(view->others[0].background[0].agent == "atropine");
  CHECK(view->axis.high > -2.0);
  CHECK(view->others[0].line.size() == 3);
  CHECK(curve_view(result, 2, "rate:RA")->chosen.curve == 2);
}

TEST_CASE("a window placed by hand is known with its reason", "[session][curve]") {
  auto rows = slowing();
  rows[3].is_placed = true;
  rows[3].flags = {"window placed by hand"};
  SessionResult result = result_of(rows);
  document::WindowChoice choice;
  choice.curve = 1;
  choice.concentration = Molar(1e-7);
  choice.why = "bubble before it";
  result.session.windows = {choice};
  const auto view = curve_view(result, 1, "rate:RA");
  REQUIRE(view);
  CHECK(view->chosen.points[3].is_placed);
  CHECK_FALSE(view->chosen.points[2].is_placed);
  REQUIRE(view->weak_points.size() == 1);
  CHECK(view->weak_points[0].what.find("bubble before it") != std::string::npos);
  // A choice for another measure is not this one's reason.
  result.session.windows[0].measure = "rate:RV";
  CHECK(curve_view(result, 1, "rate:RA")->weak_points[0].what == "window placed by hand");
}
