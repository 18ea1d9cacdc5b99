// Chronodrome, GPL-3.0-or-later.
// Corrections made by hand end in the session, and in the next result.
#include <catch2/catch.hpp>

#include <QComboBox>
#include <QLineEdit>
#include <QUndoStack>

#include "session/cursor.h"
#include "session/exclusions.h"
#include "ui/evidence/open_pane.h"

using namespace chronodrome;
using Catch::Matchers::WithinAbs;
using document::CorrectionKind;
using test_support::OpenPane;

namespace {

Seconds markNear(OpenPane& open, int row, double time) {
  const auto& marks = open.document.result()->activations[static_cast<std::size_t>(row)].marks;
  return marks[*session::nearest_mark(marks, Seconds(time))].time;
}

bool hasMark(OpenPane& open, int row, Seconds time) {
  return std::abs((markNear(open, row, time.value()) - time).value()) < 1e-9;
}

} // namespace

TEST_CASE("a mark is added by a double click and by the key, on the row and at the sample", "[ui]") {
  OpenPane open;
  open.show(1030.0, 1032.0);
  open.doubleClick(open.at(1, 1030.75));
  REQUIRE(open.document.session().review.size() == 1);
  const auto& added = open.document.session().review[0];
  CHECK(added.what == CorrectionKind::add);
  CHECK(added.channel == "RV");
  CHECK_THAT(added.time->value(), WithinAbs(1030.75, 2.0 / open.figure().timeFrame().width));
  CHECK_THAT(std::remainder(added.time->value(), 1e-3), WithinAbs(0.0, 1e-9));
  // It stands there before the analysis has it.
  REQUIRE(open.figure().scene().pending.size() == 1);
  REQUIRE(open.settle());
  CHECK(open.figure().scene().pending.empty());
  const auto& marks = open.document.result()->activations[1].marks;
  CHECK(marks[*session::nearest_mark(marks, *added.time)].origin == activation::Origin::added);

  open.key(Qt::Key_Escape);
  open.key(Qt::Key_Escape);
  open.point(open.at(0, 1031.9));
  CHECK(open.figure().overlay().active_row == 0);
  open.key(Qt::Key_A);
  REQUIRE(open.document.session().review.size() == 2);
  CHECK(open.document.session().review[1].channel == "RA");
  CHECK(open.document.session().review[1].time == open.pane.cursors().second);
  open.document.undoStack()->undo();
  open.document.undoStack()->undo();
  CHECK(open.document.session().review.empty());
  CHECK(open.settle());
}

TEST_CASE("a chosen mark is deleted by the key", "[ui]") {
  OpenPane open;
  open.show(1030.0, 1032.0);
  auto* remove = open.pane.findChild<QAction*>(QStringLiteral("actionDeleteMark"));
  CHECK_FALSE(remove->isEnabled());
  const Seconds mark = markNear(open, 0, 1031.0);
  open.click(open.at(0, mark.value()));
  REQUIRE(open.figure().overlay().chosen);
  CHECK(open.figure().overlay().chosen->time == mark);
  CHECK(remove->isEnabled());
  open.key(Qt::Key_Delete);
  REQUIRE(open.document.session().review.size() == 1);
  CHECK(open.document.session().review[0].what == CorrectionKind::remove);
  CHECK(open.document.session().review[0].time == mark);
  CHECK_FALSE(remove->isEnabled());
  REQUIRE(open.settle());
  CHECK_FALSE(hasMark(open, 0, mark));
}

TEST_CASE("a mark is moved by dragging, and Escape lets it stay", "[ui]") {
  OpenPane open;
  open.show(1030.0, 1031.0);
  const Seconds mark = markNear(open, 1, 1030.3);
  const QPoint from = open.at(1, mark.value());
  open.press(from);
  open.moveHeld(from + QPoint(10, 0));
  open.moveHeld(from + QPoint(30, 0));
  REQUIRE(open.figure().overlay().move);
  CHECK(open.figure().overlay().move->from == mark);
  open.key(Qt::Key_Escape);
  CHECK_FALSE(open.figure().overlay().move);
  QTest::mouseRelease(&open.figure(), Qt::LeftButton, {}, from + QPoint(30, 0));
  CHECK(open.document.session().review.empty());

  open.drag(from, from + QPoint(24, 0));
  REQUIRE(open.document.session().review.size() == 1);
  const auto moved = open.document.session().review[0];
  CHECK(moved.what == CorrectionKind::move);
  CHECK(moved.channel == "RV");
  CHECK(moved.time == mark);
  const double pixel = 1.0 / open.figure().timeFrame().width;
  CHECK_THAT(moved.to_time->value(), WithinAbs(mark.value() + 24.0 * pixel, 1.5 * pixel));
  REQUIRE(open.settle());
  CHECK(hasMark(open, 1, *moved.to_time));
  CHECK_FALSE(hasMark(open, 1, mark));
}

TEST_CASE("Tab leads from a chosen mark to the next, Escape lets go of it", "[ui]") {
  OpenPane open;
  open.show(1030.0, 1032.0);
  const Seconds mark = markNear(open, 0, 1031.0);
  open.click(open.at(0, mark.value()));
  open.key(Qt::Key_Tab);
  REQUIRE(open.figure().overlay().chosen);
  const Seconds next = open.figure().overlay().chosen->time;
  CHECK(next > mark);
  CHECK(hasMark(open, 0, next));
  open.key(Qt::Key_Backtab, Qt::ShiftModifier);
  CHECK(open.figure().overlay().chosen->time == mark);
  open.key(Qt::Key_Escape);
  CHECK_FALSE(open.figure().overlay().chosen);
}

TEST_CASE("a stretch is left out with a reason, and taken back in", "[ui]") {
  OpenPane open;
  open.show(1030.0, 1032.0);
  open.drag(open.at(0, 1030.5), open.at(0, 1031.2), Qt::AltModifier);
  REQUIRE(open.figure().overlay().selection);
  open.key(Qt::Key_X);
  auto* field = open.pane.findChild<QLineEdit*>(QStringLiteral("reasonLineEdit"));
  auto* choice = open.pane.findChild<QComboBox*>(QStringLiteral("channelComboBox"));
  REQUIRE(field);
  CHECK(choice->currentText() == QStringLiteral("RA"));
  QTest::keyClick(field, Qt::Key_Return);
  CHECK(open.document.session().review.empty()); // no reason, no exclusion
  QTest::keyClicks(field, QStringLiteral("loose contact"));
  QTest::keyClick(field, Qt::Key_Return);
  REQUIRE(open.document.session().review.size() == 1);
  const auto& left_out = open.document.session().review[0];
  CHECK(left_out.what == CorrectionKind::exclude);
  CHECK(left_out.channel == "RA");
  CHECK(left_out.why == "loose contact");
  CHECK_THAT(left_out.time->value(), WithinAbs(1030.5, 0.01));
  CHECK_THAT(left_out.to_time->value(), WithinAbs(1031.2, 0.01));
  REQUIRE(open.settle());
  REQUIRE(open.figure().scene().lost[0].size() == 1);
  CHECK(open.figure().scene().lost[0][0].reason == "loose contact");
  CHECK(open.figure().scene().lost[1].empty());

  open.click(open.at(0, 1030.8, 0.9));
  open.key(Qt::Key_X, Qt::ShiftModifier);
  CHECK(open.document.session().review.size() == 2);
  CHECK(session::exclusions_of(open.document.session().review).empty());
  CHECK(open.settle());
}

TEST_CASE("the right button selects a stretch, with Shift of all rows", "[ui]") {
  OpenPane open;
  open.show(1030.0, 1032.0);
  const QPoint from = open.at(1, 1030.5), to = open.at(1, 1031.0);
  QTest::mousePress(&open.figure(), Qt::RightButton, Qt::ShiftModifier, from);
  for (int step = 1; step <= 4; ++step) {
    const QPoint at = from + (to - from) * step / 4;
    QMouseEvent event(QEvent::MouseMove, at, open.figure().mapToGlobal(at), Qt::NoButton, Qt::RightButton,
                      Qt::ShiftModifier);
    QApplication::sendEvent(&open.figure(), &event);
  }
  QTest::mouseRelease(&open.figure(), Qt::RightButton, Qt::ShiftModifier, to);
  REQUIRE(open.figure().overlay().selection);
  CHECK(open.figure().overlay().selection->row == -1);
  CHECK_THAT(open.figure().overlay().selection->start.value(), WithinAbs(1030.5, 0.01));
  CHECK_THAT(open.figure().overlay().selection->end.value(), WithinAbs(1031.0, 0.01));
  CHECK_FALSE(open.pane.cursors().is_pinned);
}

TEST_CASE("both cursors select what X leaves out", "[ui]") {
  OpenPane open;
  open.show(1030.0, 1032.0);
  open.key(Qt::Key_S);
  open.point(open.at(1, 1030.4));
  open.key(Qt::Key_R);
  open.click(open.at(1, 1030.6));
  open.key(Qt::Key_X);
  auto* field = open.pane.findChild<QLineEdit*>(QStringLiteral("reasonLineEdit"));
  REQUIRE(field);
  open.pane.findChild<QComboBox*>(QStringLiteral("channelComboBox"))
      ->setCurrentText(QStringLiteral("all channels"));
  QTest::keyClicks(field, QStringLiteral("cannula moved"));
  QTest::keyClick(field, Qt::Key_Return);
  REQUIRE(open.document.session().review.size() == 1);
  CHECK(open.document.session().review[0].channel.empty());
  CHECK(open.document.session().review[0].time == open.pane.cursors().reference);
  CHECK(open.document.session().review[0].to_time == open.pane.cursors().second);
  CHECK(open.settle());
}
