// Chronodrome, GPL-3.0-or-later.
// Reading and analysing in the background.
#include <exception>
#include <new>
#include <utility>

#include <QFile>
#include <QFileInfo>

#include "ui/document/saving.h"
#include "ui/document/session_document.h"
#include "ui/document/session_document_private.h"

namespace chronodrome::ui {
namespace {

using session::SessionInputs;
using session::SessionResult;

/// An exception that leaves a thread would end the program, with the user's edits.
template <class Value, class Work>
Result<Value> guarded(const std::string& file, Work work) {
  try {
    return work();
  } catch (const std::bad_alloc&) {
    return Error{ErrorCode::over_limit,
                 file,
                 {},
                 "there is not enough memory for this recording",
                 "close other programs, or take fewer channels"};
  } catch (const std::exception& fault) {
    return Error{ErrorCode::internal_fault,
                 file,
                 {},
                 std::string("the work ended with a fault: ") + fault.what(),
                 "report it with the session"};
  }
}

/// What one analysis works on and gives back; the other thread's alone while it runs.
struct AnalysisRun {
  std::shared_ptr<const SessionInputs> inputs;
  session::Detection detection;
  StateNumber state = kNoState;
  std::optional<Result<SessionResult>> outcome;
};

struct ReadRun {
  ReadRequest request;
  std::optional<Result<ReadSession>> outcome;
};

} // namespace

SessionDocument::Work SessionDocument::work() const {
  const bool runs = d_->background.isWanted();
  if (d_->wanted_reading || (runs && d_->running == Work::reading)) return Work::reading;
  if (d_->analysis_wanted || (runs && d_->running == Work::analysing)) return Work::analysing;
  return Work::none;
}

double SessionDocument::workShare() const {
  return d_->background.isWanted() ? d_->background.share() : 0.0;
}

QString SessionDocument::workText() const {
  switch (work()) {
  case Work::none:
    return {};
  case Work::reading:
    if (!d_->wanted_reading && d_->background.isWanted()) return d_->background.text();
    return QStringLiteral("reading");
  case Work::analysing:
    if (!d_->analysis_wanted && d_->background.isWanted()) return d_->background.text();
    return QStringLiteral("analysing");
  }
  return {};
}

void SessionDocument::cancelWork() {
  d_->wanted_reading.reset();
  d_->analysis_wanted = false;
  d_->burst_timer.stop();
  d_->background.cancel();
  Q_EMIT workChanged();
}

void SessionDocument::analyseAgain() {
  d_->wantAnalysis(true);
}

std::shared_ptr<const SessionResult> SessionDocument::preview(const document::WindowChoice& choice) const {
  if (!d_->result || !d_->result_inputs) return nullptr;
  // Asked for at every step of a drag: the inputs are copied once for a result, only their windows change.
  if (d_->preview_of != d_->result_inputs) {
    d_->preview_of = d_->result_inputs;
    d_->preview_inputs = *d_->result_inputs;
  }
  SessionInputs& inputs = d_->preview_inputs;
  inputs.session.windows = d_->content.session.windows;
  inputs.session.windows.push_back(choice);
  auto shown = d_->result;
  for (const auto& measure : inputs.session.measures) {
    if (!choice.measure.empty() && choice.measure != measure) continue;
    auto next = session::with_windows_of(inputs, *shown, measure);
    if (!next) return nullptr;
    shown = std::make_shared<const SessionResult>(std::move(next).value());
  }
  return shown;
}

void SessionDocument::Private::want(ReadRequest request) {
  wanted_reading = std::move(request);
  // An analysis that is stopped for this comes back if the reading fails.
  if (running == Work::analysing && background.isWanted()) analysis_wanted = true;
  background.cancel();
  startNext();
  Q_EMIT q->workChanged();
}

void SessionDocument::Private::wantAnalysis(bool also_if_current) {
  if (!is_open) return;
  if (running == Work::analysing) background.cancel();
  // Undo has come back to what the result was made from.
  analysis_wanted = also_if_current || !result || result_state != state;
  if (!analysis_wanted) {
    last_error.reset();
    burst_timer.stop();
  } else if (!burst_timer.isActive()) {
    burst_timer.start();
  }
  Q_EMIT q->workChanged();
}

void SessionDocument::Private::startNext() {
  if (!background.isIdle()) return;
  if (wanted_reading) {
    startReading(*std::exchange(wanted_reading, std::nullopt));
  } else if (analysis_wanted && !burst_timer.isActive()) {
    startAnalysis();
  }
}

void SessionDocument::Private::startReading(const ReadRequest& request) {
  running = Work::reading;
  last_error.reset();
  auto run = std::make_shared<ReadRun>();
  run->request = request;
  const QString path = request.session.isEmpty() ? request.journal : request.session;
  background.start(
      [this, run, path](const session::Watch& watch) -> Background::Delivery {
        run->outcome =
            guarded<ReadSession>(path.toStdString(), [&] { return readSession(run->request, watch); });
        return [this, run](bool wanted) {
          if (!wanted) return;
          if (run->outcome->ok())
            takeRead(run->request, run->outcome->value());
          else
            tellFailure(run->outcome->error());
        };
      },
      QStringLiteral("reading %1").arg(QFileInfo(path).fileName()));
}

void SessionDocument::Private::takeRead(const ReadRequest& request, ReadSession& read) {
  auto recovered = std::move(read.recovered);
  const Content& before = read.content;
  ContentChange change;
  if (recovered) {
    change = sessionChange(before.session, recovered->session);
    ContentChange log = logChange(before.log, *recovered->log);
    change.before.log = std::move(log.before.log);
    change.after.log = std::move(log.after.log);
  }
  const bool log_is_saved = read.is_saved || settleUnsaved(read.content, *read.recording);
  place(std::move(read.content), std::move(read.recording), log_is_saved);
  if (!request.journal.isEmpty()) {
    recovered_journal = request.journal;
    push(std::move(change), QStringLiteral("recover unsaved edits"));
    keepJournal();
    // Nothing that the disk does not have.
    if (!isModified()) QFile::remove(std::exchange(recovered_journal, {}));
  }
  wantAnalysis();
}

std::shared_ptr<const SessionInputs> SessionDocument::Private::currentInputs() {
  if (!is_open) return nullptr;
  if (inputs_state == state) return inputs;
  auto made = session::inputs_of(content.session, *content.log, recording);
  inputs_state = state;
  inputs_error.reset();
  // With settings that cannot be used the last ones stay, for what shows them.
  if (made)
    inputs = std::make_shared<const SessionInputs>(std::move(made).value());
  else
    inputs_error = made.error();
  return inputs;
}

void SessionDocument::Private::startAnalysis() {
  analysis_wanted = false;
  last_error.reset();
  auto run = std::make_shared<AnalysisRun>();
  run->inputs = currentInputs();
  if (inputs_error) {
    tellFailure(*inputs_error);
    Q_EMIT q->workChanged();
    return;
  }
  running = Work::analysing;
  run->state = state;
  run->detection = std::move(detection);
  background.start(
      [this, run](const session::Watch& watch) -> Background::Delivery {
        run->outcome = guarded<SessionResult>(run->inputs->session.path, [&] {
          return session::analyse(*run->inputs, 0, run->detection, watch);
        });
        return [this, run](bool wanted) {
          detection = std::move(run->detection);
          if (!wanted) return;
          if (!run->outcome->ok()) return tellFailure(run->outcome->error());
          auto fresh = std::move(*run->outcome).value();
          result_inputs = currentInputs();
          if (result_inputs != run->inputs) {
            // It was saved meanwhile: the same session, in the file as it is now.
            keepPlace(fresh.session, content.session);
            fresh.session_sha256 = result_inputs->session_sha256;
            fresh.protocol = *content.log;
          }
          result = std::make_shared<const SessionResult>(std::move(fresh));
          result_state = run->state;
          Q_EMIT q->resultChanged();
          tellChanges();
        };
      },
      QStringLiteral("analysing"));
}

} // namespace chronodrome::ui
