// Chronodrome, GPL-3.0-or-later.
// Corrections by the hand of the user: each becomes an edit of the document.
#include <algorithm>

#include <QAction>

#include "session/cursor.h"
#include "session/exclusions.h"
#include "ui/evidence/evidence_pane.h"
#include "ui/look/number_text.h"

namespace chronodrome::ui::evidence {
namespace {

const QString kAllChannels = QStringLiteral("all channels");

} // namespace

void EvidencePane::addMark(int row, Seconds time) {
  if (!document_.result()) return;
  document_.addMark(figure_->scene().channel(row).label, time);
  active_row_ = row;
  chosen_ = {row, time};
  place_ = time;
  showOverlay();
  updateActions();
}

void EvidencePane::addMarkHere() {
  if (!cursors_.second) placeSecond();
  if (cursors_.second) addMark(active_row_, *cursors_.second);
}

void EvidencePane::deleteChosen() {
  if (!chosen_) return;
  const Overlay::Mark mark = *chosen_;
  chosen_.reset();
  place_ = mark.time;
  document_.deleteMark(figure_->scene().channel(mark.row).label, mark.time);
  showOverlay();
  updateActions();
}

void EvidencePane::choose(int row, std::size_t index) {
  const Seconds time = figure_->scene().marks(row)[index].time;
  active_row_ = row;
  chosen_ = {row, time};
  place_ = time;
  pinSecond(time);
  updateActions();
}

void EvidencePane::chooseNeighbour(int direction) {
  active_row_ = chosen_ ? chosen_->row : active_row_;
  go(session::LandmarkKind::beat, direction);
}

void EvidencePane::dragMark(int row, std::size_t index, double x) {
  const auto& marks = figure_->scene().marks(row);
  if (index >= marks.size()) return;
  const Snap snap = cursors_.snap == Snap::off ? Snap::off : Snap::samples;
  move_ = {row, marks[index].time, snappedAt(row, x, snap)};
  cursors_.second = move_->to;
  showOverlay();
}

void EvidencePane::dropMark(int row, std::size_t index, double x) {
  dragMark(row, index, x);
  if (!move_) return;
  const Overlay::Move move = *move_;
  move_.reset();
  chosen_ = {row, move.to};
  place_ = move.to;
  document_.moveMark(figure_->scene().channel(row).label, move.from, move.to);
  pinSecond(move.to);
  updateActions();
}

void EvidencePane::selectStretch(int row, double x1, double x2) {
  const TimeFrame time = figure_->timeFrame();
  selection_ = {row, std::clamp(time.timeOf(x1), Seconds(0.0), focus_.recordingEnd()),
                std::clamp(time.timeOf(x2), Seconds(0.0), focus_.recordingEnd())};
  if (row >= 0) active_row_ = row;
  showOverlay();
}

std::optional<Overlay::Selection> EvidencePane::stretch() const {
  if (selection_ && selection_->end > selection_->start) return selection_;
  if (!cursors_.reference || !cursors_.second || !cursors_.is_pinned) return std::nullopt;
  const auto [start, end] = std::minmax(*cursors_.reference, *cursors_.second);
  if (!(end > start)) return std::nullopt;
  return Overlay::Selection{active_row_, start, end};
}

void EvidencePane::askReason() {
  const auto chosen = stretch();
  if (!chosen) {
    bar_->tell(QStringLiteral(
        "Select a stretch first: drag with Alt or the right button held, or place both cursors."));
    return;
  }
  selection_ = chosen;
  showOverlay();
  QStringList channels{kAllChannels};
  for (const auto& channel : figure_->scene().result->channels)
    channels << QString::fromStdString(channel.label);
  const QString question = QStringLiteral("Leave out %1 to %2 of")
                               .arg(look::timeText(chosen->start, 2), look::timeText(chosen->end, 2));
  const auto answer = [this, span = *chosen](const QString& why, const QString& channel) {
    if (why.isEmpty()) return QStringLiteral("say why: the report will show it");
    document_.exclude(channel == kAllChannels ? std::string() : channel.toStdString(), span.start, span.end,
                      why);
    selection_.reset();
    showOverlay();
    return QString();
  };
  bar_->ask(QStringLiteral("reasonLineEdit"), question,
            QStringLiteral("because … (Return leaves it out, Escape does not)"), channels,
            channels.at(chosen->row < 0 ? 0 : chosen->row + 1), answer);
}

void EvidencePane::takeBack() {
  const std::string label = figure_->scene().channel(active_row_).label;
  if (const auto chosen = stretch()) {
    const bool all = chosen->row < 0;
    document_.include(all ? std::string() : figure_->scene().channel(chosen->row).label, chosen->start,
                      chosen->end);
    selection_.reset();
    showOverlay();
    return;
  }
  const Seconds at = cursors_.second.value_or(here());
  for (const auto& exclusion : session::exclusions_of(document_.session().review)) {
    const bool is_meant = exclusion.channel.empty() || exclusion.channel == label;
    if (!is_meant || at < exclusion.span.start || at > exclusion.span.end) continue;
    document_.include(exclusion.channel, exclusion.span.start, exclusion.span.end);
    return;
  }
  bar_->tell(QStringLiteral("Nothing is left out by hand here."));
}

} // namespace chronodrome::ui::evidence
