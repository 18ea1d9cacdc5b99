// Chronodrome, GPL-3.0-or-later.
#include "ui/window/message_bar.h"

#include <QHBoxLayout>

namespace chronodrome::ui::window {

MessageBar::MessageBar(QWidget* parent)
    : QFrame(parent), theme_(&look::Theme::of(look::Mode::light)), sign_(new QLabel(this)),
      text_(new QLabel(this)), offer_(new QToolButton(this)) {
  setObjectName(QStringLiteral("messageFrame"));
  setAccessibleName(QStringLiteral("message"));
  auto* row = new QHBoxLayout(this);
  row->setContentsMargins(2 * look::kUnit, look::kUnit / 2, look::kUnit, look::kUnit / 2);
  row->setSpacing(look::kUnit);
  text_->setObjectName(QStringLiteral("messageLabel"));
  text_->setWordWrap(true);
  text_->setTextFormat(Qt::PlainText);
  text_->setTextInteractionFlags(Qt::TextSelectableByMouse | Qt::TextSelectableByKeyboard);
  offer_->setObjectName(QStringLiteral("offerToolButton"));
  auto* close = new QToolButton(this);
  close->setObjectName(QStringLiteral("dismissToolButton"));
  close->setText(QStringLiteral("Dismiss"));
  row->addWidget(sign_);
  row->addWidget(text_, 1);
  row->addWidget(offer_);
  row->addWidget(close);
  connect(close, &QToolButton::clicked, this, &MessageBar::dismiss);
  connect(offer_, &QToolButton::clicked, this, [this] {
    const auto take = take_;
    dismiss();
    if (take) take();
  });
  hide();
}

void MessageBar::setTheme(const look::Theme& theme) {
  theme_ = &theme;
  paintTone();
}

void MessageBar::show(Tone tone, const QString& text) {
  show(tone, text, {}, {});
}

void MessageBar::show(Tone tone, const QString& text, const QString& offer, std::function<void()> take) {
  tone_ = tone;
  text_->setText(text);
  take_ = std::move(take);
  offer_->setText(offer);
  offer_->setAccessibleName(offer);
  offer_->setVisible(!offer.isEmpty());
  paintTone();
  setVisible(true);
}

void MessageBar::dismiss() {
  take_ = {};
  setVisible(false);
}

void MessageBar::paintTone() {
  const QColor color = tone_ == Tone::fault     ? theme_->fault
                       : tone_ == Tone::caution ? theme_->caution
                                                : theme_->accent;
  sign_->setText(tone_ == Tone::fault     ? QStringLiteral("Error")
                 : tone_ == Tone::caution ? QStringLiteral("Note")
                                          : QString());
  sign_->setVisible(tone_ != Tone::news);
  sign_->setFont(theme_->font(look::TextSize::normal, true));
  setStyleSheet(QStringLiteral("#messageFrame { background: %1; border: none; border-left: 4px solid %2; } "
                               "#messageFrame > QLabel { color: %3; }")
                    .arg(theme_->raised.name(), color.name(), theme_->text.name()));
  sign_->setStyleSheet(QStringLiteral("color: %1; font-weight: bold;").arg(color.name()));
}

} // namespace chronodrome::ui::window
