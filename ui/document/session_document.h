// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <memory>
#include <optional>
#include <string>
#include <vector>

#include <QObject>
#include <QString>
#include <QUndoStack>

#include "base/result.h"
#include "document/session_file.h"
#include "protocol/protocol.h"
#include "session/analysis.h"
#include "session/session_result.h"

namespace chronodrome::ui {

/// The open session: what its file says with all edits, what the analysis made of it, and the way back.
/// One object lives as long as the window; sessions come and go in it. All public functions belong to the
/// window's thread; reading and analysing run on a worker, one run at a time. Results are immutable
/// snapshots; the last stays until the next is there and is stale meanwhile.
class SessionDocument : public QObject {
  Q_OBJECT
public:
  enum class Work { none, reading, analysing };

  explicit SessionDocument(QObject* parent = nullptr);
  ~SessionDocument() override;

  // ---- what is open
  [[nodiscard]] bool isOpen() const;     ///< a session with its recording is there
  [[nodiscard]] bool isModified() const; ///< edits that are not saved
  [[nodiscard]] bool isReadOnly() const; ///< of a newer program, or its folder cannot be written
  /// Why, and what to do, in one line; also where another program has the session open. Empty: it may be
  /// edited.
  [[nodiscard]] QString readOnlyReason() const;
  [[nodiscard]] QString path() const;  ///< of the session file; empty: never saved
  [[nodiscard]] QString title() const; ///< preparation's label, else the file's name, else "new session"
  [[nodiscard]] const document::SessionFile& session() const;                  ///< with all edits
  [[nodiscard]] const protocol::Protocol& protocol() const;                    ///< with all edits
  [[nodiscard]] std::shared_ptr<const recording::Recording> recording() const; ///< null: none
  [[nodiscard]] std::shared_ptr<const session::SessionResult> result() const;  ///< null: none yet
  [[nodiscard]] std::shared_ptr<const session::SessionInputs> inputs() const;  ///< of the edits as they are
  [[nodiscard]] bool isStale() const;                   ///< result() is older than the edits
  [[nodiscard]] std::optional<Error> lastError() const; ///< of the last reading or analysis, until the next

  // ---- work in the background
  [[nodiscard]] Work work() const;
  [[nodiscard]] double workShare() const; ///< 0 to 1
  [[nodiscard]] QString workText() const; ///< what is being done

  /// Why unsaved edits cannot be kept for the case of a crash; nothing: they are, or there are none.
  [[nodiscard]] std::optional<Error> autosaveFault() const;

  // ---- edits: each is one named step of undoStack(). What cannot be done makes no step: refused() says why.
  [[nodiscard]] QUndoStack* undoStack();
  void addMark(const std::string& channel, Seconds time, const QString& why = {});
  /// `time` is that of the mark, as the result gives it.
  void deleteMark(const std::string& channel, Seconds time, const QString& why = {});
  void moveMark(const std::string& channel, Seconds from, Seconds to, const QString& why = {});
  /// Leaves a stretch out; an empty channel: of all.
  void exclude(const std::string& channel, Seconds start, Seconds end, const QString& why);
  void include(const std::string& channel, Seconds start, Seconds end, const QString& why = {});
  /// Places a plateau's window by hand; `when` and `who` are filled in.
  void placeWindow(document::WindowChoice choice);
  /// Gives the windows of a step back to the rule.
  void releaseWindow(int curve, Molar concentration, const std::string& measure);
  /// The drug log as a whole (form of additions).
  void setProtocol(const protocol::Protocol& protocol, const QString& stepName);
  /// Channels, pathways, measures, preparation, settings: everything else that a session says. Its path, the
  /// files of the recording with the choices for reading them, and the name of the drug log stay as they are.
  void setSession(const document::SessionFile& session, const QString& stepName);

  /// For dragging: responses and fits with this window, without an edit; quick. Null: no result yet.
  [[nodiscard]] std::shared_ptr<const session::SessionResult>
  preview(const document::WindowChoice& choice) const;

  /// Name written into corrections (`who`): the preparation's operator, else the login name.
  [[nodiscard]] QString author() const;

public Q_SLOTS:
  /// Reads a session file and analyses it, in the background. opened() or failed() follows.
  void open(const QString& path);
  /// Takes over a session made from a recording (form of taking in): unsaved, analysed at once.
  void adopt(const chronodrome::document::SessionFile& session,
             const chronodrome::protocol::Protocol& protocol,
             std::shared_ptr<const chronodrome::recording::Recording> recording);
  /// Takes up a journal of unsaved edits (see Recovery): as open(), with one more step, `recover unsaved
  /// edits`.
  void recover(const QString& journal);
  void close();
  /// Writes the session (and the drug log, if it was edited). Errors are shown by the caller. save() refuses
  /// where the file is not as it was read any more; saveAs() under the same name replaces it.
  chronodrome::Done save();
  chronodrome::Done saveAs(const QString& path);
  /// Stops what runs in the background; the last result stays.
  void cancelWork();
  void analyseAgain();

Q_SIGNALS:
  void opened(); ///< another session (or none) is in place; its result may follow later
  void closed();
  void failed(const QString& message, const QString& file); ///< reading or analysis ended with an error
  void edited(); ///< session or drug log changed; the result is stale until resultChanged()
  void resultChanged();
  void staleChanged();
  void workChanged(); ///< kind, share or text of the work
  void modifiedChanged(bool modified);
  void pathChanged();
  void refused(const QString& message);        ///< why an edit was not made
  void autosaveFailed(const QString& message); ///< once, when unsaved edits can no longer be kept

private:
  class Private;
  std::unique_ptr<Private> d_;
};

} // namespace chronodrome::ui
