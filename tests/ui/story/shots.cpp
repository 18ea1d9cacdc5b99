// Chronodrome, GPL-3.0-or-later.
// Pictures for the eye, and times for the record: hidden, run by name. CHRONODROME_SHOTS names the folder.
#include "ui/look/custom_plot.h"

#include <QElapsedTimer>
#include <QTest>
#include <catch2/catch.hpp>
#include <iostream>

#include "open_story.h"
#include "ui/story/paint.h"
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
  plot.show(); // only a shown plot takes the size
  QApplication::processEvents();
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

TEST_CASE("pictures of everything at once", "[.shot]") {
  const auto result = test_support::eventful();
  const QString folder = qEnvironmentVariable("CHRONODROME_SHOTS", "/tmp");
  for (const auto mode : {look::Mode::light, look::Mode::dark, look::Mode::paper}) {
    QImage image(QSize(900, 420) * 2, QImage::Format_RGB32);
    image.setDevicePixelRatio(2.0);
    image.fill(look::Theme::of(mode).surface);
    QCPPainter painter(&image);
    story::paintStory(painter, QSize(900, 420), result, look::Theme::of(mode));
    painter.end();
    if (mode == look::Mode::paper) image = image.convertToFormat(QImage::Format_Grayscale8);
    image.save(folder + QStringLiteral("/eventful%1.png").arg(int(mode)));
  }
}

TEST_CASE("pictures of hands at work", "[.shot]") {
  const QString folder = qEnvironmentVariable("CHRONODROME_SHOTS", "/tmp");
  test_support::OpenStory open;
  const look::Theme& theme = look::Theme::of(look::Mode::light);
  open.pane.setStyleSheet(look::styleSheet(theme));
  open.pane.setTheme(theme);
  const auto shot = [&](const char* name) {
    test_support::OpenStory::settle();
    open.pane.grab().save(folder + QLatin1Char('/') + QLatin1String(name));
  };
  const auto index = open.responseOf("delay:AV", 4);
  open.focus.show(Seconds(590.0), Seconds(600.0));
  open.press(open.figure().bandRect(index).center().toPoint());
  open.move(open.figure().bandRect(index).center().toPoint() - QPoint(30, 0));
  shot("dragging.png");
  open.key(Qt::Key_Escape);
  open.release({400, 200});
  const QPoint from(500, open.figure().rowRect(0).center().y());
  open.drag(from, from + QPoint(90, 0), Qt::AltModifier);
  shot("leaving-out.png");
  QTest::keyClick(open.pane.findChild<QWidget*>(QStringLiteral("excludeReasonLineEdit")), Qt::Key_Escape);
  open.focus.goTo(Seconds(1040.0), Seconds(1060.0));
  open.wheel({int(open.figure().xOf(Seconds(1050.0))), from.y()}, 14, Qt::ControlModifier);
  QTest::mouseMove(open.plot, {500, from.y()});
  shot("near.png");
}

TEST_CASE("time of a replot", "[.bench]") {
  const auto inputs = session::load_session(test_support::sampleFile("guinea-pig-heart"), {});
  REQUIRE(inputs.ok());
  const auto result = session::analyse(*inputs, 1);
  REQUIRE(result.ok());
  std::cout << "guinea pig, 900 x 420\n";
  std::cout << "  replot " << replotTime(*result, QSize(900, 420)) << " ms\n";
  test_support::OpenStory open;
  const auto& row = open.document.result()->responses.rows[open.responseOf("delay:AV", 4)];
  document::WindowChoice choice{
      row.curve, row.concentration, row.measure, row.window_start, row.window_end, {}, {}, {}};
  QElapsedTimer timer;
  timer.start();
  for (int i = 0; i < 10; ++i)
    CHECK(open.document.preview(choice));
  std::cout << "  preview of one measure " << double(timer.nsecsElapsed()) * 1e-7 << " ms\n";
  choice.measure.clear();
  timer.restart();
  CHECK(open.document.preview(choice));
  std::cout << "  preview of four measures " << double(timer.nsecsElapsed()) * 1e-6 << " ms\n";
  std::cout << "an hour, 900 x 420\n";
  std::cout << "  replot " << replotTime(test_support::busyHour(), QSize(900, 420)) << " ms\n";
  std::cout << "an hour, 1800 x 800\n";
  std::cout << "  replot " << replotTime(test_support::busyHour(), QSize(1800, 800)) << " ms\n";
}
