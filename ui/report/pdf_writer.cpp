// Chronodrome, GPL-3.0-or-later.
#include "ui/report/pdf_writer.h"

#include <QBuffer>
#include <QMarginsF>
#include <QPageLayout>
#include <QPageSize>
#include <QPdfWriter>

#include "ui/report/page_setter.h"
#include "ui/report/paged_table.h"
#include "ui/report/text_box.h"

namespace chronodrome::ui::report {
namespace {

constexpr double kMarginMm = 18.0;
constexpr double kPixelsPerMm = 96.0 / 25.4;
constexpr double kPageHeight = (297.0 - 2.0 * kMarginMm) * kPixelsPerMm;
constexpr double kHead = 24.0; // running head with its white
constexpr double kFoot = 24.0;
constexpr int kResolution = 1200; // dots an inch; lines and letters keep their places

TextBox runningText(const QString& text, const look::Theme& theme, Qt::Alignment side) {
  const QFont font = paperFont(theme, look::TextSize::small);
  const QString cut = QFontMetricsF(font).elidedText(text, Qt::ElideRight, 0.7 * kContentWidth);
  return {cut, {font, theme.text_quiet, side, 0}, kContentWidth};
}

void paintFrame(QCPPainter& painter, const Content& content, const look::Theme& theme, std::size_t page,
                std::size_t pages) {
  runningText(content.running_head, theme, Qt::AlignLeft).draw(painter, QPointF(0.0, 0.0));
  runningText(content.program, theme, Qt::AlignRight).draw(painter, QPointF(0.0, 0.0));
  const double foot = kPageHeight - 14.0;
  runningText(content.running_foot, theme, Qt::AlignLeft).draw(painter, QPointF(0.0, foot));
  runningText(QStringLiteral("page %1 of %2").arg(page).arg(pages), theme, Qt::AlignRight)
      .draw(painter, QPointF(0.0, foot));
  painter.setPen(QPen(theme.line, 0.5));
  painter.drawLine(QPointF(0.0, 16.0), QPointF(kContentWidth, 16.0));
  painter.drawLine(QPointF(0.0, foot - 4.0), QPointF(kContentWidth, foot - 4.0));
}

/// Qt stamps the clock; blanks of the same length keep every offset in the file.
void blankDates(QByteArray& pdf) {
  for (const char* key : {"/CreationDate (", "/ModDate ("}) {
    for (auto at = pdf.indexOf(key); at >= 0; at = pdf.indexOf(key, at + 1)) {
      const auto end = pdf.indexOf(')', at);
      if (end < 0) return;
      for (auto i = at; i <= end; ++i)
        pdf[i] = ' ';
    }
  }
}

} // namespace

QByteArray pdfOf(const Content& content) {
  const look::Theme& theme = look::Theme::of(look::Mode::paper);
  QByteArray bytes;
  QBuffer buffer(&bytes);
  buffer.open(QIODevice::WriteOnly);
  {
    QPdfWriter writer(&buffer);
    writer.setResolution(kResolution);
    writer.setPageLayout({QPageSize(QPageSize::A4), QPageLayout::Portrait,
                          QMarginsF(kMarginMm, kMarginMm, kMarginMm, kMarginMm), QPageLayout::Millimeter});
    writer.setTitle(content.title + QStringLiteral(" – ") + content.subtitle);
    writer.setCreator(content.program);
    const PageFlow pages = pagesOf(content, theme, kPageHeight - kHead - kFoot);
    QCPPainter painter;
    painter.begin(&writer);
    painter.setMode(QCPPainter::pmVectorized);
    for (std::size_t page = 0; page < pages.pageCount(); ++page) {
      if (page > 0) writer.newPage();
      painter.save();
      painter.scale(kResolution / 96.0, kResolution / 96.0);
      paintFrame(painter, content, theme, page + 1, pages.pageCount());
      painter.translate(0.0, kHead);
      pages.paintPage(painter, page);
      painter.restore();
    }
    painter.end();
  }
  blankDates(bytes);
  return bytes;
}

} // namespace chronodrome::ui::report
