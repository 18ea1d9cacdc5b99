// Chronodrome, GPL-3.0-or-later.
// The two cursors of the pane.
#include <algorithm>
#include <cmath>

#include <QAction>
#include <QClipboard>
#include <QGuiApplication>

#include "session/cursor.h"
#include "ui/evidence/evidence_pane.h"

namespace chronodrome::ui::evidence {
namespace {

constexpr double kSnapReach = 12.0; // pixels

} // namespace

Seconds EvidencePane::snappedAt(int row, double x, Snap snap) const {
  const TimeFrame time = figure_->timeFrame();
  const Seconds at = std::clamp(time.timeOf(x), Seconds(0.0), focus_.recordingEnd());
  return snapped(*figure_->scene().result, row, at, snap, time.perPixel() * kSnapReach);
}

void EvidencePane::point(int row, double x) {
  if (row >= 0) active_row_ = row;
  if (!cursors_.is_pinned) cursors_.second = snappedAt(active_row_, x, cursors_.snap);
  showOverlay();
}

void EvidencePane::leave() {
  if (!cursors_.is_pinned) cursors_.second.reset();
  showOverlay();
}

void EvidencePane::pinSecond(Seconds time) {
  cursors_.second = time;
  cursors_.is_pinned = true;
  cursors_.moved = Cursors::Which::second;
  showOverlay();
}

void EvidencePane::placeSecond() {
  if (figure_->scene().rows() == 0) return;
  const auto at = pointer_->position();
  const double x = at ? at->x() : figure_->timeFrame().xOf(middle());
  pinSecond(snappedAt(active_row_, x, cursors_.snap));
}

void EvidencePane::placeReference() {
  if (figure_->scene().rows() == 0) return;
  if (const auto at = pointer_->position()) {
    cursors_.reference = snappedAt(active_row_, at->x(), cursors_.snap);
  } else {
    cursors_.reference = cursors_.second.value_or(middle());
  }
  cursors_.moved = Cursors::Which::reference;
  // The second goes on with the pointer: the next place is what is measured to.
  cursors_.is_pinned = false;
  showOverlay();
}

void EvidencePane::removeCursors() {
  cursors_.reference.reset();
  cursors_.second.reset();
  cursors_.is_pinned = false;
  showOverlay();
}

void EvidencePane::cycleSnap() {
  cursors_.snap = cursors_.snap == Snap::marks     ? Snap::samples
                  : cursors_.snap == Snap::samples ? Snap::off
                                                   : Snap::marks;
  if (const auto at = pointer_->position(); at && !cursors_.is_pinned)
    cursors_.second = snappedAt(active_row_, at->x(), cursors_.snap);
  showOverlay();
}

void EvidencePane::stepCursor(int direction) {
  auto& cursor = cursors_.moved == Cursors::Which::reference && cursors_.reference ? cursors_.reference
                                                                                   : cursors_.second;
  if (!cursor) return;
  const recording::Channel& channel = figure_->scene().channel(active_row_);
  const Seconds period = period_of(channel.time_base().rate());
  const Seconds wanted = *cursor + period * static_cast<double>(direction);
  const Seconds at = session::nearest_sample(channel, wanted).value_or(wanted);
  // In a gap the nearest sample may lie behind: there a step leads nowhere.
  if ((at - *cursor) * static_cast<double>(direction) > Seconds(0.0)) cursor = at;
  const Seconds width = focus_.end() - focus_.start();
  if (*cursor < focus_.start()) focus_.show(*cursor, *cursor + width);
  if (*cursor > focus_.end()) focus_.show(*cursor - width, *cursor);
  showOverlay();
}

void EvidencePane::copyReadOut() {
  if (!strip_->readOut().rows.isEmpty()) QGuiApplication::clipboard()->setText(strip_->readOut().text());
}

void EvidencePane::setActiveRow(int row) {
  if (row < 0 || row >= figure_->scene().rows()) return;
  active_row_ = row;
  showOverlay();
}

void EvidencePane::rowAbove() {
  setActiveRow(active_row_ - 1);
}

void EvidencePane::rowBelow() {
  setActiveRow(active_row_ + 1);
}

/// The nearest thing goes first.
void EvidencePane::escape() {
  if (!bar_->isHidden()) {
    bar_->dismiss();
  } else if (pointer_->isDraggingMark()) {
    pointer_->abort();
  } else if (selection_) {
    selection_.reset();
  } else if (chosen_) {
    chosen_.reset();
  } else if (cursors_.is_pinned) {
    cursors_.is_pinned = false;
    if (!pointer_->position()) cursors_.second.reset();
  } else {
    cursors_.reference.reset();
  }
  showOverlay();
}

} // namespace chronodrome::ui::evidence
