// Chronodrome, GPL-3.0-or-later.
#include "ui/story/travel.h"

#include <algorithm>
#include <vector>

namespace chronodrome::ui::story {
namespace {

constexpr Seconds kFirstWidth{10.0};   // in which single beats can be seen
constexpr Seconds kLongEpisode{120.0}; // longer ones are gone to at the place of the click
constexpr double kAir = 0.1;           // left beside what is gone to

} // namespace

void Travel::toTime(Seconds time) {
  const Seconds whole = focus_.recordingEnd();
  const Seconds width = focus_.end() - focus_.start();
  if (width <= 0.5 * whole) {
    focus_.goToTime(time);
    return;
  }
  const Seconds half = 0.5 * std::min(kFirstWidth, 0.5 * whole);
  focus_.goTo(time - half, time + half);
}

void Travel::choosePlateau(std::size_t response) {
  const auto& bands = figure_.state().bands;
  if (!bands || response >= bands->responses.rows.size()) return;
  const auto row = bands->responses.rows[response];
  focus_.chooseCurve(row.curve, row.measure);
  focus_.chooseStep(stepOf(row));
  const Seconds air = kAir * (row.window_end - row.window_start);
  focus_.goTo(row.window_start - air, row.window_end + air);
}

void Travel::follow(const Hit& hit) {
  switch (hit.part) {
  case Hit::Part::band:
  case Hit::Part::bandStart:
  case Hit::Part::bandEnd:
    choosePlateau(hit.response);
    return;
  case Hit::Part::nothing:
  case Hit::Part::gutter:
    return;
  default:
    break;
  }
  if (hit.area == Hit::Part::nothing) return; // the frame's tab: it is here already
  if (hit.area != Hit::Part::rhythm || !toEpisode(hit.time)) toTime(hit.time);
}

bool Travel::toEpisode(Seconds time) {
  const auto& rhythm = figure_.state().content->result->rhythm;
  const std::size_t at = session::episode_at(rhythm, time);
  if (at >= rhythm.episodes.size()) return false;
  const auto& episode = rhythm.episodes[at];
  const Seconds length = episode.end - episode.start;
  if (session::weight_of(episode.kind) == 0 || length > kLongEpisode) return false;
  const Seconds air = std::max(kAir * length, Seconds(1.0));
  focus_.goTo(episode.start - air, episode.end + air);
  return true;
}

std::optional<std::size_t> Travel::chosen() const {
  const auto& state = figure_.state();
  if (!state.bands || !state.chosen) return std::nullopt;
  const auto& rows = state.bands->responses.rows;
  for (std::size_t i = 0; i < rows.size(); ++i) {
    if (isOfStep(rows[i], *state.chosen)) return i;
  }
  return std::nullopt;
}

std::string Travel::measure() const {
  const auto at = chosen();
  const auto& state = figure_.state();
  if (at) return state.bands->responses.rows[*at].measure;
  if (!focus_.measure().empty()) return focus_.measure();
  return state.content && !state.content->trends.empty() ? state.content->trends.front().measure
                                                         : std::string();
}

void Travel::toPlateau(int direction) {
  const auto& bands = figure_.state().bands;
  if (!bands) return;
  const std::string wanted = measure();
  std::vector<std::size_t> order;
  for (std::size_t i = 0; i < bands->responses.rows.size(); ++i) {
    const auto& row = bands->responses.rows[i];
    if (row.measure == wanted && row.window_end > row.window_start) order.push_back(i);
  }
  if (order.empty()) return;
  std::stable_sort(order.begin(), order.end(), [&](std::size_t a, std::size_t b) {
    return bands->responses.rows[a].window_start < bands->responses.rows[b].window_start;
  });
  const auto at = chosen();
  const auto here = at ? std::find(order.begin(), order.end(), *at) : order.end();
  if (here == order.end()) {
    choosePlateau(direction > 0 ? order.front() : order.back());
  } else if (direction > 0 && here + 1 != order.end()) {
    choosePlateau(*(here + 1));
  } else if (direction < 0 && here != order.begin()) {
    choosePlateau(*(here - 1));
  }
}

void Travel::toAddition(int direction) {
  if (!figure_.state().content) return;
  const auto& times = figure_.state().content->bath.additions;
  const bool isWhole = focus_.end() - focus_.start() > 0.5 * focus_.recordingEnd();
  // From the whole recording the first one is next, whatever lies in its middle.
  const Seconds here = isWhole ? (direction > 0 ? Seconds(-1.0) : focus_.recordingEnd() + Seconds(1.0))
                               : 0.5 * (focus_.start() + focus_.end());
  constexpr Seconds kSame{1e-3};
  if (direction > 0) {
    const auto next = std::upper_bound(times.begin(), times.end(), here + kSame);
    if (next != times.end()) toTime(*next);
  } else {
    const auto next = std::lower_bound(times.begin(), times.end(), here - kSame);
    if (next != times.begin()) toTime(*std::prev(next));
  }
}

void Travel::pan(double share) {
  const Seconds by = share * (focus_.end() - focus_.start());
  focus_.show(focus_.start() + by, focus_.end() + by);
}

void Travel::toEnd(bool isLast) {
  const Seconds width = focus_.end() - focus_.start();
  if (isLast)
    focus_.goTo(focus_.recordingEnd() - width, focus_.recordingEnd());
  else
    focus_.goTo(Seconds(0.0), width);
}

void Travel::zoom(double factor) {
  const Seconds middle = 0.5 * (focus_.start() + focus_.end());
  const Seconds half = 0.5 * factor * (focus_.end() - focus_.start());
  focus_.show(middle - half, middle + half);
}

} // namespace chronodrome::ui::story
