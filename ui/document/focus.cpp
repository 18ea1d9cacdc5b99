// Chronodrome, GPL-3.0-or-later.
#include "ui/document/focus.h"

#include <algorithm>

namespace chronodrome::ui {
namespace {

/// Narrower than any interval that a reader measures.
constexpr Seconds kNarrowest{1e-3};
/// A day of clicking; older places are forgotten.
constexpr std::size_t kMostPlaces = 1000;

} // namespace

void Focus::reset(Seconds recordingEnd) {
  recording_end_ = std::max(recordingEnd, kNarrowest);
  start_ = Seconds(0.0);
  end_ = recording_end_;
  step_.reset();
  curve_ = 0;
  measure_.clear();
  places_ = {{start_, end_}};
  place_ = 0;
  Q_EMIT rangeChanged(start_, end_);
  Q_EMIT stepChanged();
  Q_EMIT curveChanged();
  Q_EMIT placesChanged();
}

void Focus::set(Seconds start, Seconds end) {
  if (end < start) std::swap(start, end);
  const Seconds width = std::clamp(end - start, kNarrowest, std::max(recording_end_, kNarrowest));
  // A stretch that is too narrow grows about its middle; one that leaves the recording is moved back in.
  const Seconds middle = 0.5 * (start + end);
  if (end - start < width) start = middle - 0.5 * width;
  start = std::clamp(start, Seconds(0.0), std::max(recording_end_ - width, Seconds(0.0)));
  if (start == start_ && start + width == end_) return;
  start_ = start;
  end_ = start + width;
  Q_EMIT rangeChanged(start_, end_);
}

void Focus::show(Seconds start, Seconds end) {
  set(start, end);
}

void Focus::goTo(Seconds start, Seconds end) {
  // Where the user had zoomed and panned to is the place to come back to.
  if (place_ < places_.size()) places_[place_] = {start_, end_};
  const Stretch before{start_, end_};
  set(start, end);
  if (start_ == before.start && end_ == before.end) return;
  if (!places_.empty()) places_.resize(place_ + 1);
  places_.push_back({start_, end_});
  if (places_.size() > kMostPlaces) places_.erase(places_.begin());
  place_ = places_.size() - 1;
  Q_EMIT placesChanged();
}

void Focus::goToTime(Seconds time) {
  const Seconds half = 0.5 * (end_ - start_);
  goTo(time - half, time + half);
}

void Focus::goBack() {
  if (!canGoBack()) return;
  places_[place_] = {start_, end_};
  --place_;
  set(places_[place_].start, places_[place_].end);
  Q_EMIT placesChanged();
}

void Focus::goForward() {
  if (!canGoForward()) return;
  places_[place_] = {start_, end_};
  ++place_;
  set(places_[place_].start, places_[place_].end);
  Q_EMIT placesChanged();
}

void Focus::chooseStep(std::optional<StepRef> step) {
  if (step == step_) return;
  step_ = std::move(step);
  Q_EMIT stepChanged();
}

void Focus::chooseCurve(int curve, const std::string& measure) {
  if (curve == curve_ && measure == measure_) return;
  curve_ = curve;
  measure_ = measure;
  Q_EMIT curveChanged();
}

} // namespace chronodrome::ui
