// Chronodrome, GPL-3.0-or-later.
// How the figure draws its layers, from the ground up.
#include "ui/evidence/evidence_figure.h"

#include <algorithm>
#include <cmath>

#include "ui/evidence/delay_drawing.h"
#include "ui/evidence/mark_drawing.h"
#include "ui/evidence/trace_drawing.h"
#include "ui/evidence/words.h"
#include "ui/look/number_text.h"
#include "ui/look/plot_style.h"

namespace chronodrome::ui::evidence {
namespace {

constexpr double kRawShare = 0.32;   // of the data colour, for the raw signal beneath the filtered one
constexpr double kStaleShare = 0.45; // of the role's colour, for marks that are older than the edits

/// A text of words that is too long for one line, cut between two of them.
QStringList inTwoLines(const QString& text, const QFontMetricsF& metrics, double width) {
  if (metrics.horizontalAdvance(text) <= width) return {text};
  for (qsizetype at = text.lastIndexOf(QLatin1Char(' ')); at > 0;
       at = text.lastIndexOf(QLatin1Char(' '), at - 1)) {
    if (metrics.horizontalAdvance(text.left(at)) <= width) return {text.left(at), text.mid(at + 1)};
  }
  return {text};
}

} // namespace

QRectF EvidenceFigure::bodyRect() const {
  const QRectF first(rows_.front().rect->rect());
  const QRectF last(rows_.back().rect->rect());
  return {first.topLeft(), last.bottomRight()};
}

bool EvidenceFigure::isChosen(const session::PlateauWindow& window) const {
  return chosen_concentration_ && window.curve == chosen_curve_ &&
         window.concentration == *chosen_concentration_;
}

void EvidenceFigure::drawGround(QCPPainter& painter) {
  const TimeFrame time = timeFrame();
  const QRectF body = bodyRect();
  painter.setClipRect(body);
  for (const auto& window : scene_.plateaus) {
    if (window.span.end <= start_ || window.span.start >= end_) continue;
    const double left = std::max(body.left(), time.xOf(window.span.start));
    const double right = std::min(body.right(), std::max(time.xOf(window.span.end), left + 1.0));
    painter.fillRect(QRectF(left, body.top(), right - left, body.height()), theme_->plateau);
  }
  for (const auto& window : scene_.plateaus) {
    if (!isChosen(window)) continue;
    painter.setPen(look::thickPen(theme_->accent));
    for (const Seconds edge : {window.span.start, window.span.end}) {
      const double x = time.xOf(edge);
      painter.drawLine(QPointF(x, body.top()), QPointF(x, body.bottom()));
    }
  }
  for (int row = 0; row < scene_.rows(); ++row) {
    drawLost(painter, row);
    drawMarkLines(painter, rowFrame(row), scene_.marks(row), markColor(row), *theme_);
  }
}

QColor EvidenceFigure::markColor(int row) const {
  const QColor color = theme_->of(scene_.channel(row).role);
  return scene_.is_stale ? look::blended(color, theme_->surface, kStaleShare) : color;
}

void EvidenceFigure::drawLost(QCPPainter& painter, int row) {
  const RowFrame frame = rowFrame(row);
  const QColor hatch = look::blended(theme_->excluded, theme_->surface, 0.55);
  double last = -1e9;
  for (const auto& lost : scene_.lost[static_cast<std::size_t>(row)]) {
    if (lost.span.end <= start_ || lost.span.start >= end_) continue;
    const double left = std::max(frame.rect.left(), frame.time.xOf(lost.span.start));
    const double right = std::min(frame.rect.right(), frame.time.xOf(lost.span.end));
    if (right - left < 3.0) {
      // Too narrow to hatch: a tick at the foot of the row, once a pixel.
      if (left - last < 1.0) continue;
      last = left;
      painter.fillRect(QRectF(std::round(left), frame.rect.bottom() - 5.0, 2.0, 6.0), theme_->excluded);
      continue;
    }
    drawHatching(painter, QRectF(left, frame.rect.top(), right - left, frame.rect.height()), hatch);
  }
}

void EvidenceFigure::drawTraces(QCPPainter& painter) {
  const QColor faint = look::blended(theme_->data, theme_->surface, kRawShare);
  for (int row = 0; row < scene_.rows(); ++row) {
    const RowFrame frame = rowFrame(row);
    const bool is_over = !at(row).filtered.empty();
    drawTrace(painter, frame, at(row).raw, is_over ? faint : theme_->data);
    if (is_over) drawTrace(painter, frame, at(row).filtered, theme_->data);
  }
}

void EvidenceFigure::drawMarksAndDelays(QCPPainter& painter) {
  for (int row = 0; row < scene_.rows(); ++row) {
    const RowFrame frame = rowFrame(row);
    painter.setClipRect(frame.rect.adjusted(-kGlyph, -kGlyph, kGlyph, 0.0));
    drawMarks(painter, frame, scene_.marks(row), markColor(row), *theme_);
    for (const auto& pending : scene_.pending) {
      if (pending.row == row) drawPending(painter, frame, pending, theme_->of(scene_.channel(row).role));
    }
  }
  painter.setClipping(false);
  std::vector<StripRoom> rooms(rows_.size());
  for (std::size_t p = 0; p < scene_.pathways.size(); ++p) {
    const auto [from, to] = scene_.pathways[p];
    if (from < 0 || to < 0 || from == to) continue;
    const int upper = std::min(from, to);
    const QRectF upper_rect = rowFrame(upper).rect;
    const QRectF from_rect = rowFrame(from).rect;
    const QRectF to_rect = rowFrame(to).rect;
    DelayPlace place;
    place.time = timeFrame();
    place.from_edge = from < to ? from_rect.bottom() + 1.0 : from_rect.top();
    place.to_edge = from < to ? to_rect.top() : to_rect.bottom() + 1.0;
    place.strip_top = upper_rect.bottom() + 1.0;
    place.strip_height = rowFrame(upper + 1).rect.top() - place.strip_top;
    drawDelays(painter, place, scene_.result->pathways[p], *theme_, rooms[static_cast<std::size_t>(upper)]);
  }
}

void EvidenceFigure::drawLabels(QCPPainter& painter) {
  painter.setFont(theme_->font(look::TextSize::small));
  TextRoom room;
  drawEvents(painter, room);
  drawPlateauTexts(painter, room);
  for (int row = 0; row < scene_.rows(); ++row) {
    const RowFrame frame = rowFrame(row);
    for (const auto& lost : scene_.lost[static_cast<std::size_t>(row)]) {
      if (lost.span.end <= start_ || lost.span.start >= end_) continue;
      const double left = std::max(frame.rect.left(), frame.time.xOf(lost.span.start));
      const double right = std::min(frame.rect.right(), frame.time.xOf(lost.span.end));
      const QRectF foot(left, frame.rect.bottom() - 20.0, right - left, 18.0);
      const QString text = lostText(lost);
      if (!drawChip(painter, foot, text, theme_->text_quiet, theme_->surface))
        drawChip(painter, foot, text.section(QLatin1Char(':'), 0, 0), theme_->text_quiet, theme_->surface);
    }
    drawRowLabel(painter, row);
  }
  drawFoot(painter);
}

void EvidenceFigure::drawRowLabel(QCPPainter& painter, int row) {
  const QRectF rect = rowFrame(row).rect;
  const recording::Channel& channel = scene_.channel(row);
  painter.fillRect(QRectF(look::kUnit, rect.top(), 3.0, std::min(rect.height(), 32.0)),
                   theme_->of(channel.role));
  const double left = 2.0 * look::kUnit;
  const double width = rect.left() - left - 34.0; // what the axis numbers take
  double y = rect.top();
  const auto line = [&](const QString& text, const QFont& font, const QColor& ink) {
    const QFontMetricsF metrics(font);
    if (y + metrics.height() > rect.bottom() + 4.0) return;
    painter.setFont(font);
    painter.setPen(ink);
    painter.drawText(QRectF(left, y, width, metrics.height()), Qt::AlignLeft | Qt::AlignTop,
                     metrics.elidedText(text, Qt::ElideRight, width));
    y += metrics.height();
  };
  const QFont bold = theme_->font(look::TextSize::normal, true);
  for (const QString& part : inTwoLines(QString::fromStdString(channel.label), QFontMetricsF(bold), width))
    line(part, bold, theme_->text);
  const QFont quiet = theme_->font(look::TextSize::small);
  // Where the row is low the unit comes before the role: without it the axis says nothing.
  QStringList parts = channelText(channel).split(QStringLiteral(", "));
  if (parts.size() > 1 && y + 2.0 * QFontMetricsF(quiet).height() > rect.bottom() + 4.0)
    parts.swapItemsAt(0, 1);
  for (const QString& part : parts)
    line(part, quiet, theme_->text_quiet);
  if (at(row).is_locked) line(QStringLiteral("scale locked"), quiet, theme_->text_quiet);
}

void EvidenceFigure::drawEvents(QCPPainter& painter, TextRoom& room) {
  const TimeFrame time = timeFrame();
  const QRectF body = bodyRect();
  const QFontMetricsF metrics(painter.font());
  const auto& events = scene_.bath.events();
  for (std::size_t i = 0; i < events.size(); ++i) {
    const auto& event = events[i];
    if (event.time < start_ || event.time > end_) continue;
    const double x = std::round(time.xOf(event.time));
    painter.setPen(look::thinPen(theme_->agent));
    painter.drawLine(QPointF(x, body.top() - 18.0), QPointF(x, body.bottom()));
    double next = body.right();
    for (std::size_t k = i + 1; k < events.size() && events[k].time <= end_; ++k) {
      if (events[k].time > event.time) {
        next = std::min(next, time.xOf(events[k].time));
        break;
      }
    }
    const auto write = [&](double left, const QString& text) {
      const double width = metrics.horizontalAdvance(text);
      if (left < body.left() || left + width > next - 2.0 || !room.take(left - 4.0, left + width))
        return false;
      painter.setPen(theme_->text);
      painter.drawText(QRectF(left, body.top() - 20.0, width + 1.0, 14.0), Qt::AlignLeft | Qt::AlignVCenter,
                       text);
      return true;
    };
    if (write(x + 4.0, eventText(event)) || !write(x + 4.0, shortEventText(event))) continue;
    // The concentration alone: the agent stands once, before its first addition.
    const bool is_new =
        i == 0 || protocol::agent_key(events[i - 1].agent) != protocol::agent_key(event.agent);
    const QString agent = QString::fromStdString(event.agent);
    if (is_new) write(x - 6.0 - metrics.horizontalAdvance(agent), agent);
  }
}

void EvidenceFigure::drawPlateauTexts(QCPPainter& painter, TextRoom& room) {
  const TimeFrame time = timeFrame();
  const QRectF body = bodyRect();
  const QFontMetricsF metrics(painter.font());
  QString before;
  for (const auto& window : scene_.plateaus) {
    if (window.span.end <= start_ || window.span.start >= end_) continue;
    const double left = std::max(body.left(), time.xOf(window.span.start));
    const double right = std::min(body.right(), time.xOf(window.span.end));
    const QString text = plateauText(window);
    const double width = metrics.horizontalAdvance(text);
    // Windows of several measures overlap: their step is named once.
    if (text == before || width + 4.0 > right - left || !room.take(left, left + width + 4.0)) continue;
    before = text;
    painter.setPen(isChosen(window) ? theme_->accent : theme_->text_quiet);
    painter.drawText(QRectF(left + 2.0, body.top() - 20.0, width + 1.0, 14.0),
                     Qt::AlignLeft | Qt::AlignVCenter, text);
  }
}

void EvidenceFigure::drawFoot(QCPPainter& painter) {
  const QRectF body = bodyRect();
  painter.setFont(theme_->font(look::TextSize::small));
  painter.setPen(theme_->text_quiet);
  const QRectF line(look::kUnit, body.bottom() + 20.0, body.right() - look::kUnit, 16.0);
  painter.drawText(line, Qt::AlignLeft | Qt::AlignVCenter, acrossText(end_ - start_));
  const QString unit =
      end_ >= Seconds(3600.0) ? QStringLiteral("time, h:min:s") : QStringLiteral("time, min:s");
  painter.drawText(QRectF(body.left(), line.top(), body.width(), line.height()), Qt::AlignCenter, unit);
  QStringList right;
  for (const QString& text :
       {scene_.is_stale ? QStringLiteral("marks are being found again") : QString(), note_, mode_}) {
    if (!text.isEmpty()) right << text;
  }
  painter.drawText(line, Qt::AlignRight | Qt::AlignVCenter, right.join(QStringLiteral("  ·  ")));
}

} // namespace chronodrome::ui::evidence
