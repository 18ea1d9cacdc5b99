// Chronodrome, GPL-3.0-or-later.
// Going about in the story: mouse, wheel and keys.
#include "open_story.h"

#include <QComboBox>
#include <QLabel>
#include <QLineEdit>
#include <QPushButton>
#include <QScrollBar>
#include <QSet>
#include <QToolButton>

using namespace chronodrome;
using namespace chronodrome::ui;
using Catch::Matchers::WithinAbs;
using Catch::Matchers::WithinRel;
using test_support::OpenStory;

namespace {

/// A place in a row between two plateaus.
QPoint freePlace(const OpenStory& open, double time_s) {
  return {int(std::lround(open.figure().xOf(Seconds(time_s)))), open.figure().rowRect(0).center().y()};
}

} // namespace

TEST_CASE("a click goes there, first at a width in which beats can be seen", "[story]") {
  OpenStory open;
  open.click(freePlace(open, 300.0));
  CHECK(open.focus.end() - open.focus.start() <= Seconds(10.0 + 1e-9));
  CHECK_THAT(0.5 * (open.focus.start() + open.focus.end()).value(), WithinAbs(300.0, open.pixel()));
  CHECK(open.focus.canGoBack());
  open.focus.show(Seconds(0.0), Seconds(40.0));
  open.click(freePlace(open, 700.0));
  CHECK_THAT((open.focus.end() - open.focus.start()).value(), WithinAbs(40.0, 1e-9));
  CHECK_THAT(0.5 * (open.focus.start() + open.focus.end()).value(), WithinAbs(700.0, open.pixel()));
}

TEST_CASE("the frame is dragged by its body and by its edges", "[story]") {
  OpenStory open;
  open.focus.show(Seconds(300.0), Seconds(500.0));
  const int tab = open.figure().bathRect().top() - 6;
  const auto at = [&](double time_s) {
    return QPoint(int(std::lround(open.figure().xOf(Seconds(time_s)))), tab);
  };
  open.drag(at(400.0), at(400.0) + QPoint(60, 0));
  CHECK_THAT(open.focus.start().value(), WithinAbs(300.0 + 60.0 * open.pixel(), open.pixel()));
  CHECK_THAT((open.focus.end() - open.focus.start()).value(), WithinAbs(200.0, 1e-6));
  open.focus.show(Seconds(300.0), Seconds(500.0));
  open.drag(at(500.0), at(500.0) - QPoint(50, 0));
  CHECK(open.focus.start() == Seconds(300.0));
  CHECK_THAT(open.focus.end().value(), WithinAbs(500.0 - 50.0 * open.pixel(), open.pixel()));
  open.press(at(300.0));
  open.move(at(300.0) - QPoint(30, 0));
  CHECK(open.focus.start() < Seconds(290.0));
  open.key(Qt::Key_Escape);
  CHECK(open.focus.start() == Seconds(300.0));
  open.release(at(300.0) - QPoint(30, 0));
  CHECK(open.focus.start() == Seconds(300.0));
}

TEST_CASE("the wheel zooms the evidence about the pointer's time", "[story]") {
  OpenStory open;
  const QPoint place = freePlace(open, 300.0);
  const double about = open.figure().timeAt(place.x()).value();
  const double width = (open.focus.end() - open.focus.start()).value();
  open.wheel(place, 2);
  CHECK_THAT((open.focus.end() - open.focus.start()).value(), WithinRel(width / (1.25 * 1.25), 1e-9));
  const double share = (about - open.focus.start().value()) / (open.focus.end() - open.focus.start()).value();
  CHECK_THAT(share, WithinAbs(about / width, 1e-9));
  CHECK(open.figure().isWhole()); // the story itself stays
  open.wheel(place, -2);
  CHECK_THAT((open.focus.end() - open.focus.start()).value(), WithinRel(width, 1e-9));
}

TEST_CASE("Ctrl and the wheel zoom the story itself, and one action brings the whole back", "[story]") {
  OpenStory open;
  const QPoint place = freePlace(open, 800.0);
  const double about = open.figure().timeAt(place.x()).value();
  auto* whole = open.action("actionWholeRecording");
  REQUIRE(whole != nullptr);
  CHECK_FALSE(whole->isEnabled());
  open.wheel(place, 4, Qt::ControlModifier);
  CHECK_FALSE(open.figure().isWhole());
  CHECK_THAT(open.figure().timeAt(place.x()).value(), WithinAbs(about, 1e-6));
  CHECK(open.pane.findChild<QToolButton*>(QStringLiteral("wholeRecordingToolButton"))->isVisible());
  CHECK(open.focus.start() == Seconds(0.0)); // the evidence stays
  open.focus.goTo(Seconds(10.0), Seconds(20.0));
  OpenStory::settle();
  CHECK(open.figure().view().start < Seconds(10.0)); // the story comes along
  whole->trigger();
  CHECK(open.figure().isWhole());
}

TEST_CASE("keys move the frame by steps, pages and to the ends", "[story]") {
  OpenStory open;
  open.focus.show(Seconds(300.0), Seconds(400.0));
  open.key(Qt::Key_Right);
  CHECK_THAT(open.focus.start().value(), WithinAbs(310.0, 1e-9));
  open.key(Qt::Key_Left);
  CHECK_THAT(open.focus.start().value(), WithinAbs(300.0, 1e-9));
  open.key(Qt::Key_PageDown);
  CHECK_THAT(open.focus.start().value(), WithinAbs(390.0, 1e-9));
  open.key(Qt::Key_PageUp);
  CHECK_THAT(open.focus.start().value(), WithinAbs(300.0, 1e-9));
  open.key(Qt::Key_Plus);
  CHECK((open.focus.end() - open.focus.start()) < Seconds(70.0));
  CHECK_THAT(0.5 * (open.focus.start() + open.focus.end()).value(), WithinAbs(350.0, 1e-9));
  open.key(Qt::Key_Minus);
  CHECK_THAT((open.focus.end() - open.focus.start()).value(), WithinAbs(100.0, 1e-9));
  open.key(Qt::Key_End);
  CHECK_THAT(open.focus.end().value(), WithinAbs(open.focus.recordingEnd().value(), 1e-9));
  CHECK_THAT((open.focus.end() - open.focus.start()).value(), WithinAbs(100.0, 1e-9));
  open.key(Qt::Key_Home);
  CHECK(open.focus.start() == Seconds(0.0));
}

TEST_CASE("the next and the previous addition are one key away", "[story]") {
  OpenStory open;
  std::vector<double> times;
  for (const auto& event : open.document.protocol().events) {
    if (event.kind == protocol::EventKind::addition) times.push_back(event.time.value());
  }
  REQUIRE(times.size() >= 3);
  const auto middle = [&] { return 0.5 * (open.focus.start() + open.focus.end()).value(); };
  open.key(Qt::Key_A);
  CHECK_THAT(middle(), WithinAbs(times[0], 1e-6));
  open.key(Qt::Key_A);
  CHECK_THAT(middle(), WithinAbs(times[1], 1e-6));
  open.key(Qt::Key_A, Qt::ShiftModifier);
  CHECK_THAT(middle(), WithinAbs(times[0], 1e-6));
}

TEST_CASE("a click on a short episode shows it whole", "[story]") {
  OpenStory open;
  const auto& episodes = open.document.result()->rhythm.episodes;
  const auto found = std::find_if(episodes.begin(), episodes.end(), [](const auto& episode) {
    return episode.kind == "wenckebach" && episode.end - episode.start > Seconds(10.0);
  });
  REQUIRE(found != episodes.end());
  const Seconds middle = 0.5 * (found->start + found->end);
  open.click({int(std::lround(open.figure().xOf(middle))), open.figure().rhythmRect().center().y()});
  CHECK(open.focus.start() < found->start);
  CHECK(open.focus.end() > found->end);
  CHECK(open.focus.end() - open.focus.start() < Seconds(60.0));
}

TEST_CASE("Alt-drag leaves a stretch out, once a reason is given", "[story]") {
  OpenStory open;
  auto* bar = open.pane.findChild<QWidget*>(QStringLiteral("excludeFrame"));
  auto* reason = open.pane.findChild<QLineEdit*>(QStringLiteral("excludeReasonLineEdit"));
  auto* leaveOut = open.pane.findChild<QPushButton*>(QStringLiteral("excludePushButton"));
  REQUIRE(bar != nullptr);
  CHECK_FALSE(bar->isVisible());
  const QPoint from = freePlace(open, 520.0);
  open.drag(from, from + QPoint(40, 0), Qt::AltModifier);
  REQUIRE(bar->isVisible());
  CHECK_FALSE(leaveOut->isEnabled());
  QTest::keyClick(reason, Qt::Key_Return);
  CHECK(open.document.session().review.empty());
  QTest::keyClicks(reason, QStringLiteral("electrode slipped"));
  REQUIRE(leaveOut->isEnabled());
  QTest::keyClick(reason, Qt::Key_Return);
  REQUIRE(open.document.session().review.size() == 1);
  const auto& correction = open.document.session().review.front();
  CHECK(correction.what == document::CorrectionKind::exclude);
  CHECK(correction.channel.empty());
  CHECK(correction.why == "electrode slipped");
  // The line shows and takes tenths of a second.
  CHECK_THAT(correction.time->value(), WithinAbs(520.0, open.pixel() + 0.05));
  CHECK_THAT(correction.to_time->value(), WithinAbs(520.0 + 40.0 * open.pixel(), open.pixel() + 0.05));
  CHECK_FALSE(bar->isVisible());
  REQUIRE(QTest::qWaitFor([&] { return !open.document.isStale(); }, 60000));
}

TEST_CASE("Escape in the line of reasons leaves everything as it was", "[story]") {
  OpenStory open;
  open.action("actionLeaveStretchOut")->trigger();
  OpenStory::settle();
  auto* bar = open.pane.findChild<QWidget*>(QStringLiteral("excludeFrame"));
  REQUIRE(bar->isVisible());
  QTest::keyClick(open.pane.findChild<QLineEdit*>(QStringLiteral("excludeReasonLineEdit")), Qt::Key_Escape);
  CHECK_FALSE(bar->isVisible());
  CHECK(open.document.session().review.empty());
}

TEST_CASE("the line above the story reads out time, value and bath", "[story]") {
  OpenStory open;
  auto* line = open.pane.findChild<QLabel*>(QStringLiteral("storyReadoutLabel"));
  const QPoint place = freePlace(open, 700.0);
  QTest::mouseMove(open.plot, place);
  OpenStory::settle();
  CHECK(line->text().contains(QStringLiteral("11:")));
  CHECK(line->text().contains(QStringLiteral("beats/min")));
  CHECK(line->text().contains(QStringLiteral("acetylcholine")));
  QTest::mouseMove(open.plot, {place.x(), open.figure().rhythmRect().center().y()});
  OpenStory::settle();
  CHECK(line->text().contains(QStringLiteral("first-degree")));
}

TEST_CASE("every action has a name, words, a hint and a key of its own", "[story]") {
  OpenStory open("atrial-strip");
  QSet<QString> names, keys;
  for (auto* action : open.pane.actions()) {
    CHECK(action->objectName().startsWith(QStringLiteral("action")));
    CHECK_FALSE(action->text().isEmpty());
    CHECK_FALSE(action->toolTip().isEmpty());
    CHECK_FALSE(names.contains(action->objectName()));
    names.insert(action->objectName());
    for (const auto& key : action->shortcuts()) {
      CHECK_FALSE(keys.contains(key.toString()));
      keys.insert(key.toString());
    }
  }
  CHECK(names.contains(QStringLiteral("actionNextAddition")));
  CHECK(names.contains(QStringLiteral("actionPreviousAddition")));
}

TEST_CASE("rows that have no room are scrolled to", "[story]") {
  OpenStory open("rabbit-heart", QSize(700, 300));
  auto* bar = open.pane.findChild<QScrollBar*>(QStringLiteral("storyRowsScrollBar"));
  REQUIRE(bar->isVisible());
  CHECK(open.figure().rowCount() == 5);
  CHECK_FALSE(open.figure().rowRect(0).isEmpty());
  CHECK(open.figure().rowRect(0).height() >= story::StoryFigure::kLeastRow - 8);
  CHECK(open.figure().rowRect(4).isEmpty());
  open.wheel({20, open.figure().rowRect(0).center().y()}, -1); // over the labels
  CHECK(bar->value() == 1);
  bar->setValue(bar->maximum());
  OpenStory::settle();
  CHECK(open.figure().rowRect(0).isEmpty());
  CHECK_FALSE(open.figure().rowRect(4).isEmpty());
  open.pane.resize(900, 800);
  OpenStory::settle();
  CHECK_FALSE(bar->isVisible());
  CHECK_FALSE(open.figure().rowRect(0).isEmpty());
}

TEST_CASE("without a session there is a sentence, and nothing to do", "[story]") {
  SessionDocument document;
  Focus focus;
  story::StoryPane pane(document, focus);
  pane.resize(900, 420);
  pane.show();
  REQUIRE(QTest::qWaitForWindowExposed(&pane));
  CHECK(pane.findChild<QLabel*>(QStringLiteral("storyEmptyLabel"))->isVisible());
  for (auto* action : pane.actions())
    CHECK_FALSE(action->isEnabled());
}
