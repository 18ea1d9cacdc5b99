// Chronodrome, GPL-3.0-or-later.
#pragma once

#include "ui/story/figure_part.h"

namespace chronodrome::ui::story {

/// Hatching over what cannot be read (crossed) or is left out (falling), with a word where it fits.
class LostStretches : public FigurePart {
public:
  /// `trend`: whose stretches; nothing: what is lost of all channels.
  LostStretches(QCustomPlot& plot, const FigureState& state, QCPAxisRect* rect,
                std::optional<std::size_t> trend)
      : FigurePart(plot, kValueLayer, state, rect), trend_(trend) {}

  /// The stretch at a time, or null.
  [[nodiscard]] const session::LostStretch* at(Seconds time) const;

protected:
  void draw(QCPPainter* painter) override;

private:
  [[nodiscard]] const std::vector<session::LostStretch>* stretches() const;

  std::optional<std::size_t> trend_;
};

} // namespace chronodrome::ui::story
