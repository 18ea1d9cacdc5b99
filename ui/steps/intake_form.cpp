// Chronodrome, GPL-3.0-or-later.
#include "ui/steps/intake_form.h"

#include <algorithm>
#include <filesystem>

#include <QComboBox>
#include <QFileDialog>
#include <QFileInfo>
#include <QKeyEvent>
#include <QLabel>
#include <QPlainTextEdit>
#include <QProgressBar>
#include <QPushButton>
#include <QStackedWidget>
#include <QTableWidget>
#include <QToolButton>
#include <QVBoxLayout>

#include "intake/session_reader.h"
#include "session/proposal.h"
#include "session/saved_layout.h"
#include "session/session_edits.h"
#include "ui/look/number_text.h"
#include "ui/steps/intake_pages.h"
#include "ui/steps/recording_loader.h"
#include "ui/steps/session_draft.h"
#include "ui/steps/session_tables.h"
#include "ui/steps/table_choices.h"

namespace fs = std::filesystem;

namespace chronodrome::ui::steps {
namespace {

intake::ReadSettings settingsOf(const document::CsvChoices& csv) {
  intake::ReadSettings settings;
  if (csv.rate_hz) settings.rate = Hertz(*csv.rate_hz);
  settings.delimiter = csv.delimiter;
  settings.decimal = csv.decimal;
  settings.time_column = csv.time_column;
  return settings;
}

/// Labels and roles: what pathways and measures are proposed from.
std::string rolesOf(const document::SessionFile& session) {
  std::string text;
  for (const auto& channel : session.channels)
    text += channel.source + '\n' + channel.role + '\n';
  return text;
}

bool sameCsv(const document::CsvChoices& a, const document::CsvChoices& b) {
  return a.rate_hz == b.rate_hz && a.delimiter == b.delimiter && a.decimal == b.decimal &&
         a.time_column == b.time_column;
}

} // namespace

IntakeForm::IntakeForm(QWidget* parent)
    : QWidget(parent), loader_(new RecordingLoader(this)), draft_(new SessionDraft(this)) {
  setObjectName(QStringLiteral("intakeForm"));
  setAccessibleName(QStringLiteral("Take a recording in"));
  build();
  connect(loader_, &RecordingLoader::headRead, this, [this](const auto& head) { showHead(*head); });
  connect(loader_, &RecordingLoader::progressed, this, [this](double share) {
    progress_->setRange(0, 100);
    progress_->setValue(static_cast<int>(100.0 * share));
  });
  connect(loader_, &RecordingLoader::finished, this, [this](const auto& loaded) { showLoaded(*loaded); });
  connect(loader_, &RecordingLoader::ordersChecked, this, &IntakeForm::showDoubts);
  connect(choices_, &TableChoices::changed, this, &IntakeForm::readAgain);
  connect(draft_, &SessionDraft::edited, this, &IntakeForm::followEdit);
  connect(draft_, &SessionDraft::refused, this,
          [this](const QString& text) { say(text, QStringLiteral("fault")); });
}

IntakeForm::~IntakeForm() = default;

bool IntakeForm::isReading() const {
  return loader_->isReading();
}

bool IntakeForm::isComplete() const {
  return !isReading() && draft_->recording() != nullptr && !draft_->session().channels.empty() &&
         middle_->currentIndex() == kTablesPage;
}

void IntakeForm::start(const QString& recordingPath) {
  path_ = recordingPath;
  layout_.reset();
  pathways_touched_ = measures_touched_ = false;
  protocols_.clear();
  choices_->clear();
  table_part_->hide();
  file_part_->hide();
  draft_->begin({}, nullptr, {}, {});
  title_->setText(QStringLiteral("Take in %1").arg(QFileInfo(path_).fileName()));
  facts_->setText(QFileInfo(path_).absolutePath());
  say({});
  showDoubts({});
  showProtocols();
  readAgain();
}

void IntakeForm::readAgain() {
  say({});
  choices_->ask({});
  choices_->showRate(std::nullopt);
  progress_->setRange(0, 0);
  const double megabytes = static_cast<double>(QFileInfo(path_).size()) / 1e6;
  progress_text_->setText(
      QStringLiteral("Reading %1 (%2 MB)").arg(QFileInfo(path_).fileName(), look::plainText(megabytes)));
  middle_->setCurrentIndex(kProgressPage);
  loader_->read(path_, settingsOf(choices_->choices()));
  followState();
}

void IntakeForm::showHead(const intake::TableHead& head) {
  table_part_->setVisible(head.is_table);
  file_part_->setVisible(!head.is_table);
  if (head.is_table) choices_->showHead(head);
}

void IntakeForm::showLoaded(const LoadedRecording& loaded) {
  if (loaded.error) {
    draft_->begin({}, nullptr, {}, {});
    showError(*loaded.error);
  } else {
    // What was typed about the preparation outlives another reading of the file.
    auto session = loaded.proposal.session;
    const std::string date = session.preparation.date;
    session.preparation = draft_->session().preparation;
    if (session.preparation.date.empty()) session.preparation.date = date;
    roles_before_ = rolesOf(session);
    protocols_ = loaded.protocols;
    draft_->begin(std::move(session), loaded.recording, loaded.proposal.channels, loaded.previews);
    if (table_part_->isVisibleTo(this) && !loaded.recording->signals.empty())
      choices_->showRate(loaded.recording->signals.front().time_base.rate().value());
    middle_->setCurrentIndex(kTablesPage);
    showFacts();
    showWarnings();
    showProtocols();
    if (layout_) applyLayout();
    loader_->checkOrders(draft_->session(), draft_->recording());
  }
  followState();
  Q_EMIT shown();
}

/// Roles change place and nothing else; leads follow the labels of the file.
void IntakeForm::applyDoubt(const session::RoleDoubt& doubt) {
  auto session = draft_->session();
  for (const auto& [label, role] : doubt.roles) {
    for (const auto& channel : draft_->session().channels) {
      if (channel.label != label) continue;
      auto entry = channel;
      entry.role = role;
      const auto read = session::read_lead(entry.source);
      if (entry.lead.empty())
        entry.lead = recording::name_of(read.word.empty() ? recording::Lead::unipolar : read.lead);
      if (auto changed = session::with_channel_changed(session, label, entry)) {
        session = std::move(changed).value();
        draft_->confirm(entry.source);
      }
    }
  }
  draft_->change(std::move(session), QStringLiteral("roles"));
}

/// Pathways and measures follow the roles until the user has set them by hand.
void IntakeForm::followEdit(const QString& step) {
  say({});
  if (step.contains(QStringLiteral("pathway"))) pathways_touched_ = true;
  if (step.startsWith(QStringLiteral("measure ")) || step.startsWith(QStringLiteral("leave out ")))
    measures_touched_ = true;
  const std::string roles = rolesOf(draft_->session());
  if (roles == roles_before_) {
    if (step.contains(QStringLiteral("pathway")) && !measures_touched_) {
      auto session = draft_->session();
      session.measures = session::propose_measures(session);
      draft_->show(session);
    }
    return followState();
  }
  roles_before_ = roles;
  auto session = draft_->session();
  if (!pathways_touched_) session.pathways = session::propose_pathways(session.channels);
  if (!measures_touched_) session.measures = session::propose_measures(session);
  draft_->show(session);
  showDoubts({});
  loader_->checkOrders(draft_->session(), draft_->recording());
  followState();
}

void IntakeForm::askForLayout() {
  const QString file = QFileDialog::getOpenFileName(
      this, QStringLiteral("Take channels and settings from a session"), QFileInfo(path_).absolutePath(),
      QStringLiteral("Sessions (*.session.json *.json)"));
  if (!file.isEmpty()) useLayout(file);
}

void IntakeForm::useLayout(const QString& sessionPath) {
  auto layout = intake::read_session(sessionPath.toStdString());
  if (!layout) return say(look::messageText(layout.error()), QStringLiteral("fault"));
  layout_ = std::move(layout).value();
  pathways_touched_ = measures_touched_ = true;
  if (!sameCsv(layout_->csv, choices_->choices()) && table_part_->isVisibleTo(this)) {
    choices_->choose(layout_->csv);
    return readAgain();
  }
  if (draft_->recording()) applyLayout();
}

void IntakeForm::applyLayout() {
  auto match = session::apply_layout(*layout_, *draft_->recording());
  const QString name = QString::fromStdString(layout_->name);
  layout_.reset();
  if (match.matched == 0)
    return say(
        QStringLiteral("None of the channels of %1 is in this recording; choose another session").arg(name),
        QStringLiteral("fault"));
  match.session.preparation.label = draft_->session().preparation.label;
  match.session.preparation.operator_name = draft_->session().preparation.operator_name;
  for (const auto& channel : match.session.channels)
    draft_->confirm(channel.source);
  roles_before_ = rolesOf(match.session);
  draft_->show(match.session);
  QStringList unmatched;
  for (const auto& text : match.unmatched)
    unmatched << QString::fromStdString(text);
  if (unmatched.isEmpty())
    say(QStringLiteral("Channels, pathways, measures and settings are those of %1.").arg(name));
  else
    say(QStringLiteral("Taken from %1, but %2").arg(name, unmatched.join(QStringLiteral("; "))),
        QStringLiteral("caution"));
  loader_->checkOrders(draft_->session(), draft_->recording());
  followState();
}

void IntakeForm::cancel() {
  loader_->cancel();
  draft_->begin({}, nullptr, {}, {});
  followState();
  Q_EMIT cancelled();
}

void IntakeForm::takeIn() {
  if (QWidget* focus = focusWidget(); focus != nullptr && isAncestorOf(focus))
    focus->clearFocus(); // ends typing
  if (!isComplete()) return;
  auto session = draft_->session();
  const fs::path path(path_.toStdString());
  session.folder = path.parent_path().string();
  session.name = path.stem().string();
  session.files = {{path.filename().string(), draft_->recording()->files.front().sha256}};
  session.csv = choices_->choices();
  const auto chosen = static_cast<std::size_t>(std::max(0, log_->currentIndex()));
  protocol::Protocol protocol;
  if (chosen < protocols_.size() && !protocols_[chosen].error) {
    protocol = protocols_[chosen].protocol;
    if (!protocols_[chosen].file.empty()) session.protocol_file = protocols_[chosen].file;
  }
  Q_EMIT accepted(session, protocol, draft_->recording());
}

void IntakeForm::followState() {
  take_in_->setEnabled(isComplete());
  layout_button_->setEnabled(!isReading());
}

void IntakeForm::say(const QString& text, const QString& tone) {
  message_->setText(text);
  message_->setToolTip(text);
  setTone(*message_, tone);
}

void IntakeForm::keyPressEvent(QKeyEvent* event) {
  if (event->key() == Qt::Key_Escape) return cancel();
  QWidget::keyPressEvent(event);
}

} // namespace chronodrome::ui::steps
