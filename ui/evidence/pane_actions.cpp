// Chronodrome, GPL-3.0-or-later.
// Everything that the pane can do, with its key.
#include <array>
#include <utility>

#include <QAction>

#include "ui/evidence/evidence_pane.h"

namespace chronodrome::ui::evidence {
namespace {

using session::LandmarkKind;

QList<QKeySequence> keys(std::initializer_list<const char*> texts) {
  QList<QKeySequence> sequences;
  for (const char* text : texts)
    sequences << QKeySequence(QString::fromLatin1(text));
  return sequences;
}

struct TimeScale {
  const char* name;
  const char* text;
  double seconds;
};

constexpr std::array<TimeScale, 7> kTimeScales{{{"actionScale200ms", "&200 ms across", 0.2},
                                                {"actionScale1s", "&1 s across", 1.0},
                                                {"actionScale5s", "&5 s across", 5.0},
                                                {"actionScale30s", "&30 s across", 30.0},
                                                {"actionScale5min", "5 &min across", 300.0},
                                                {"actionScale30min", "30 m&in across", 1800.0},
                                                {"actionScaleAll", "&Whole recording", 0.0}}};

} // namespace

QAction* EvidencePane::add(const char* name, const QString& text, const QList<QKeySequence>& sequences,
                           const char* menu, const QString& tip, void (EvidencePane::*what)()) {
  auto* action = new QAction(text, this);
  action->setObjectName(QLatin1String(name));
  action->setShortcuts(sequences);
  // Letters and arrows belong to the traces; what takes Ctrl or Alt is meant wherever the keyboard is.
  const Qt::KeyboardModifiers held =
      sequences.isEmpty() ? Qt::NoModifier : sequences.front()[0].keyboardModifiers();
  action->setShortcutContext(held & (Qt::ControlModifier | Qt::AltModifier) ? Qt::WindowShortcut
                                                                            : Qt::WidgetWithChildrenShortcut);
  action->setToolTip(tip);
  action->setProperty("menu", QLatin1String(menu));
  if (what != nullptr) connect(action, &QAction::triggered, this, what);
  addAction(action);
  recording_actions_ << action;
  return action;
}

void EvidencePane::addActions() {
  addViewActions();
  addGoActions();
  addCursorActions();
  addEditActions();
}

void EvidencePane::addViewActions() {
  for (std::size_t i = 0; i < kTimeScales.size(); ++i) {
    const TimeScale& scale = kTimeScales[i];
    QAction* action = add(scale.name, QLatin1String(scale.text),
                          {QKeySequence(static_cast<int>(Qt::Key_1) + static_cast<int>(i))}, "View",
                          QStringLiteral("show this much time, about the pointer or the cursor"), nullptr);
    connect(action, &QAction::triggered, this, [this, seconds = scale.seconds] {
      showWidth(seconds > 0.0 ? Seconds(seconds) : focus_.recordingEnd());
    });
  }
  add("actionZoomIn", QStringLiteral("Zoom i&n"), keys({"+", "="}), "View",
      QStringLiteral("less time, larger"), &EvidencePane::zoomIn);
  add("actionZoomOut", QStringLiteral("Zoom &out"), keys({"-"}), "View", QStringLiteral("more time, smaller"),
      &EvidencePane::zoomOut);
  filtered_action_ =
      add("actionFiltered", QStringLiteral("&Filtered over raw"), keys({"F"}), "View",
          QStringLiteral("draw the filtered signal, as the analysis reads it, over the raw one"),
          &EvidencePane::toggleFiltered);
  filtered_action_->setCheckable(true);
  filtered_action_->setChecked(is_filtered_);
  add("actionLockScale", QStringLiteral("&Lock the amplitude scale of the row"), keys({"L"}), "View",
      QStringLiteral("keep the value axis of this row as it is, or let it follow the signal again"),
      &EvidencePane::toggleLock);
  add("actionLockAllScales", QStringLiteral("Lock &all amplitude scales"), keys({"Shift+L"}), "View",
      QStringLiteral("keep or free the value axes of all rows"), &EvidencePane::toggleAllLocks);
}

void EvidencePane::addGoActions() {
  add("actionGoToTime", QStringLiteral("Go to a &time…"), keys({"Ctrl+G"}), "Go",
      QStringLiteral("type a time of the recording: 1:12:30, 72 min, 4350 s"), &EvidencePane::askTime);
  back_action_ = add("actionBack", QStringLiteral("&Back"), keys({"Alt+Left"}), "Go",
                     QStringLiteral("to where you were before the last jump"), nullptr);
  connect(back_action_, &QAction::triggered, &focus_, &Focus::goBack);
  forward_action_ = add("actionForward", QStringLiteral("For&ward"), keys({"Alt+Right"}), "Go",
                        QStringLiteral("to where you went from here"), nullptr);
  connect(forward_action_, &QAction::triggered, &focus_, &Focus::goForward);

  struct Place {
    const char *name, *text, *next_key, *previous_key;
    LandmarkKind kind;
  };
  static const std::array<Place, 6> places{
      {{"Beat", "beat", ".", ",", LandmarkKind::beat},
       {"FlaggedBeat", "flagged beat", "N", "Shift+N", LandmarkKind::flagged_beat},
       {"Edit", "edited mark", "E", "Shift+E", LandmarkKind::edited_mark},
       {"Addition", "addition", "D", "Shift+D", LandmarkKind::addition},
       {"Rhythm", "rhythm episode", "H", "Shift+H", LandmarkKind::rhythm},
       {"Gap", "gap", "G", "Shift+G", LandmarkKind::gap}}};
  for (const Place& place : places) {
    for (const int direction : {1, -1}) {
      const bool is_next = direction > 0;
      const QByteArray name = QByteArray(is_next ? "actionNext" : "actionPrevious") + place.name;
      const QString text =
          (is_next ? QStringLiteral("Next ") : QStringLiteral("Previous ")) + QLatin1String(place.text);
      QAction* action = add(name.constData(), text, keys({is_next ? place.next_key : place.previous_key}),
                            "Go", text.toLower(), nullptr);
      connect(action, &QAction::triggered, this,
              [this, kind = place.kind, direction] { go(kind, direction); });
      if (place.kind != LandmarkKind::gap) result_actions_ << action;
    }
  }
  add("actionEarlier", QStringLiteral("Earlier"), keys({"Left"}), "Go",
      QStringLiteral("a sample, while a cursor is placed; else a tenth of the view"),
      &EvidencePane::goEarlier);
  add("actionLater", QStringLiteral("Later"), keys({"Right"}), "Go",
      QStringLiteral("a sample, while a cursor is placed; else a tenth of the view"), &EvidencePane::goLater);
  add("actionPanEarlier", QStringLiteral("Pan earlier"), keys({"Shift+Left"}), "Go",
      QStringLiteral("a tenth of the view"), &EvidencePane::panEarlier);
  add("actionPanLater", QStringLiteral("Pan later"), keys({"Shift+Right"}), "Go",
      QStringLiteral("a tenth of the view"), &EvidencePane::panLater);
  add("actionPageEarlier", QStringLiteral("Page earlier"), keys({"PgUp"}), "Go",
      QStringLiteral("one view, less a tenth"), &EvidencePane::pageEarlier);
  add("actionPageLater", QStringLiteral("Page later"), keys({"PgDown"}), "Go",
      QStringLiteral("one view, less a tenth"), &EvidencePane::pageLater);
  add("actionGoToStart", QStringLiteral("Start of the recording"), keys({"Home"}), "Go",
      QStringLiteral("at the width that is shown"), &EvidencePane::goToStart);
  add("actionGoToEnd", QStringLiteral("End of the recording"), keys({"End"}), "Go",
      QStringLiteral("at the width that is shown"), &EvidencePane::goToEnd);
}

void EvidencePane::addCursorActions() {
  add("actionPlaceReference", QStringLiteral("Place the &reference cursor"), keys({"R"}), "Cursor",
      QStringLiteral("at the pointer, or at the second cursor"), &EvidencePane::placeReference);
  add("actionPlaceSecond", QStringLiteral("Place the &second cursor"), keys({"C"}), "Cursor",
      QStringLiteral("at the pointer, or in the middle; a click does the same"), &EvidencePane::placeSecond);
  add("actionRemoveCursors", QStringLiteral("Remove the &cursors"), keys({"Shift+R"}), "Cursor",
      QStringLiteral("both; Escape removes one after the other"), &EvidencePane::removeCursors);
  add("actionSnap", QStringLiteral("Snap to marks, samples or &nothing"), keys({"S"}), "Cursor",
      QStringLiteral("what cursors are drawn to; the corner of the traces says which"),
      &EvidencePane::cycleSnap);
  add("actionRowAbove", QStringLiteral("Row above"), keys({"Up"}), "Cursor",
      QStringLiteral("keys work on the row with the bar at its left"), &EvidencePane::rowAbove);
  add("actionRowBelow", QStringLiteral("Row below"), keys({"Down"}), "Cursor",
      QStringLiteral("keys work on the row with the bar at its left"), &EvidencePane::rowBelow);
  add("actionCopyReadOut", QStringLiteral("Copy &read-out"), keys({"Ctrl+Shift+C"}), "Cursor",
      QStringLiteral("what the cursors read, as text"), &EvidencePane::copyReadOut);
}

void EvidencePane::addEditActions() {
  result_actions_ << add(
      "actionAddMark", QStringLiteral("&Add a mark here"), keys({"A"}), "Edit",
      QStringLiteral("on the row with the bar at its left, at the cursor; a double click does "
                     "the same"),
      &EvidencePane::addMarkHere);
  delete_action_ =
      add("actionDeleteMark", QStringLiteral("&Delete the chosen mark"), keys({"Del", "Backspace"}), "Edit",
          QStringLiteral("click a mark to choose it"), &EvidencePane::deleteChosen);
  recording_actions_.removeOne(delete_action_);
  result_actions_ << add(
      "actionExclude", QStringLiteral("Leave the stretch &out…"), keys({"X"}), "Edit",
      QStringLiteral(
          "what is selected by dragging with Alt or the right button, or lies between the cursors"),
      &EvidencePane::askReason);
  result_actions_ << add("actionInclude", QStringLiteral("Take the stretch &back in"), keys({"Shift+X"}),
                         "Edit",
                         QStringLiteral("undoes a leaving out within the selected stretch, or at the cursor"),
                         &EvidencePane::takeBack);
}

void EvidencePane::updateActions() {
  const bool has_recording = figure_->scene().rows() > 0;
  const bool has_result = has_recording && document_.result() != nullptr;
  for (QAction* action : recording_actions_)
    action->setEnabled(has_recording);
  for (QAction* action : result_actions_)
    action->setEnabled(has_result);
  back_action_->setEnabled(has_recording && focus_.canGoBack());
  forward_action_->setEnabled(has_recording && focus_.canGoForward());
  delete_action_->setEnabled(has_result && chosen_);
}

} // namespace chronodrome::ui::evidence
