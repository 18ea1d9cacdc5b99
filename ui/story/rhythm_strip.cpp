// Chronodrome, GPL-3.0-or-later.
#include "ui/story/rhythm_strip.h"

#include <algorithm>

#include "ui/look/plot_style.h"
#include "ui/story/story_words.h"

namespace chronodrome::ui::story {
namespace {

constexpr std::size_t kNarrow = 12; // pixels below which a block has no room for a pattern of its own
constexpr double kLeastWidth = 3.0; // so that a pause is seen

} // namespace

QRect RhythmStrip::clipRect() const {
  // The axis below has its unit in the gutter, so the strip draws down to the edge.
  return rect_ ? QRect(0, rect_->rect().top() - 1, rect_->rect().right() + 2, rect_->rect().height() + 40)
               : QRect();
}

void RhythmStrip::renew() {
  if (!state_.content || !state_.content->result || !rect_) {
    blocks_.clear();
    of_ = nullptr;
    return;
  }
  if (of_ == state_.content.get() && start_ == viewStart() && end_ == viewEnd() && width_ == rect_->width())
    return;
  of_ = state_.content.get();
  start_ = viewStart();
  end_ = viewEnd();
  width_ = rect_->width();
  blocks_ = session::rhythm_blocks(of_->result->rhythm, start_, end_,
                                   static_cast<std::size_t>(std::max(1, width_)), kNarrow);
}

const session::RhythmBlock* RhythmStrip::blockAt(double x) {
  renew();
  const session::RhythmBlock* found = nullptr;
  for (const auto& block : blocks_) {
    const QRectF area = rectOf(block);
    const bool isOver = x >= area.left() && x <= area.right();
    // A short block is drawn over its neighbours.
    if (isOver && (found == nullptr || session::weight_of(found->kind) == 0)) found = &block;
  }
  return found;
}

QRectF RhythmStrip::rectOf(const session::RhythmBlock& block) const {
  const double left = rect_->left() + double(block.first);
  return {left, double(rect_->top()), std::max(kLeastWidth, double(block.end - block.first)),
          double(rect_->height())};
}

QColor RhythmStrip::inkOf(const session::RhythmBlock& block) const {
  switch (lookOf(block.kind).tone) {
  case Tone::caution:
    return state_.theme.caution;
  case Tone::fault:
    return state_.theme.fault;
  case Tone::quiet:
    break;
  }
  return state_.theme.text_quiet;
}

void RhythmStrip::drawWords(QCPPainter& painter, const session::RhythmBlock& block,
                            const QRectF& area) const {
  const QFontMetricsF metrics(painter.font());
  const RhythmLook look = lookOf(block.kind);
  for (const QString& words : blockWords(block)) {
    if (metrics.horizontalAdvance(words) + 6.0 > area.width()) continue;
    if (look.isInverse) {
      painter.setPen(state_.theme.surface);
      painter.drawText(area, Qt::AlignCenter, words);
    } else if (look.pattern == Pattern::none) {
      // On the quiet line: said once, at its left end.
      drawPlate(painter,
                QRectF(area.left() + 4.0, area.top(), metrics.horizontalAdvance(words) + 8.0, area.height()),
                words, state_.theme, state_.theme.text_quiet);
    } else {
      drawPlate(painter, area, words, state_.theme, state_.theme.text);
    }
    return;
  }
}

void RhythmStrip::drawBlock(QCPPainter& painter, const session::RhythmBlock& block) const {
  const QRectF area = rectOf(block);
  const RhythmLook look = lookOf(block.kind);
  const QColor ink = inkOf(block);
  if (look.pattern == Pattern::none) {
    painter.setPen(look::thinPen(state_.theme.line));
    painter.drawLine(QLineF(area.left(), area.center().y(), area.right(), area.center().y()));
  } else {
    painter.fillRect(area, state_.theme.surface);
    fillPattern(painter, area, look.pattern, ink, look.spacing);
    painter.setPen(look::thinPen(ink));
    if (look.pattern != Pattern::solid) painter.drawRect(area.adjusted(0.0, 0.0, -1.0, -1.0));
  }
  drawWords(painter, block, area);
}

void RhythmStrip::draw(QCPPainter* painter) {
  if (!state_.content || !state_.content->result || !rect_) return;
  renew();
  painter->setFont(state_.theme.font(look::TextSize::small));
  const double gutter = rect_->left() - 2.0 * look::kUnit;
  painter->setPen(state_.theme.text);
  painter->drawText(QRectF(look::kUnit, rect_->top(), gutter, rect_->height()),
                    Qt::AlignLeft | Qt::AlignVCenter, QStringLiteral("rhythm"));
  painter->setPen(state_.theme.text_quiet);
  const bool isLong = state_.content->end >= Seconds(3600.0);
  painter->drawText(QRectF(look::kUnit, rect_->bottom() + 4.0, gutter, 18.0),
                    Qt::AlignLeft | Qt::AlignVCenter,
                    isLong ? QStringLiteral("time, h:min:s") : QStringLiteral("time, min:s"));
  painter->setClipRect(rect_->rect().adjusted(0, 0, 1, 1));
  painter->setOpacity(opacity());
  for (int pass = 0; pass < 2; ++pass) {
    for (const auto& block : blocks_) {
      if ((session::weight_of(block.kind) > 0) == (pass == 1)) drawBlock(*painter, block);
    }
  }
  painter->setOpacity(1.0);
}

} // namespace chronodrome::ui::story
