// Chronodrome, GPL-3.0-or-later.
#include "ui/story/exclude_bar.h"

#include <QComboBox>
#include <QHBoxLayout>
#include <QKeyEvent>
#include <QLabel>
#include <QLineEdit>
#include <QPushButton>

#include "ui/look/number_text.h"
#include "ui/look/theme.h"

namespace chronodrome::ui::story {
namespace {

QLineEdit* timeEdit(const QString& name, const QString& spoken) {
  auto* edit = new QLineEdit;
  edit->setObjectName(name);
  edit->setAccessibleName(spoken);
  edit->setFixedWidth(edit->fontMetrics().horizontalAdvance(QStringLiteral("0:00:00.0")) + 3 * look::kUnit);
  edit->setToolTip(QStringLiteral("a time of the recording: 12:30.5, 1:12:30, 4350 s"));
  return edit;
}

QPushButton* button(const QString& name, const QString& text) {
  auto* made = new QPushButton(text);
  made->setObjectName(name);
  made->setAccessibleName(text);
  made->setAutoDefault(false);
  return made;
}

} // namespace

ExcludeBar::ExcludeBar(QWidget* parent)
    : QFrame(parent),
      from_(timeEdit(QStringLiteral("excludeFromLineEdit"), QStringLiteral("leave out from"))),
      to_(timeEdit(QStringLiteral("excludeToLineEdit"), QStringLiteral("leave out until"))),
      channel_(new QComboBox), reason_(new QLineEdit),
      leave_out_(button(QStringLiteral("excludePushButton"), QStringLiteral("leave out"))) {
  setObjectName(QStringLiteral("excludeFrame"));
  channel_->setObjectName(QStringLiteral("excludeChannelComboBox"));
  channel_->setAccessibleName(QStringLiteral("channel to leave out"));
  reason_->setObjectName(QStringLiteral("excludeReasonLineEdit"));
  reason_->setAccessibleName(QStringLiteral("reason for leaving it out"));
  reason_->setPlaceholderText(QStringLiteral("why (kept with the session)"));
  auto* cancel = button(QStringLiteral("cancelExcludePushButton"), QStringLiteral("cancel"));

  auto* row = new QHBoxLayout(this);
  row->setContentsMargins(look::kUnit, look::kUnit / 2, look::kUnit, look::kUnit / 2);
  row->setSpacing(look::kUnit);
  row->addWidget(new QLabel(QStringLiteral("leave out")));
  row->addWidget(from_);
  row->addWidget(new QLabel(QStringLiteral("to")));
  row->addWidget(to_);
  row->addWidget(new QLabel(QStringLiteral("of")));
  row->addWidget(channel_);
  row->addWidget(reason_, 1);
  row->addWidget(leave_out_);
  row->addWidget(cancel);

  for (auto* edit : {from_, to_, reason_}) {
    connect(edit, &QLineEdit::textChanged, this, &ExcludeBar::check);
    connect(edit, &QLineEdit::returnPressed, this, &ExcludeBar::accept);
  }
  connect(leave_out_, &QPushButton::clicked, this, &ExcludeBar::accept);
  connect(cancel, &QPushButton::clicked, this, &ExcludeBar::cancelled);
  setChannels({});
  check();
}

void ExcludeBar::setChannels(const QStringList& labels) {
  const QString before = channel_->currentData().toString();
  channel_->clear();
  channel_->addItem(QStringLiteral("all channels"), QString());
  for (const QString& label : labels)
    channel_->addItem(label, label);
  channel_->setCurrentIndex(std::max(0, channel_->findData(before)));
}

void ExcludeBar::ask(Seconds start, Seconds end) {
  from_->setText(look::timeText(start));
  to_->setText(look::timeText(end));
  show();
  reason_->setFocus(Qt::OtherFocusReason);
  check();
}

std::optional<Seconds> ExcludeBar::time(const QLineEdit* edit) const {
  return look::typedTime(edit->text());
}

void ExcludeBar::check() {
  const auto from = time(from_);
  const auto to = time(to_);
  const bool isStretch = from && to && *from < *to;
  leave_out_->setEnabled(isStretch && !reason_->text().trimmed().isEmpty());
  leave_out_->setToolTip(!isStretch ? QStringLiteral("the second time must be later than the first")
                         : leave_out_->isEnabled()
                             ? QStringLiteral("an edit like any other: it can be undone")
                             : QStringLiteral("say why first"));
}

void ExcludeBar::accept() {
  if (!leave_out_->isEnabled()) return;
  const QString reason = reason_->text().trimmed();
  reason_->clear();
  Q_EMIT accepted(channel_->currentData().toString(), *time(from_), *time(to_), reason);
}

void ExcludeBar::keyPressEvent(QKeyEvent* event) {
  if (event->key() != Qt::Key_Escape) {
    QFrame::keyPressEvent(event);
    return;
  }
  Q_EMIT cancelled();
}

} // namespace chronodrome::ui::story
