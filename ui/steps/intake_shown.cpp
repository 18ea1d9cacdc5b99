// Chronodrome, GPL-3.0-or-later.
// What the form of taking in says of a file that was read, or could not be.
#include <algorithm>

#include <QComboBox>
#include <QLabel>
#include <QPlainTextEdit>
#include <QPushButton>
#include <QStackedWidget>
#include <QTableWidget>
#include <QVBoxLayout>

#include "ui/look/number_text.h"
#include "ui/steps/intake_form.h"
#include "ui/steps/intake_pages.h"
#include "ui/steps/session_draft.h"
#include "ui/steps/table_choices.h"

namespace chronodrome::ui::steps {

/// A question where a choice would help, else an error; both in words, in the place of the tables.
void IntakeForm::showError(const Error& error) {
  const auto asked =
      table_part_->isVisibleTo(this) ? intake::choices_asked(error) : std::vector<std::string>();
  const QString where = error.place.line ? QStringLiteral("Line %1: ").arg(*error.place.line) : QString();
  question_->setText(where + QString::fromStdString(error.what));
  setTone(*question_, asked.empty() ? QStringLiteral("fault") : QStringLiteral("caution"));
  question_hint_->setText(asked.empty() ? QString::fromStdString(error.remedy) : questionInWords(asked));
  middle_->setCurrentIndex(kQuestionPage);
  choices_->ask(asked);
}

void IntakeForm::showFacts() {
  const auto& recording = *draft_->recording();
  facts_->setText(factsText(recording));
  file_facts_->setText(fileFactsText(recording));
}

void IntakeForm::showWarnings() {
  const auto& recording = *draft_->recording();
  QStringList lines;
  if (!recording.convention.empty()) lines << QString::fromStdString(recording.convention);
  for (const auto& warning : recording.warnings) {
    const QString where =
        warning.place.line ? QStringLiteral("line %1: ").arg(*warning.place.line) : QString();
    lines << where + remedyInWords(look::messageText(warning).toStdString());
  }
  for (const auto& note : recording.file_notes) {
    const QString text = QString::fromStdString(note).trimmed();
    if (text != QStringLiteral("X")) lines << text; // how EDF says that nothing is stated
  }
  warnings_->setPlainText(lines.join(QLatin1Char('\n')));
  const auto count = recording.warnings.size();
  warnings_title_->setText(count == 0   ? QStringLiteral("From the file: no warnings")
                           : count == 1 ? QStringLiteral("From the file: 1 warning")
                                        : QStringLiteral("From the file: %1 warnings").arg(count));
  setTone(*warnings_title_, count == 0 ? QString() : QStringLiteral("caution"));
}

void IntakeForm::showProtocols() {
  log_->clear();
  for (const auto& source : protocols_) {
    const QString name = source.file.empty()
                             ? QStringLiteral("annotations of the file")
                             : QString::fromStdString(source.file) + QStringLiteral(" beside it");
    const auto count = source.protocol.events.size();
    log_->addItem(source.error ? name + QStringLiteral(" (cannot be read)")
                               : QStringLiteral("%1 (%2 %3)")
                                     .arg(name)
                                     .arg(count)
                                     .arg(count == 1 ? QStringLiteral("event") : QStringLiteral("events")));
  }
  const bool annotated = !protocols_.empty() && protocols_.back().file.empty();
  // A session without a log of its own takes the annotations: "none" would not stay.
  if (!annotated) log_->addItem(QStringLiteral("none yet: additions are typed later"));
  log_->setEnabled(log_->count() > 1);
  const bool first_fails = !protocols_.empty() && protocols_.front().error;
  log_->setCurrentIndex(first_fails && log_->count() > 1 ? 1 : 0);
  showLog();
}

void IntakeForm::showLog() {
  const auto chosen = static_cast<std::size_t>(std::max(0, log_->currentIndex()));
  const auto* source = chosen < protocols_.size() ? &protocols_[chosen] : nullptr;
  const auto* failed = !protocols_.empty() && protocols_.front().error ? &*protocols_.front().error : nullptr;
  const QString doubt = failed != nullptr ? look::messageText(*failed)
                        : source != nullptr && !source->protocol.warnings.empty()
                            ? look::messageText(source->protocol.warnings.front())
                            : QString();
  log_hint_->setText(doubt);
  log_hint_->setVisible(!doubt.isEmpty());
  fillEvents(*log_events_, source == nullptr ? protocol::Protocol{} : source->protocol);
  log_events_->setVisible(source != nullptr && !source->protocol.events.empty());
}

void IntakeForm::showDoubts(const std::vector<session::RoleDoubt>& doubts) {
  while (auto* item = doubts_layout_->takeAt(0)) {
    delete item->widget();
    delete item;
  }
  for (const auto& doubt : doubts) {
    auto* line = doubtLine(QString::fromStdString(doubt.text), doubts_);
    auto* button = line->findChild<QPushButton*>(QStringLiteral("useRolesPushButton"));
    connect(button, &QPushButton::clicked, this, [this, doubt] { applyDoubt(doubt); });
    doubts_layout_->addWidget(line);
  }
  doubts_->setVisible(!doubts.empty());
}

} // namespace chronodrome::ui::steps
