// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <memory>
#include <optional>
#include <vector>

#include <QTimer>
#include <QUndoStack>

#include "ui/document/background.h"
#include "ui/document/content.h"
#include "ui/document/journal.h"
#include "ui/document/loading.h"
#include "ui/document/session_document.h"
#include "ui/document/session_lock.h"

namespace chronodrome::ui {

/// Every state of the content that an edit made has a number of its own; going back by undo comes to the same
/// number. A result is stale where its number is not the content's.
using StateNumber = int;
inline constexpr StateNumber kNoState = -1;

class SessionDocument::Private {
public:
  explicit Private(SessionDocument* document);
  ~Private();

  // ---- session_document.cpp: what is open
  /// Puts another session, or none (no recording), in place and says so.
  void place(Content fresh, std::shared_ptr<const recording::Recording> its_recording, bool log_is_saved);
  void updateReadOnly();
  void tellFailure(const Error& error);
  /// Emits modifiedChanged and staleChanged where these changed.
  void tellChanges();
  [[nodiscard]] bool isModified() const;
  [[nodiscard]] bool isStale() const { return result && result_state != state; }

  // ---- document_edits.cpp
  [[nodiscard]] bool mayEdit();
  void push(ContentChange change, const QString& name);
  void appendCorrection(document::CorrectionKind what, const std::string& channel, Seconds time,
                        std::optional<Seconds> to_time, const QString& why);
  /// Whether a mark stands within the reach of a correction, as the result says and the corrections that it
  /// does not know yet; nothing: it cannot be known.
  [[nodiscard]] std::optional<bool> standsAt(const std::string& channel, Seconds time) const;
  void noteStep(); ///< after every edit, undo and redo

  // ---- document_work.cpp
  void want(ReadRequest request);
  void wantAnalysis(bool also_if_current = false);
  void startNext();
  void startReading(const ReadRequest& request);
  void startAnalysis();
  void takeRead(const ReadRequest& request, ReadSession& read);
  [[nodiscard]] std::shared_ptr<const session::SessionInputs> currentInputs();

  // ---- document_saving.cpp
  Done saveTo(const QString& path);
  /// Writes the drug log where it is edited or new, and says in `planned` where it lies. Returns it.
  Result<std::shared_ptr<const protocol::Protocol>> saveLog(document::SessionFile& planned,
                                                            bool at_home) const;
  void takeSaved(const document::SessionFile& saved, const std::shared_ptr<const protocol::Protocol>& log);
  [[nodiscard]] bool isLogEdited() const;
  void keepJournal();
  void dropJournal();

  SessionDocument* q;

  bool is_open = false;
  Content content;
  std::shared_ptr<const recording::Recording> recording;
  std::shared_ptr<const protocol::Protocol> saved_log; ///< as on the disk; null: on none
  QString read_only_reason;
  std::unique_ptr<SessionLock> lock;

  QUndoStack stack;
  StateNumber state = kNoState, last_state = kNoState;
  bool is_placing = false; ///< the stack is being cleared: that is no edit
  bool told_modified = false, told_stale = false;

  std::shared_ptr<const session::SessionResult> result;
  std::shared_ptr<const session::SessionInputs> result_inputs; ///< that it was made from
  StateNumber result_state = kNoState;
  std::shared_ptr<const session::SessionInputs> preview_of; ///< that the next one was copied from
  session::SessionInputs preview_inputs;
  std::shared_ptr<const session::SessionInputs> inputs;
  StateNumber inputs_state = kNoState;
  std::optional<Error> inputs_error; ///< why there are none of this state
  std::optional<Error> last_error;

  Work running = Work::none;
  std::optional<ReadRequest> wanted_reading;
  bool analysis_wanted = false;
  QTimer burst_timer; ///< edits of one burst are analysed together
  session::Detection detection;

  QTimer journal_timer;
  int unsaved_edits = 0, edits_not_kept = 0;
  QString recovered_journal; ///< of a program that ended; removed when this one keeps the edits
  bool told_autosave_fault = false;

  Journal journal;
  Background background; ///< last: what runs ends before the rest goes
};

} // namespace chronodrome::ui
