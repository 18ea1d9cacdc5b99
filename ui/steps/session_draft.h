// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <memory>
#include <set>
#include <string>
#include <vector>

#include <QObject>
#include <QString>

#include "base/result.h"
#include "document/session_file.h"
#include "recording/recording.h"
#include "session/preview_traces.h"
#include "session/proposal.h"

namespace chronodrome::ui::steps {

/// What the tables and fields of a form edit: a session and the recording it belongs to. A form decides what
/// an edit leads to (kept until the recording is taken in, or one undoable step of the open session).
class SessionDraft : public QObject {
  Q_OBJECT
public:
  explicit SessionDraft(QObject* parent = nullptr) : QObject(parent) {}

  [[nodiscard]] const document::SessionFile& session() const { return session_; }
  [[nodiscard]] const std::shared_ptr<const recording::Recording>& recording() const { return recording_; }
  /// One a signal, or none at all where nothing was guessed.
  [[nodiscard]] const std::vector<session::ChannelProposal>& guesses() const { return guesses_; }
  [[nodiscard]] const std::vector<session::SignalPreview>& previews() const { return previews_; }
  /// True for a source whose meaning the user has set or confirmed.
  [[nodiscard]] bool isConfirmed(const std::string& source) const { return confirmed_.count(source) == 1; }
  /// True while nothing may be changed (a session of a newer program).
  [[nodiscard]] bool isReadOnly() const { return read_only_; }
  void setReadOnly(bool readOnly);

  /// Another recording, with all that was guessed of it.
  void begin(document::SessionFile session, std::shared_ptr<const recording::Recording> recording,
             std::vector<session::ChannelProposal> guesses, std::vector<session::SignalPreview> previews);
  /// The session as it is now; no edit.
  void show(const document::SessionFile& session);
  /// An edit: changed() and edited() follow.
  void change(document::SessionFile session, const QString& step);
  /// An edit that may be refused, with words for the user.
  bool change(Result<document::SessionFile> session, const QString& step);
  void refuse(const QString& message) { Q_EMIT refused(message); }
  void confirm(const std::string& source) { confirmed_.insert(source); }

Q_SIGNALS:
  void begun(); ///< another recording is there
  void changed();
  void edited(const QString& step);
  void refused(const QString& message);

private:
  document::SessionFile session_;
  std::shared_ptr<const recording::Recording> recording_;
  std::vector<session::ChannelProposal> guesses_;
  std::vector<session::SignalPreview> previews_;
  std::set<std::string> confirmed_;
  bool read_only_ = false;
};

} // namespace chronodrome::ui::steps
