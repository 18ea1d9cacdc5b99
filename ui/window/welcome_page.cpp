// Chronodrome, GPL-3.0-or-later.
#include "ui/window/welcome_page.h"

#include <QDir>
#include <QFileInfo>
#include <QHBoxLayout>
#include <QLabel>
#include <QPushButton>

#include "ui/window/sample_sessions.h"

namespace chronodrome::ui::window {
namespace {

constexpr int kColumn = 72 * look::kUnit;
constexpr int kEntryHeight = 7 * look::kUnit;

QLabel* heading(const QString& text, QWidget* parent) {
  auto* label = new QLabel(text, parent);
  label->setProperty("quiet", true);
  label->setProperty("textSize", QStringLiteral("small"));
  return label;
}

/// The folder as people say it: with ~ for the home folder.
QString shortFolder(const QString& path) {
  QString folder = QDir::toNativeSeparators(QFileInfo(path).absolutePath());
  const QString home = QDir::homePath();
  if (folder.startsWith(home + QLatin1Char('/'))) folder.replace(0, home.size(), QStringLiteral("~"));
  return folder;
}

void clear(QVBoxLayout& layout) {
  while (auto* item = layout.takeAt(0)) {
    if (auto* widget = item->widget()) widget->deleteLater();
    delete item;
  }
}

} // namespace

WelcomePage::WelcomePage(QAction* takeIn, QAction* open, QWidget* parent) : QWidget(parent) {
  setObjectName(QStringLiteral("welcomeWidget"));
  auto* column = new QWidget(this);
  column->setFixedWidth(kColumn);
  auto* down = new QVBoxLayout(column);
  down->setContentsMargins(0, 0, 0, 0);
  down->setSpacing(look::kUnit);

  auto* title = new QLabel(QStringLiteral("No session is open"), column);
  title->setProperty("textSize", QStringLiteral("large"));
  auto* what =
      new QLabel(QStringLiteral("Take in a recording (CSV, EDF or EDF+), or open a session that was saved. "
                                "Files can also be dropped here."),
                 column);
  what->setWordWrap(true);
  what->setProperty("quiet", true);
  down->addWidget(title);
  down->addWidget(what);
  down->addSpacing(look::kUnit);

  auto* buttons = new QHBoxLayout;
  buttons->setSpacing(look::kUnit);
  auto* take = new QPushButton(QStringLiteral("Take in a recording…"), column);
  take->setObjectName(QStringLiteral("takeInPushButton"));
  take->setDefault(true);
  auto* openButton = new QPushButton(QStringLiteral("Open a session…"), column);
  openButton->setObjectName(QStringLiteral("openSessionPushButton"));
  connect(take, &QPushButton::clicked, takeIn, &QAction::trigger);
  connect(openButton, &QPushButton::clicked, open, &QAction::trigger);
  buttons->addWidget(take);
  buttons->addWidget(openButton);
  buttons->addStretch(1);
  down->addLayout(buttons);
  down->addSpacing(2 * look::kUnit);

  const auto samples = sampleSessions();
  if (!samples.empty()) {
    down->addWidget(heading(QStringLiteral("Sample sessions, with invented data"), column));
    for (const auto& sample : samples) {
      auto* button = entry(sample.name, sample.about, sample.name + QStringLiteral("PushButton"));
      connect(button, &QPushButton::clicked, this, [this, name = sample.name] { Q_EMIT sampleChosen(name); });
      down->addWidget(button);
    }
    down->addSpacing(2 * look::kUnit);
  }

  recent_box_ = new QWidget(column);
  auto* box = new QVBoxLayout(recent_box_);
  box->setContentsMargins(0, 0, 0, 0);
  box->setSpacing(look::kUnit);
  box->addWidget(heading(QStringLiteral("Recent sessions"), recent_box_));
  recent_ = new QVBoxLayout;
  recent_->setSpacing(look::kUnit);
  box->addLayout(recent_);
  recent_box_->hide();
  down->addWidget(recent_box_);

  auto* caution =
      heading(QStringLiteral("For research only, not for diagnosis. Work with animals, chemicals and mains "
                             "equipment under your local licence and rules."),
              column);
  caution->setWordWrap(true);
  down->addSpacing(2 * look::kUnit);
  down->addWidget(caution);

  auto* page = new QVBoxLayout(this);
  page->addStretch(2);
  page->addWidget(column, 0, Qt::AlignHCenter);
  page->addStretch(3);
}

QPushButton* WelcomePage::entry(const QString& head, const QString& about, const QString& objectName) {
  auto* button = new QPushButton(this);
  button->setObjectName(objectName);
  button->setAccessibleName(head + QStringLiteral(": ") + about);
  button->setCursor(Qt::PointingHandCursor);
  auto* lines = new QVBoxLayout(button);
  lines->setContentsMargins(2 * look::kUnit, look::kUnit, 2 * look::kUnit, look::kUnit);
  lines->setSpacing(2);
  auto* name = new QLabel(head, button);
  auto* more = new QLabel(about, button);
  more->setProperty("quiet", true);
  more->setProperty("textSize", QStringLiteral("small"));
  for (auto* label : {name, more}) {
    label->setAttribute(Qt::WA_TransparentForMouseEvents);
    lines->addWidget(label);
  }
  button->setFixedHeight(kEntryHeight);
  return button;
}

void WelcomePage::setTheme(const look::Theme& theme) {
  setFont(theme.font(look::TextSize::normal));
}

void WelcomePage::setRecent(const QStringList& paths) {
  clear(*recent_);
  int shown = 0;
  for (const QString& path : paths) {
    if (shown == 4) break;
    const bool there = QFileInfo::exists(path);
    auto* button = entry(QFileInfo(path).fileName(),
                         there ? shortFolder(path) : shortFolder(path) + QStringLiteral(" (not there now)"),
                         QStringLiteral("recent%1PushButton").arg(shown));
    button->setEnabled(there);
    connect(button, &QPushButton::clicked, this, [this, path] { Q_EMIT recentChosen(path); });
    recent_->addWidget(button);
    ++shown;
  }
  recent_box_->setVisible(shown > 0);
}

} // namespace chronodrome::ui::window
