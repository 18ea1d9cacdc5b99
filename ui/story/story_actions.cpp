// Chronodrome, GPL-3.0-or-later.
#include "ui/story/story_actions.h"

#include <QWidget>

namespace chronodrome::ui::story {
namespace {

constexpr double kKeyZoom = 1.5;
constexpr double kSmallStep = 0.1; // of the frame's width
constexpr double kPageStep = 0.9;  // leaves a tenth in sight

} // namespace

StoryActions::StoryActions(const Parts& parts, QWidget& keysOn)
    : QObject(&keysOn), parts_(parts), keys_on_(keysOn) {
  addTravel();
  addZoom();
  addWindow();
  refresh();
}

QAction* StoryActions::add(const Words& words, std::function<void()> run) {
  auto* action = new QAction(QString::fromUtf8(words.text), this);
  action->setObjectName(QString::fromLatin1(words.name));
  action->setToolTip(QString::fromUtf8(words.toolTip));
  action->setShortcut(words.key);
  action->setShortcutContext(Qt::WidgetWithChildrenShortcut);
  connect(action, &QAction::triggered, this, [run = std::move(run)] { run(); });
  keys_on_.addAction(action);
  all_.append(action);
  return action;
}

void StoryActions::addTravel() {
  auto& travel = parts_.travel;
  add({"actionNextAddition", "next addition", "go to the next entry of the drug log",
       QKeySequence(Qt::Key_A)},
      [&travel] { travel.toAddition(1); });
  add({"actionPreviousAddition", "previous addition", "go to the entry of the drug log before",
       QKeySequence(Qt::SHIFT | Qt::Key_A)},
      [&travel] { travel.toAddition(-1); });
  add({"actionNextPlateau", "next plateau", "choose the next plateau of this measure",
       QKeySequence(Qt::Key_P)},
      [&travel] { travel.toPlateau(1); });
  add({"actionPreviousPlateau", "previous plateau", "choose the plateau of this measure before",
       QKeySequence(Qt::SHIFT | Qt::Key_P)},
      [&travel] { travel.toPlateau(-1); });
  add({"actionFrameEarlier", "earlier", "move what the evidence shows by a tenth of its width",
       QKeySequence(Qt::Key_Left)},
      [&travel] { travel.pan(-kSmallStep); });
  add({"actionFrameLater", "later", "move what the evidence shows by a tenth of its width",
       QKeySequence(Qt::Key_Right)},
      [&travel] { travel.pan(kSmallStep); });
  add({"actionFramePageEarlier", "a page earlier", "move by one width, keeping a tenth in sight",
       QKeySequence(Qt::Key_PageUp)},
      [&travel] { travel.pan(-kPageStep); });
  add({"actionFramePageLater", "a page later", "move by one width, keeping a tenth in sight",
       QKeySequence(Qt::Key_PageDown)},
      [&travel] { travel.pan(kPageStep); });
  add({"actionFrameStart", "to the start", "go to the start of the recording", QKeySequence(Qt::Key_Home)},
      [&travel] { travel.toEnd(false); });
  add({"actionFrameEnd", "to the end", "go to the end of the recording", QKeySequence(Qt::Key_End)},
      [&travel] { travel.toEnd(true); });
}

void StoryActions::addZoom() {
  auto& travel = parts_.travel;
  auto* in =
      add({"actionFrameNarrower", "narrower", "the evidence shows less time", QKeySequence(Qt::Key_Plus)},
          [&travel] { travel.zoom(1.0 / kKeyZoom); });
  in->setShortcuts({QKeySequence(Qt::Key_Plus), QKeySequence(Qt::Key_Equal)});
  add({"actionFrameWider", "wider", "the evidence shows more time", QKeySequence(Qt::Key_Minus)},
      [&travel] { travel.zoom(kKeyZoom); });
  auto* near = add({"actionStoryNearer", "story nearer", "the story shows less time about the frame",
                    QKeySequence(Qt::CTRL | Qt::Key_Plus)},
                   [this] { zoomView(1.0 / kKeyZoom); });
  near->setShortcuts({QKeySequence(Qt::CTRL | Qt::Key_Plus), QKeySequence(Qt::CTRL | Qt::Key_Equal)});
  add({"actionStoryFarther", "story farther", "the story shows more time",
       QKeySequence(Qt::CTRL | Qt::Key_Minus)},
      [this] { zoomView(kKeyZoom); });
  whole_ = add({"actionWholeRecording", "whole recording", "the story shows the whole recording again",
                QKeySequence(Qt::Key_W)},
               [this] {
                 if (parts_.figure.state().content)
                   Q_EMIT viewWanted(Seconds(0.0), parts_.figure.state().content->end);
               });
}

void StoryActions::addWindow() {
  const auto key = [](auto keys) { return QKeySequence(keys); };
  const char* how = "by a second; Enter places it, Escape leaves it";
  of_chosen_ << add({"actionWindowEarlier", "plateau earlier", how, key(Qt::CTRL | Qt::Key_Left)},
                    [this] { nudge(Grip::body, -1.0); });
  of_chosen_ << add({"actionWindowLater", "plateau later", how, key(Qt::CTRL | Qt::Key_Right)},
                    [this] { nudge(Grip::body, 1.0); });
  of_chosen_ << add({"actionWindowEndEarlier", "plateau ends earlier", how, key(Qt::SHIFT | Qt::Key_Left)},
                    [this] { nudge(Grip::end, -1.0); });
  of_chosen_ << add({"actionWindowEndLater", "plateau ends later", how, key(Qt::SHIFT | Qt::Key_Right)},
                    [this] { nudge(Grip::end, 1.0); });
  of_chosen_ << add(
      {"actionWindowStartEarlier", "plateau begins earlier", how, key(Qt::CTRL | Qt::SHIFT | Qt::Key_Left)},
      [this] { nudge(Grip::start, -1.0); });
  of_chosen_ << add(
      {"actionWindowStartLater", "plateau begins later", how, key(Qt::CTRL | Qt::SHIFT | Qt::Key_Right)},
      [this] { nudge(Grip::start, 1.0); });
  release_ = add({"actionReleaseWindow", "give the window back to the rule",
                  "the chosen plateau lies again where the rule puts it", key(Qt::Key_Delete)},
                 [this] { releaseChosen(); });
  leave_step_out_ =
      add({"actionLeaveStepOut", "leave this step's stretch out…",
           "leave the chosen plateau's whole step out of the analysis, with a reason", key(Qt::Key_X)},
          [this] { leaveChosenOut(); });
  leave_stretch_out_ =
      add({"actionLeaveStretchOut", "leave a stretch out…",
           "drag over the stretch (or hold Alt while dragging), then say why", key(Qt::SHIFT | Qt::Key_X)},
          [this] {
            const auto& frame = parts_.figure.touch().frame;
            parts_.gestures.armSelection();
            if (frame) Q_EMIT exclusionWanted(frame->start, frame->end);
          });
}

void StoryActions::nudge(Grip grip, double seconds) {
  if (const auto chosen = parts_.travel.chosen()) parts_.editing.nudge(*chosen, grip, Seconds(seconds));
}

void StoryActions::releaseChosen() {
  const auto chosen = parts_.travel.chosen();
  if (!chosen) return;
  const auto row = parts_.figure.state().bands->responses.rows[*chosen];
  parts_.document.releaseWindow(row.curve, row.concentration, row.measure);
}

void StoryActions::leaveChosenOut() {
  const auto chosen = parts_.travel.chosen();
  if (!chosen) return;
  const auto& bands = *parts_.figure.state().bands;
  const auto step = stepStretch(bands, bands.responses.rows[*chosen]);
  Q_EMIT exclusionWanted(step.start, step.end);
}

void StoryActions::zoomView(double factor) {
  const auto view = parts_.figure.view();
  const auto& frame = parts_.figure.touch().frame;
  const Seconds about = std::clamp(frame ? 0.5 * (frame->start + frame->end) : 0.5 * (view.start + view.end),
                                   view.start, view.end);
  Q_EMIT viewWanted(about - (about - view.start) * factor, about + (view.end - about) * factor);
}

void StoryActions::refresh() {
  const bool hasStory = parts_.figure.state().content && parts_.figure.state().content->result;
  const auto chosen = parts_.travel.chosen();
  const bool mayEdit = hasStory && !parts_.document.isReadOnly();
  for (auto* action : all_)
    action->setEnabled(hasStory);
  for (auto* action : of_chosen_)
    action->setEnabled(mayEdit && chosen.has_value());
  whole_->setEnabled(hasStory && !parts_.figure.isWhole());
  leave_stretch_out_->setEnabled(mayEdit);
  leave_step_out_->setEnabled(mayEdit && chosen.has_value());
  release_->setEnabled(mayEdit && chosen && parts_.figure.state().bands->responses.rows[*chosen].is_placed);
}

} // namespace chronodrome::ui::story
