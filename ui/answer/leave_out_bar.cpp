// Chronodrome, GPL-3.0-or-later.
#include "ui/answer/leave_out_bar.h"

#include <QComboBox>
#include <QGridLayout>
#include <QKeyEvent>
#include <QLabel>
#include <QLineEdit>
#include <QPushButton>

namespace chronodrome::ui::answer {

LeaveOutBar::LeaveOutBar(QWidget* parent)
    : QFrame(parent), question_(new QLabel(this)), channel_(new QComboBox(this)), why_(new QLineEdit(this)),
      button_(new QPushButton(tr("Leave out"), this)) {
  setObjectName(QStringLiteral("leaveOutBarFrame"));
  question_->setObjectName(QStringLiteral("leaveOutQuestionLabel"));
  question_->setWordWrap(true);
  channel_->setObjectName(QStringLiteral("leaveOutChannelComboBox"));
  channel_->setAccessibleName(tr("Channels that the step is left out of"));
  why_->setObjectName(QStringLiteral("leaveOutReasonLineEdit"));
  why_->setAccessibleName(tr("Reason for leaving the step out"));
  why_->setPlaceholderText(tr("why, for the history"));
  button_->setObjectName(QStringLiteral("leaveOutPushButton"));
  button_->setAccessibleName(tr("Leave the step out"));
  auto* grid = new QGridLayout(this);
  grid->setContentsMargins(0, 0, 0, 0);
  grid->setSpacing(look::kUnit / 2);
  grid->addWidget(question_, 0, 0);
  grid->addWidget(channel_, 0, 1);
  grid->addWidget(why_, 1, 0);
  grid->addWidget(button_, 1, 1);
  grid->setColumnStretch(0, 1);
  connect(why_, &QLineEdit::returnPressed, this, &LeaveOutBar::accept);
  connect(button_, &QPushButton::clicked, this, &LeaveOutBar::accept);
  hide();
}

void LeaveOutBar::setTheme(const look::Theme& theme) {
  question_->setFont(theme.font(look::TextSize::normal, true));
}

void LeaveOutBar::ask(const QString& step, const QStringList& channels) {
  question_->setText(tr("Leave %1 out").arg(step));
  channel_->clear();
  channel_->addItem(tr("of all channels"), QString());
  for (const QString& channel : channels)
    channel_->addItem(tr("of %1 only").arg(channel), channel);
  why_->clear();
  show();
  why_->setFocus(Qt::OtherFocusReason);
}

void LeaveOutBar::accept() {
  const QString why = why_->text().trimmed();
  if (why.isEmpty()) {
    question_->setText(tr("A reason is needed: it stands in the history and in the report"));
    why_->setFocus(Qt::OtherFocusReason);
    return;
  }
  hide();
  Q_EMIT leftOut(channel_->currentData().toString(), why);
}

void LeaveOutBar::keyPressEvent(QKeyEvent* event) {
  if (event->key() != Qt::Key_Escape) return QFrame::keyPressEvent(event);
  hide();
  Q_EMIT closed();
}

} // namespace chronodrome::ui::answer
