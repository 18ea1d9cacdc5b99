// Chronodrome, GPL-3.0-or-later.
#include "ui/steps/session_draft.h"

#include "ui/look/number_text.h"

namespace chronodrome::ui::steps {

void SessionDraft::setReadOnly(bool readOnly) {
  read_only_ = readOnly;
  Q_EMIT changed();
}

void SessionDraft::begin(document::SessionFile session, std::shared_ptr<const recording::Recording> recording,
                         std::vector<session::ChannelProposal> guesses,
                         std::vector<session::SignalPreview> previews) {
  session_ = std::move(session);
  recording_ = std::move(recording);
  guesses_ = std::move(guesses);
  previews_ = std::move(previews);
  confirmed_.clear();
  Q_EMIT begun();
  Q_EMIT changed();
}

void SessionDraft::show(const document::SessionFile& session) {
  session_ = session;
  Q_EMIT changed();
}

void SessionDraft::change(document::SessionFile session, const QString& step) {
  session_ = std::move(session);
  Q_EMIT changed();
  Q_EMIT edited(step);
}

bool SessionDraft::change(Result<document::SessionFile> session, const QString& step) {
  if (!session) {
    refuse(look::messageText(session.error()));
    return false;
  }
  change(std::move(session).value(), step);
  return true;
}

} // namespace chronodrome::ui::steps
