// Chronodrome, GPL-3.0-or-later.
#include "ui/evidence/inline_bar.h"

#include <utility>

#include <QComboBox>
#include <QHBoxLayout>
#include <QKeyEvent>
#include <QLabel>
#include <QLineEdit>

#include "ui/look/theme.h"

namespace chronodrome::ui::evidence {

InlineBar::InlineBar(QWidget* parent) : QWidget(parent) {
  setObjectName(QStringLiteral("inlineBar"));
  question_ = new QLabel(this);
  choices_ = new QComboBox(this);
  choices_->setObjectName(QStringLiteral("channelComboBox"));
  choices_->setAccessibleName(QStringLiteral("channel"));
  field_ = new QLineEdit(this);
  field_->setMaximumWidth(44 * look::kUnit);
  question_->setBuddy(field_);
  message_ = new QLabel(this);
  message_->setObjectName(QStringLiteral("inlineMessageLabel"));
  auto* line = new QHBoxLayout(this);
  line->setContentsMargins(look::kUnit, look::kUnit / 2, look::kUnit, look::kUnit / 2);
  line->setSpacing(look::kUnit);
  line->addWidget(question_);
  line->addWidget(choices_);
  line->addWidget(field_, 1);
  line->addWidget(message_, 1);
  connect(field_, &QLineEdit::returnPressed, this, &InlineBar::accept);
  connect(field_, &QLineEdit::textEdited, message_, &QLabel::clear);
  hide();
}

void InlineBar::ask(const QString& name, const QString& question, const QString& hint,
                    const QStringList& choices, const QString& chosen, Answer answer) {
  answer_ = std::move(answer);
  question_->setText(question);
  choices_->clear();
  choices_->addItems(choices);
  choices_->setCurrentText(chosen);
  choices_->setVisible(!choices.isEmpty());
  field_->setObjectName(name);
  field_->setAccessibleName(question);
  field_->setPlaceholderText(hint);
  field_->clear();
  field_->show();
  message_->clear();
  show();
  field_->setFocus(Qt::ShortcutFocusReason);
}

void InlineBar::tell(const QString& message) {
  answer_ = {};
  question_->setText(message);
  choices_->hide();
  field_->hide();
  message_->clear();
  show();
}

void InlineBar::dismiss() {
  if (isHidden()) return;
  hide();
  Q_EMIT dismissed();
}

void InlineBar::accept() {
  if (!answer_) return;
  const QString message = answer_(field_->text().trimmed(), choices_->currentText());
  if (message.isEmpty()) {
    dismiss();
    return;
  }
  message_->setText(message);
  field_->selectAll();
}

void InlineBar::keyPressEvent(QKeyEvent* event) {
  if (event->key() == Qt::Key_Escape) {
    dismiss();
    return;
  }
  QWidget::keyPressEvent(event);
}

} // namespace chronodrome::ui::evidence
