// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <memory>

#include <QAction>
#include <QList>
#include <QWidget>

#include "session/session_result.h"
#include "ui/document/focus.h"
#include "ui/document/session_document.h"
#include "ui/look/theme.h"

class QCustomPlot;
class QLabel;
class QScrollBar;
class QStackedWidget;
class QToolButton;

namespace chronodrome::ui::story {

class ExcludeBar;
class Gestures;
class StoryActions;
class StoryFigure;
class Travel;
class WindowEditing;
struct Hit;

/// The story: the whole recording at a glance, and the way to any place in it. Shows the document's result,
/// follows and moves the focus, and edits plateaus' windows and exclusions.
class StoryPane : public QWidget {
  Q_OBJECT
public:
  /// Both must outlive the pane.
  StoryPane(SessionDocument& document, Focus& focus, QWidget* parent = nullptr);
  ~StoryPane() override;

  void setTheme(const look::Theme& theme);
  /// For menus, in their order. Their keys work while the story has the focus.
  [[nodiscard]] QList<QAction*> actions();

  [[nodiscard]] const StoryFigure& figure() const { return *figure_; }

Q_SIGNALS:
  /// While a plateau is dragged: what its place would give. Null: the document's own result again.
  void previewChanged(std::shared_ptr<const chronodrome::session::SessionResult> result);

protected:
  bool eventFilter(QObject* watched, QEvent* event) override;
  void contextMenuEvent(QContextMenuEvent* event) override;

private:
  void layOut();
  void listenToDocument();
  void listenToFocus();
  void listenToHands();
  void showResult();
  void showStale();
  void showFrame();
  void showChosen();
  void showRows();
  void setView(Seconds start, Seconds end);
  void readOut(QPointF place);
  void readOutFrame();
  void askExclusion(Seconds start, Seconds end);
  void endExclusion();
  void showMenu(const Hit& hit, const QPoint& globalPlace);
  bool handleKey(int key);

  SessionDocument& document_;
  Focus& focus_;
  QCustomPlot* plot_;
  QScrollBar* rows_bar_;
  QLabel* readout_;
  QLabel* stale_;
  QLabel* empty_;
  QToolButton* whole_;
  QStackedWidget* pages_;
  ExcludeBar* exclude_bar_;
  std::unique_ptr<StoryFigure> figure_;
  std::unique_ptr<Travel> travel_;
  WindowEditing* editing_;
  Gestures* gestures_;
  StoryActions* actions_;
};

} // namespace chronodrome::ui::story
