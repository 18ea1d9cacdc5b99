// Chronodrome, GPL-3.0-or-later.
#include "ui/evidence/trace_drawing.h"

#include <algorithm>
#include <cmath>
#include <vector>

#include <QImage>

#include "ui/look/plot_style.h"

namespace chronodrome::ui::evidence {
namespace {

constexpr double kDotsApart = 4.0; // pixels
constexpr double kDot = 3.0;

/// Values far beyond the edges would overflow the painter.
double clamped(double y) {
  return std::clamp(y, -20000.0, 20000.0);
}

void appendColumns(const RowFrame& row, const recording::TracePiece& piece, QVector<QPointF>& points) {
  double before = row.rect.center().y();
  for (std::size_t i = 0; i < piece.points.size(); ++i) {
    const double x = row.time.xOf(piece.time_of(i));
    const double low = clamped(row.yOf(piece.points[i].min));
    const double high = clamped(row.yOf(piece.points[i].max));
    // The end that is nearer comes first, so that the line between columns is short. A column always has a
    // height of its own: a line from one middle to the next would cut the spike of a single sample short.
    const bool low_first = std::abs(low - before) <= std::abs(high - before);
    points.append(QPointF(x, low_first ? low : high));
    if (std::abs(low - high) >= 0.5) points.append(QPointF(x, low_first ? high : low));
    before = points.back().y();
  }
}

void drawDots(QCPPainter& painter, const QVector<QPointF>& points, const QColor& color) {
  for (const QPointF& point : points)
    painter.fillRect(QRectF(point.x() - kDot / 2.0, point.y() - kDot / 2.0, kDot, kDot), color);
}

/// First and last line of pixels of each column of a row; first > last: nothing.
struct Bands {
  std::vector<int> first, last;
};

/// Columns of a piece as pixels of a row that is `width` x `height` of them. Neighbours touch, as a line
/// would.
void addBands(const RowFrame& row, double scale, int height, const recording::TracePiece& piece,
              Bands& bands) {
  const auto width = static_cast<int>(bands.first.size());
  const auto line = [&](double value) {
    const double y = (row.yOf(value) - row.rect.top()) * scale;
    return static_cast<int>(std::clamp(std::floor(y), -1.0, static_cast<double>(height)));
  };
  int before = -1;
  int last_first = 0, last_last = 0;
  for (std::size_t i = 0; i < piece.points.size(); ++i) {
    const auto x = static_cast<int>(std::floor((row.time.xOf(piece.time_of(i)) - row.rect.left()) * scale));
    if (x < 0 || x >= width) continue;
    int first = line(piece.points[i].max);
    int last = line(piece.points[i].min);
    if (before >= 0 && x > before) {
      if (first > last_last + 1) first = last_last + 1;
      if (last < last_first - 1) last = last_first - 1;
    }
    const auto at = static_cast<std::size_t>(x);
    bands.first[at] = std::min(bands.first[at], first);
    bands.last[at] = std::max(bands.last[at], last);
    before = x, last_first = bands.first[at], last_last = bands.last[at];
  }
}

/// The bands as a picture in the device's pixels, line by line: a column of a line drawing costs a cache line
/// a pixel, which is ten times as much (measured).
void drawBands(QCPPainter& painter, const RowFrame& row, std::span<const recording::TracePiece> pieces,
               const QColor& color) {
  const double scale = painter.device()->devicePixelRatioF();
  const int width = static_cast<int>(std::ceil(row.rect.width() * scale));
  const int height = static_cast<int>(std::ceil(row.rect.height() * scale));
  if (width <= 0 || height <= 0) return;
  Bands bands{std::vector<int>(static_cast<std::size_t>(width), height),
              std::vector<int>(static_cast<std::size_t>(width), -1)};
  for (const auto& piece : pieces)
    addBands(row, scale, height, piece, bands);
  const int top = *std::min_element(bands.first.begin(), bands.first.end());
  const int bottom = std::min(*std::max_element(bands.last.begin(), bands.last.end()), height - 1);
  if (bottom < top) return;
  const int low = std::max(top, 0);
  QImage image(width, bottom - low + 1, QImage::Format_ARGB32_Premultiplied);
  image.setDevicePixelRatio(scale);
  const QRgb ink = color.rgb();
  for (int y = low; y <= bottom; ++y) {
    auto* out = reinterpret_cast<QRgb*>(image.scanLine(y - low));
    for (int x = 0; x < width; ++x) {
      const auto at = static_cast<std::size_t>(x);
      out[x] = bands.first[at] <= y && y <= bands.last[at] ? ink : 0U;
    }
  }
  painter.drawImage(row.rect.topLeft() + QPointF(0.0, low / scale), image);
}

} // namespace

void drawTrace(QCPPainter& painter, const RowFrame& row, std::span<const recording::TracePiece> pieces,
               const QColor& color) {
  const bool is_columns =
      std::any_of(pieces.begin(), pieces.end(), [](const auto& piece) { return !piece.is_samples; });
  if (is_columns && !painter.modes().testFlag(QCPPainter::pmVectorized)) {
    drawBands(painter, row, pieces, color);
    return;
  }
  painter.save();
  painter.setClipRect(row.rect.adjusted(0.0, -1.0, 1.0, 1.0));
  painter.setPen(look::thinPen(color));
  QVector<QPointF> points;
  for (const auto& piece : pieces) {
    points.clear();
    points.reserve(static_cast<qsizetype>(2 * piece.points.size()));
    if (piece.is_samples) {
      for (std::size_t i = 0; i < piece.points.size(); ++i)
        points.append(QPointF(row.time.xOf(piece.time_of(i)), clamped(row.yOf(piece.points[i].min))));
    } else {
      appendColumns(row, piece, points);
    }
    if (points.size() == 1) points.append(points.front() + QPointF(1.0, 0.0));
    painter.drawPolyline(points.constData(), static_cast<int>(points.size()));
    if (piece.is_samples && piece.step / row.time.perPixel() > kDotsApart) drawDots(painter, points, color);
  }
  painter.restore();
}

} // namespace chronodrome::ui::evidence
