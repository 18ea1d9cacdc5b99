// Chronodrome, GPL-3.0-or-later.
#include "ui/report/svg_figure.h"

#include <QBuffer>
#include <QRegularExpression>
#include <QSvgGenerator>

#include "ui/report/words.h"

namespace chronodrome::ui::report {

QString svgOf(const Figures::Figure& figure) {
  QByteArray bytes;
  QBuffer buffer(&bytes);
  buffer.open(QIODevice::WriteOnly);
  {
    QSvgGenerator generator;
    generator.setOutputDevice(&buffer);
    generator.setResolution(96);
    generator.setSize(figure.size);
    generator.setViewBox(QRect(QPoint(0, 0), figure.size));
    QCPPainter painter;
    painter.begin(&generator);
    painter.setMode(QCPPainter::pmVectorized);
    figure.paint(painter);
    painter.end();
  }
  QString svg = QString::fromUtf8(bytes);
  // Inside a page the element needs neither the head of a file nor names of its spaces; what is left then
  // names nothing outside.
  svg.remove(0, std::max<qsizetype>(0, svg.indexOf(QStringLiteral("<svg"))));
  static const QRegularExpression spaces(QStringLiteral("\\s+xmlns(:\\w+)?=\"[^\"]*\""));
  static const QRegularExpression notes(QStringLiteral("<(title|desc)>.*?</\\1>"),
                                        QRegularExpression::DotMatchesEverythingOption);
  static const QRegularExpression lengths(QStringLiteral("<svg width=\"[^\"]*\" height=\"[^\"]*\""));
  svg.remove(spaces);
  svg.remove(notes);
  svg.replace(lengths, QStringLiteral("<svg role=\"img\" aria-label=\"%1\" width=\"%2\" height=\"%3\"")
                           .arg(plain(figure.spoken).toHtmlEscaped())
                           .arg(figure.size.width())
                           .arg(figure.size.height()));
  return plain(svg);
}

} // namespace chronodrome::ui::report
