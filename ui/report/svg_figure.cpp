// Chronodrome, GPL-3.0-or-later.
#include "ui/report/svg_figure.h"

#include "ui/report/svg_device.h"
#include "ui/report/words.h"

namespace chronodrome::ui::report {

QString svgOf(const Figures::Figure& figure) {
  SvgDevice device(figure.size);
  {
    QCPPainter painter;
    painter.begin(&device);
    painter.setMode(QCPPainter::pmVectorized);
    figure.paint(painter);
    painter.end();
  }
  const QString width = QString::number(figure.size.width());
  const QString height = QString::number(figure.size.height());
  return QStringLiteral("<svg role=\"img\" aria-label=\"") + plain(figure.spoken).toHtmlEscaped() +
         QStringLiteral("\" width=\"") + width + QStringLiteral("\" height=\"") + height +
         QStringLiteral("\" viewBox=\"0 0 ") + width + QLatin1Char(' ') + height + QStringLiteral("\">\n") +
         withoutControls(device.content()) + QStringLiteral("</svg>");
}

} // namespace chronodrome::ui::report
