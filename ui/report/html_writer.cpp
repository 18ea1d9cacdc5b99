// Chronodrome, GPL-3.0-or-later.
#include "ui/report/html_writer.h"

#include "ui/look/theme.h"
#include "ui/report/svg_figure.h"
#include "ui/report/words.h"

namespace chronodrome::ui::report {
namespace {

QString safe(const QString& text) {
  return plain(text).toHtmlEscaped();
}

QString styleOf(const look::Theme& theme) {
  const QString rules = QStringLiteral(
      "body{font:13px/1.45 'Liberation "
      "Sans',Arial,Helvetica,sans-serif;color:%1;background:%2;max-width:%3px;"
      "margin:32px auto;padding:0 24px}"
      "h1{font-size:22px;margin:0}h2{font-size:17px;margin:32px 0 8px}h3{font-size:13px;margin:20px 0 6px}"
      "p{margin:6px 0 10px}.quiet{color:%4;font-size:11px}"
      "table{border-collapse:collapse;font-size:11px;margin:8px 0 12px}"
      "th,td{padding:2px 8px 2px 5px;text-align:left;vertical-align:top;overflow-wrap:anywhere}"
      "th{border-bottom:1px solid %1}td{border-bottom:1px solid %5}"
      ".n{text-align:right;font-variant-numeric:tabular-nums}.g{font-weight:bold;background:%6}"
      ".facts td{border:0;padding:1px 12px 1px 0}.facts td:first-child{color:%4;white-space:nowrap}"
      ".wide{overflow-x:auto}"
      ".figures{display:flex;flex-wrap:wrap;gap:16px;margin:12px "
      "0}figure{margin:0}figure>svg{max-width:100%;height:auto;"
      "font-family:'Liberation Sans',Arial,Helvetica,sans-serif;white-space:pre}"
      "figcaption{color:%4;font-size:11px;margin-top:4px}"
      "ul{padding-left:18px;margin:6px 0 12px}li{margin:3px 0;overflow-wrap:anywhere}"
      ".sign{display:grid;grid-template-columns:360px 160px;gap:0 40px;font-size:11px;color:%4}"
      ".sign span{border-top:1px solid %1;margin-top:44px;padding-top:2px}"
      "footer{color:%4;font-size:11px;border-top:1px solid %5;margin-top:32px;padding-top:8px}"
      "@media print{body{margin:0;padding:0}h2,h3{break-after:avoid}figure,tr{break-inside:avoid}"
      "thead{display:table-header-group}}");
  return rules.arg(theme.text.name(), theme.surface.name())
      .arg(kContentWidth + 60)
      .arg(theme.text_quiet.name(), theme.grid.name(), theme.raised.name());
}

class Writer {
public:
  void add(const Heading& heading) {
    const QString tag = heading.level == 1 ? QStringLiteral("h2") : QStringLiteral("h3");
    element(tag, safe(heading.text));
  }
  void add(const Paragraph& paragraph) {
    html_ += paragraph.tone == Tone::quiet ? QStringLiteral("<p class=\"quiet\">") : QStringLiteral("<p>");
    html_ += safe(paragraph.text) + QStringLiteral("</p>\n");
  }
  void add(const Bullets& bullets) {
    html_ += QStringLiteral("<ul>\n");
    for (const auto& item : bullets.items) {
      const QString lead = item.lead.isEmpty()
                               ? QString()
                               : QStringLiteral("<strong>") + safe(item.lead) + QStringLiteral("</strong>");
      element(QStringLiteral("li"), lead + safe(item.text));
    }
    html_ += QStringLiteral("</ul>\n");
  }
  void add(const Facts& facts) {
    html_ += QStringLiteral("<table class=\"facts\"><tbody>\n");
    for (const auto& row : facts.rows)
      html_ += QStringLiteral("<tr><td>") + safe(row.first) + QStringLiteral("</td><td>") + safe(row.second) +
               QStringLiteral("</td></tr>\n");
    html_ += QStringLiteral("</tbody></table>\n");
  }
  void add(const Table& table) {
    html_ += QStringLiteral("<div class=\"wide\"><table><thead><tr>");
    for (const auto& column : table.columns)
      html_ += open(QStringLiteral("th"), column.is_number) + safe(column.head) + QStringLiteral("</th>");
    html_ += QStringLiteral("</tr></thead><tbody>\n");
    for (const auto& row : table.rows)
      addRow(table, row);
    html_ += QStringLiteral("</tbody></table></div>\n");
  }
  void add(const Figures& figures) {
    html_ += QStringLiteral("<div class=\"figures\">\n");
    for (const auto& figure : figures.figures)
      html_ += QStringLiteral("<figure>") + svgOf(figure) + QStringLiteral("<figcaption>") +
               safe(figure.caption) + QStringLiteral("</figcaption></figure>\n");
    html_ += QStringLiteral("</div>\n");
  }
  void add(const Signatures& signatures) {
    html_ += QStringLiteral("<div class=\"sign\">");
    for (const QString& role : signatures.roles)
      html_ += QStringLiteral("<span>") + safe(role) + QStringLiteral("</span><span>Date</span>");
    html_ += QStringLiteral("</div>\n");
  }
  void element(const QString& tag, const QString& inner) {
    html_ += QLatin1Char('<') + tag + QLatin1Char('>') + inner + QStringLiteral("</") + tag +
             QStringLiteral(">\n");
  }
  void raw(const QString& html) { html_ += html; }
  [[nodiscard]] QByteArray take() const { return html_.toUtf8(); }

private:
  static QString open(const QString& tag, bool is_number) {
    return QLatin1Char('<') + tag + (is_number ? QStringLiteral(" class=\"n\">") : QStringLiteral(">"));
  }
  void addRow(const Table& table, const Table::Row& row) {
    html_ += QStringLiteral("<tr>");
    if (row.is_group) {
      html_ += QStringLiteral("<td class=\"g\" colspan=\"%1\">").arg(table.columns.size());
      html_ += safe(row.cells.value(0)) + QStringLiteral("</td>");
    } else {
      for (qsizetype i = 0; i < row.cells.size(); ++i) {
        const auto at = static_cast<std::size_t>(i);
        html_ += open(QStringLiteral("td"), at < table.columns.size() && table.columns[at].is_number) +
                 safe(row.cells.at(i)) + QStringLiteral("</td>");
      }
    }
    html_ += QStringLiteral("</tr>\n");
  }

  QString html_;
};

} // namespace

QByteArray htmlOf(const Content& content) {
  Writer writer;
  writer.raw(QStringLiteral("<!DOCTYPE html>\n<html lang=\"en\"><head><meta charset=\"utf-8\"/>\n"));
  writer.element(QStringLiteral("title"), safe(content.title));
  writer.raw(QStringLiteral("<meta name=\"generator\" content=\"") + safe(content.program) +
             QStringLiteral("\"/>\n<meta name=\"viewport\" content=\"width=device-width\"/>\n<style>") +
             styleOf(look::Theme::of(look::Mode::paper)) + QStringLiteral("</style></head>\n<body>\n"));
  writer.element(QStringLiteral("h1"), safe(content.title));
  writer.raw(QStringLiteral("<p class=\"quiet\">") + safe(content.subtitle) + QStringLiteral("</p>\n"));
  for (const auto& block : content.blocks)
    std::visit([&](const auto& one) { writer.add(one); }, block);
  writer.raw(QStringLiteral("<footer>") + safe(content.program) + QStringLiteral(" · ") +
             safe(content.running_foot) + QStringLiteral("</footer>\n</body></html>\n"));
  return writer.take();
}

} // namespace chronodrome::ui::report
