// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <optional>

#include <QWidget>

#include "session/places.h"
#include "ui/document/focus.h"
#include "ui/document/session_document.h"
#include "ui/evidence/cursors.h"
#include "ui/evidence/evidence_figure.h"
#include "ui/evidence/filtered_work.h"
#include "ui/evidence/inline_bar.h"
#include "ui/evidence/pointer.h"
#include "ui/evidence/read_out_strip.h"
#include "ui/look/theme.h"

class QAction;
class QLabel;
class QStackedWidget;

namespace chronodrome::ui::evidence {

/// Traces, marks and cursors of the open session, over the stretch that the focus shows; corrections are made
/// here. Its QWidget::actions() are all it can do; the property `menu` of each says where it belongs: View,
/// Go, Cursor or Edit. Single letters count only while the pane has the keyboard.
class EvidencePane : public QWidget {
  Q_OBJECT
public:
  EvidencePane(SessionDocument& document, Focus& focus, QWidget* parent = nullptr);
  void setTheme(const look::Theme& theme);
  [[nodiscard]] const EvidenceFigure& figure() const { return *figure_; }
  [[nodiscard]] const Cursors& cursors() const { return cursors_; }

protected:
  bool eventFilter(QObject* watched, QEvent* event) override;
  void keyPressEvent(QKeyEvent* event) override;

private:
  // ---- set-up (evidence_pane.cpp, pane_actions.cpp)
  void layOut();
  void connectParts();
  void addActions();
  void addViewActions();
  void addGoActions();
  void addCursorActions();
  void addEditActions();
  QAction* add(const char* name, const QString& text, const QList<QKeySequence>& keys, const char* menu,
               const QString& tip, void (EvidencePane::*what)());
  void updateActions();

  // ---- what is shown
  void takeDocument();
  void takePending();
  void showRange();
  void showFiltered();
  void showStep();
  void showOverlay();
  void showEmptyText();

  // ---- view and places (pane_going.cpp)
  void zoom(double factor, std::optional<double> x);
  void showWidth(Seconds width);
  void panBy(double share);
  void zoomIn();
  void zoomOut();
  void goEarlier();
  void goLater();
  void panEarlier();
  void panLater();
  void pageEarlier();
  void pageLater();
  void goToStart();
  void goToEnd();
  void askTime();
  QString goToTyped(const QString& text);
  void go(session::LandmarkKind kind, int direction);
  void arrive(session::LandmarkKind kind, const session::Landmark& landmark);
  void toggleFiltered();
  void toggleLock();
  void toggleAllLocks();
  [[nodiscard]] Seconds here() const; ///< from which the next place is looked for

  // ---- cursors (pane_cursors.cpp)
  void point(int row, double x);
  void leave();
  void pinSecond(Seconds time);
  void placeSecond();
  void placeReference();
  void removeCursors();
  void cycleSnap();
  void stepCursor(int direction);
  void copyReadOut();
  void setActiveRow(int row);
  void rowAbove();
  void rowBelow();
  void escape();
  [[nodiscard]] Seconds snappedAt(int row, double x, Snap snap) const;
  [[nodiscard]] Seconds middle() const;

  // ---- corrections (pane_editing.cpp)
  void addMark(int row, Seconds time);
  void addMarkHere();
  void deleteChosen();
  void choose(int row, std::size_t index);
  void chooseNeighbour(int direction);
  void dragMark(int row, std::size_t index, double x);
  void dropMark(int row, std::size_t index, double x);
  void selectStretch(int row, double x1, double x2);
  void askReason();
  void takeBack();
  [[nodiscard]] std::optional<Overlay::Selection> stretch() const; ///< selected, or between the cursors

  SessionDocument& document_;
  Focus& focus_;
  const look::Theme* theme_ = &look::Theme::of(look::Mode::light);
  QStackedWidget* pages_ = nullptr;
  QLabel* empty_ = nullptr;
  EvidenceFigure* figure_ = nullptr;
  Pointer* pointer_ = nullptr;
  InlineBar* bar_ = nullptr;
  ReadOutStrip* strip_ = nullptr;
  FilteredWork* work_ = nullptr;
  QAction* filtered_action_ = nullptr;
  QAction* back_action_ = nullptr;
  QAction* forward_action_ = nullptr;
  QAction* delete_action_ = nullptr;
  QList<QAction*> recording_actions_; ///< of use only while traces are there
  QList<QAction*> result_actions_;    ///< ... and an analysis of them

  Cursors cursors_;
  int active_row_ = 0;
  std::optional<Overlay::Mark> chosen_;
  std::optional<Overlay::Move> move_;
  std::optional<Overlay::Selection> selection_;
  std::optional<Seconds> place_; ///< gone to last
  bool is_filtered_ = true;
};

} // namespace chronodrome::ui::evidence
