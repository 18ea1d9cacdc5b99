// Chronodrome, GPL-3.0-or-later.
#include <catch2/catch.hpp>

#include <QPainter>

#include "ui/report/content.h"
#include "ui/report/svg_device.h"

using namespace chronodrome::ui::report;

namespace {

QString painted(const std::function<void(QPainter&)>& paint) {
  SvgDevice device(QSize(100, 50));
  QPainter painter(&device);
  paint(painter);
  painter.end();
  return device.content();
}

} // namespace

TEST_CASE("a clip rectangle is kept, moved as the painter is moved, and ends where it is lifted",
          "[report]") {
  const QString svg = painted([](QPainter& painter) {
    painter.setPen(QPen(Qt::black, 1.0));
    painter.translate(10, 5);
    painter.setClipRect(QRect(0, 0, 20, 10));
    painter.drawLine(QPointF(0, 0), QPointF(500, 0));
    painter.setClipping(false);
    painter.drawLine(QPointF(0, 0), QPointF(1, 0));
  });
  const auto open =
      svg.indexOf(QStringLiteral("<svg x=\"10\" y=\"5\" width=\"20\" height=\"10\" viewBox=\"10 5 20 10\">"));
  const auto line = svg.indexOf(QStringLiteral("M10 5L510 5"));
  const auto close = svg.indexOf(QStringLiteral("</svg>"));
  const auto free = svg.indexOf(QStringLiteral("M10 5L11 5"));
  CHECK(open >= 0);
  CHECK(open < line);
  CHECK(line < close);
  CHECK(close < free);
}

TEST_CASE("a clip is restored with the painter's state", "[report]") {
  const QString svg = painted([](QPainter& painter) {
    painter.setClipRect(QRect(0, 0, 40, 40));
    painter.save();
    painter.setClipRect(QRect(0, 0, 10, 10));
    painter.fillRect(QRectF(0, 0, 1, 1), Qt::black);
    painter.restore();
    painter.fillRect(QRectF(0, 0, 2, 2), Qt::black);
  });
  CHECK(svg.count(QStringLiteral("<svg ")) == 2);
  CHECK(svg.indexOf(QStringLiteral("width=\"40\"")) > svg.indexOf(QStringLiteral("width=\"10\"")));
  CHECK(svg.count(QStringLiteral("</svg>")) == 2);
}

TEST_CASE("text stays text, escaped, with its size, weight and turn", "[report]") {
  const QString svg = painted([](QPainter& painter) {
    QFont font;
    font.setPixelSize(11);
    font.setBold(true);
    painter.setFont(font);
    painter.drawText(QPointF(3, 20), QStringLiteral("a<b&c"));
    painter.rotate(-90);
    painter.drawText(QPointF(-30, 8), QStringLiteral("up"));
  });
  CHECK(svg.contains(
      QStringLiteral("<text x=\"3\" y=\"20\" font-size=\"11\" font-weight=\"bold\" fill=\"#000000\">"
                     "a&lt;b&amp;c</text>")));
  CHECK(svg.contains(QStringLiteral("<text transform=\"matrix(0 -1 1 0 8 30)\"")));
}

TEST_CASE("colours, opacity, widths and dashes are kept", "[report]") {
  const QString svg = painted([](QPainter& painter) {
    painter.setOpacity(0.5);
    QPen pen(QColor(0x12, 0x34, 0x56), 2.0, Qt::DashLine);
    painter.setPen(pen);
    painter.setBrush(QColor(0xAB, 0xCD, 0xEF));
    painter.drawRect(QRectF(1, 1, 5, 5));
    painter.setPen(Qt::NoPen);
    painter.setBrush(Qt::NoBrush);
    painter.drawRect(QRectF(1, 1, 5, 5)); // nothing to see, nothing written
  });
  CHECK(svg.contains(QStringLiteral("fill=\"#abcdef\" fill-opacity=\"0.5\"")));
  CHECK(svg.contains(QStringLiteral("stroke=\"#123456\" stroke-opacity=\"0.5\" stroke-width=\"2\"")));
  CHECK(svg.contains(QStringLiteral("stroke-dasharray=\"")));
  CHECK(svg.count(QStringLiteral("<path")) == 1);
}

TEST_CASE("a column without any text is left out", "[report]") {
  Table table;
  table.columns = {
      {QStringLiteral("a"), true}, {QStringLiteral("note"), false}, {QStringLiteral("b"), false}};
  table.rows = {{{QStringLiteral("group")}, true},
                {{QStringLiteral("1"), QString(), QStringLiteral("x")}, false}};
  const Table left = withoutEmptyColumns(table);
  REQUIRE(left.columns.size() == 2);
  CHECK(left.columns[1].head == QStringLiteral("b"));
  CHECK(left.rows[0].cells == QStringList{QStringLiteral("group")});
  CHECK(left.rows[1].cells == QStringList{QStringLiteral("1"), QStringLiteral("x")});
}
