// Chronodrome, GPL-3.0-or-later.
#include "ui/story/lost_stretches.h"

#include <algorithm>

#include "ui/look/plot_style.h"
#include "ui/story/pattern.h"

namespace chronodrome::ui::story {

const std::vector<session::LostStretch>* LostStretches::stretches() const {
  if (!state_.content) return nullptr;
  if (!trend_) return &state_.content->lost;
  return *trend_ < state_.content->trends.size() ? &state_.content->trends[*trend_].lost : nullptr;
}

const session::LostStretch* LostStretches::at(Seconds time) const {
  const auto* all = stretches();
  if (all == nullptr) return nullptr;
  for (const auto& stretch : *all) {
    if (stretch.span.start <= time && time < stretch.span.end) return &stretch;
  }
  return nullptr;
}

void LostStretches::draw(QCPPainter* painter) {
  const auto* all = stretches();
  if (all == nullptr || !rect_) return;
  painter->setFont(state_.theme.font(look::TextSize::small));
  const QFontMetricsF metrics(painter->font());
  painter->setOpacity(opacity());
  double drawnTo[2] = {-1e9, -1e9}; // of each kind: thousands of short stretches share a few pixels
  for (const auto& stretch : *all) {
    const double left = std::max(double(rect_->left()), xOf(stretch.span.start));
    const double right = std::min(double(rect_->right() + 1), std::max(left + 2.0, xOf(stretch.span.end)));
    double& done = drawnTo[stretch.is_excluded ? 1 : 0];
    if (right <= left || right <= done) continue;
    done = right;
    const QRectF area(left, rect_->top(), right - left, rect_->height());
    fillPattern(*painter, area, stretch.is_excluded ? Pattern::falling : Pattern::crossed,
                state_.theme.excluded);
    painter->setPen(look::thinPen(state_.theme.excluded));
    painter->drawLine(QLineF(area.topLeft(), area.bottomLeft()));
    painter->drawLine(QLineF(area.topRight(), area.bottomRight()));
    const QString word = stretch.is_excluded       ? QStringLiteral("left out")
                         : stretch.reason == "gap" ? QStringLiteral("gap")
                                                   : QStringLiteral("unreadable");
    if (trend_ && metrics.horizontalAdvance(word) + 12.0 < area.width())
      drawPlate(*painter, area, word, state_.theme, state_.theme.text);
  }
  painter->setOpacity(1.0);
}

} // namespace chronodrome::ui::story
