// Chronodrome, GPL-3.0-or-later.
#include "ui/answer/answer_figure.h"

#include <cmath>

#include <QAccessible>
#include <QHelpEvent>
#include <QKeyEvent>
#include <QToolTip>

#include "ui/answer/words.h"

namespace chronodrome::ui::answer {

namespace {
constexpr double kReach = 10.0; // pixels around a point that belong to it
}

AnswerFigure::AnswerFigure(QWidget* parent) : QCustomPlot(parent), panel_(*this) {
  setObjectName(QStringLiteral("curveAnswerFigure"));
  setAccessibleName(tr("Concentration-response curve"));
  setFocusPolicy(Qt::StrongFocus);
  setMouseTracking(true);
  setMinimumSize(320, 240);
  setSizePolicy(QSizePolicy::Expanding, QSizePolicy::Expanding);
}

void AnswerFigure::setView(const session::CurveView& view, const look::Theme& theme, const QColor& color) {
  std::optional<Molar> before;
  if (chosen_ && panel_.view()) before = panel_.view()->chosen.points[*chosen_].concentration;
  panel_.show(view, theme, color);
  panel_.arrange(size());
  chosen_.reset();
  setChosen(before);
  tell();
}

void AnswerFigure::clearView() {
  chosen_.reset();
  panel_.clear();
  replot(QCustomPlot::rpQueuedReplot);
}

void AnswerFigure::setChosen(std::optional<Molar> concentration) {
  const auto& view = panel_.view();
  // Of repeated concentrations the one that is chosen stays.
  const bool stays = view && chosen_ && concentration && *chosen_ < view->chosen.points.size() &&
                     view->chosen.points[*chosen_].concentration == *concentration;
  if (!stays) {
    chosen_.reset();
    for (std::size_t i = 0; view && concentration && i < view->chosen.points.size() && !chosen_; ++i) {
      if (view->chosen.points[i].concentration == *concentration) chosen_ = i;
    }
  }
  panel_.layer().setChosen(chosen_);
  replot(QCustomPlot::rpQueuedReplot);
}

QPointF AnswerFigure::pixelOf(std::size_t point) const {
  return panel_.layer().centreOf(panel_.view()->chosen.points.at(point));
}

std::optional<std::size_t> AnswerFigure::pointAt(const QPointF& pixel) const {
  std::optional<std::size_t> nearest;
  double least = kReach;
  for (std::size_t i = 0; panel_.view() && i < panel_.view()->chosen.points.size(); ++i) {
    const QPointF off = pixelOf(i) - pixel;
    const double distance = std::hypot(off.x(), off.y());
    if (distance > least) continue;
    least = distance;
    nearest = i;
  }
  return nearest;
}

void AnswerFigure::choose(std::size_t point, bool jumps) {
  chosen_ = point;
  panel_.layer().setChosen(chosen_);
  replot(QCustomPlot::rpQueuedReplot);
  tell();
  Q_EMIT pointChosen(point, jumps);
}

void AnswerFigure::tell() {
  if (!panel_.view()) return;
  QString words = answerText(*panel_.view());
  if (chosen_) words = pointText(*panel_.view(), panel_.view()->chosen.points[*chosen_]);
  setAccessibleDescription(words);
}

void AnswerFigure::move(int steps) {
  if (!panel_.view() || panel_.view()->chosen.points.empty()) return;
  const int last = static_cast<int>(panel_.view()->chosen.points.size()) - 1;
  const int from = chosen_ ? static_cast<int>(*chosen_) : (steps > 0 ? -1 : last + 1);
  choose(static_cast<std::size_t>(std::clamp(from + steps, 0, last)), false);
}

bool AnswerFigure::event(QEvent* event) {
  if (event->type() != QEvent::ToolTip) return QCustomPlot::event(event);
  const auto* help = static_cast<QHelpEvent*>(event);
  const auto point = pointAt(help->pos());
  if (point) {
    QToolTip::showText(help->globalPos(), pointText(*panel_.view(), panel_.view()->chosen.points[*point]),
                       this);
  } else {
    QToolTip::hideText();
  }
  return true;
}

void AnswerFigure::mousePressEvent(QMouseEvent* event) {
  setFocus(Qt::MouseFocusReason);
  const auto point = pointAt(event->position());
  if (event->button() == Qt::LeftButton && point) choose(*point, true);
}

void AnswerFigure::mouseMoveEvent(QMouseEvent* event) {
  setCursor(pointAt(event->position()) ? Qt::PointingHandCursor : Qt::ArrowCursor);
}

void AnswerFigure::keyPressEvent(QKeyEvent* event) {
  constexpr int all = 1 << 16;
  switch (event->key()) {
  case Qt::Key_Left:
    return move(-1);
  case Qt::Key_Right:
    return move(1);
  case Qt::Key_Home:
    return move(-all);
  case Qt::Key_End:
    return move(all);
  case Qt::Key_Return:
  case Qt::Key_Enter:
    if (chosen_) return choose(*chosen_, true);
    break;
  default:
    break;
  }
  QCustomPlot::keyPressEvent(event);
}

void AnswerFigure::contextMenuEvent(QContextMenuEvent* event) {
  const bool by_key = event->reason() == QContextMenuEvent::Keyboard;
  const auto point = by_key ? chosen_ : pointAt(event->pos());
  if (!point) return;
  Q_EMIT menuRequested(*point, by_key ? mapToGlobal(pixelOf(*point).toPoint()) : event->globalPos());
}

void AnswerFigure::resizeEvent(QResizeEvent* event) {
  panel_.arrange(event->size());
  QCustomPlot::resizeEvent(event);
}

void AnswerFigure::focusInEvent(QFocusEvent* event) {
  panel_.layer().setFramed(true);
  replot(QCustomPlot::rpQueuedReplot);
  QCustomPlot::focusInEvent(event);
}

void AnswerFigure::focusOutEvent(QFocusEvent* event) {
  panel_.layer().setFramed(false);
  replot(QCustomPlot::rpQueuedReplot);
  QCustomPlot::focusOutEvent(event);
}

} // namespace chronodrome::ui::answer
