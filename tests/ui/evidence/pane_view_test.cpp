// Chronodrome, GPL-3.0-or-later.
// Moving through a recording with wheel, mouse and keys.
#include <catch2/catch.hpp>

#include <QClipboard>
#include <QLabel>
#include <QLineEdit>

#include "ui/evidence/open_pane.h"

using namespace chronodrome;
using Catch::Matchers::WithinAbs;
using test_support::OpenPane;

TEST_CASE("the wheel zooms about the pointer, and Shift turns it into a pan", "[ui]") {
  OpenPane open;
  open.show(1020.0, 1050.0);
  const QPoint at = open.at(0, 1027.0);
  const double before = open.figure().timeFrame().timeOf(at.x()).value();
  for (int notch = 0; notch < 12; ++notch) {
    open.wheel(at, 1);
    open.figure().replot();
    REQUIRE_THAT(open.figure().timeFrame().timeOf(at.x()).value(), WithinAbs(before, 1e-6));
  }
  CHECK((open.focus.end() - open.focus.start()).value() < 30.0 / 10.0);
  for (int notch = 0; notch < 12; ++notch)
    open.wheel(at, -1);
  CHECK_THAT((open.focus.end() - open.focus.start()).value(), WithinAbs(30.0, 1e-6));
  CHECK_THAT(open.focus.start().value(), WithinAbs(1020.0, 1e-6));
  open.wheel(at, 1, Qt::ShiftModifier);
  CHECK_THAT((open.focus.end() - open.focus.start()).value(), WithinAbs(30.0, 1e-6));
  CHECK_THAT(open.focus.start().value(), WithinAbs(1017.0, 0.01));
}

TEST_CASE("zooming stops at a millisecond without moving on", "[ui]") {
  OpenPane open;
  open.show(1030.0, 1030.01);
  const QPoint at = open.at(0, 1030.003);
  for (int notch = 0; notch < 40; ++notch)
    open.wheel(at, 1);
  open.figure().replot();
  CHECK_THAT((open.focus.end() - open.focus.start()).value(), WithinAbs(1e-3, 1e-9));
  CHECK_THAT(open.figure().timeFrame().timeOf(at.x()).value(), WithinAbs(1030.003, 1e-5));
}

TEST_CASE("dragging the ground pans, dragging the axis scales", "[ui]") {
  OpenPane open;
  open.show(1020.0, 1030.0);
  const QPoint from = open.at(0, 1025.0, 0.95);
  open.drag(from, from + QPoint(100, 0));
  const double per_pixel = 10.0 / open.figure().timeFrame().width;
  CHECK_THAT(open.focus.start().value(), WithinAbs(1020.0 - 100.0 * per_pixel, 3.0 * per_pixel));

  const auto before = open.figure().rowFrame(1).limits;
  const QPoint axis(20, open.at(1, 1020.0).y());
  open.drag(axis, axis + QPoint(0, -60));
  open.figure().replot();
  const auto after = open.figure().rowFrame(1).limits;
  CHECK(after.max - after.min < 0.9 * (before.max - before.min));
  CHECK(open.figure().isLocked(1));
  CHECK_FALSE(open.figure().isLocked(0));
  open.doubleClick(axis);
  open.figure().replot();
  CHECK_FALSE(open.figure().isLocked(1));
  CHECK_THAT(open.figure().rowFrame(1).limits.max, WithinAbs(before.max, 1.0));
}

TEST_CASE("number keys give fixed time scales about the pointer", "[ui]") {
  OpenPane open;
  const double widths[] = {0.2, 1.0, 5.0, 30.0, 300.0, 1230.0, 1230.0};
  for (int i = 0; i < 7; ++i) {
    open.show(1000.0, 1060.0);
    const QPoint at = open.at(1, 1030.0);
    open.point(at);
    const double before = open.figure().timeFrame().timeOf(at.x()).value();
    open.key(static_cast<Qt::Key>(Qt::Key_1 + i));
    open.figure().replot();
    INFO(i);
    CHECK_THAT((open.focus.end() - open.focus.start()).value(), WithinAbs(widths[i], 1e-6));
    if (i < 4) CHECK_THAT(open.figure().timeFrame().timeOf(at.x()).value(), WithinAbs(before, 1e-6));
  }
}

TEST_CASE("a typed time is gone to, and a wrong one is told beside the field", "[ui]") {
  OpenPane open;
  open.show(100.0, 110.0);
  open.key(Qt::Key_G, Qt::ControlModifier);
  auto* field = open.pane.findChild<QLineEdit*>(QStringLiteral("goToTimeLineEdit"));
  auto* message = open.pane.findChild<QLabel*>(QStringLiteral("inlineMessageLabel"));
  REQUIRE(field);
  REQUIRE(field->isVisible());
  CHECK(field->hasFocus());
  QTest::keyClicks(field, QStringLiteral("soon"));
  QTest::keyClick(field, Qt::Key_Return);
  CHECK(message->text().contains(QStringLiteral("no time")));
  CHECK(open.focus.start() == Seconds(100.0));
  field->selectAll();
  QTest::keyClicks(field, QStringLiteral("99:00"));
  QTest::keyClick(field, Qt::Key_Return);
  CHECK(message->text().contains(QStringLiteral("20:30")));
  field->selectAll();
  QTest::keyClicks(field, QStringLiteral("17:10.5"));
  QTest::keyClick(field, Qt::Key_Return);
  CHECK_FALSE(field->isVisible());
  CHECK_THAT(open.focus.start().value(), WithinAbs(1025.5, 1e-6));
  CHECK(open.pane.cursors().second == Seconds(1030.5));
  CHECK(open.figure().hasFocus());
  // Back, and forward again.
  open.key(Qt::Key_Left, Qt::AltModifier);
  CHECK_THAT(open.focus.start().value(), WithinAbs(100.0, 1e-6));
  open.key(Qt::Key_Right, Qt::AltModifier);
  CHECK_THAT(open.focus.start().value(), WithinAbs(1025.5, 1e-6));
}

TEST_CASE("letters typed into the field do not act on the traces", "[ui]") {
  OpenPane open;
  open.show(100.0, 110.0);
  open.key(Qt::Key_G, Qt::ControlModifier);
  auto* field = open.pane.findChild<QLineEdit*>(QStringLiteral("goToTimeLineEdit"));
  QTest::keyClicks(field, QStringLiteral("1 a s 7"));
  CHECK(field->text() == QStringLiteral("1 a s 7"));
  CHECK(open.focus.end() == Seconds(110.0));
  CHECK(open.document.session().review.empty());
  QTest::keyClick(field, Qt::Key_Escape);
  CHECK_FALSE(field->isVisible());
}

TEST_CASE("keys lead from beat to beat, to additions and to rhythm episodes", "[ui]") {
  OpenPane open;
  open.show(1030.0, 1035.0);
  open.click(open.at(0, 1030.05));
  const auto& marks = open.document.result()->activations[0].marks;
  const auto first =
      std::find_if(marks.begin(), marks.end(), [](const auto& mark) { return mark.time > Seconds(1030.06); });
  open.key(Qt::Key_Period);
  CHECK(open.pane.cursors().second == first->time);
  open.key(Qt::Key_Period);
  CHECK(open.pane.cursors().second == (first + 1)->time);
  open.key(Qt::Key_Comma);
  CHECK(open.pane.cursors().second == first->time);
  CHECK(open.focus.start() == Seconds(1030.0));

  open.key(Qt::Key_D);
  CHECK(open.pane.cursors().second == Seconds(1110.0));
  CHECK_THAT(0.5 * (open.focus.start() + open.focus.end()).value(), WithinAbs(1110.0, 1e-6));
  open.key(Qt::Key_D, Qt::ShiftModifier);
  CHECK(open.pane.cursors().second == Seconds(990.0));
  const auto& episodes = open.document.result()->rhythm.episodes;
  const auto next = std::find_if(episodes.begin(), episodes.end(),
                                 [](const auto& episode) { return episode.start > Seconds(990.0); });
  REQUIRE(next != episodes.end());
  open.key(Qt::Key_H);
  CHECK(open.pane.cursors().second == next->start);
  // There is no gap in this recording: it is said.
  open.key(Qt::Key_G);
  CHECK(open.pane.cursors().second == next->start);
}

TEST_CASE("arrow keys step a placed cursor by one sample, and pan without one", "[ui]") {
  OpenPane open;
  open.show(1030.0, 1031.0);
  open.key(Qt::Key_Right);
  CHECK_THAT(open.focus.start().value(), WithinAbs(1030.1, 1e-9));
  open.show(1030.0, 1031.0);
  open.key(Qt::Key_S);
  CHECK(open.pane.cursors().snap == ui::evidence::Snap::samples);
  open.click(open.at(1, 1030.5));
  const double at = open.pane.cursors().second->value();
  CHECK_THAT(std::remainder(at, 1e-3), WithinAbs(0.0, 1e-9));
  for (int i = 0; i < 3; ++i)
    open.key(Qt::Key_Right);
  CHECK_THAT(open.pane.cursors().second->value(), WithinAbs(at + 3e-3, 1e-9));
  open.key(Qt::Key_Left);
  CHECK_THAT(open.pane.cursors().second->value(), WithinAbs(at + 2e-3, 1e-9));
  CHECK(open.focus.start() == Seconds(1030.0));
}

TEST_CASE("before a recording is open the pane says what to do", "[ui]") {
  ui::SessionDocument document;
  ui::Focus focus;
  ui::evidence::EvidencePane pane(document, focus);
  pane.resize(900, 350);
  pane.show();
  auto* label = pane.findChild<QLabel*>(QStringLiteral("emptyEvidenceLabel"));
  REQUIRE(label);
  CHECK(label->isVisible());
  CHECK(label->text().contains(QStringLiteral("open a session")));
  for (QAction* action : pane.actions())
    CHECK_FALSE(action->isEnabled());
}

TEST_CASE("every action has a name, a key, a tip and a menu, and no key is taken twice", "[ui]") {
  ui::SessionDocument document;
  ui::Focus focus;
  const ui::evidence::EvidencePane pane(document, focus);
  QStringList keys, names;
  for (const QAction* action : pane.actions()) {
    INFO(action->text().toStdString());
    CHECK(action->objectName().startsWith(QStringLiteral("action")));
    CHECK_FALSE(action->toolTip().isEmpty());
    CHECK_FALSE(action->shortcuts().isEmpty());
    const QString menu = action->property("menu").toString();
    CHECK(QStringList({"View", "Go", "Edit", "Cursor"}).contains(menu));
    for (const QKeySequence& key : action->shortcuts())
      keys << key.toString();
    names << action->objectName();
  }
  CHECK(keys.removeDuplicates() == 0);
  CHECK(names.removeDuplicates() == 0);
}
