// Chronodrome, GPL-3.0-or-later.
#include "ui/window/status_line.h"

#include <algorithm>

#include "ui/look/number_text.h"

namespace chronodrome::ui::window {
namespace {

/// What the worst channel is like, in words; empty before any result.
QString qualityText(const session::SessionResult& result) {
  QString worst;
  int lowest = 101;
  double unreadable = 0.0;
  for (const auto& channel : result.activations) {
    for (const auto& window : channel.quality) {
      if (window.index >= lowest) continue;
      lowest = window.index;
      worst = QString::fromStdString(channel.channel);
    }
    for (const auto& stretch : channel.unreadable)
      unreadable += (stretch.span.end - stretch.span.start).value();
  }
  if (lowest > 100) return {};
  QString text = QStringLiteral("lowest signal quality %1 of 100, on %2").arg(lowest).arg(worst);
  if (unreadable > 0.0) text += QStringLiteral(", unreadable ") + look::durationText(Seconds(unreadable));
  return text;
}

QString preparationText(const document::SessionFile& session) {
  const auto& preparation = session.preparation;
  QStringList parts;
  for (const auto& part : {preparation.label, preparation.species, preparation.tissue}) {
    if (!part.empty()) parts << QString::fromStdString(part);
  }
  if (preparation.temperature_c)
    parts << look::plainText(*preparation.temperature_c, 1.0) + QStringLiteral(" °C");
  return parts.join(QStringLiteral(" · "));
}

} // namespace

StatusLine::StatusLine(SessionDocument& document, QWidget* parent)
    : QStatusBar(parent), document_(document), theme_(&look::Theme::of(look::Mode::light)),
      preparation_(new QLabel(this)), quality_(new QLabel(this)), work_(new QLabel(this)),
      bar_(new QProgressBar(this)), cancel_(new QToolButton(this)), saved_(new QLabel(this)) {
  setObjectName(QStringLiteral("statusLine"));
  setSizeGripEnabled(false);
  preparation_->setObjectName(QStringLiteral("preparationLabel"));
  quality_->setObjectName(QStringLiteral("qualityLabel"));
  work_->setObjectName(QStringLiteral("workLabel"));
  bar_->setObjectName(QStringLiteral("workProgressBar"));
  bar_->setAccessibleName(QStringLiteral("progress of the work in the background"));
  bar_->setRange(0, 1000);
  bar_->setFixedSize(15 * look::kUnit, look::kUnit);
  bar_->setTextVisible(false);
  cancel_->setObjectName(QStringLiteral("cancelWorkToolButton"));
  cancel_->setText(QStringLiteral("Cancel"));
  saved_->setObjectName(QStringLiteral("savedLabel"));
  addWidget(preparation_);
  addWidget(quality_, 1);
  addPermanentWidget(work_);
  addPermanentWidget(bar_);
  addPermanentWidget(cancel_);
  addPermanentWidget(saved_);
  connect(cancel_, &QToolButton::clicked, this, [this] {
    if (other_.isEmpty())
      document_.cancelWork();
    else
      Q_EMIT cancelOtherWork();
  });
  connect(&document_, &SessionDocument::workChanged, this, &StatusLine::showWork);
  connect(&document_, &SessionDocument::resultChanged, this, &StatusLine::showSession);
  connect(&document_, &SessionDocument::opened, this, &StatusLine::showSession);
  connect(&document_, &SessionDocument::closed, this, &StatusLine::showSession);
  connect(&document_, &SessionDocument::edited, this, &StatusLine::showSession);
  connect(&document_, &SessionDocument::modifiedChanged, this, &StatusLine::showSession);
  showSession();
  showWork();
}

void StatusLine::setTheme(const look::Theme& theme) {
  theme_ = &theme;
  for (auto* label : {preparation_, quality_, work_, saved_})
    label->setStyleSheet(QStringLiteral("color: %1; padding: 0 8px;")
                             .arg(label == preparation_ ? theme.text.name() : theme.text_quiet.name()));
}

void StatusLine::setOtherWork(const QString& text) {
  other_ = text;
  showWork();
}

void StatusLine::showSession() {
  const bool open = document_.isOpen();
  preparation_->setText(open ? preparationText(document_.session()) : QString());
  const auto result = document_.result();
  quality_->setText(open && result ? qualityText(*result) : QString());
  QString saved;
  if (open) {
    saved = document_.isReadOnly()       ? QStringLiteral("read only")
            : document_.isModified()     ? QStringLiteral("unsaved edits")
            : document_.path().isEmpty() ? QStringLiteral("not saved yet")
                                         : QStringLiteral("saved");
  }
  saved_->setText(saved);
}

void StatusLine::showWork() {
  const bool own = document_.work() != SessionDocument::Work::none;
  const bool other = !other_.isEmpty();
  work_->setText(own ? document_.workText() : other_);
  // Writing results does not say how far it is: the bar runs to and fro.
  bar_->setRange(0, own || !other ? 1000 : 0);
  if (own) bar_->setValue(static_cast<int>(1000.0 * std::clamp(document_.workShare(), 0.0, 1.0)));
  for (QWidget* part : {static_cast<QWidget*>(bar_), static_cast<QWidget*>(cancel_)})
    part->setVisible(own || other);
}

} // namespace chronodrome::ui::window
