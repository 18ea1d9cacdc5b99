// Chronodrome, GPL-3.0-or-later.
#include "ui/look/custom_plot.h"

#include "ui/story/story_pane.h"

#include <QHBoxLayout>
#include <QLabel>
#include <QScrollBar>
#include <QStackedWidget>
#include <QToolButton>
#include <QVBoxLayout>

#include "ui/story/exclude_bar.h"
#include "ui/story/gestures.h"
#include "ui/story/readout.h"
#include "ui/story/story_actions.h"
#include "ui/story/story_words.h"
#include "ui/story/travel.h"
#include "ui/story/window_editing.h"

namespace chronodrome::ui::story {

StoryPane::StoryPane(SessionDocument& document, Focus& focus, QWidget* parent)
    : QWidget(parent), document_(document), focus_(focus), plot_(new QCustomPlot),
      rows_bar_(new QScrollBar(Qt::Vertical)), readout_(new QLabel), stale_(new QLabel), empty_(new QLabel),
      whole_(new QToolButton), pages_(new QStackedWidget), exclude_bar_(new ExcludeBar),
      figure_(std::make_unique<StoryFigure>(*plot_)), travel_(std::make_unique<Travel>(*figure_, focus)),
      editing_(new WindowEditing(document, *figure_, this)),
      gestures_(new Gestures(*plot_, *figure_, focus, *editing_, this)),
      actions_(new StoryActions({document, *figure_, *travel_, *editing_, *gestures_}, *plot_)) {
  setObjectName(QStringLiteral("storyPane"));
  setAccessibleName(QStringLiteral("story: the whole recording"));
  layOut();
  plot_->installEventFilter(this);
  listenToDocument();
  listenToFocus();
  listenToHands();
  setTheme(look::Theme::of(look::systemMode()));
  showResult();
}

StoryPane::~StoryPane() {
  // The hands hold on to the figure, the figure to the plot.
  delete actions_;
  delete gestures_;
  delete editing_;
  travel_.reset();
  figure_.reset();
}

void StoryPane::layOut() {
  plot_->setObjectName(QStringLiteral("storyPlot"));
  plot_->setAccessibleName(QStringLiteral("bath, trends with plateaus, and rhythm over time"));
  plot_->setFocusPolicy(Qt::StrongFocus);
  setFocusProxy(plot_);
  rows_bar_->setObjectName(QStringLiteral("storyRowsScrollBar"));
  rows_bar_->setAccessibleName(QStringLiteral("rows of the story"));
  readout_->setObjectName(QStringLiteral("storyReadoutLabel"));
  readout_->setProperty("quiet", true);
  // A long line must not widen the pane.
  readout_->setSizePolicy(QSizePolicy::Ignored, QSizePolicy::Fixed);
  stale_->setObjectName(QStringLiteral("storyStaleLabel"));
  stale_->setText(QStringLiteral("recalculating"));
  whole_->setObjectName(QStringLiteral("wholeRecordingToolButton"));
  whole_->setAccessibleName(QStringLiteral("whole recording"));
  whole_->setDefaultAction(actions_->wholeRecording());
  empty_->setObjectName(QStringLiteral("storyEmptyLabel"));
  empty_->setText(
      QStringLiteral("Nothing to tell yet. The whole recording appears here once it is analysed."));
  empty_->setAlignment(Qt::AlignCenter);
  empty_->setWordWrap(true);
  empty_->setProperty("quiet", true);
  exclude_bar_->hide();

  auto* head = new QHBoxLayout;
  head->setContentsMargins(look::kUnit, 0, look::kUnit, 0);
  head->setSpacing(look::kUnit);
  head->addWidget(readout_, 1);
  head->addWidget(stale_);
  head->addWidget(whole_);
  auto* story = new QWidget;
  auto* body = new QHBoxLayout(story);
  body->setContentsMargins(0, 0, 0, 0);
  body->setSpacing(0);
  body->addWidget(plot_, 1);
  body->addWidget(rows_bar_);
  pages_->addWidget(empty_);
  pages_->addWidget(story);
  auto* column = new QVBoxLayout(this);
  column->setContentsMargins(0, 0, 0, 0);
  column->setSpacing(0);
  column->addLayout(head);
  column->addWidget(exclude_bar_);
  column->addWidget(pages_, 1);
  const int line = 3 * look::kUnit;
  for (QWidget* part : std::initializer_list<QWidget*>{readout_, stale_, whole_})
    part->setFixedHeight(line);
  setMinimumSize(40 * look::kUnit, 25 * look::kUnit);
}

void StoryPane::listenToDocument() {
  connect(&document_, &SessionDocument::opened, this, &StoryPane::showResult);
  connect(&document_, &SessionDocument::closed, this, &StoryPane::showResult);
  connect(&document_, &SessionDocument::resultChanged, this, &StoryPane::showResult);
  connect(&document_, &SessionDocument::staleChanged, this, &StoryPane::showStale);
}

void StoryPane::listenToFocus() {
  connect(&focus_, &Focus::rangeChanged, this, &StoryPane::showFrame);
  connect(&focus_, &Focus::stepChanged, this, &StoryPane::showChosen);
}

void StoryPane::listenToHands() {
  connect(editing_, &WindowEditing::previewChanged, this, &StoryPane::previewChanged);
  connect(gestures_, &Gestures::pointerMoved, this, &StoryPane::readOut);
  connect(gestures_, &Gestures::pointerLeft, this, &StoryPane::readOutFrame);
  connect(gestures_, &Gestures::clicked, this, [this](const Hit& hit) { travel_->follow(hit); });
  connect(gestures_, &Gestures::stretchChosen, this, &StoryPane::askExclusion);
  connect(gestures_, &Gestures::menuWanted, this, &StoryPane::showMenu);
  connect(gestures_, &Gestures::viewWanted, this, &StoryPane::setView);
  connect(gestures_, &Gestures::rowsScrolled, this,
          [this](int by) { rows_bar_->setValue(rows_bar_->value() + by); });
  connect(rows_bar_, &QScrollBar::valueChanged, this, &StoryPane::showRows);
  connect(actions_, &StoryActions::viewWanted, this, &StoryPane::setView);
  connect(actions_, &StoryActions::exclusionWanted, this, &StoryPane::askExclusion);
  connect(exclude_bar_, &ExcludeBar::cancelled, this, &StoryPane::endExclusion);
  connect(exclude_bar_, &ExcludeBar::accepted, this,
          [this](const QString& channel, Seconds start, Seconds end, const QString& reason) {
            endExclusion();
            document_.exclude(channel.toStdString(), start, end, reason);
          });
}

void StoryPane::setTheme(const look::Theme& theme) {
  figure_->setTheme(theme);
  for (QLabel* label : {readout_, empty_, stale_}) {
    QPalette colours = theme.palette();
    colours.setColor(QPalette::WindowText, label == stale_ ? theme.caution : theme.text_quiet);
    label->setPalette(colours);
    label->setFont(theme.font(label == empty_ ? look::TextSize::normal : look::TextSize::small));
  }
}

QList<QAction*> StoryPane::actions() {
  return actions_->all();
}

void StoryPane::showResult() {
  gestures_->abort();
  const auto result = document_.result();
  figure_->setContent(result ? contentOf(result) : nullptr);
  QStringList labels;
  for (const auto& channel : document_.session().channels)
    labels << QString::fromStdString(channel.label);
  exclude_bar_->setChannels(labels);
  if (!result) endExclusion();
  pages_->setCurrentIndex(result ? 1 : 0);
  whole_->setVisible(!figure_->isWhole());
  showRows();
  showFrame();
  showChosen();
  showStale();
}

void StoryPane::showStale() {
  const bool isStale = document_.result() && document_.isStale();
  stale_->setVisible(isStale);
  figure_->setStale(isStale);
  actions_->refresh();
}

void StoryPane::showFrame() {
  const bool hasStory = figure_->state().content != nullptr;
  figure_->touch().frame =
      hasStory ? std::optional(recording::Span{focus_.start(), focus_.end()}) : std::nullopt;
  const auto view = figure_->view();
  if (hasStory && !figure_->isWhole() && (focus_.end() <= view.start || focus_.start() >= view.end)) {
    // The evidence has gone where the story cannot be seen: the story comes along.
    const Seconds half = 0.5 * (view.end - view.start);
    const Seconds middle = 0.5 * (focus_.start() + focus_.end());
    setView(middle - half, middle + half);
  }
  if (!plot_->underMouse() || gestures_->isDragging()) readOutFrame();
  figure_->replotTouch();
}

void StoryPane::showChosen() {
  figure_->setChosen(focus_.step());
  actions_->refresh();
}

void StoryPane::showRows() {
  const std::size_t room = figure_->rowsFor(plot_->height());
  const std::size_t all = figure_->rowCount();
  const int hidden = static_cast<int>(all > room ? all - room : 0);
  rows_bar_->setRange(0, hidden);
  rows_bar_->setPageStep(static_cast<int>(room));
  rows_bar_->setVisible(hidden > 0);
  figure_->setRows(static_cast<std::size_t>(rows_bar_->value()), room);
}

void StoryPane::setView(Seconds start, Seconds end) {
  figure_->setView(start, end);
  whole_->setVisible(!figure_->isWhole());
  actions_->refresh();
}

void StoryPane::readOut(QPointF place) {
  const QString text = readoutText(*figure_, place);
  if (text.isEmpty()) {
    readOutFrame();
    return;
  }
  readout_->setText(text);
  figure_->touch().pointer = figure_->timeAt(place.x());
  figure_->replotTouch();
}

void StoryPane::readOutFrame() {
  figure_->touch().pointer.reset();
  figure_->replotTouch();
  readout_->setText(figure_->state().content ? frameText(focus_.start(), focus_.end()) : QString());
}

} // namespace chronodrome::ui::story
