// Chronodrome, GPL-3.0-or-later.
// How the pane moves through the recording.
#include <algorithm>

#include <QAction>

#include "session/cursor.h"
#include "ui/evidence/evidence_pane.h"
#include "ui/look/number_text.h"

namespace chronodrome::ui::evidence {
namespace {

using session::LandmarkKind;

constexpr double kPan = 0.1;
constexpr double kPage = 0.9;
constexpr double kKeyZoom = 1.5;

/// How wide the view may be at a place of this kind; a jump from farther out comes closer.
struct Width {
  Seconds widest, closer;
};
Width widthFor(LandmarkKind kind) {
  switch (kind) {
  case LandmarkKind::beat:
  case LandmarkKind::flagged_beat:
  case LandmarkKind::edited_mark:
    return {Seconds(30.0), Seconds(5.0)};
  case LandmarkKind::rhythm:
    return {Seconds(60.0), Seconds(10.0)};
  case LandmarkKind::addition:
  case LandmarkKind::gap:
    break;
  }
  return {Seconds(900.0), Seconds(300.0)};
}

} // namespace

Seconds EvidencePane::middle() const {
  return 0.5 * (focus_.start() + focus_.end());
}

Seconds EvidencePane::here() const {
  const auto shows = [&](const std::optional<Seconds>& time) {
    return time && *time >= focus_.start() && *time <= focus_.end();
  };
  if (chosen_ && shows(chosen_->time)) return chosen_->time;
  if (shows(place_)) return *place_;
  if (cursors_.is_pinned && shows(cursors_.second)) return *cursors_.second;
  return middle();
}

void EvidencePane::zoom(double factor, std::optional<double> x) {
  if (figure_->scene().rows() == 0) return;
  const Seconds width = focus_.end() - focus_.start();
  // Nothing is narrower than 1 ms or wider than the recording: beyond, the place under the pointer must not
  // move.
  const Seconds wanted =
      std::clamp(width * factor, Seconds(1e-3), std::max(focus_.recordingEnd(), Seconds(1e-3)));
  const Seconds fixed = x ? figure_->timeFrame().timeOf(*x) : here();
  const double share = std::clamp((fixed - focus_.start()) / width, 0.0, 1.0);
  focus_.show(fixed - wanted * share, fixed + wanted * (1.0 - share));
}

void EvidencePane::showWidth(Seconds width) {
  const auto at = pointer_->position();
  zoom(width / (focus_.end() - focus_.start()), at ? std::optional(at->x()) : std::nullopt);
}

void EvidencePane::zoomIn() {
  showWidth((focus_.end() - focus_.start()) / kKeyZoom);
}

void EvidencePane::zoomOut() {
  showWidth((focus_.end() - focus_.start()) * kKeyZoom);
}

void EvidencePane::panBy(double share) {
  const Seconds step = (focus_.end() - focus_.start()) * share;
  focus_.show(focus_.start() + step, focus_.end() + step);
}

void EvidencePane::goEarlier() {
  cursors_.isActive() ? stepCursor(-1) : panBy(-kPan);
}

void EvidencePane::goLater() {
  cursors_.isActive() ? stepCursor(1) : panBy(kPan);
}

void EvidencePane::panEarlier() {
  panBy(-kPan);
}

void EvidencePane::panLater() {
  panBy(kPan);
}

void EvidencePane::pageEarlier() {
  panBy(-kPage);
}

void EvidencePane::pageLater() {
  panBy(kPage);
}

void EvidencePane::goToStart() {
  focus_.goTo(Seconds(0.0), focus_.end() - focus_.start());
}

void EvidencePane::goToEnd() {
  const Seconds width = focus_.end() - focus_.start();
  focus_.goTo(focus_.recordingEnd() - width, focus_.recordingEnd());
}

void EvidencePane::askTime() {
  bar_->ask(QStringLiteral("goToTimeLineEdit"), QStringLiteral("Go to"), QStringLiteral("12:30.5 or 750 s"),
            {}, {}, [this](const QString& text, const QString&) { return goToTyped(text); });
}

QString EvidencePane::goToTyped(const QString& text) {
  const auto time = look::typedTime(text);
  if (!time) return QStringLiteral("this is no time; write 1:12:30, 12:30.5, 72 min or 4350 s");
  if (*time < Seconds(0.0) || *time > focus_.recordingEnd())
    return QStringLiteral("the recording runs from 0:00 to ") + look::timeText(focus_.recordingEnd());
  // From the whole recording there is nowhere to move to: come closer.
  if (focus_.end() - focus_.start() >= focus_.recordingEnd() * 0.99) {
    focus_.goTo(*time - Seconds(5.0), *time + Seconds(5.0));
  } else {
    focus_.goToTime(*time);
  }
  place_ = time;
  pinSecond(*time);
  return {};
}

void EvidencePane::go(LandmarkKind kind, int direction) {
  const Scene& scene = figure_->scene();
  if (!scene.result) return;
  // Beats are those of the row that keys work on; everything else is looked for everywhere.
  const std::string channel = kind == LandmarkKind::beat ? scene.channel(active_row_).label : std::string();
  const auto found = direction > 0 ? session::next_landmark(*scene.result, kind, here(), channel)
                                   : session::previous_landmark(*scene.result, kind, here(), channel);
  if (found) {
    arrive(kind, *found);
  } else {
    bar_->tell(direction > 0 ? QStringLiteral("there is none after this")
                             : QStringLiteral("there is none before this"));
  }
}

void EvidencePane::arrive(LandmarkKind kind, const session::Landmark& landmark) {
  bar_->dismiss();
  const Scene& scene = figure_->scene();
  for (int row = 0; row < scene.rows() && !landmark.channel.empty(); ++row) {
    if (scene.channel(row).label == landmark.channel) active_row_ = row;
  }
  const Seconds width = focus_.end() - focus_.start();
  const auto [widest, closer] = widthFor(kind);
  const Seconds edge = width * (kind == LandmarkKind::beat ? 0.0 : 0.05);
  const bool shows = landmark.time >= focus_.start() + edge && landmark.time <= focus_.end() - edge;
  if (width > widest) {
    focus_.goTo(landmark.time - closer * 0.5, landmark.time + closer * 0.5);
  } else if (!shows && kind == LandmarkKind::beat) {
    focus_.show(landmark.time - width * 0.5, landmark.time + width * 0.5);
  } else if (!shows) {
    focus_.goToTime(landmark.time);
  }
  place_ = landmark.time;
  chosen_.reset();
  const auto& marks = scene.marks(active_row_);
  const auto mark = session::nearest_mark(marks, landmark.time);
  if (mark && !landmark.channel.empty() && marks[*mark].time == landmark.time)
    chosen_ = {active_row_, landmark.time};
  pinSecond(landmark.time);
  updateActions();
}

void EvidencePane::toggleFiltered() {
  is_filtered_ = !is_filtered_;
  filtered_action_->setChecked(is_filtered_);
  showFiltered();
  showOverlay();
}

void EvidencePane::toggleLock() {
  if (figure_->scene().rows() > 0) figure_->setLocked(active_row_, !figure_->isLocked(active_row_));
}

void EvidencePane::toggleAllLocks() {
  bool all = true;
  for (int row = 0; row < figure_->scene().rows(); ++row)
    all = all && figure_->isLocked(row);
  for (int row = 0; row < figure_->scene().rows(); ++row)
    figure_->setLocked(row, !all);
}

} // namespace chronodrome::ui::evidence
