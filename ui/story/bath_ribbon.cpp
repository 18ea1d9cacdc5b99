// Chronodrome, GPL-3.0-or-later.
#include "ui/story/bath_ribbon.h"

#include <algorithm>

#include "ui/look/number_text.h"
#include "ui/look/plot_style.h"
#include "ui/story/pattern.h"

namespace chronodrome::ui::story {
namespace {

constexpr int kStepsLane = 40;  // room for a staircase above the line of labels
constexpr int kSingleLane = 20; // one concentration: a bar
constexpr int kPacingLane = 18;
constexpr int kLaneGap = 4;
constexpr double kLowestBar = 16.0; // so that every bar holds its label
constexpr double kLabelPad = 4.0;

bool isStaircase(const session::BathLane& lane) {
  return std::any_of(lane.steps.begin(), lane.steps.end(),
                     [](const session::BathStep& step) { return step.height < 1.0; });
}

int laneHeight(const session::BathLane& lane) {
  return isStaircase(lane) ? kStepsLane : kSingleLane;
}

} // namespace

int BathRibbon::heightFor(const StoryContent* content) {
  if (content == nullptr || !content->result) return kSingleLane;
  int height = 0;
  for (const auto& lane : content->bath.lanes)
    height += laneHeight(lane) + kLaneGap;
  if (!content->result->plan.paced.empty()) height += kPacingLane + kLaneGap;
  return std::max(height - kLaneGap, kSingleLane);
}

QRect BathRibbon::clipRect() const {
  return rect_ ? QRect(0, rect_->rect().top() - 2, rect_->rect().right() + 2, rect_->rect().height() + 6)
               : QRect();
}

QRectF BathRibbon::laneRect(std::size_t lane) const {
  double top = rect_->rect().top();
  const auto& lanes = state_.content->bath.lanes;
  for (std::size_t i = 0; i < lane; ++i)
    top += laneHeight(lanes[i]) + kLaneGap;
  return {double(rect_->rect().left()), top, double(rect_->rect().width()), double(laneHeight(lanes[lane]))};
}

QRectF BathRibbon::pacingRect() const {
  const auto& lanes = state_.content->bath.lanes;
  const double top = lanes.empty() ? rect_->rect().top() : laneRect(lanes.size() - 1).bottom() + kLaneGap;
  return {double(rect_->rect().left()), top, double(rect_->rect().width()), double(kPacingLane)};
}

int BathRibbon::laneAt(double y) const {
  if (!rect_ || !state_.content) return -1;
  for (std::size_t i = 0; i < state_.content->bath.lanes.size(); ++i) {
    const QRectF lane = laneRect(i);
    if (y >= lane.top() && y <= lane.bottom()) return static_cast<int>(i);
  }
  return -1;
}

QRectF BathRibbon::barOf(const session::BathStep& step, const QRectF& lane) const {
  const double height = kLowestBar + step.height * (lane.height() - kLowestBar);
  const double left = xOf(step.start);
  return {left, lane.bottom() - height, xOf(step.end) - left, height};
}

void BathRibbon::drawLane(QCPPainter& painter, const session::BathLane& lane, const QRectF& rect) const {
  for (const auto& step : lane.steps) {
    const QRectF bar = barOf(step, rect);
    if (bar.right() < rect.left() || bar.left() > rect.right()) continue;
    painter.fillRect(bar, state_.theme.agent_fill);
    if (lane.is_antagonist) fillPattern(painter, bar, Pattern::level, state_.theme.surface, 4.0);
  }
  painter.setPen(look::thinPen(state_.theme.agent));
  double lastRight = rect.left() - 1e9;
  double lastTop = rect.bottom();
  for (const auto& step : lane.steps) {
    const QRectF bar = barOf(step, rect);
    const bool isJoined = bar.left() - lastRight < 0.5;
    if (!isJoined && lastRight > rect.left() - 1e8)
      painter.drawLine(QLineF(lastRight, lastTop, lastRight, rect.bottom()));
    painter.drawLine(QLineF(bar.left(), isJoined ? lastTop : rect.bottom(), bar.left(), bar.top()));
    painter.drawLine(QLineF(bar.left(), bar.top(), bar.right(), bar.top()));
    if (step.logged && *step.logged < step.start) {
      const double logged = xOf(*step.logged);
      painter.drawLine(QLineF(logged, rect.bottom() + 2.0, bar.left(), rect.bottom() + 2.0));
      painter.drawLine(QLineF(logged, rect.bottom() - 2.0, logged, rect.bottom() + 2.0));
    }
    lastRight = bar.right();
    lastTop = bar.top();
  }
  if (lastRight < rect.right()) painter.drawLine(QLineF(lastRight, lastTop, lastRight, rect.bottom()));
  painter.drawLine(QLineF(rect.left(), rect.bottom(), rect.right(), rect.bottom()));
}

void BathRibbon::drawLabels(QCPPainter& painter, const session::BathLane& lane, const QRectF& rect) const {
  const QFontMetricsF metrics(painter.font());
  painter.setPen(state_.theme.text);
  const QString agent = QString::fromStdString(lane.agent);
  const auto roomFor = [&](const QString& text) { return metrics.horizontalAdvance(text) + 2.0 * kLabelPad; };
  bool isNamed = false;
  double lastRight = -1e9; // of the step before
  double free = -1e9;      // where the label before ends
  for (std::size_t i = 0; i < lane.steps.size(); ++i) {
    const auto& step = lane.steps[i];
    const QRectF bar = barOf(step, rect).intersected(rect);
    // After a pause without the agent its name is said again.
    if (xOf(step.start) - lastRight > 0.5) isNamed = false;
    lastRight = xOf(step.end);
    if (!step.logged || bar.width() <= 0.0) continue; // thinned by another addition: its amount stands before
    const QString amount = look::concentrationText(step.concentration);
    const QString full = agent + QLatin1Char(' ') + amount;
    const bool isFull = !isNamed && roomFor(full) <= bar.width();
    const QString text = isFull ? full : amount;
    // Of narrow steps every second, third ... bears its amount, at its start and over the steps after it.
    double runEnd = bar.right();
    for (std::size_t k = i + 1; k < lane.steps.size() && lane.steps[k].start <= lane.steps[k - 1].end; ++k)
      runEnd = std::min(rect.right(), xOf(lane.steps[k].end));
    if (bar.left() < free || bar.left() + roomFor(text) > runEnd) continue;
    isNamed = isNamed || isFull;
    free = bar.left() + roomFor(text);
    painter.drawText(QRectF(bar.left() + kLabelPad, rect.bottom() - kLowestBar, roomFor(text), kLowestBar),
                     Qt::AlignLeft | Qt::AlignVCenter, text);
  }
}

void BathRibbon::drawMarks(QCPPainter& painter, const QRectF& rect) const {
  const QFontMetricsF metrics(painter.font());
  const auto& course = state_.content->bath;
  for (const auto& mark : course.marks) {
    if (mark.kind == protocol::EventKind::note) continue;
    const double x = xOf(mark.arrival);
    if (x < rect.left() || x > rect.right()) continue;
    painter.setPen(look::thinPen(state_.theme.agent));
    painter.drawLine(QLineF(x, rect.top(), x, rect.bottom()));
    const auto next = std::upper_bound(course.additions.begin(), course.additions.end(), mark.logged);
    const double room =
        (next == course.additions.end() ? rect.right() : std::min(rect.right(), xOf(*next))) - x;
    QString text =
        mark.kind == protocol::EventKind::washout ? QStringLiteral("washout") : QStringLiteral("vehicle");
    if (metrics.horizontalAdvance(text) + 2.0 * kLabelPad > room) continue;
    // Only where no bar of this lane, with its own words, lies.
    const auto& steps = course.lanes.front().steps;
    const bool isOverBar = std::any_of(steps.begin(), steps.end(), [&](const session::BathStep& step) {
      return step.start <= mark.arrival && mark.arrival < step.end;
    });
    if (isOverBar) continue;
    painter.setPen(state_.theme.text_quiet);
    painter.drawText(QRectF(x + kLabelPad, rect.bottom() - kLowestBar, room, kLowestBar),
                     Qt::AlignLeft | Qt::AlignVCenter, text);
  }
}

void BathRibbon::drawPacing(QCPPainter& painter, const QRectF& rect) const {
  const QFontMetricsF metrics(painter.font());
  for (const auto& stretch : state_.content->result->plan.paced) {
    const double left = xOf(stretch.start);
    const QRectF bar =
        QRectF(left, rect.top(), std::max(2.0, xOf(stretch.end) - left), rect.height()).intersected(rect);
    if (bar.isEmpty()) continue;
    fillPattern(painter, bar, Pattern::upright, state_.theme.text_quiet, 4.0);
    painter.setPen(look::thinPen(state_.theme.text_quiet));
    painter.drawRect(bar);
    const QString text = QStringLiteral("paced");
    if (metrics.horizontalAdvance(text) + 4.0 * kLabelPad < bar.width())
      drawPlate(painter, bar, text, state_.theme, state_.theme.text);
  }
}

void BathRibbon::drawGutterText(QCPPainter& painter, const QRectF& lane, const QString& text) const {
  const QRectF label(look::kUnit, lane.top(), lane.left() - 2.0 * look::kUnit, lane.height());
  const QFontMetricsF metrics(painter.font());
  painter.setPen(state_.theme.text);
  painter.drawText(QRectF(label.left(), label.bottom() - kLowestBar, label.width(), kLowestBar),
                   Qt::AlignLeft | Qt::AlignVCenter, metrics.elidedText(text, Qt::ElideRight, label.width()));
}

void BathRibbon::draw(QCPPainter* painter) {
  if (!state_.content || !state_.content->result || !rect_) return;
  const auto& lanes = state_.content->bath.lanes;
  painter->setFont(state_.theme.font(look::TextSize::small));
  for (std::size_t i = 0; i < lanes.size(); ++i)
    drawGutterText(*painter, laneRect(i), QString::fromStdString(lanes[i].agent));
  const auto& paced = state_.content->result->plan.paced;
  if (!paced.empty()) drawGutterText(*painter, pacingRect(), QStringLiteral("pacing"));
  if (lanes.empty() && paced.empty()) drawGutterText(*painter, QRectF(rect_->rect()), QStringLiteral("bath"));
  painter->setOpacity(opacity());
  painter->setClipRect(rect_->rect().adjusted(0, -1, 1, 4));
  for (std::size_t i = 0; i < lanes.size(); ++i) {
    drawLane(*painter, lanes[i], laneRect(i));
    drawLabels(*painter, lanes[i], laneRect(i));
  }
  if (!lanes.empty()) drawMarks(*painter, laneRect(0));
  if (!paced.empty()) drawPacing(*painter, pacingRect());
  if (lanes.empty() && paced.empty()) {
    painter->setPen(state_.theme.text_quiet);
    painter->drawText(QRectF(rect_->rect()).adjusted(kLabelPad, 0, 0, 0), Qt::AlignLeft | Qt::AlignVCenter,
                      QStringLiteral("nothing in the drug log"));
  }
  painter->setOpacity(1.0);
}

} // namespace chronodrome::ui::story
