// Chronodrome, GPL-3.0-or-later.
// What the pane does with keys, menus and hints, and how it asks for a reason.
#include "ui/look/custom_plot.h"

#include "ui/story/story_pane.h"

#include <QContextMenuEvent>
#include <QHelpEvent>
#include <QKeyEvent>
#include <QMenu>
#include <QToolTip>

#include "ui/story/exclude_bar.h"
#include "ui/story/gestures.h"
#include "ui/story/readout.h"
#include "ui/story/story_actions.h"
#include "ui/story/story_figure.h"
#include "ui/story/travel.h"
#include "ui/story/window_editing.h"

namespace chronodrome::ui::story {

void StoryPane::askExclusion(Seconds start, Seconds end) {
  if (document_.isReadOnly()) {
    endExclusion();
    return;
  }
  figure_->touch().selection = recording::Span{start, end};
  figure_->replotTouch();
  exclude_bar_->ask(start, end);
}

void StoryPane::endExclusion() {
  gestures_->abort();
  figure_->touch().selection.reset();
  figure_->replotTouch();
  if (exclude_bar_->isHidden()) return;
  exclude_bar_->hide();
  plot_->setFocus(Qt::OtherFocusReason);
}

void StoryPane::showMenu(const Hit& hit, const QPoint& globalPlace) {
  if (!figure_->state().content) return;
  QMenu menu(this);
  menu.setObjectName(QStringLiteral("storyMenu"));
  const bool isBand =
      hit.part == Hit::Part::band || hit.part == Hit::Part::bandStart || hit.part == Hit::Part::bandEnd;
  if (isBand) {
    // The menu's entries speak of the chosen plateau: so this one becomes it.
    focus_.chooseStep(stepOf(figure_->state().bands->responses.rows[hit.response]));
    actions_->refresh();
    menu.addActions({actions_->release(), actions_->leaveStepOut()});
    menu.addSeparator();
  }
  menu.addActions({actions_->leaveStretchOut(), actions_->wholeRecording()});
  menu.exec(globalPlace);
}

void StoryPane::contextMenuEvent(QContextMenuEvent* event) {
  Hit hit;
  const auto chosen = travel_->chosen();
  if (chosen) {
    hit.part = Hit::Part::band;
    hit.response = *chosen;
  }
  const QPointF place = chosen ? figure_->bandRect(*chosen).center() : QPointF(plot_->rect().center());
  showMenu(hit, plot_->mapToGlobal(place.toPoint()));
  event->accept();
}

bool StoryPane::handleKey(int key) {
  if (key == Qt::Key_Escape) return gestures_->abort();
  if ((key == Qt::Key_Return || key == Qt::Key_Enter) && editing_->isActive()) {
    editing_->place();
    return true;
  }
  return false;
}

bool StoryPane::eventFilter(QObject* watched, QEvent* event) {
  switch (event->type()) {
  case QEvent::ToolTip: {
    const auto* help = static_cast<QHelpEvent*>(event);
    QToolTip::showText(help->globalPos(), tooltipText(*figure_, help->pos()), plot_);
    return true;
  }
  case QEvent::KeyPress:
    if (handleKey(static_cast<QKeyEvent*>(event)->key())) return true;
    break;
  case QEvent::ShortcutOverride:
    // While something is being moved, Escape and Enter are about it.
    if (editing_->isActive() || gestures_->isDragging()) {
      const int key = static_cast<QKeyEvent*>(event)->key();
      if (key == Qt::Key_Escape || key == Qt::Key_Return || key == Qt::Key_Enter) event->accept();
    }
    break;
  case QEvent::FocusIn:
  case QEvent::FocusOut:
    figure_->touch().hasFocus = event->type() == QEvent::FocusIn;
    figure_->replotTouch();
    break;
  case QEvent::Resize:
    // The plot takes its new size first.
    QMetaObject::invokeMethod(this, &StoryPane::showRows, Qt::QueuedConnection);
    break;
  default:
    break;
  }
  return QWidget::eventFilter(watched, event);
}

} // namespace chronodrome::ui::story
