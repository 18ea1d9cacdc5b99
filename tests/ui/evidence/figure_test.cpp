// Chronodrome, GPL-3.0-or-later.
// What is seen: read from painted pixels.
#include "ui/evidence/evidence_figure.h"

#include <QBuffer>
#include <QImage>
#include <QPdfWriter>
#include <catch2/catch.hpp>

#include "ui/evidence/made_scene.h"
#include "ui/evidence/paint.h"
#include "ui/evidence/sample_session.h"

using namespace chronodrome;
using namespace chronodrome::ui;
using Catch::Matchers::WithinAbs;
using test_support::result_of;

namespace {

const look::Theme& light() {
  return look::Theme::of(look::Mode::light);
}

/// A figure of 900 x 300 without a hand over it.
struct Drawn {
  explicit Drawn(std::shared_ptr<const session::SessionResult> result, QSize size = {900, 300}) {
    figure.resize(size);
    figure.setScene(evidence::sceneOf(std::move(result)));
    evidence::Overlay none;
    none.active_row = -1;
    figure.setOverlay(none);
  }
  QImage image(double start, double end) {
    figure.setView(Seconds(start), Seconds(end));
    figure.replot();
    return figure.grab().toImage();
  }
  evidence::EvidenceFigure figure;
};

/// Rows of pixels from `top` down in which column x shows `color`.
int heightOf(const QImage& image, int x, const QRectF& rect, const QColor& color) {
  int count = 0;
  for (int y = static_cast<int>(rect.top()); y <= static_cast<int>(rect.bottom()); ++y) {
    if (image.pixelColor(x, y) == color) ++count;
  }
  return count;
}

} // namespace

TEST_CASE("a spike of one sample is seen at every zoom, as high as it is", "[ui]") {
  std::vector<double> samples(3600 * 500, 0.0);
  samples[1234567] = 5.0;
  const double time = 1234567 / 500.0;
  Drawn drawn(result_of({samples}, 500.0));
  for (const double width : {3600.0, 1200.0, 300.0, 30.0, 5.0, 1.0, 0.2, 0.05}) {
    const double start = std::max(0.0, time - 0.4 * width);
    const QImage image = drawn.image(start, start + width);
    const auto frame = drawn.figure.rowFrame(0);
    const int x = static_cast<int>(std::lround(frame.time.xOf(Seconds(time))));
    const double wanted = frame.yOf(0.0) - frame.yOf(5.0);
    int seen = 0;
    // At close zoom the spike is a triangle: its rows are counted wherever they are.
    for (int y = static_cast<int>(frame.rect.top()); y < static_cast<int>(frame.yOf(0.0)); ++y) {
      for (int dx = -60; dx <= 60; ++dx) {
        const int at = x + dx;
        if (at < frame.rect.left() || at > frame.rect.right() || image.pixelColor(at, y) != light().data)
          continue;
        ++seen;
        break;
      }
    }
    INFO(width << " s across");
    CHECK_THAT(static_cast<double>(seen), WithinAbs(wanted, 3.0));
    // Beside it: the line, or a dot of three pixels.
    CHECK(heightOf(image, x > frame.rect.left() + 200 ? x - 100 : x + 100, frame.rect, light().data) <= 3);
  }
}

TEST_CASE("a gap is drawn as a gap, hatched and named", "[ui]") {
  std::vector<double> samples(20000);
  for (std::size_t i = 0; i < samples.size(); ++i)
    samples[i] = i % 2 == 0 ? 1.0 : -1.0;
  Drawn drawn(result_of({samples}, 1000.0, {{0, 8000, Seconds(0.0)}, {8000, 12000, Seconds(12.0)}}));
  const QImage image = drawn.image(0.0, 24.0);
  const auto frame = drawn.figure.rowFrame(0);
  const auto column = [&](double time) {
    return heightOf(image, static_cast<int>(std::lround(frame.time.xOf(Seconds(time)))), frame.rect,
                    light().data);
  };
  CHECK(column(4.0) > frame.rect.height() * 0.6);
  CHECK(column(20.0) > frame.rect.height() * 0.6);
  for (double time = 8.1; time < 11.95; time += 0.05)
    REQUIRE(column(time) == 0);
  int hatched = 0;
  const QColor hatch = look::blended(light().excluded, light().surface, 0.55);
  for (int x = static_cast<int>(frame.time.xOf(Seconds(8.2))); x < frame.time.xOf(Seconds(11.8)); ++x)
    hatched += heightOf(image, x, frame.rect, hatch);
  CHECK(hatched > 1000);
}

TEST_CASE("samples that are far apart stand as dots", "[ui]") {
  std::vector<double> samples(1000, 0.0);
  samples[500] = 1.0;
  Drawn drawn(result_of({samples}, 1000.0));
  const auto thickness = [&](double start, double end) {
    const QImage image = drawn.image(start, end);
    const auto frame = drawn.figure.rowFrame(0);
    return heightOf(image, static_cast<int>(std::lround(frame.time.xOf(Seconds(0.510)))),
                    frame.rect.adjusted(0, frame.rect.height() / 2, 0, 0), light().data);
  };
  CHECK(thickness(0.4, 0.7) <= 2);
  CHECK(thickness(0.49, 0.53) == 3);
}

TEST_CASE("the origin of a mark is told by its shape", "[ui]") {
  auto result = result_of({std::vector<double>(10000, 0.0)}, 1000.0);
  using activation::Origin;
  for (const auto origin : {Origin::detected, Origin::added, Origin::moved}) {
    activation::Activation mark;
    mark.time = Seconds(2.0 + 2.0 * static_cast<double>(result->activations[0].marks.size()));
    mark.origin = origin;
    result->activations[0].marks.push_back(mark);
  }
  Drawn drawn(result);
  const QImage image = drawn.image(0.0, 10.0);
  const auto frame = drawn.figure.rowFrame(0);
  const QColor color = light().of(recording::Role::atrial);
  // Full pixels of the shape in its first, middle and last line.
  const auto widths = [&](double time) {
    const int x = static_cast<int>(std::lround(frame.time.xOf(Seconds(time))));
    std::vector<int> found;
    for (const int y : {1, 4, 6}) {
      int count = 0;
      for (int dx = -6; dx <= 6; ++dx) {
        if (image.pixelColor(x + dx, static_cast<int>(frame.rect.top()) + y) == color) ++count;
      }
      found.push_back(count);
    }
    return found;
  };
  const auto triangle = widths(2.0), circle = widths(4.0), diamond = widths(6.0);
  CHECK(triangle[0] > triangle[1]);
  CHECK(triangle[1] > triangle[2]);
  CHECK(circle[1] > circle[0]);
  CHECK(diamond[1] > diamond[0]);
  CHECK(circle[0] > diamond[0]);
}

TEST_CASE("the axis keeps its limits while the signal stays within, and a locked one always", "[ui]") {
  std::vector<double> samples(20000);
  for (std::size_t i = 0; i < samples.size(); ++i)
    samples[i] = (i < 10000 ? 1.0 : i < 15000 ? 0.7 : 0.05) * (i % 2 == 0 ? 1.0 : -1.0);
  Drawn drawn(result_of({samples}, 1000.0));
  drawn.image(0.0, 4.0);
  const auto first = drawn.figure.rowFrame(0).limits;
  CHECK(first.max >= 1.0);
  drawn.image(11.0, 14.0);
  CHECK(drawn.figure.rowFrame(0).limits.max == first.max);
  drawn.image(16.0, 19.0);
  CHECK(drawn.figure.rowFrame(0).limits.max < 0.2);
  drawn.figure.setLimits(0, {-3.0, 3.0});
  drawn.image(0.0, 4.0);
  CHECK(drawn.figure.rowFrame(0).limits.max == 3.0);
  CHECK(drawn.figure.isLocked(0));
  drawn.figure.setLocked(0, false);
  drawn.image(0.0, 4.0);
  CHECK(drawn.figure.rowFrame(0).limits.max < 2.0);
}

TEST_CASE("the axes of all rows start and end together", "[ui]") {
  Drawn drawn(result_of({std::vector<double>(9000, 1e-4), std::vector<double>(9000, 123456.0),
                         std::vector<double>(9000, 0.0)},
                        1000.0),
              {900, 400});
  drawn.image(0.0, 9.0);
  const QRectF first = drawn.figure.rowFrame(0).rect;
  for (int row = 1; row < 3; ++row) {
    const QRectF rect = drawn.figure.rowFrame(row).rect;
    CHECK(rect.left() == first.left());
    CHECK(rect.right() == first.right());
    CHECK_THAT(rect.height(), WithinAbs(first.height(), 1.0));
    CHECK(rect.top() > drawn.figure.rowFrame(row - 1).rect.bottom());
  }
}

TEST_CASE("a row keeps its scale when a new result brings its channel again", "[ui]") {
  const auto result = result_of({std::vector<double>(9000, 1.0), std::vector<double>(9000, 2.0)}, 1000.0);
  Drawn drawn(result);
  drawn.image(0.0, 9.0);
  drawn.figure.setLimits(1, {-7.0, 7.0});
  drawn.figure.setScene(evidence::sceneOf(result));
  CHECK(drawn.figure.isLocked(1));
  CHECK(drawn.figure.rowFrame(1).limits.max == 7.0);
}

TEST_CASE("traces on paper are drawn from lines, small and with their scale", "[ui]") {
  const auto result = test_support::sample_result();
  QByteArray bytes;
  QBuffer buffer(&bytes);
  buffer.open(QIODevice::WriteOnly);
  {
    QPdfWriter writer(&buffer);
    writer.setResolution(96);
    QCPPainter painter;
    REQUIRE(painter.begin(&writer));
    evidence::paintTraces(painter, {680, 300}, *result, Seconds(0.0), Seconds(1230.0),
                          look::Theme::of(look::Mode::paper));
    painter.end();
  }
  // 1.2 million samples a channel: at most four points a column of 680, packed.
  CHECK(bytes.size() > 4000);
  CHECK(bytes.size() < 120000);
  CHECK_FALSE(bytes.contains("/Subtype /Image"));
}

TEST_CASE("traces on paper are dark on white", "[ui]") {
  QImage image(680, 300, QImage::Format_RGB32);
  image.fill(Qt::white);
  QCPPainter painter;
  REQUIRE(painter.begin(&image));
  evidence::paintTraces(painter, image.size(), *test_support::sample_result(), Seconds(1030.0),
                        Seconds(1032.0), look::Theme::of(look::Mode::paper));
  painter.end();
  int dark = 0, bright = 0;
  for (int y = 0; y < image.height(); ++y) {
    for (int x = 0; x < image.width(); ++x) {
      const int grey = qGray(image.pixel(x, y));
      dark += grey < 60 ? 1 : 0;
      bright += grey > 250 ? 1 : 0;
    }
  }
  CHECK(dark > 1500);
  CHECK(bright > image.width() * image.height() * 7 / 10);
}
