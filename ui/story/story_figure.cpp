// Chronodrome, GPL-3.0-or-later.
#include "ui/story/story_figure.h"

#include <algorithm>
#include <cmath>

#include "ui/look/plot_style.h"
#include "ui/story/bath_ribbon.h"
#include "ui/story/lost_stretches.h"
#include "ui/story/plateau_bands.h"
#include "ui/story/rhythm_strip.h"
#include "ui/story/trend_row.h"

namespace chronodrome::ui::story {
namespace {

constexpr int kGutter = 136; // labels and the numbers of the axes
constexpr int kRight = 16;
constexpr int kRowGap = 4; // above and below each row
constexpr int kRhythmHeight = 24;
constexpr int kAxisHeight = 28;
constexpr double kTickEvery = 90.0;  // pixels between times at the axis
constexpr double kValueEvery = 18.0; // pixels between numbers of a row

void addLayers(QCustomPlot& plot) {
  plot.addLayer(QString::fromLatin1(kGroundLayer), plot.layer(QStringLiteral("background")),
                QCustomPlot::limAbove);
  plot.addLayer(QString::fromLatin1(kDataLayer), plot.layer(QStringLiteral("main")), QCustomPlot::limAbove);
  plot.addLayer(QString::fromLatin1(kValueLayer), plot.layer(QString::fromLatin1(kDataLayer)),
                QCustomPlot::limAbove);
  plot.addLayer(QString::fromLatin1(kTouchLayer), plot.layer(QStringLiteral("overlay")),
                QCustomPlot::limAbove);
  plot.layer(QString::fromLatin1(kTouchLayer))->setMode(QCPLayer::lmBuffered);
}

} // namespace

StoryFigure::StoryFigure(QCustomPlot& plot) : plot_(plot) {
  state_.theme = look::Theme::of(look::Mode::light);
  state_.gutter = kGutter;
  addLayers(plot_);
  look::dress(plot_, state_.theme);
  QObject::connect(&plot_, &QCustomPlot::beforeReplot, &context_, [this] { fitTicks(); });
  build();
}

void StoryFigure::setTheme(const look::Theme& theme) {
  state_.theme = theme;
  look::dress(plot_, theme);
  dressRects();
  replot();
}

void StoryFigure::setContent(std::shared_ptr<const StoryContent> content) {
  const bool isOther = !state_.content || !content || state_.content->end != content->end;
  state_.content = std::move(content);
  state_.bands = state_.content ? state_.content->result : nullptr;
  if (isOther)
    view_ = {Seconds(0.0), state_.content ? std::max(state_.content->end, Seconds(1.0)) : Seconds(1.0)};
  build();
}

void StoryFigure::setBands(std::shared_ptr<const session::SessionResult> result) {
  state_.bands = result ? std::move(result) : state_.content ? state_.content->result : nullptr;
  replot();
}

void StoryFigure::setChosen(std::optional<StepRef> step) {
  state_.chosen = std::move(step);
  replot();
}

void StoryFigure::setStale(bool isStale) {
  if (state_.isStale == isStale) return;
  state_.isStale = isStale;
  replot();
}

void StoryFigure::setView(Seconds start, Seconds end) {
  const Seconds whole = state_.content ? std::max(state_.content->end, Seconds(1.0)) : Seconds(1.0);
  const Seconds width = std::clamp(end - start, std::min(Seconds(1.0), whole), whole);
  const Seconds from = std::clamp(start, Seconds(0.0), whole - width);
  view_ = {from, from + width};
  applyView();
  replot();
}

bool StoryFigure::isWhole() const {
  return !state_.content || (view_.start <= Seconds(0.0) && view_.end >= state_.content->end);
}

std::size_t StoryFigure::rowCount() const {
  return state_.content ? state_.content->trends.size() : 0;
}

int StoryFigure::fixedHeight() const {
  return kTabStrip + BathRibbon::heightFor(state_.content.get()) + 2 * kRowGap + kRowGap + kRhythmHeight +
         kAxisHeight;
}

std::size_t StoryFigure::rowsFor(int height) const {
  return static_cast<std::size_t>(std::max(1, (height - fixedHeight()) / kLeastRow));
}

void StoryFigure::setRows(std::size_t first, std::size_t count) {
  count = std::max<std::size_t>(1, std::min(count, rowCount()));
  first = std::min(first, rowCount() - std::min(rowCount(), count));
  if (first == first_row_ && count == row_limit_) return;
  first_row_ = first;
  row_limit_ = count;
  build();
}

void StoryFigure::clear() {
  touch_layer_ = nullptr;
  rows_.clear();
  parts_.clear();
  plot_.plotLayout()->clear();
}

QCPAxisRect* StoryFigure::addRect(int row) {
  auto* rect = new QCPAxisRect(&plot_, false);
  rect->addAxes(QCPAxis::atLeft | QCPAxis::atBottom);
  rect->setAutoMargins(QCP::msNone);
  rect->setMargins(QMargins(kGutter, kRowGap, kRight, kRowGap));
  rect->setMinimumMargins(QMargins(0, 0, 0, 0));
  rect->setSizeConstraintRect(QCPLayoutElement::scrOuterRect);
  plot_.plotLayout()->addElement(row, 0, rect);
  return rect;
}

void StoryFigure::addTrendRow(std::size_t trend, int at) {
  Row row;
  row.trend = trend;
  row.rect = addRect(at);
  auto* values = row.rect->axis(QCPAxis::atLeft);
  values->setTicker(QSharedPointer<look::NumberTicker>::create());
  const auto& content = state_.content->trends[trend];
  values->setRange(content.low, content.high);
  auto bands =
      std::make_unique<PlateauBands>(plot_, state_, row.rect, content.measure, PlateauBands::Part::ground);
  row.bands = bands.get();
  parts_.push_back(std::move(bands));
  parts_.push_back(std::make_unique<TrendRow>(plot_, state_, row.rect, trend));
  auto lost = std::make_unique<LostStretches>(plot_, state_, row.rect, trend);
  row.lost = lost.get();
  parts_.push_back(std::move(lost));
  parts_.push_back(
      std::make_unique<PlateauBands>(plot_, state_, row.rect, content.measure, PlateauBands::Part::values));
  rows_.push_back(row);
}

void StoryFigure::addEmptyRow(int at) {
  addRect(at)->axis(QCPAxis::atLeft)->setTicks(false);
}

void StoryFigure::build() {
  clear();
  auto* layout = plot_.plotLayout();
  layout->setRowSpacing(0);
  layout->setMargins(QMargins(0, 0, 0, 0));
  bath_rect_ = addRect(0);
  const int bathHeight = BathRibbon::heightFor(state_.content.get());
  bath_rect_->setMargins(QMargins(kGutter, kTabStrip, kRight, 2 * kRowGap));
  bath_rect_->setMinimumSize(0, kTabStrip + bathHeight + 2 * kRowGap);
  bath_rect_->setMaximumSize(QWIDGETSIZE_MAX, kTabStrip + bathHeight + 2 * kRowGap);
  auto bath = std::make_unique<BathRibbon>(plot_, kDataLayer, state_, bath_rect_);
  bath_ = bath.get();
  parts_.push_back(std::move(bath));

  int at = 1;
  const std::size_t end = std::min(rowCount(), first_row_ + std::min(row_limit_, rowCount()));
  for (std::size_t trend = first_row_; trend < end; ++trend)
    addTrendRow(trend, at++);
  if (at == 1) addEmptyRow(at++);

  rhythm_rect_ = addRect(at);
  rhythm_rect_->setMargins(QMargins(kGutter, kRowGap, kRight, kAxisHeight));
  rhythm_rect_->setMinimumSize(0, kRowGap + kRhythmHeight + kAxisHeight);
  rhythm_rect_->setMaximumSize(QWIDGETSIZE_MAX, kRowGap + kRhythmHeight + kAxisHeight);
  auto rhythm = std::make_unique<RhythmStrip>(plot_, state_, rhythm_rect_);
  rhythm_ = rhythm.get();
  parts_.push_back(std::move(rhythm));
  for (auto* rect : {bath_rect_.data(), rhythm_rect_.data()}) {
    auto lost = std::make_unique<LostStretches>(plot_, state_, rect, std::nullopt);
    lost_ = lost.get();
    parts_.push_back(std::move(lost));
  }
  auto touch = std::make_unique<TouchLayer>(plot_, state_, touch_, bath_rect_, rhythm_rect_);
  touch_layer_ = touch.get();
  parts_.push_back(std::move(touch));
  dressRects();
  applyView();
  // Places must be right at once: the pointer may ask before the replot comes.
  for (const auto phase :
       {QCPLayoutElement::upPreparation, QCPLayoutElement::upMargins, QCPLayoutElement::upLayout})
    layout->update(phase);
  replot();
}

void StoryFigure::dressAxes(QCPAxisRect& rect, bool isRow, bool hasTimes) const {
  auto* times = rect.axis(QCPAxis::atBottom);
  auto* values = rect.axis(QCPAxis::atLeft);
  times->setTicker(QSharedPointer<look::TimeTicker>::create());
  times->setVisible(isRow || hasTimes);
  times->setTickLabels(hasTimes);
  if (!hasTimes) times->setTickLength(0, 0);
  if (!hasTimes) times->setSubTickLength(0, 0);
  if (hasTimes) times->grid()->setVisible(false);
  values->setVisible(isRow);
}

void StoryFigure::dressRects() {
  for (auto* rect : plot_.axisRects()) {
    look::dress(*rect, state_.theme);
    dressAxes(*rect, rect != bath_rect_ && rect != rhythm_rect_, rect == rhythm_rect_);
  }
}

void StoryFigure::applyView() {
  for (auto* rect : plot_.axisRects())
    rect->axis(QCPAxis::atBottom)->setRange(view_.start.value(), view_.end.value());
}

void StoryFigure::fitTicks() {
  const QRect view = plot_.viewport();
  const auto times = std::max(2, static_cast<int>((view.width() - kGutter - kRight) / kTickEvery));
  const auto rows = std::max<std::size_t>(1, rows_.size());
  const double rowHeight = double(view.height() - fixedHeight()) / double(rows) - 2.0 * kRowGap;
  const auto values = std::clamp(static_cast<int>(rowHeight / kValueEvery), 2, 8);
  for (auto* rect : plot_.axisRects()) {
    rect->axis(QCPAxis::atBottom)->ticker()->setTickCount(times);
    rect->axis(QCPAxis::atLeft)->ticker()->setTickCount(values);
  }
}

void StoryFigure::replot() {
  plot_.replot(QCustomPlot::rpQueuedReplot);
}

void StoryFigure::replotTouch() {
  if (is_touch_due_) return;
  is_touch_due_ = true;
  QMetaObject::invokeMethod(
      &context_,
      [this] {
        is_touch_due_ = false;
        plot_.layer(QString::fromLatin1(kTouchLayer))->replot();
      },
      Qt::QueuedConnection);
}

} // namespace chronodrome::ui::story
