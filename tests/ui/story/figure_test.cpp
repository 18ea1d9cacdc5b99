// Chronodrome, GPL-3.0-or-later.
#include "ui/look/custom_plot.h"

#include <QBuffer>
#include <QImage>
#include <QPdfWriter>
#include <algorithm>
#include <catch2/catch.hpp>

#include "made_sessions.h"
#include "ui/look/plot_style.h"
#include "ui/story/paint.h"
#include "ui/story/story_figure.h"
#include "ui/story/story_words.h"

using namespace chronodrome;
using namespace chronodrome::ui;

namespace {

constexpr QSize kSize(900, 420);

QImage painted(const session::SessionResult& result, look::Mode mode = look::Mode::light) {
  const look::Theme& theme = look::Theme::of(mode);
  QImage image(kSize, QImage::Format_RGB32);
  image.fill(theme.surface);
  QCPPainter painter(&image);
  story::paintStory(painter, kSize, result, theme);
  painter.end();
  return image;
}

/// Where two pictures differ.
QRect difference(const QImage& a, const QImage& b) {
  QRect all;
  for (int y = 0; y < a.height(); ++y) {
    for (int x = 0; x < a.width(); ++x) {
      if (a.pixel(x, y) != b.pixel(x, y)) all = all.united(QRect(x, y, 1, 1));
    }
  }
  return all;
}

std::vector<double> withBeatAdvanced(std::vector<double> times, std::size_t at, double by) {
  times[at] -= by;
  return times;
}

} // namespace

TEST_CASE("one odd beat in 14 400 is seen from afar", "[story]") {
  const auto times = test_support::hourOfBeats();
  const QImage plain = painted(test_support::beatsAt(times, 3600.0));
  // In the middle of the sway, so that the axis stays as it is and only the beat makes a difference.
  const auto at = static_cast<std::size_t>(
      std::lower_bound(times.begin(), times.end(), 800.0 * std::acos(-1.0)) - times.begin());
  const auto odd = test_support::beatsAt(withBeatAdvanced(times, at, 0.003), 3600.0);
  const QRect seen = difference(plain, painted(odd));
  REQUIRE_FALSE(seen.isNull());
  CHECK(seen.width() <= 3);
  CHECK(seen.height() >= 20);
  QCustomPlot plot;
  plot.setViewport(QRect(QPoint(0, 0), kSize));
  story::StoryFigure figure(plot);
  figure.setContent(story::contentOf(std::make_shared<session::SessionResult>(odd)));
  plot.replot();
  CHECK(std::abs(seen.center().x() - figure.xOf(Seconds(times[at]))) <= 2.0);
}

TEST_CASE("a beat beyond the axis leaves a mark at its edge and does not flatten the row", "[story]") {
  auto times = test_support::hourOfBeats();
  const auto plainTrend = session::trend_of(test_support::beatsAt(times, 3600.0), "rate:RA");
  times.insert(times.begin() + 9000, times[8999] + 0.01); // 6000 beats/min
  const auto result = test_support::beatsAt(times, 3600.0);
  const auto trend = session::trend_of(result, "rate:RA");
  CHECK_THAT(trend.high, Catch::Matchers::WithinRel(plainTrend.high, 0.2));
  const look::Theme& theme = look::Theme::of(look::Mode::light);
  QCustomPlot plot;
  plot.setViewport(QRect(QPoint(0, 0), kSize));
  story::StoryFigure figure(plot);
  figure.setContent(story::contentOf(std::make_shared<session::SessionResult>(result)));
  plot.replot();
  const int x = static_cast<int>(std::lround(figure.xOf(Seconds(times[9000]))));
  const int top = figure.rowRect(0).top();
  const QImage image = painted(result);
  int inked = 0;
  for (int dx = -4; dx <= 4; ++dx) {
    for (int dy = 0; dy <= 5; ++dy) {
      if (image.pixelColor(x + dx, top + dy) == theme.of(recording::Role::atrial)) ++inked;
    }
  }
  CHECK(inked >= 10); // a triangle, not just the line's pixel
}

TEST_CASE("in grey, a steady plateau differs from one that is not, and from one without a value", "[story]") {
  auto result = test_support::beatsAt(test_support::hourOfBeats(), 3600.0);
  response::Response row;
  row.curve = 1;
  row.measure = "rate:RA";
  row.unit = "bpm";
  row.window_start = Seconds(1000.0);
  row.window_end = Seconds(1400.0);
  row.value = 240.0;
  const auto grey = [&](response::Status status) {
    row.status = status;
    row.value.reset();
    if (status == response::Status::ok || status == response::Status::not_steady) row.value = 240.0;
    result.responses.rows = {row};
    return painted(result, look::Mode::paper).convertToFormat(QImage::Format_Grayscale8);
  };
  const QImage steady = grey(response::Status::ok);
  const QImage drifting = grey(response::Status::not_steady);
  const QImage silent = grey(response::Status::arrested);
  CHECK(difference(steady, drifting).width() > 60);
  CHECK(difference(steady, silent).width() > 60);
  CHECK(difference(silent, grey(response::Status::excluded)).height() > 40);
}

TEST_CASE("the story is printed as lines and letters, not as a picture", "[story]") {
  QBuffer file;
  file.open(QIODevice::WriteOnly);
  {
    QPdfWriter writer(&file);
    writer.setResolution(96);
    QCPPainter painter(&writer);
    painter.setMode(QCPPainter::pmVectorized);
    story::paintStory(painter, QSize(700, 420), test_support::busyHour(), look::Theme::of(look::Mode::paper));
  }
  CHECK(file.data().size() > 5000);
  CHECK_FALSE(file.data().contains("/Subtype /Image"));
}

TEST_CASE("a story without log, pathways or measures still has its place", "[story]") {
  session::SessionResult bare;
  auto recording = std::make_shared<recording::Recording>();
  recording->duration = Seconds(60.0);
  bare.recording = recording;
  const QImage image = painted(bare);
  QImage empty(kSize, QImage::Format_RGB32);
  empty.fill(look::Theme::of(look::Mode::light).surface);
  CHECK(difference(image, empty).width() > 600); // an axis, and words that say what is missing
  session::SessionResult nothing;
  painted(nothing);
}

TEST_CASE("the figure says what lies where", "[story]") {
  auto result = std::make_shared<session::SessionResult>(test_support::busyHour());
  QCustomPlot plot;
  plot.setViewport(QRect(0, 0, 900, 600));
  story::StoryFigure figure(plot);
  figure.setContent(story::contentOf(result));
  figure.touch().frame = recording::Span{Seconds(1800.0), Seconds(2400.0)};
  plot.replot();
  using Part = story::Hit::Part;
  const QRectF band = figure.bandRect(10);
  REQUIRE_FALSE(band.isEmpty());
  CHECK(figure.hitAt(band.center()).part == Part::band);
  CHECK(figure.hitAt(band.center()).response == 10);
  CHECK(figure.hitAt({band.left() - 2.0, band.center().y()}).part == Part::bandStart);
  CHECK(figure.hitAt({band.right() + 2.0, band.center().y()}).part == Part::bandEnd);
  CHECK(figure.hitAt({20.0, band.center().y()}).part == Part::gutter);
  const double tab = figure.bathRect().top() - 6.0;
  CHECK(figure.hitAt({figure.xOf(Seconds(2100.0)), tab}).part == Part::frameTab);
  CHECK(figure.hitAt({figure.xOf(Seconds(1800.0)), tab}).part == Part::frameStart);
  CHECK(figure.hitAt({figure.xOf(Seconds(2400.0)), tab}).part == Part::frameEnd);
  const double bath = figure.bathRect().center().y();
  CHECK(figure.hitAt({figure.xOf(Seconds(600.0)), bath}).part == Part::bath);
  CHECK(figure.hitAt({figure.xOf(Seconds(600.0)), double(figure.rhythmRect().center().y())}).part ==
        Part::rhythm);
  CHECK_THAT(figure.timeAt(figure.xOf(Seconds(600.0))).value(), Catch::Matchers::WithinAbs(600.0, 1e-6));
  figure.setRows(3, 2);
  plot.replot();
  CHECK(figure.bandRect(10).isEmpty());
  CHECK_FALSE(figure.rowRect(4).isEmpty());
}

TEST_CASE("numbers at an axis are where they say they are", "[story]") {
  QCustomPlot plot;
  plot.setViewport(QRect(0, 0, 900, 420));
  auto* axis = plot.axisRect()->axis(QCPAxis::atLeft);
  axis->setTicker(QSharedPointer<look::NumberTicker>::create());
  for (const auto& [low, high] :
       {std::pair(0.0, 1.0), {0.0, 10.0}, {50.0, 60.0}, {-0.05, 1.05}, {0.0, 0.1}}) {
    for (int wanted = 2; wanted < 9; ++wanted) {
      axis->ticker()->setTickCount(wanted);
      axis->setRange(low, high);
      plot.replot();
      const auto places = axis->tickVector();
      const auto labels = axis->tickVectorLabels();
      for (int i = 0; i < places.size(); ++i) {
        QString label = labels.at(i);
        CHECK_THAT(label.replace(QStringLiteral("\u2212"), QStringLiteral("-")).toDouble(),
                   Catch::Matchers::WithinAbs(places.at(i), 1e-9 * (high - low)));
      }
    }
  }
}

TEST_CASE("narrow steps of the bath are named where there is room, washouts and vehicles too", "[story]") {
  const QImage with = painted(test_support::eventful());
  auto bare = test_support::eventful();
  std::erase_if(bare.protocol.events,
                [](const protocol::Event& event) { return event.kind == protocol::EventKind::vehicle; });
  const QRect seen = difference(with, painted(bare));
  CHECK(seen.width() > 20); // a line, and the word beside it
  CHECK(seen.height() <= 48);
}

TEST_CASE("every kind of rhythm has a pattern and words of its own", "[story]") {
  const std::vector<std::string> kinds = {"first_degree_av_block",
                                          "wenckebach",
                                          "second_degree_fixed",
                                          "two_to_one",
                                          "high_degree_av_block",
                                          "complete_av_block",
                                          "junctional_escape",
                                          "ventricular_escape",
                                          "premature_atrial",
                                          "premature_ventricular",
                                          "sinus_pause",
                                          "arrest",
                                          "retrograde",
                                          "preexcitation",
                                          "ventricular_tachycardia",
                                          "ventricular_fibrillation",
                                          "paced",
                                          "undetermined",
                                          "unreadable"};
  QStringList words;
  for (const auto& kind : kinds) {
    CHECK(story::lookOf(kind).pattern != story::Pattern::none);
    CHECK(session::weight_of(kind) > 0);
    session::RhythmBlock block;
    block.kind = kind;
    words << story::blockWords(block).first();
  }
  CHECK(words.removeDuplicates() == 0);
  CHECK(story::lookOf("regular").pattern == story::Pattern::none);
  session::RhythmBlock periods;
  periods.kind = "wenckebach";
  periods.ratio = "4:3";
  CHECK(story::blockWords(periods).first() == QStringLiteral("Wenckebach 4:3"));
}
