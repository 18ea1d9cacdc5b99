// Chronodrome, GPL-3.0-or-later.
#include "ui/story/window_editing.h"

#include "ui/story/story_words.h"

namespace chronodrome::ui::story {

WindowEditing::WindowEditing(SessionDocument& document, StoryFigure& figure, QObject* parent)
    : QObject(parent), document_(document), figure_(figure) {}

void WindowEditing::begin(std::size_t response, Grip grip, bool ofAllMeasures) {
  const auto& bands = figure_.state().bands;
  if (document_.isReadOnly() || !bands || response >= bands->responses.rows.size()) return;
  const auto& row = bands->responses.rows[response];
  response_ = response;
  drag_.emplace(row, stepStretch(*bands, row), grip, ofAllMeasures);
}

void WindowEditing::moveTo(Seconds by) {
  if (!drag_) return;
  const auto before = drag_->window();
  drag_->moveTo(by);
  if (drag_->window().start == before.start && drag_->window().end == before.end) return;
  showPreview();
}

void WindowEditing::nudge(std::size_t response, Grip grip, Seconds by) {
  if (!drag_ || response != response_) {
    abort();
    begin(response, grip, false);
  }
  if (!drag_) return;
  drag_->hold(grip);
  moveTo(by);
}

void WindowEditing::showPreview() {
  const auto result = document_.preview(drag_->choice());
  if (!result) return;
  figure_.setBands(result);
  const auto& row = result->responses.rows[response_];
  figure_.touch().words = TouchState::Words{draggedText(row), figure_.bandRect(response_)};
  Q_EMIT previewChanged(result);
}

void WindowEditing::place() {
  if (!drag_) return;
  const auto drag = *drag_;
  // The bands stay where they were dropped until the new result is there.
  drag_.reset();
  figure_.touch().words.reset();
  if (drag.isMoved())
    document_.placeWindow(drag.choice());
  else
    finish();
  figure_.replotTouch();
}

void WindowEditing::abort() {
  if (!drag_) return;
  drag_.reset();
  finish();
}

void WindowEditing::finish() {
  figure_.touch().words.reset();
  figure_.setBands(nullptr);
  Q_EMIT previewChanged(nullptr);
}

} // namespace chronodrome::ui::story
