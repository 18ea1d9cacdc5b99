// Chronodrome, GPL-3.0-or-later.
#include <algorithm>
#include <cmath>

#include "pharmacology/flags.h"
#include "session/curve_series.h"

namespace chronodrome::session {

namespace {

namespace flags = pharmacology::flags;
using response::Response;
using response::Status;

CurvePlace place_of(const PlottedPoint& point) {
  return {point.window_start, point.window_end, point.concentration};
}

CurvePlace whole(const CurveSeries& series) {
  CurvePlace place{series.points.front().window_start, series.points.front().window_end, {}};
  for (const PlottedPoint& point : series.points) {
    place.start = std::min(place.start, point.window_start);
    place.end = std::max(place.end, point.window_end);
  }
  return place;
}

template <class Wanted>
std::vector<CurvePlace> places_where(const CurveSeries& series, Wanted wanted) {
  std::vector<CurvePlace> places;
  for (const PlottedPoint& point : series.points) {
    if (wanted(point)) places.push_back(place_of(point));
  }
  return places;
}

std::vector<const PlottedPoint*> measured(const CurveSeries& series) {
  std::vector<const PlottedPoint*> points;
  for (const PlottedPoint& point : series.points) {
    if (point.value) points.push_back(&point);
  }
  return points;
}

/// The two steps between which the response changes most: where an undetermined slope comes from.
std::vector<CurvePlace> steepest(const CurveSeries& series) {
  const auto points = measured(series);
  std::vector<CurvePlace> places;
  double most = -1.0;
  for (std::size_t i = 1; i < points.size(); ++i) {
    const double change = std::abs(*points[i]->value - *points[i - 1]->value);
    if (!(change > most)) continue;
    most = change;
    places = {place_of(*points[i - 1]), place_of(*points[i])};
  }
  return places;
}

/// The end of the tested concentrations beyond which the EC50 or a limit of it lies.
std::vector<CurvePlace> beyond(const CurveSeries& series) {
  const auto points = measured(series);
  std::vector<CurvePlace> places;
  const PlottedPoint *lowest = nullptr, *highest = nullptr;
  for (const PlottedPoint* point : points) {
    if (!point->position) continue;
    if (!lowest) lowest = point;
    highest = point;
  }
  if (!lowest) return places;
  bool is_below = false, is_above = false;
  for (const PlottedInterval& ec50 : series.ec50) {
    for (const auto& value : {ec50.estimate, ec50.low, ec50.high}) {
      is_below = is_below || (value && *value < *lowest->position);
      is_above = is_above || (value && *value > *highest->position);
    }
  }
  if (is_below) places.push_back(place_of(*lowest));
  if (is_above) places.push_back(place_of(*highest));
  return places;
}

std::vector<CurvePlace> places_of(const std::string& flag, const CurveSeries& series) {
  std::vector<CurvePlace> places;
  const auto points = measured(series);
  if (flag == flags::kSelectedBeats) {
    places = places_where(series, [](const PlottedPoint& point) { return point.is_selected; });
  } else if (flag == flags::kHeavilyCensored) {
    places = places_where(series, [](const PlottedPoint& point) { return point.bound.has_value(); });
  } else if (flag == flags::kUpperPlateauOpen && !points.empty()) {
    places = {place_of(*points.back())};
  } else if (flag == flags::kLowerPlateauOpen && !points.empty()) {
    places = {place_of(*points.front())};
  } else if (flag == flags::kSlopeUndetermined) {
    places = steepest(series);
  } else if (flag == flags::kExtrapolated) {
    places = beyond(series);
  }
  if (places.empty()) places.push_back(whole(series));
  return places;
}

void add_flags(std::vector<WeakPoint>& weak, const pharmacology::CurveFit& fit, const CurveSeries& series) {
  for (std::size_t i = 0; i < fit.flags.size(); ++i) {
    const bool known =
        std::any_of(weak.begin(), weak.end(), [&](const WeakPoint& one) { return one.flag == fit.flags[i]; });
    if (known) continue;
    WeakPoint point;
    point.flag = fit.flags[i];
    point.what = i < fit.reasons.size() ? fit.reasons[i] : fit.flags[i];
    // "4 distinct concentrations" beside "4 distinct concentrations for 4 parameters ..." is no news.
    const bool said = std::any_of(weak.begin(), weak.end(), [&](const WeakPoint& one) {
      return one.what.rfind(point.what + " ", 0) == 0;
    });
    if (said) continue;
    for (const pharmacology::FlagMeaning& meaning : pharmacology::flag_meanings()) {
      if (meaning.flag != point.flag) continue;
      point.meaning = meaning.meaning;
      point.advice = meaning.advice;
    }
    point.places = places_of(point.flag, series);
    weak.push_back(std::move(point));
  }
}

std::string why_placed(const SessionResult& result, const Response& row) {
  std::string why;
  for (const document::WindowChoice& choice : result.session.windows) {
    const bool is_its = choice.curve == row.curve && choice.concentration == row.concentration &&
                        (choice.measure.empty() || choice.measure == row.measure);
    if (is_its) why = choice.why;
  }
  return why;
}

std::string words_of(const SessionResult& result, const PlottedPoint& point) {
  const Response& row = result.responses.rows[point.row];
  std::string text;
  const auto add = [&](const std::string& part) { text += (text.empty() ? "" : "; ") + part; };
  if (row.status == Status::excluded) add("left out");
  if (row.status == Status::unreadable) add("unreadable");
  for (const std::string& flag : row.flags)
    add(flag);
  if (text.empty() && row.status == Status::not_steady) add("not at steady state");
  if (text.empty() && row.status == Status::arrested) add("no beat in the window");
  if (text.empty() && row.status == Status::censored) add("known only as a limit");
  if (point.is_placed) {
    // The response says that it was; here stands why.
    const std::string why = why_placed(result, row);
    if (!why.empty()) add("reason: " + why);
    if (text.empty()) add("window placed by hand");
  }
  return text;
}

} // namespace

std::vector<WeakPoint> weak_points(const SessionResult& result, const CurveSeries& series) {
  std::vector<WeakPoint> weak;
  if (series.points.empty()) return weak;
  add_flags(weak, series.fit, series);
  if (series.censored) add_flags(weak, *series.censored, series);
  for (const PlottedPoint& point : series.points) {
    const std::string words = words_of(result, point);
    if (words.empty()) continue;
    // What is said of many steps alike is said once.
    const auto same = std::find_if(weak.begin(), weak.end(), [&](const WeakPoint& one) {
      return one.flag.empty() && one.what == words;
    });
    if (same != weak.end()) {
      same->places.push_back(place_of(point));
      continue;
    }
    WeakPoint one;
    one.what = words;
    one.places = {place_of(point)};
    weak.push_back(std::move(one));
  }
  return weak;
}

} // namespace chronodrome::session
