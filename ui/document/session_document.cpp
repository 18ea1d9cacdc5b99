// Chronodrome, GPL-3.0-or-later.
#include "ui/document/session_document.h"

#include <pwd.h>
#include <unistd.h>
#include <utility>

#include <QFileInfo>

#include "base/number_text.h"
#include "ui/document/places.h"
#include "ui/document/saving.h"
#include "ui/document/session_document_private.h"
#include "ui/look/number_text.h"

namespace chronodrome::ui {
namespace {

/// A burst of edits (pasting, a held key) is one analysis; shorter than anyone sees.
constexpr int kBurstMs = 20;
/// With the time that writing takes, at most 5 s of edits are lost.
constexpr int kJournalMs = 3000;

QString loginName() {
  const passwd* user = ::getpwuid(::getuid());
  if (user != nullptr && user->pw_name != nullptr) return QString::fromLocal8Bit(user->pw_name);
  return qEnvironmentVariable("USER", QStringLiteral("unknown"));
}

} // namespace

SessionDocument::Private::Private(SessionDocument* document)
    : q(document), lock(std::make_unique<SessionLock>()), journal(recoveryFolder(), [document] {
        QMetaObject::invokeMethod(
            document,
            [document] {
              auto& d = *document->d_;
              const auto fault = d.journal.fault();
              if (fault && !std::exchange(d.told_autosave_fault, true))
                Q_EMIT document->autosaveFailed(look::messageText(*fault));
            },
            Qt::QueuedConnection);
      }) {
  content.log = std::make_shared<const protocol::Protocol>();
  burst_timer.setSingleShot(true);
  burst_timer.setInterval(kBurstMs);
  journal_timer.setSingleShot(true);
  journal_timer.setInterval(kJournalMs);
  connect(&burst_timer, &QTimer::timeout, q, [this] { startNext(); });
  connect(&journal_timer, &QTimer::timeout, q, [this] { keepJournal(); });
  connect(&background, &Background::progressed, q, &SessionDocument::workChanged);
  connect(&background, &Background::becameIdle, q, [this] {
    running = Work::none;
    startNext();
    Q_EMIT q->workChanged();
  });
  connect(&stack, &QUndoStack::indexChanged, q, [this] {
    if (!is_placing) noteStep();
  });
}

SessionDocument::Private::~Private() = default;

bool SessionDocument::Private::isModified() const {
  return is_open && (!stack.isClean() || content.session.path.empty());
}

void SessionDocument::Private::tellChanges() {
  const bool modified = isModified();
  if (std::exchange(told_modified, modified) != modified) Q_EMIT q->modifiedChanged(modified);
  const bool stale = isStale();
  if (std::exchange(told_stale, stale) != stale) Q_EMIT q->staleChanged();
}

void SessionDocument::Private::updateReadOnly() {
  read_only_reason.clear();
  const QString path = q->path();
  if (content.session.version > document::kSessionVersion) {
    lock->release();
    read_only_reason =
        QStringLiteral("a newer program wrote this session; to edit it, open it with that program");
    return;
  }
  if (path.isEmpty()) return lock->release();
  const QFileInfo file(path), folder(file.absolutePath());
  if (!folder.isWritable() || (file.exists() && !file.isWritable())) {
    lock->release();
    read_only_reason =
        QStringLiteral("the folder or the file cannot be written; to edit the session, copy its "
                       "folder to a place of your own");
    return;
  }
  if (lock->take(path) || lock->holder().isEmpty()) return;
  read_only_reason =
      QStringLiteral("it is open elsewhere, by %1; close it there and open it again, or save a copy "
                     "under another name")
          .arg(lock->holder());
}

void SessionDocument::Private::place(Content fresh, std::shared_ptr<const recording::Recording> its_recording,
                                     bool log_is_saved) {
  dropJournal();
  {
    is_placing = true;
    stack.clear();
    is_placing = false;
  }
  const bool had_result = result != nullptr;
  content = std::move(fresh);
  recording = std::move(its_recording);
  is_open = recording != nullptr;
  saved_log = log_is_saved ? content.log : nullptr;
  state = ++last_state;
  result.reset();
  result_inputs.reset();
  preview_of.reset();
  preview_inputs = {};
  result_state = kNoState;
  inputs.reset();
  inputs_state = kNoState;
  inputs_error.reset();
  last_error.reset();
  detection = {};
  analysis_wanted = false;
  burst_timer.stop();
  updateReadOnly();
  if (!is_open) Q_EMIT q->closed();
  Q_EMIT q->opened();
  Q_EMIT q->pathChanged();
  if (had_result) Q_EMIT q->resultChanged();
  tellChanges();
}

void SessionDocument::Private::tellFailure(const Error& error) {
  if (error.code == ErrorCode::cancelled) return;
  last_error = error;
  Q_EMIT q->failed(look::messageText(error), QString::fromStdString(error.file));
}

SessionDocument::SessionDocument(QObject* parent) : QObject(parent), d_(std::make_unique<Private>(this)) {}

SessionDocument::~SessionDocument() {
  // Nobody listens any more; the stack's last signals are no edits.
  d_->is_placing = true;
  d_->background.cancel();
}

bool SessionDocument::isOpen() const {
  return d_->is_open;
}

bool SessionDocument::isModified() const {
  return d_->isModified();
}

bool SessionDocument::isReadOnly() const {
  return !d_->read_only_reason.isEmpty();
}

QString SessionDocument::readOnlyReason() const {
  return d_->read_only_reason;
}

QString SessionDocument::path() const {
  return QString::fromStdString(d_->content.session.path);
}

QString SessionDocument::title() const {
  const auto& session = d_->content.session;
  if (!session.preparation.label.empty()) return QString::fromStdString(session.preparation.label);
  return session.name.empty() ? QStringLiteral("new session") : QString::fromStdString(session.name);
}

const document::SessionFile& SessionDocument::session() const {
  return d_->content.session;
}

const protocol::Protocol& SessionDocument::protocol() const {
  return *d_->content.log;
}

std::shared_ptr<const recording::Recording> SessionDocument::recording() const {
  return d_->recording;
}

std::shared_ptr<const session::SessionResult> SessionDocument::result() const {
  return d_->result;
}

std::shared_ptr<const session::SessionInputs> SessionDocument::inputs() const {
  return d_->currentInputs();
}

bool SessionDocument::isStale() const {
  return d_->isStale();
}

std::optional<Error> SessionDocument::lastError() const {
  return d_->last_error;
}

std::optional<Error> SessionDocument::autosaveFault() const {
  return d_->journal.fault();
}

QUndoStack* SessionDocument::undoStack() {
  return &d_->stack;
}

QString SessionDocument::author() const {
  const auto& name = d_->content.session.preparation.operator_name;
  return trimmed(name).empty() ? loginName() : QString::fromStdString(name);
}

void SessionDocument::adopt(const document::SessionFile& session, const protocol::Protocol& protocol,
                            std::shared_ptr<const recording::Recording> recording) {
  if (!recording) return;
  cancelWork();
  Content fresh{session, std::make_shared<const protocol::Protocol>(protocol)};
  const bool log_is_saved = settleUnsaved(fresh, *recording);
  d_->place(std::move(fresh), std::move(recording), log_is_saved);
  d_->unsaved_edits = 1; // what the form asked for is work, too
  d_->keepJournal();
  d_->wantAnalysis();
}

void SessionDocument::close() {
  cancelWork();
  if (!d_->is_open) return;
  Content nothing;
  nothing.log = std::make_shared<const protocol::Protocol>();
  d_->place(std::move(nothing), nullptr, true);
}

void SessionDocument::open(const QString& path) {
  d_->want({absolutePath(path), {}});
}

void SessionDocument::recover(const QString& journal) {
  d_->want({{}, journal});
}

} // namespace chronodrome::ui
