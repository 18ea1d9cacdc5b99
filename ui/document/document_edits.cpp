// Chronodrome, GPL-3.0-or-later.
// What a user changes: each edit is one step of the undo stack.
#include <algorithm>
#include <cmath>
#include <utility>

#include <QDateTime>
#include <QUndoCommand>

#include "activation/corrections.h"
#include "ui/document/session_document.h"
#include "ui/document/session_document_private.h"
#include "ui/document/step_names.h"

namespace chronodrome::ui {
namespace {

using document::Correction;
using document::CorrectionKind;
using document::WindowChoice;

/// Unsaved edits that are written without waiting for the timer.
constexpr int kEditsAtOnce = 20;

std::string now() {
  return QDateTime::currentDateTimeUtc().toString(Qt::ISODate).toStdString();
}

bool isNear(const std::optional<Seconds>& a, Seconds b) {
  return a && std::abs((*a - b).value()) <= activation::kCorrectionReach.value() + 1e-12;
}

bool isOfStep(const WindowChoice& choice, int curve, Molar concentration) {
  return choice.curve == curve && choice.concentration == concentration;
}

class Edit : public QUndoCommand {
public:
  Edit(Content& content, StateNumber& state, StateNumber after, ContentChange change, const QString& name)
      : QUndoCommand(name), content_(content), state_(state), before_(state), after_(after),
        change_(std::move(change)) {}

  void redo() override {
    applyChange(content_, change_);
    state_ = after_;
  }
  void undo() override {
    revertChange(content_, change_);
    state_ = before_;
  }

private:
  Content& content_;
  StateNumber& state_;
  StateNumber before_, after_;
  ContentChange change_;
};

} // namespace

bool SessionDocument::Private::mayEdit() {
  if (!is_open) return false;
  if (read_only_reason.isEmpty()) return true;
  Q_EMIT q->refused(QStringLiteral("the session cannot be edited: ") + read_only_reason);
  return false;
}

void SessionDocument::Private::push(ContentChange change, const QString& name) {
  if (change.isNothing()) return;
  stack.push(new Edit(content, state, ++last_state, std::move(change), name));
}

void SessionDocument::Private::noteStep() {
  ++unsaved_edits;
  ++edits_not_kept;
  if (!isModified()) {
    dropJournal();
  } else if (edits_not_kept >= kEditsAtOnce) {
    keepJournal();
  } else if (!journal_timer.isActive()) {
    journal_timer.start();
  }
  tellChanges();
  Q_EMIT q->edited();
  wantAnalysis();
}

void SessionDocument::Private::appendCorrection(CorrectionKind what, const std::string& channel, Seconds time,
                                                std::optional<Seconds> to_time, const QString& why) {
  Correction correction;
  for (const auto& earlier : content.session.review)
    correction.seq = std::max(correction.seq, earlier.seq);
  ++correction.seq;
  correction.when = now();
  correction.who = q->author().toStdString();
  correction.channel = channel;
  correction.why = why.trimmed().toStdString();
  correction.what = what;
  correction.time = time;
  correction.to_time = to_time;
  const QString name = stepNameOf(correction);
  ContentChange change;
  change.appended = std::move(correction);
  push(std::move(change), name);
}

std::optional<bool> SessionDocument::Private::standsAt(const std::string& channel, Seconds time) const {
  if (!result) return std::nullopt;
  int known = 0;
  for (const auto& correction : result->session.review)
    known = std::max(known, correction.seq);
  const auto& review = content.session.review;
  for (auto at = review.rbegin(); at != review.rend() && at->seq > known; ++at) {
    if (at->channel != channel) continue;
    const bool moves = at->what == CorrectionKind::move;
    if (isNear(moves ? at->to_time : at->time, time) && (moves || at->what == CorrectionKind::add))
      return true;
    if (isNear(at->time, time) && (moves || at->what == CorrectionKind::remove)) return false;
  }
  for (const auto& found : result->activations) {
    if (found.channel != channel) continue;
    return std::any_of(found.marks.begin(), found.marks.end(),
                       [&](const activation::Activation& mark) { return isNear(mark.time, time); });
  }
  return std::nullopt;
}

void SessionDocument::addMark(const std::string& channel, Seconds time, const QString& why) {
  if (!d_->mayEdit()) return;
  if (d_->standsAt(channel, time).value_or(false)) {
    Q_EMIT refused(
        QStringLiteral("there is an activation within 5 ms already; move that one, or delete it first"));
    return;
  }
  d_->appendCorrection(CorrectionKind::add, channel, time, std::nullopt, why);
}

void SessionDocument::deleteMark(const std::string& channel, Seconds time, const QString& why) {
  if (!d_->mayEdit()) return;
  if (!d_->standsAt(channel, time).value_or(true)) {
    Q_EMIT refused(QStringLiteral("there is no activation within 5 ms to delete"));
    return;
  }
  d_->appendCorrection(CorrectionKind::remove, channel, time, std::nullopt, why);
}

void SessionDocument::moveMark(const std::string& channel, Seconds from, Seconds to, const QString& why) {
  if (!d_->mayEdit() || from == to) return;
  if (!d_->standsAt(channel, from).value_or(true)) {
    Q_EMIT refused(QStringLiteral("there is no activation within 5 ms to move"));
    return;
  }
  if (!isNear(from, to) && d_->standsAt(channel, to).value_or(false)) {
    Q_EMIT refused(
        QStringLiteral("another activation stands within 5 ms of the new place; delete one of the two"));
    return;
  }
  d_->appendCorrection(CorrectionKind::move, channel, from, to, why);
}

void SessionDocument::exclude(const std::string& channel, Seconds start, Seconds end, const QString& why) {
  if (start == end || !d_->mayEdit()) return;
  d_->appendCorrection(CorrectionKind::exclude, channel, std::min(start, end), std::max(start, end), why);
}

void SessionDocument::include(const std::string& channel, Seconds start, Seconds end, const QString& why) {
  if (start == end || !d_->mayEdit()) return;
  d_->appendCorrection(CorrectionKind::include, channel, std::min(start, end), std::max(start, end), why);
}

void SessionDocument::placeWindow(WindowChoice choice) {
  if (!d_->mayEdit()) return;
  if (choice.end < choice.start) std::swap(choice.start, choice.end);
  // A drag may leave the recording; a window does not.
  choice.start = std::max(choice.start, Seconds(0.0));
  choice.end = std::min(choice.end, d_->recording->duration);
  if (choice.end <= choice.start) return;
  choice.when = now();
  choice.who = author().toStdString();
  auto windows = d_->content.session.windows;
  std::optional<WindowChoice> last;
  std::erase_if(windows, [&](const WindowChoice& other) {
    // A window for all measures takes the place of those for one.
    if (!isOfStep(other, choice.curve, choice.concentration)) return false;
    if (!choice.measure.empty() && other.measure != choice.measure) return false;
    if (other.measure == choice.measure) last = other;
    return true;
  });
  if (last && last->start == choice.start && last->end == choice.end && last->why == choice.why) return;
  const QString name = windowStepName(QStringLiteral("place"), choice.concentration, choice.measure);
  windows.push_back(std::move(choice));
  d_->push(windowsChange(d_->content.session, std::move(windows)), name);
}

void SessionDocument::releaseWindow(int curve, Molar concentration, const std::string& measure) {
  if (!d_->mayEdit()) return;
  const auto& session = d_->content.session;
  std::vector<WindowChoice> windows;
  for (const WindowChoice& choice : session.windows) {
    if (!isOfStep(choice, curve, concentration)) {
      windows.push_back(choice);
    } else if (!measure.empty() && choice.measure.empty()) {
      // The window stays for the other measures.
      for (const auto& other : session.measures) {
        if (other == measure) continue;
        windows.push_back(choice);
        windows.back().measure = other;
      }
    } else if (!measure.empty() && choice.measure != measure) {
      windows.push_back(choice);
    }
  }
  d_->push(windowsChange(session, std::move(windows)),
           windowStepName(QStringLiteral("release"), concentration, measure));
}

void SessionDocument::setProtocol(const protocol::Protocol& protocol, const QString& stepName) {
  if (d_->mayEdit()) d_->push(logChange(d_->content.log, protocol), stepName);
}

void SessionDocument::setSession(const document::SessionFile& session, const QString& stepName) {
  if (d_->mayEdit()) d_->push(sessionChange(d_->content.session, session), stepName);
}

} // namespace chronodrome::ui
