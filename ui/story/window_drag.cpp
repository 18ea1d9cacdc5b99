// Chronodrome, GPL-3.0-or-later.
#include "ui/story/window_drag.h"

#include <algorithm>

namespace chronodrome::ui::story {

WindowDrag::WindowDrag(const response::Response& response, recording::Span step, Grip grip,
                       bool ofAllMeasures)
    : first_{response.window_start, response.window_end}, now_(first_), held_(first_), grip_(grip) {
  // A window placed by an older choice may reach beyond its step: it is not cut before it is moved.
  step_ = {std::min(step.start, first_.start), std::max(step.end, first_.end)};
  choice_.curve = response.curve;
  choice_.concentration = response.concentration;
  if (!ofAllMeasures) choice_.measure = response.measure;
}

void WindowDrag::hold(Grip grip) {
  grip_ = grip;
  held_ = now_;
}

void WindowDrag::moveTo(Seconds by) {
  const Seconds least = std::min(kLeastWindow, step_.end - step_.start);
  const Seconds length = held_.end - held_.start;
  switch (grip_) {
  case Grip::start:
    now_.start = std::clamp(held_.start + by, step_.start, std::max(step_.start, held_.end - least));
    break;
  case Grip::end:
    now_.end = std::clamp(held_.end + by, std::min(step_.end, held_.start + least), step_.end);
    break;
  case Grip::body:
    now_.start = std::clamp(held_.start + by, step_.start, step_.end - length);
    now_.end = now_.start + length;
    break;
  }
}

bool WindowDrag::isMoved() const {
  return now_.start != first_.start || now_.end != first_.end;
}

document::WindowChoice WindowDrag::choice() const {
  document::WindowChoice choice = choice_;
  choice.start = now_.start;
  choice.end = now_.end;
  return choice;
}

} // namespace chronodrome::ui::story
