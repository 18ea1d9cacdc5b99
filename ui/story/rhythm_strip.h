// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <vector>

#include "session/rhythm_blocks.h"
#include "ui/story/figure_part.h"

namespace chronodrome::ui::story {

/// Episodes of rhythm as blocks: regular is a quiet line, everything else a pattern with its words.
class RhythmStrip : public FigurePart {
public:
  RhythmStrip(QCustomPlot& plot, const FigureState& state, QCPAxisRect* rect)
      : FigurePart(plot, kDataLayer, state, rect) {}

  /// The block at a place, or null.
  [[nodiscard]] const session::RhythmBlock* blockAt(double x);

protected:
  [[nodiscard]] QRect clipRect() const override;
  void draw(QCPPainter* painter) override;

private:
  void renew();
  [[nodiscard]] QRectF rectOf(const session::RhythmBlock& block) const;
  void drawBlock(QCPPainter& painter, const session::RhythmBlock& block) const;
  void drawWords(QCPPainter& painter, const session::RhythmBlock& block, const QRectF& area) const;
  [[nodiscard]] QColor inkOf(const session::RhythmBlock& block) const;

  const StoryContent* of_ = nullptr; ///< what the blocks were made of
  Seconds start_, end_;
  int width_ = 0;
  std::vector<session::RhythmBlock> blocks_;
};

} // namespace chronodrome::ui::story
