// Chronodrome, GPL-3.0-or-later.
#include "ui/story/plateau_bands.h"

#include <algorithm>

#include "ui/look/number_text.h"
#include "ui/look/plot_style.h"
#include "ui/story/story_words.h"

namespace chronodrome::ui::story {
namespace {

constexpr double kOpenLine = 4.0; // height of the open value line

} // namespace

QRectF PlateauBands::bandOf(const response::Response& response) const {
  const double left = xOf(response.window_start);
  return {left, double(rect_->top()), std::max(1.0, xOf(response.window_end) - left),
          double(rect_->height())};
}

bool PlateauBands::isChosen(const response::Response& response) const {
  return state_.chosen && isOfStep(response, *state_.chosen);
}

void PlateauBands::drawGround(QCPPainter& painter, const response::Response& response,
                              const QRectF& band) const {
  painter.fillRect(band, isChosen(response) ? state_.theme.accent_fill : state_.theme.plateau);
  // What cannot be read or is left out is hatched over the row already.
  if (response.status == response::Status::arrested || response.status == response::Status::censored)
    fillPattern(painter, band, Pattern::level, state_.theme.excluded, 5.0);
}

void PlateauBands::drawValue(QCPPainter& painter, const response::Response& response,
                             const QRectF& band) const {
  const bool isSteady = response.status != response::Status::not_steady;
  const auto style = isSteady ? Qt::SolidLine : Qt::DashLine;
  const bool chosen = isChosen(response);
  painter.setPen(chosen ? look::thickPen(state_.theme.accent, style)
                        : look::thinPen(state_.theme.text_quiet, style));
  painter.drawLine(QLineF(band.topLeft(), band.bottomLeft()));
  painter.drawLine(QLineF(band.topRight(), band.bottomRight()));
  if (!response.value) {
    drawWord(painter, response, band);
    return;
  }
  const double y = rect_->axis(QCPAxis::atLeft)->coordToPixel(*response.value);
  const QColor ink = chosen ? state_.theme.accent : state_.theme.data;
  if (isSteady) {
    painter.fillRect(QRectF(band.left(), y - 1.0, band.width(), look::kThick), ink);
  } else {
    const QRectF open(band.left(), y - 0.5 * kOpenLine, band.width(), kOpenLine);
    painter.fillRect(open, state_.theme.surface);
    painter.setPen(look::thinPen(ink));
    painter.drawRect(open);
  }
}

void PlateauBands::drawWord(QCPPainter& painter, const response::Response& response,
                            const QRectF& band) const {
  const QString word = bandWord(response.status);
  painter.setFont(state_.theme.font(look::TextSize::small));
  const QFontMetricsF metrics(painter.font());
  const double length = metrics.horizontalAdvance(word) + 6.0;
  if (length <= band.width()) {
    drawPlate(painter, band, word, state_.theme, state_.theme.text);
  } else if (length <= band.height() && metrics.height() <= band.width() + 2.0) {
    painter.save();
    painter.translate(band.center());
    painter.rotate(-90.0);
    drawPlate(painter, QRectF(-0.5 * band.height(), -0.5 * band.width(), band.height(), band.width()), word,
              state_.theme, state_.theme.text);
    painter.restore();
  }
}

void PlateauBands::draw(QCPPainter* painter) {
  if (!state_.bands || !rect_) return;
  painter->setOpacity(opacity());
  for (const auto& response : state_.bands->responses.rows) {
    if (response.measure != measure_ || response.window_end <= response.window_start) continue;
    const QRectF band = bandOf(response);
    if (band.right() < rect_->left() || band.left() > rect_->right()) continue;
    if (part_ == Part::ground)
      drawGround(*painter, response, band);
    else
      drawValue(*painter, response, band);
  }
  painter->setOpacity(1.0);
}

} // namespace chronodrome::ui::story
