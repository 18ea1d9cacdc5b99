// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <memory>

#include <QActionGroup>
#include <QMainWindow>
#include <QMenu>
#include <QSplitter>
#include <QStackedWidget>

#include "ui/answer/answer_pane.h"
#include "ui/document/focus.h"
#include "ui/document/recent_files.h"
#include "ui/document/recovery.h"
#include "ui/document/session_document.h"
#include "ui/evidence/evidence_pane.h"
#include "ui/look/theme.h"
#include "ui/steps/additions_form.h"
#include "ui/steps/intake_form.h"
#include "ui/steps/session_form.h"
#include "ui/story/story_pane.h"
#include "ui/window/message_bar.h"
#include "ui/window/prompts.h"
#include "ui/window/results_writer.h"
#include "ui/window/status_line.h"
#include "ui/window/welcome_page.h"

namespace chronodrome::ui::window {

/// The one window: story above, evidence below, answer beside. It lays out, wires the panes to document and
/// focus, and holds what no pane owns: files, menus, appearance.
class MainWindow : public QMainWindow {
  Q_OBJECT
public:
  enum class Appearance { system, light, dark };

  explicit MainWindow(Prompts& prompts, QWidget* parent = nullptr);
  ~MainWindow() override;

  [[nodiscard]] SessionDocument& document() { return document_; }
  [[nodiscard]] Focus& focus() { return focus_; }
  /// A session file is opened, anything else taken in as a recording; asks first where edits would be lost.
  void openPath(const QString& path);
  void setAppearance(Appearance appearance);
  /// Offers what an earlier run left behind when it ended without saving.
  void offerRecovery();

protected:
  void closeEvent(QCloseEvent* event) override;
  void dragEnterEvent(QDragEnterEvent* event) override;
  void dropEvent(QDropEvent* event) override;
  void changeEvent(QEvent* event) override;

private:
  // main_window.cpp
  void layOut();
  void connectParts();
  void applyTheme();
  void showPage();
  void showBeside(QWidget* form);
  void chooseFirstCurve();
  void restoreShape();
  void keepShape();

  // main_window_actions.cpp
  void makeActions();
  QAction* action(const char* name, const QString& text, const QKeySequence& key, void (MainWindow::*what)());
  void fillMenus();
  void addPaneActions(QMenu& menu, const char* name);
  void updateActions();
  void fillRecentMenu();
  void showKeys();
  void showAbout();

  // main_window_files.cpp
  void takeIn();
  void startTakingIn(const QString& recording);
  void openSession();
  void openSample(const QString& name);
  void openSessionFile(const QString& path);
  bool save();
  bool saveAs();
  void closeSession();
  void writeResults();
  bool mayLeave(); ///< false: the user wants to stay with unsaved edits
  void report(const Error& error);

  Prompts& prompts_;
  SessionDocument document_;
  Focus focus_;
  RecentFiles recent_;
  ResultsWriter writer_{this};
  Appearance appearance_ = Appearance::system;
  bool applying_theme_ = false;

  MessageBar* message_ = nullptr;
  QStackedWidget* pages_ = nullptr;
  WelcomePage* welcome_ = nullptr;
  steps::IntakeForm* intake_ = nullptr;
  QSplitter* across_ = nullptr;
  QSplitter* down_ = nullptr;
  story::StoryPane* story_ = nullptr;
  evidence::EvidencePane* evidence_ = nullptr;
  QStackedWidget* beside_ = nullptr;
  answer::AnswerPane* answer_ = nullptr;
  steps::AdditionsForm* additions_ = nullptr;
  steps::SessionForm* session_form_ = nullptr;
  QWidget* edits_ = nullptr;
  StatusLine* status_ = nullptr;
  bool taking_in_ = false;

  QAction* take_in_action_ = nullptr;
  QAction* open_action_ = nullptr;
  QAction* save_action_ = nullptr;
  QAction* save_as_action_ = nullptr;
  QAction* close_action_ = nullptr;
  QAction* results_action_ = nullptr;
  QAction* analyse_action_ = nullptr;
  QAction* answer_action_ = nullptr;
  QAction* additions_action_ = nullptr;
  QAction* channels_action_ = nullptr;
  QAction* edits_action_ = nullptr;
  QMenu* recent_menu_ = nullptr;
  QMenu* samples_menu_ = nullptr;
};

} // namespace chronodrome::ui::window
