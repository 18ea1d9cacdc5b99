// Chronodrome, GPL-3.0-or-later.
#include "ui/window/main_window.h"

#include <QApplication>
#include <QCloseEvent>
#include <QLabel>
#include <QScopedValueRollback>
#include <QSettings>
#include <QUndoView>
#include <QVBoxLayout>

namespace chronodrome::ui::window {
namespace {

constexpr int kAnswerWidth = 52 * look::kUnit;

/// The list of edits, each of which can be gone back to by a click.
QWidget* editsPage(QUndoStack* stack, QWidget* parent) {
  auto* page = new QWidget(parent);
  page->setObjectName(QStringLiteral("editsWidget"));
  auto* down = new QVBoxLayout(page);
  down->setContentsMargins(2 * look::kUnit, look::kUnit, 2 * look::kUnit, look::kUnit);
  auto* title = new QLabel(QStringLiteral("Edits of this session"), page);
  title->setProperty("textSize", QStringLiteral("large"));
  auto* hint = new QLabel(QStringLiteral("Choose a line to go back to it, or forward again."), page);
  hint->setProperty("quiet", true);
  hint->setWordWrap(true);
  auto* view = new QUndoView(stack, page);
  view->setObjectName(QStringLiteral("editsUndoView"));
  view->setAccessibleName(QStringLiteral("edits of this session, in order"));
  view->setEmptyLabel(QStringLiteral("as opened"));
  down->addWidget(title);
  down->addWidget(hint);
  down->addWidget(view, 1);
  return page;
}

} // namespace

MainWindow::MainWindow(Prompts& prompts, QWidget* parent) : QMainWindow(parent), prompts_(prompts) {
  setObjectName(QStringLiteral("mainWindow"));
  setAcceptDrops(true);
  setMinimumSize(120 * look::kUnit, 75 * look::kUnit);
  makeActions();
  layOut();
  fillMenus();
  connectParts();
  applyTheme();
  restoreShape();
  welcome_->setRecent(recent_.paths());
  showPage();
  updateActions();
}

MainWindow::~MainWindow() = default;

void MainWindow::layOut() {
  auto* middle = new QWidget(this);
  auto* lines = new QVBoxLayout(middle);
  lines->setContentsMargins(0, 0, 0, 0);
  lines->setSpacing(0);
  message_ = new MessageBar(middle);
  pages_ = new QStackedWidget(middle);
  lines->addWidget(message_);
  lines->addWidget(pages_, 1);

  welcome_ = new WelcomePage(take_in_action_, open_action_, pages_);
  intake_ = new steps::IntakeForm(pages_);
  across_ = new QSplitter(Qt::Horizontal, pages_);
  across_->setObjectName(QStringLiteral("acrossSplitter"));
  down_ = new QSplitter(Qt::Vertical, across_);
  down_->setObjectName(QStringLiteral("downSplitter"));
  story_ = new story::StoryPane(document_, focus_, down_);
  evidence_ = new evidence::EvidencePane(document_, focus_, down_);
  down_->addWidget(story_);
  down_->addWidget(evidence_);
  down_->setStretchFactor(0, 1);
  down_->setStretchFactor(1, 1);

  beside_ = new QStackedWidget(across_);
  answer_ = new answer::AnswerPane(document_, focus_, beside_);
  additions_ = new steps::AdditionsForm(document_, focus_, beside_);
  session_form_ = new steps::SessionForm(document_, beside_);
  edits_ = editsPage(document_.undoStack(), beside_);
  for (QWidget* form : {static_cast<QWidget*>(answer_), static_cast<QWidget*>(additions_),
                        static_cast<QWidget*>(session_form_), edits_})
    beside_->addWidget(form);
  across_->addWidget(down_);
  across_->addWidget(beside_);
  across_->setStretchFactor(0, 1);
  across_->setStretchFactor(1, 0);
  for (auto* splitter : {across_, down_}) {
    splitter->setHandleWidth(look::kUnit / 2);
    splitter->setChildrenCollapsible(false);
  }
  across_->setSizes({width() - kAnswerWidth, kAnswerWidth});

  pages_->addWidget(welcome_);
  pages_->addWidget(intake_);
  pages_->addWidget(across_);
  setCentralWidget(middle);
  status_ = new StatusLine(document_, this);
  setStatusBar(status_);
}

void MainWindow::connectParts() {
  connect(story_, &story::StoryPane::previewChanged, answer_, &answer::AnswerPane::showPreview);
  connect(welcome_, &WelcomePage::sampleChosen, this, &MainWindow::openSample);
  connect(welcome_, &WelcomePage::recentChosen, this, [this](const QString& path) { openPath(path); });
  connect(intake_, &steps::IntakeForm::accepted, this,
          [this](const document::SessionFile& session, const protocol::Protocol& protocol,
                 const std::shared_ptr<const recording::Recording>& recording) {
            taking_in_ = false;
            document_.adopt(session, protocol, recording);
          });
  connect(intake_, &steps::IntakeForm::cancelled, this, [this] {
    taking_in_ = false;
    showPage();
  });
  connect(additions_, &steps::AdditionsForm::finished, this, [this] { showBeside(answer_); });
  connect(session_form_, &steps::SessionForm::finished, this, [this] { showBeside(answer_); });

  connect(&document_, &SessionDocument::opened, this, [this] {
    taking_in_ = false;
    message_->dismiss();
    if (const auto recording = document_.recording()) focus_.reset(recording->duration);
    if (!document_.path().isEmpty()) recent_.add(document_.path());
    if (document_.isReadOnly()) message_->show(MessageBar::Tone::caution, document_.readOnlyReason());
    fillRecentMenu();
    showPage();
    updateActions();
  });
  connect(&document_, &SessionDocument::closed, this, [this] {
    focus_.reset(Seconds(0.0));
    welcome_->setRecent(recent_.paths());
    showPage();
    updateActions();
  });
  connect(&document_, &SessionDocument::failed, this, [this](const QString& message, const QString& file) {
    message_->show(MessageBar::Tone::fault, file.isEmpty() ? message : file + QStringLiteral(": ") + message);
    showPage();
    updateActions();
  });
  for (const auto signal : {&SessionDocument::refused, &SessionDocument::autosaveFailed})
    connect(&document_, signal, this,
            [this](const QString& why) { message_->show(MessageBar::Tone::caution, why); });
  connect(&document_, &SessionDocument::resultChanged, this, &MainWindow::chooseFirstCurve);
  for (const auto signal :
       {&SessionDocument::edited, &SessionDocument::workChanged, &SessionDocument::pathChanged})
    connect(&document_, signal, this, &MainWindow::updateActions);
  connect(&document_, &SessionDocument::modifiedChanged, this, [this](bool modified) {
    setWindowModified(modified);
    updateActions();
  });

  connect(&writer_, &ResultsWriter::runningChanged, this, [this](bool running) {
    status_->setOtherWork(running ? QStringLiteral("writing results") : QString());
    updateActions();
  });
  connect(&writer_, &ResultsWriter::failed, this,
          [this](const QString& why) { message_->show(MessageBar::Tone::fault, why); });
  connect(status_, &StatusLine::cancelOtherWork, &writer_, &ResultsWriter::cancel);
}

void MainWindow::setAppearance(Appearance appearance) {
  appearance_ = appearance;
  applyTheme();
}

void MainWindow::applyTheme() {
  // Setting palette and style sheet sends the very events that call this.
  if (applying_theme_) return;
  const QScopedValueRollback<bool> applying(applying_theme_, true);
  static const look::Mode asked = look::systemMode();
  const look::Mode mode = appearance_ == Appearance::light  ? look::Mode::light
                          : appearance_ == Appearance::dark ? look::Mode::dark
                                                            : asked;
  const look::Theme& theme = look::Theme::of(mode);
  QApplication::setPalette(theme.palette());
  QApplication::setFont(theme.font(look::TextSize::normal));
  qApp->setStyleSheet(look::styleSheet(theme));
  message_->setTheme(theme);
  welcome_->setTheme(theme);
  intake_->setTheme(theme);
  story_->setTheme(theme);
  evidence_->setTheme(theme);
  answer_->setTheme(theme);
  additions_->setTheme(theme);
  session_form_->setTheme(theme);
  status_->setTheme(theme);
}

void MainWindow::changeEvent(QEvent* event) {
  QMainWindow::changeEvent(event);
}

void MainWindow::showPage() {
  QWidget* page = taking_in_           ? static_cast<QWidget*>(intake_)
                  : document_.isOpen() ? static_cast<QWidget*>(across_)
                                       : static_cast<QWidget*>(welcome_);
  pages_->setCurrentWidget(page);
  setWindowTitle(document_.isOpen() ? document_.title() + QStringLiteral("[*] – Chronodrome")
                                    : QStringLiteral("Chronodrome"));
  setWindowModified(document_.isModified());
}

void MainWindow::showBeside(QWidget* form) {
  beside_->setCurrentWidget(form);
  answer_action_->setChecked(form == answer_);
  additions_action_->setChecked(form == additions_);
  channels_action_->setChecked(form == session_form_);
  edits_action_->setChecked(form == edits_);
  form->setFocus();
}

/// A new result that has not the curve the answer shows: its first one.
void MainWindow::chooseFirstCurve() {
  updateActions();
  const auto result = document_.result();
  if (!result || result->curves.empty()) return;
  for (const auto& curve : result->curves) {
    if (curve.curve == focus_.curve() && curve.measure == focus_.measure()) return;
  }
  focus_.chooseCurve(result->curves.front().curve, result->curves.front().measure);
}

void MainWindow::restoreShape() {
  const QSettings settings(QSettings::IniFormat, QSettings::UserScope, QStringLiteral("chronodrome"),
                           QStringLiteral("window"));
  resize(160 * look::kUnit, 100 * look::kUnit);
  restoreGeometry(settings.value(QStringLiteral("geometry")).toByteArray());
  across_->restoreState(settings.value(QStringLiteral("across")).toByteArray());
  down_->restoreState(settings.value(QStringLiteral("down")).toByteArray());
}

void MainWindow::keepShape() {
  QSettings settings(QSettings::IniFormat, QSettings::UserScope, QStringLiteral("chronodrome"),
                     QStringLiteral("window"));
  settings.setValue(QStringLiteral("geometry"), saveGeometry());
  settings.setValue(QStringLiteral("across"), across_->saveState());
  settings.setValue(QStringLiteral("down"), down_->saveState());
}

void MainWindow::closeEvent(QCloseEvent* event) {
  if (!mayLeave()) {
    event->ignore();
    return;
  }
  keepShape();
  document_.close();
  event->accept();
}

} // namespace chronodrome::ui::window
