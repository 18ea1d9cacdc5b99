// Chronodrome, GPL-3.0-or-later.
#include <QDialog>
#include <QFileInfo>
#include <QHeaderView>
#include <QLabel>
#include <QMenuBar>
#include <QTableWidget>
#include <QVBoxLayout>

#include "ui/window/main_window.h"
#include "ui/window/sample_sessions.h"

namespace chronodrome::ui::window {
namespace {

/// Menu titles carry a mnemonic; pane actions name their menu without.
QString plain(QString text) {
  return text.remove(QLatin1Char('&'));
}

void addKeyRows(QTableWidget& table, const QMenu& menu, const QString& path) {
  for (const QAction* action : menu.actions()) {
    if (action->menu() != nullptr) {
      addKeyRows(table, *action->menu(), path + QStringLiteral(" › ") + plain(action->text()));
      continue;
    }
    if (action->shortcut().isEmpty()) continue;
    QStringList keys;
    for (const QKeySequence& key : action->shortcuts())
      keys << key.toString(QKeySequence::NativeText);
    const int row = table.rowCount();
    table.insertRow(row);
    table.setItem(row, 0, new QTableWidgetItem(keys.join(QStringLiteral(", "))));
    table.setItem(row, 1, new QTableWidgetItem(plain(action->text())));
    table.setItem(row, 2, new QTableWidgetItem(path));
  }
}

} // namespace

QAction* MainWindow::action(const char* name, const QString& text, const QKeySequence& key,
                            void (MainWindow::*what)()) {
  auto* made = new QAction(text, this);
  made->setObjectName(QLatin1String(name));
  made->setShortcut(key);
  connect(made, &QAction::triggered, this, what);
  addAction(made);
  return made;
}

void MainWindow::makeActions() {
  take_in_action_ =
      action("actionTakeIn", QStringLiteral("&Take in a recording…"), QKeySequence::New, &MainWindow::takeIn);
  open_action_ =
      action("actionOpen", QStringLiteral("&Open a session…"), QKeySequence::Open, &MainWindow::openSession);
  save_action_ = new QAction(QStringLiteral("&Save"), this);
  save_action_->setObjectName(QStringLiteral("actionSave"));
  save_action_->setShortcut(QKeySequence::Save);
  connect(save_action_, &QAction::triggered, this, [this] { save(); });
  save_as_action_ = new QAction(QStringLiteral("Save &as…"), this);
  save_as_action_->setObjectName(QStringLiteral("actionSaveAs"));
  save_as_action_->setShortcut(QKeySequence(QStringLiteral("Ctrl+Shift+S")));
  connect(save_as_action_, &QAction::triggered, this, [this] { saveAs(); });
  close_action_ = action("actionClose", QStringLiteral("&Close session"),
                         QKeySequence(QStringLiteral("Ctrl+W")), &MainWindow::closeSession);
  results_action_ = action("actionWriteResults", QStringLiteral("Write &results and report…"),
                           QKeySequence(QStringLiteral("Ctrl+E")), &MainWindow::writeResults);
  analyse_action_ = new QAction(QStringLiteral("A&nalyse again"), this);
  analyse_action_->setObjectName(QStringLiteral("actionAnalyse"));
  analyse_action_->setShortcut(QKeySequence(QStringLiteral("F5")));
  connect(analyse_action_, &QAction::triggered, &document_, &SessionDocument::analyseAgain);
}

void MainWindow::fillMenus() {
  auto* session = menuBar()->addMenu(QStringLiteral("&Session"));
  session->addAction(take_in_action_);
  session->addAction(open_action_);
  recent_menu_ = session->addMenu(QStringLiteral("&Recent"));
  samples_menu_ = session->addMenu(QStringLiteral("Sa&mple sessions"));
  for (const auto& sample : sampleSessions()) {
    auto* one = samples_menu_->addAction(sample.name);
    one->setObjectName(QStringLiteral("actionSample_") + sample.name);
    connect(one, &QAction::triggered, this, [this, name = sample.name] { openSample(name); });
  }
  samples_menu_->setEnabled(!samples_menu_->isEmpty());
  session->addSeparator();
  session->addAction(save_action_);
  session->addAction(save_as_action_);
  session->addAction(results_action_);
  session->addSeparator();
  session->addAction(close_action_);
  auto* quit = session->addAction(QStringLiteral("&Quit"), this, &QWidget::close);
  quit->setObjectName(QStringLiteral("actionQuit"));
  quit->setShortcut(QKeySequence(QStringLiteral("Ctrl+Q")));

  auto* edit = menuBar()->addMenu(QStringLiteral("&Edit"));
  auto* undo = document_.undoStack()->createUndoAction(this, QStringLiteral("&Undo"));
  undo->setObjectName(QStringLiteral("actionUndo"));
  undo->setShortcut(QKeySequence::Undo);
  auto* redo = document_.undoStack()->createRedoAction(this, QStringLiteral("&Redo"));
  redo->setObjectName(QStringLiteral("actionRedo"));
  redo->setShortcuts({QKeySequence(QStringLiteral("Ctrl+Shift+Z")), QKeySequence(QStringLiteral("Ctrl+Y"))});
  edit->addAction(undo);
  edit->addAction(redo);
  edit->addSeparator();
  addPaneActions(*edit, "Edit");
  edit->addSeparator();
  edit->addAction(analyse_action_);

  auto* view = menuBar()->addMenu(QStringLiteral("&View"));
  auto* beside = new QActionGroup(this);
  const auto form = [&](const char* name, const QString& text, const char* key, QWidget* shown) {
    auto* made = view->addAction(text);
    made->setObjectName(QLatin1String(name));
    made->setShortcut(QKeySequence(QLatin1String(key)));
    made->setCheckable(true);
    beside->addAction(made);
    connect(made, &QAction::triggered, this, [this, shown] { showBeside(shown); });
    return made;
  };
  answer_action_ = form("actionAnswer", QStringLiteral("&Concentration-response"), "Ctrl+1", answer_);
  additions_action_ = form("actionAdditions", QStringLiteral("&Additions"), "Ctrl+2", additions_);
  channels_action_ =
      form("actionChannels", QStringLiteral("C&hannels, preparation, settings"), "Ctrl+3", session_form_);
  edits_action_ = form("actionEdits", QStringLiteral("&Edits"), "Ctrl+4", edits_);
  answer_action_->setChecked(true);
  view->addSeparator();
  addPaneActions(*view, "View");
  view->addSeparator();
  auto* appearance = view->addMenu(QStringLiteral("A&ppearance"));
  auto* modes = new QActionGroup(this);
  const std::pair<QString, Appearance> choices[] = {{QStringLiteral("As the &system"), Appearance::system},
                                                    {QStringLiteral("&Light"), Appearance::light},
                                                    {QStringLiteral("&Dark"), Appearance::dark}};
  for (const auto& [text, mode] : choices) {
    auto* made = appearance->addAction(text);
    made->setObjectName(QStringLiteral("actionAppearance%1").arg(static_cast<int>(mode)));
    made->setCheckable(true);
    made->setChecked(mode == appearance_);
    modes->addAction(made);
    connect(made, &QAction::triggered, this, [this, chosen = mode] { setAppearance(chosen); });
  }

  auto* go = menuBar()->addMenu(QStringLiteral("&Go"));
  addPaneActions(*go, "Go");
  auto* cursor = menuBar()->addMenu(QStringLiteral("&Cursors"));
  addPaneActions(*cursor, "Cursor");

  auto* help = menuBar()->addMenu(QStringLiteral("&Help"));
  auto* keys = help->addAction(QStringLiteral("&Keys"), this, &MainWindow::showKeys);
  keys->setObjectName(QStringLiteral("actionKeys"));
  keys->setShortcut(QKeySequence::HelpContents);
  auto* about = help->addAction(QStringLiteral("&About and cautions"), this, &MainWindow::showAbout);
  about->setObjectName(QStringLiteral("actionAbout"));
  fillRecentMenu();
}

/// Panes say by a property in which menu an action belongs.
void MainWindow::addPaneActions(QMenu& menu, const char* name) {
  for (const auto& actions : {story_->actions(), evidence_->actions(), answer_->actions()}) {
    bool first = true;
    for (QAction* one : actions) {
      const QString wanted = one->property("menu").toString();
      if ((wanted.isEmpty() ? QStringLiteral("View") : wanted) != QLatin1String(name)) continue;
      if (first && !menu.isEmpty()) menu.addSeparator();
      first = false;
      menu.addAction(one);
    }
  }
}

void MainWindow::updateActions() {
  const bool open = document_.isOpen();
  const bool writable = open && !document_.isReadOnly();
  save_action_->setEnabled(writable && (document_.isModified() || document_.path().isEmpty()));
  save_as_action_->setEnabled(open);
  close_action_->setEnabled(open || taking_in_);
  results_action_->setEnabled(open && document_.result() != nullptr && !writer_.isRunning());
  analyse_action_->setEnabled(open && document_.work() == SessionDocument::Work::none);
  for (QAction* form : {answer_action_, additions_action_, channels_action_, edits_action_})
    form->setEnabled(open);
}

void MainWindow::fillRecentMenu() {
  recent_menu_->clear();
  for (const QString& path : recent_.paths()) {
    auto* one = recent_menu_->addAction(QFileInfo(path).fileName() + QStringLiteral("  —  ") +
                                        QFileInfo(path).absolutePath());
    one->setEnabled(QFileInfo::exists(path));
    connect(one, &QAction::triggered, this, [this, path] { openPath(path); });
  }
  recent_menu_->setEnabled(!recent_menu_->isEmpty());
}

void MainWindow::showKeys() {
  QDialog dialog(this);
  dialog.setObjectName(QStringLiteral("keysDialog"));
  dialog.setWindowTitle(QStringLiteral("Keys"));
  dialog.resize(70 * look::kUnit, 70 * look::kUnit);
  auto* down = new QVBoxLayout(&dialog);
  auto* table = new QTableWidget(0, 3, &dialog);
  table->setObjectName(QStringLiteral("keysTableWidget"));
  table->setHorizontalHeaderLabels(
      {QStringLiteral("key"), QStringLiteral("what it does"), QStringLiteral("menu")});
  table->verticalHeader()->hide();
  table->setShowGrid(false);
  table->setEditTriggers(QAbstractItemView::NoEditTriggers);
  table->setSelectionBehavior(QAbstractItemView::SelectRows);
  for (const QAction* top : menuBar()->actions()) {
    if (top->menu() != nullptr) addKeyRows(*table, *top->menu(), plain(top->text()));
  }
  table->resizeColumnsToContents();
  table->horizontalHeader()->setStretchLastSection(true);
  down->addWidget(table);
  dialog.exec();
}

void MainWindow::showAbout() {
  QDialog dialog(this);
  dialog.setObjectName(QStringLiteral("aboutDialog"));
  dialog.setWindowTitle(QStringLiteral("About Chronodrome"));
  auto* down = new QVBoxLayout(&dialog);
  down->setContentsMargins(3 * look::kUnit, 3 * look::kUnit, 3 * look::kUnit, 3 * look::kUnit);
  auto* text = new QLabel(
      QStringLiteral(
          "<p style='font-size:17px'>Chronodrome %1</p>"
          "<p>Beats, conduction delays and concentration-response curves from isolated-heart recordings.</p>"
          "<p><b>For research only.</b> It makes no diagnosis and must not guide the treatment of people or "
          "animals.</p>"
          "<p>Work with animals and their tissue needs a local licence and ethics approval. Agonists, "
          "antagonists and "
          "solvents follow the safety data sheets and the rules of your laboratory; amplifiers, stimulators "
          "and heated baths those for mains equipment near fluids.</p>"
          "<p>Free software under the GNU General Public License, version 3 or later, without any "
          "warranty.</p>")
          .arg(QStringLiteral(CHRONODROME_VERSION)),
      &dialog);
  text->setObjectName(QStringLiteral("aboutLabel"));
  text->setWordWrap(true);
  text->setFixedWidth(60 * look::kUnit);
  down->addWidget(text);
  dialog.exec();
}

} // namespace chronodrome::ui::window
