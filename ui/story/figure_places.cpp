// Chronodrome, GPL-3.0-or-later.
// What lies where in the figure.
#include <algorithm>
#include <cmath>

#include "ui/story/bath_ribbon.h"
#include "ui/story/lost_stretches.h"
#include "ui/story/plateau_bands.h"
#include "ui/story/rhythm_strip.h"
#include "ui/story/story_figure.h"

namespace chronodrome::ui::story {
namespace {

constexpr double kReach = 4.0; // pixels at either side of an edge that catch it

/// Start, end or body of something from `left` to `right`; a narrow one keeps a body that can be caught.
std::optional<int> edgeAt(double x, double left, double right) {
  const double inside = std::min(kReach, 0.25 * (right - left));
  if (x < left - kReach || x > right + kReach) return std::nullopt;
  if (x <= left + inside) return -1;
  if (x >= right - inside) return 1;
  return 0;
}

} // namespace

Seconds StoryFigure::timeAt(double x) const {
  return Seconds(rhythm_rect_->axis(QCPAxis::atBottom)->pixelToCoord(x));
}

double StoryFigure::xOf(Seconds time) const {
  return rhythm_rect_->axis(QCPAxis::atBottom)->coordToPixel(time.value());
}

const StoryFigure::Row* StoryFigure::rowOf(std::size_t trend) const {
  for (const auto& row : rows_) {
    if (row.trend == trend) return &row;
  }
  return nullptr;
}

QRect StoryFigure::rowRect(std::size_t trend) const {
  const Row* row = rowOf(trend);
  return row != nullptr && row->rect ? row->rect->rect() : QRect();
}

QRect StoryFigure::bathRect() const {
  return bath_rect_->rect();
}

QRect StoryFigure::rhythmRect() const {
  return rhythm_rect_->rect();
}

QRectF StoryFigure::bandRect(std::size_t response) const {
  if (!state_.bands || response >= state_.bands->responses.rows.size()) return {};
  const auto& row = state_.bands->responses.rows[response];
  for (const auto& shown : rows_) {
    if (state_.content->trends[shown.trend].measure == row.measure) return shown.bands->bandOf(row);
  }
  return {};
}

const session::LostStretch* StoryFigure::lostAt(std::optional<std::size_t> trend, Seconds time) const {
  const Row* row = trend ? rowOf(*trend) : nullptr;
  const LostStretches* part = row != nullptr ? row->lost : lost_;
  return part->at(time);
}

int StoryFigure::laneAt(double y) const {
  return bath_->laneAt(y);
}

const session::RhythmBlock* StoryFigure::blockAt(double x) const {
  return rhythm_->blockAt(x);
}

std::optional<Hit> StoryFigure::frameHit(QPointF place) const {
  if (!touch_.frame || touch_layer_ == nullptr) return std::nullopt;
  const QRectF tab = touch_layer_->tabRect();
  if (tab.isNull()) return std::nullopt;
  const bool isInStrip = place.y() < bath_rect_->top();
  const QRectF area = isInStrip ? tab : touch_layer_->frameRect();
  const auto edge = edgeAt(place.x(), area.left(), area.right());
  if (!edge) return std::nullopt;
  Hit hit;
  hit.part = *edge < 0   ? Hit::Part::frameStart
             : *edge > 0 ? Hit::Part::frameEnd
             : isInStrip ? Hit::Part::frameTab
                         : Hit::Part::frameBody;
  return hit;
}

std::optional<Hit> StoryFigure::bandHit(QPointF place, const Row& row) const {
  if (!state_.bands) return std::nullopt;
  const auto& responses = state_.bands->responses.rows;
  std::optional<Hit> nearest;
  double away = 1e9;
  for (std::size_t i = 0; i < responses.size(); ++i) {
    const auto& response = responses[i];
    if (response.measure != state_.content->trends[row.trend].measure ||
        response.window_end <= response.window_start)
      continue;
    const QRectF band = row.bands->bandOf(response);
    const auto edge = edgeAt(place.x(), band.left(), band.right());
    if (!edge) continue;
    // Where two bands meet, the edge of the chosen one is caught, else the nearer edge.
    const bool isChosen = state_.chosen && isOfStep(response, *state_.chosen);
    const double toEdge = *edge < 0 ? std::abs(place.x() - band.left()) : std::abs(place.x() - band.right());
    const double distance = *edge == 0 ? kReach : isChosen ? -1.0 : toEdge;
    if (distance >= away) continue;
    away = distance;
    nearest = Hit{};
    nearest->response = i;
    nearest->part = *edge < 0 ? Hit::Part::bandStart : *edge > 0 ? Hit::Part::bandEnd : Hit::Part::band;
  }
  return nearest;
}

const StoryFigure::Row* StoryFigure::rowAt(double y) const {
  for (const auto& row : rows_) {
    if (row.rect && y >= row.rect->top() - kReach && y <= row.rect->bottom() + kReach) return &row;
  }
  return nullptr;
}

Hit StoryFigure::hitAt(QPointF place) const {
  Hit hit;
  hit.time = timeAt(place.x());
  if (!state_.content || !state_.content->result) return hit;
  if (place.x() < rhythm_rect_->left() - kReach) {
    hit.part = Hit::Part::gutter;
    return hit;
  }
  const Row* row = rowAt(place.y());
  if (row != nullptr) {
    hit.area = Hit::Part::row;
    hit.trend = row->trend;
  } else if (place.y() >= rhythm_rect_->top() - kReach) {
    hit.area = Hit::Part::rhythm;
  } else if (place.y() >= bath_rect_->top() && place.y() <= bath_rect_->bottom() + kReach) {
    hit.area = Hit::Part::bath;
  }
  hit.part = hit.area;
  const auto band = row != nullptr ? bandHit(place, *row) : std::nullopt;
  const auto frame = frameHit(place);
  const bool isFrameEdge =
      frame && (frame->part == Hit::Part::frameStart || frame->part == Hit::Part::frameEnd);
  // A plateau's edge lies above the frame's, and that above a plateau's body.
  if (band && (band->part != Hit::Part::band || !isFrameEdge)) {
    hit.part = band->part;
    hit.response = band->response;
  } else if (frame) {
    hit.part = frame->part;
  }
  return hit;
}

} // namespace chronodrome::ui::story
