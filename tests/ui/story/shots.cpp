// Chronodrome, GPL-3.0-or-later.
// Pictures for the eye, and times for the record: hidden, run by name. CHRONODROME_SHOTS names the folder.
#include "ui/look/custom_plot.h"

#include <QElapsedTimer>
#include <QTest>
#include <catch2/catch.hpp>
#include <iostream>

#include "made_sessions.h"
#include "ui/story/story_figure.h"
#include "ui/story/story_pane.h"

using namespace chronodrome;
using namespace chronodrome::ui;

namespace {

void shoot(const std::string& name, QSize size, look::Mode mode, const std::string& file,
           bool chosen = false) {
  SessionDocument document;
  Focus focus;
  story::StoryPane pane(document, focus);
  const look::Theme& theme = look::Theme::of(mode);
  pane.setStyleSheet(look::styleSheet(theme));
  pane.setPalette(theme.palette());
  pane.setAutoFillBackground(true);
  pane.setTheme(theme);
  pane.resize(size);
  pane.show();
  document.open(QString::fromStdString(test_support::sampleFile(name)));
  REQUIRE(QTest::qWaitFor([&] { return document.result() != nullptr; }, 60000));
  focus.reset(document.recording()->duration);
  if (chosen) {
    const auto& row = document.result()->responses.rows[4];
    focus.chooseStep(StepRef{row.curve, row.concentration, row.measure});
    focus.show(row.window_start, row.window_end);
  }
  REQUIRE(QTest::qWaitForWindowExposed(&pane));
  QApplication::processEvents();
  pane.grab().save(qEnvironmentVariable("CHRONODROME_SHOTS", "/tmp") + QLatin1Char('/') +
                   QString::fromStdString(file));
}

double replotTime(const session::SessionResult& result, QSize size) {
  QCustomPlot plot;
  plot.resize(size);
  story::StoryFigure figure(plot);
  QElapsedTimer timer;
  timer.start();
  figure.setContent(story::contentOf(std::make_shared<session::SessionResult>(result)));
  std::cout << "  content " << double(timer.nsecsElapsed()) * 1e-6 << " ms\n";
  plot.replot();
  double least = 1e9;
  for (int i = 0; i < 20; ++i) {
    // Another view each time, so that nothing is remembered from the last.
    figure.setView(Seconds(0.0), figure.state().content->end - Seconds(0.5 * (i % 2 + 1)));
    timer.restart();
    plot.replot(QCustomPlot::rpImmediateRefresh);
    least = std::min(least, double(timer.nsecsElapsed()) * 1e-6);
  }
  figure.touch().frame = recording::Span{Seconds(10.0), Seconds(100.0)};
  timer.restart();
  for (int i = 0; i < 20; ++i)
    plot.layer(QString::fromLatin1(story::kTouchLayer))->replot();
  std::cout << "  frame " << double(timer.nsecsElapsed()) * 1e-6 / 20.0 << " ms\n";
  return least;
}

} // namespace

TEST_CASE("pictures of the sample sessions", "[.shot]") {
  for (const std::string name : {"guinea-pig-heart", "rabbit-heart", "atrial-strip"}) {
    shoot(name, QSize(900, 420), look::Mode::light, name + "-light.png");
    shoot(name, QSize(900, 420), look::Mode::dark, name + "-dark.png", true);
  }
  shoot("guinea-pig-heart", QSize(1800, 800), look::Mode::light, "guinea-pig-large.png", true);
  shoot("guinea-pig-heart", QSize(900, 420), look::Mode::paper, "guinea-pig-paper.png");
}

TEST_CASE("time of a replot", "[.bench]") {
  const auto inputs = session::load_session(test_support::sampleFile("guinea-pig-heart"), {});
  REQUIRE(inputs.ok());
  const auto result = session::analyse(*inputs, 1);
  REQUIRE(result.ok());
  std::cout << "guinea pig, 900 x 420\n";
  std::cout << "  replot " << replotTime(*result, QSize(900, 420)) << " ms\n";
  std::cout << "an hour, 900 x 420\n";
  std::cout << "  replot " << replotTime(test_support::busyHour(), QSize(900, 420)) << " ms\n";
  std::cout << "an hour, 1800 x 800\n";
  std::cout << "  replot " << replotTime(test_support::busyHour(), QSize(1800, 800)) << " ms\n";
}
