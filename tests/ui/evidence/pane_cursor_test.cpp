// Chronodrome, GPL-3.0-or-later.
// What cursors read, against numbers worked out from the files of the sample session by other means: samples
// from the bytes of recording.edf, delays and beats from truth.json, the bath from scenario.json.
#include <catch2/catch.hpp>

#include <QClipboard>
#include <QGuiApplication>

#include "ui/evidence/open_pane.h"
#include "ui/evidence/read_out_strip.h"

using namespace chronodrome;
using Catch::Matchers::WithinAbs;
using test_support::OpenPane;
using ui::evidence::Snap;

namespace {

QString cell(OpenPane& open, int row, const QString& head) {
  const auto& read_out = open.pane.findChild<ui::evidence::ReadOutStrip*>()->readOut();
  for (qsizetype column = 0; column < read_out.heads.size(); ++column) {
    if (read_out.heads.at(column).startsWith(head)) return read_out.rows.at(row).at(column);
  }
  return QStringLiteral("no such column");
}

} // namespace

TEST_CASE("cursors snap to marks, to samples, or to nothing", "[ui]") {
  OpenPane open;
  open.show(1030.0, 1031.0);
  const auto& marks = open.document.result()->activations[0].marks;
  const auto mark =
      std::find_if(marks.begin(), marks.end(), [](const auto& m) { return m.time > Seconds(1030.1); });
  const QPoint beside = open.at(0, mark->time.value()) + QPoint(8, 0);
  const double exact = open.figure().timeFrame().timeOf(beside.x()).value();
  open.point(beside);
  CHECK(open.pane.cursors().second == mark->time);
  open.key(Qt::Key_S);
  CHECK(open.pane.cursors().snap == Snap::samples);
  CHECK_THAT(open.pane.cursors().second->value(), WithinAbs(std::round(exact * 1e3) / 1e3, 1e-9));
  open.key(Qt::Key_S);
  CHECK(open.pane.cursors().snap == Snap::off);
  CHECK_THAT(open.pane.cursors().second->value(), WithinAbs(exact, 1e-9));
  open.key(Qt::Key_S);
  CHECK(open.pane.cursors().snap == Snap::marks);
  // Far from any mark it is the sample.
  open.point(open.at(0, mark->time.value() - 0.06));
  CHECK_THAT(std::remainder(open.pane.cursors().second->value(), 1e-3), WithinAbs(0.0, 1e-9));
}

TEST_CASE("two cursors read what the files hold", "[ui]") {
  OpenPane open;
  open.key(Qt::Key_F); // raw
  open.show(1030.0, 1030.1);
  open.key(Qt::Key_S);
  open.point(open.at(0, 1030.020));
  open.key(Qt::Key_R);
  CHECK_THAT(open.pane.cursors().reference->value(), WithinAbs(1030.020, 1e-9));
  open.click(open.at(0, 1030.060));
  CHECK_THAT(open.pane.cursors().second->value(), WithinAbs(1030.060, 1e-9));

  CHECK(cell(open, 0, "time") == QStringLiteral("reference 17:10.0200"));
  CHECK(cell(open, 1, "time") == QStringLiteral("second 17:10.0600"));
  // 40 ms are 60 / 0.04 = 1500 a minute.
  CHECK(cell(open, 2, "time") == QStringLiteral("difference 40.0\u00A0ms = 1500 beats/min"));
  CHECK(cell(open, 0, "RA, mV, raw") == QStringLiteral("0.07228"));
  CHECK(cell(open, 1, "RA, mV, raw") == QStringLiteral("0.05275"));
  CHECK(cell(open, 2, "RA, mV, raw") == QStringLiteral("\u22120.01954"));
  CHECK(cell(open, 0, "RV, mV, raw") == QStringLiteral("\u22120.06056"));
  CHECK(cell(open, 1, "RV, mV, raw") == QStringLiteral("0.1817"));
  CHECK(cell(open, 2, "RV, mV, raw") == QStringLiteral("0.2422"));
  // 30 µM was added at 990 s and met the tissue 12 s later.
  CHECK(cell(open, 1, "bath") == QStringLiteral("acetylcholine 30\u00A0µM"));
  CHECK(cell(open, 2, "bath") == QStringLiteral("40.1 s after the addition"));
  CHECK(cell(open, 3, "bath") == QStringLiteral("clock 10:22:10.1"));

  QGuiApplication::clipboard()->clear();
  open.key(Qt::Key_C, Qt::ControlModifier | Qt::ShiftModifier);
  const QStringList lines = QGuiApplication::clipboard()->text().split(QLatin1Char('\n'));
  REQUIRE(lines.size() == 6); // heads, four rows, end of the last line
  CHECK(lines[1].startsWith(QStringLiteral("reference 17:10.0200\t")));
  CHECK(lines[2].contains(QStringLiteral("0.1817")));
}

TEST_CASE("the delay and the intervals at a cursor are those of the beat", "[ui]") {
  OpenPane open;
  open.show(1028.0, 1032.0);
  // Marks lie within 0.5 ms of the beats of truth.json near 1030.2 s, which conduct after a blocked one.
  open.click(open.at(0, 1030.2029));
  const double delay = cell(open, 0, "AV delay").toDouble();
  CHECK_THAT(delay, WithinAbs(83.051, 1.0));
  const QStringList intervals = cell(open, 1, "RA").split(QStringLiteral(" | "));
  REQUIRE(intervals.size() == 2);
  CHECK_THAT(intervals[0].toDouble(), WithinAbs(379.474, 1.0));
  CHECK_THAT(intervals[1].toDouble(), WithinAbs(377.647, 1.0));
  open.key(Qt::Key_Escape);
  open.key(Qt::Key_Escape);
  open.click(open.at(0, 1029.8234));
  CHECK(cell(open, 0, "AV delay") == QStringLiteral("blocked"));
}

TEST_CASE("the filtered value is read while the filtered signal is shown, and named", "[ui]") {
  OpenPane open;
  open.show(1030.0, 1030.1);
  REQUIRE(
      QTest::qWaitFor([&] { return open.figure().mode() == QStringLiteral("filtered over raw"); }, 20000));
  open.key(Qt::Key_S);
  open.click(open.at(0, 1030.060));
  const QString filtered = cell(open, 0, "RA, mV, filtered");
  CHECK(filtered != QStringLiteral("no such column"));
  CHECK(filtered != QStringLiteral("0.05275"));
  open.key(Qt::Key_F);
  CHECK(open.figure().mode() == QStringLiteral("raw"));
  CHECK(cell(open, 0, "RA, mV, raw") == QStringLiteral("0.05275"));
}

TEST_CASE("a cursor in motion does not draw the traces again", "[ui]") {
  OpenPane open;
  open.show(1030.0, 1031.0);
  REQUIRE(
      QTest::qWaitFor([&] { return open.figure().mode() == QStringLiteral("filtered over raw"); }, 20000));
  QCoreApplication::processEvents();
  int replots = 0;
  QObject::connect(&open.figure(), &QCustomPlot::beforeReplot, &open.figure(), [&] { ++replots; });
  for (int x = 0; x < 40; ++x)
    open.point(open.at(0, 1030.2) + QPoint(x, 0));
  QCoreApplication::processEvents();
  CHECK(replots == 0);
  CHECK(open.figure().overlay().second);
}

TEST_CASE("Escape takes back one thing after the other", "[ui]") {
  OpenPane open;
  open.show(1030.0, 1031.0);
  open.point(open.at(0, 1030.2));
  open.key(Qt::Key_R);
  open.click(open.at(0, 1030.4));
  open.drag(open.at(0, 1030.5), open.at(0, 1030.6), Qt::AltModifier);
  open.key(Qt::Key_Escape);
  CHECK_FALSE(open.figure().overlay().selection);
  CHECK(open.pane.cursors().is_pinned);
  open.key(Qt::Key_Escape);
  CHECK_FALSE(open.pane.cursors().is_pinned);
  CHECK(open.pane.cursors().reference);
  open.key(Qt::Key_Escape);
  CHECK_FALSE(open.pane.cursors().reference);
}
