// Chronodrome, GPL-3.0-or-later.
#include "ui/answer/answer_desk.h"

#include <QBuffer>
#include <QPdfWriter>

#include "ui/answer/export_curve.h"
#include "ui/answer/paint.h"

using namespace chronodrome;
using namespace chronodrome::ui;
using namespace chronodrome::ui::answer;
using look::Mode;
using look::Theme;
using response::Status;

namespace {

struct Shown {
  explicit Shown(const session::SessionResult& result, Mode mode = Mode::light, int width = 480) {
    figure.resize(width, 360);
    figure.setView(session::curve_view(result, 1, "rate:RA").value(), Theme::of(mode), Theme::of(mode).data);
    figure.show();
    REQUIRE(QTest::qWaitForWindowExposed(&figure));
    figure.replot();
    image = figure.toPixmap().toImage();
  }
  [[nodiscard]] QColor at(QPointF pixel) const { return image.pixelColor(pixel.toPoint()); }

  AnswerFigure figure;
  QImage image;
};

int darkPixels(const QImage& image) {
  int dark = 0;
  for (int y = 0; y < image.height(); ++y) {
    for (int x = 0; x < image.width(); ++x)
      dark += qGray(image.pixel(x, y)) < 96 ? 1 : 0;
  }
  return dark;
}

} // namespace

TEST_CASE("how a response was read is told by the filling of its mark", "[answer][pixels]") {
  session::SessionResult result = slowing();
  result.responses.rows[2].status = Status::not_steady;
  result.responses.rows[3].is_selected = true;
  const Theme& theme = Theme::of(Mode::light);
  const Shown shown(result);
  const QPointF left(-2.5, 0.0), right(2.5, 0.0);
  // 1: steady, full.
  CHECK(shown.at(shown.figure.pixelOf(1) + left) == theme.data);
  CHECK(shown.at(shown.figure.pixelOf(1) + right) == theme.data);
  // 2: not steady, open.
  CHECK(shown.at(shown.figure.pixelOf(2) + left) == theme.surface);
  CHECK(shown.at(shown.figure.pixelOf(2) + right) == theme.surface);
  // 3: from selected beats, half.
  CHECK(shown.at(shown.figure.pixelOf(3) + left) == theme.data);
  CHECK(shown.at(shown.figure.pixelOf(3) + right) == theme.surface);
}

TEST_CASE("the control stands left of a break in the axis", "[answer][pixels]") {
  const Shown shown(slowing());
  const auto& axis = shown.figure.view()->axis;
  const double bottom = shown.figure.axisRect()->bottom();
  const double gap = shown.figure.xAxis->coordToPixel(*axis.break_at);
  const double scale = shown.figure.xAxis->coordToPixel(-7.2);
  // The base line runs along the scale and is open between the strokes.
  const auto hasLine = [&](double x) {
    for (const double y : {bottom - 1.0, bottom, bottom + 1.0}) {
      if (shown.at({x, y}) == Theme::of(Mode::light).line) return true;
    }
    return false;
  };
  CHECK(hasLine(scale));
  CHECK(hasLine(gap - 12.0));
  CHECK_FALSE(hasLine(gap));
  CHECK(shown.figure.pixelOf(0).x() < gap);
  CHECK(shown.figure.pixelOf(1).x() > gap);
}

TEST_CASE("the band is painted around the line, on and beyond the concentrations tested",
          "[answer][pixels]") {
  session::SessionResult result = resultOf(
      {{0, 200.0}, {1e-9, 196.0}, {1e-8, 195.0}, {1e-7, 150.6}, {1e-6, 116.3}, {1e-5, 97.5}, {1e-4, 103.8}});
  const Shown shown(result);
  const auto& line = shown.figure.view()->chosen.line.at(1);
  REQUIRE_FALSE(line.band.empty());
  const std::size_t middle = line.position.size() / 4;
  const double x = shown.figure.xAxis->coordToPixel(line.position[middle]);
  const double inside =
      shown.figure.yAxis->coordToPixel(0.3 * line.response[middle] + 0.7 * line.band[middle].high);
  const double outside = shown.figure.yAxis->coordToPixel(line.band[middle].high) - 6.0;
  CHECK(shown.at({x, inside}) != Theme::of(Mode::light).surface);
  CHECK(shown.at({x, inside}) != Theme::of(Mode::light).data);
  CHECK(shown.at({x, outside}) == Theme::of(Mode::light).surface);
}

TEST_CASE("a bound is an arrow at its limit, what has no value stands hollow at the bottom",
          "[answer][pixels]") {
  session::SessionResult result = slowing();
  auto& bound = result.responses.rows[5];
  bound.status = Status::censored;
  bound.value.reset();
  bound.limit = 120.0;
  bound.limit_side = "at_least";
  auto& left_out = result.responses.rows[6];
  left_out.status = Status::excluded;
  left_out.value.reset();
  const Theme& theme = Theme::of(Mode::light);
  const Shown shown(result);
  const QPointF limit = shown.figure.pixelOf(5);
  CHECK_THAT(limit.y(), Catch::Matchers::WithinAbs(shown.figure.yAxis->coordToPixel(120.0), 1e-6));
  CHECK(shown.at(limit + QPointF(0.0, -11.0)) == theme.data); // the arrow's head, upwards
  CHECK(shown.at(limit + QPointF(0.0, 11.0)) != theme.data);
  const QPointF hollow = shown.figure.pixelOf(6);
  CHECK(shown.figure.axisRect()->bottom() - hollow.y() < 30.0);
  CHECK(shown.at(hollow) == theme.surface);
}

TEST_CASE("labels of the concentration axis do not touch in a narrow panel", "[answer]") {
  const session::SessionResult result = slowing();
  for (const int width : {320, 480, 900}) {
    const Shown shown(result, Mode::light, width);
    const auto ticks = shown.figure.xAxis->tickVector();
    const auto labels = shown.figure.xAxis->tickVectorLabels();
    REQUIRE(ticks.size() == labels.size());
    const QFontMetrics metrics(shown.figure.xAxis->tickLabelFont());
    double end = -1e9;
    int labelled = 0;
    for (int i = 0; i < ticks.size(); ++i) {
      if (labels[i].isEmpty()) continue;
      ++labelled;
      const double half = metrics.horizontalAdvance(labels[i]) / 2.0;
      const double centre = shown.figure.xAxis->coordToPixel(ticks[i]);
      CAPTURE(width, labels[i].toStdString());
      CHECK(centre - half > end);
      end = centre + half;
    }
    CHECK(labelled >= 4);
  }
}

TEST_CASE("the panel is drawn into any painter, on paper in ink that has a width", "[answer]") {
  session::SessionResult result = slowing();
  QImage image(640, 480, QImage::Format_RGB32);
  image.fill(Qt::white);
  {
    QCPPainter painter(&image);
    paintCurve(painter, image.size(), result, 1, "rate:RA", Theme::of(Mode::paper));
  }
  CHECK(darkPixels(image) > 1000);
  // Nothing but grey: it survives a photocopy.
  for (int y = 0; y < image.height(); y += 3) {
    for (int x = 0; x < image.width(); x += 3) {
      const QColor color = image.pixelColor(x, y);
      CHECK(std::abs(color.red() - color.blue()) < 12);
    }
  }
  QImage none(64, 64, QImage::Format_RGB32);
  none.fill(Qt::white);
  {
    QCPPainter painter(&none);
    paintCurve(painter, none.size(), result, 9, "rate:RA", Theme::of(Mode::paper));
  }
  CHECK(darkPixels(none) == 0);
}

TEST_CASE("a curve is exported at the width of a column", "[answer][export]") {
  const session::SessionResult result = slowing();
  const ExportedCurve curve{&result, 1, "rate:RA", session::ResponseForm::absolute};
  for (const ExportChoice& choice : exportChoices()) {
    CAPTURE(filterText(choice).toStdString());
    const QByteArray bytes = exportedBytes(curve, choice);
    switch (choice.kind) {
    case ExportKind::pdf:
      CHECK(bytes.startsWith("%PDF"));
      CHECK(bytes.contains("/FontFile2")); // text as text
      break;
    case ExportKind::svg:
      CHECK(bytes.contains("<text"));
      CHECK(bytes.contains("carbachol in the bath"));
      break;
    case ExportKind::png: {
      const QImage image = QImage::fromData(bytes);
      const double inches = image.width() / (image.dotsPerMeterX() * 0.0254);
      CHECK_THAT(inches * 25.4, Catch::Matchers::WithinAbs(choice.width_mm, 0.5));
      CHECK(darkPixels(image) > 5000);
      break;
    }
    case ExportKind::csv:
      CHECK(bytes.count('\n') == 8);
      CHECK(bytes.startsWith("curve,agent,"));
      break;
    }
  }
  const Done refused = exportCurve(QStringLiteral("/no/such/folder/x.pdf"), curve, exportChoices().front());
  REQUIRE_FALSE(refused);
  CHECK(refused.error().code == ErrorCode::cannot_write);
}

TEST_CASE("the export action writes the file that was asked for", "[answer][export]") {
  AnswerDesk desk;
  desk.open("guinea-pig-heart", "delay:AV");
  const QString path = desk.folder.filePath("figure");
  desk.pane.setFileAsker([&](const QString& proposed, const QStringList& filters, QString& filter) {
    CHECK(proposed.endsWith(QStringLiteral("delay-AV-curve-1")));
    filter = filters.last();
    return path;
  });
  desk.trigger("actionExportCurve");
  QFile file(path + QStringLiteral(".csv"));
  REQUIRE(file.open(QIODevice::ReadOnly));
  const QByteArray text = file.readAll();
  CHECK(text.count('\n') == 11);
  CHECK(text.contains("delay:AV"));
  CHECK_FALSE(text.contains("rate:"));
}
