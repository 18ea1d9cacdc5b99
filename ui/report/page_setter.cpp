// Chronodrome, GPL-3.0-or-later.
#include "ui/report/page_setter.h"

#include <algorithm>

#include "ui/report/paged_table.h"
#include "ui/report/text_box.h"

namespace chronodrome::ui::report {
namespace {

constexpr double kUnit = look::kUnit;
constexpr double kIndent = 14.0;     // of a list
constexpr double kFactNames = 112.0; // width of the names of facts

class Setter {
public:
  Setter(const Content& content, const look::Theme& theme, double height)
      : content_(content), theme_(theme), pages_(height) {}

  PageFlow take() {
    setTitle();
    for (std::size_t i = 0; i < content_.blocks.size(); ++i) {
      at_ = i;
      std::visit([this](const auto& block) { set(block); }, content_.blocks[i]);
    }
    return std::move(pages_);
  }

private:
  [[nodiscard]] TextBox box(const QString& text, look::TextSize size, bool bold, double width,
                            bool quiet = false, int bold_characters = 0) const {
    return {text,
            {paperFont(theme_, size, bold), quiet ? theme_.text_quiet : theme_.text, Qt::AlignLeft,
             bold_characters},
            width};
  }

  void placeBox(const TextBox& text, double x, int first, int last) {
    pages_.place((last - first) * text.lineHeight(), [text, x, first, last](QCPPainter& painter, double y) {
      text.draw(painter, QPointF(x, y), first, last);
    });
  }
  void placeBox(const TextBox& text, double x) { placeBox(text, x, 0, text.lineCount()); }

  /// Lines that may go over to the next page, two at the least on either side.
  void flowBox(const TextBox& text, double x) {
    int first = 0;
    const int count = text.lineCount();
    while (first < count) {
      const int room = static_cast<int>(pages_.left() / text.lineHeight());
      int last = std::min(count, first + room);
      if (last < count) last = std::min(last, count - 2);
      if (last - first < std::min(2, count - first)) {
        if (!pages_.isAtTop()) {
          pages_.newPage();
          continue;
        }
        last = std::min(count, first + std::max(1, room));
      }
      placeBox(text, x, first, last);
      first = last;
    }
  }

  void setTitle() {
    pages_.place(0.5 * kUnit, [](QCPPainter&, double) {});
    placeBox(box(content_.title, look::TextSize::large, true, kContentWidth), 0.0);
    placeBox(box(content_.subtitle, look::TextSize::normal, false, kContentWidth, true), 0.0);
    pages_.space(kUnit);
  }

  /// What a block needs at the least below the heading before it.
  [[nodiscard]] double firstHeight(std::size_t index) const {
    if (index >= content_.blocks.size()) return 0.0;
    const Block& block = content_.blocks[index];
    if (const auto* heading = std::get_if<Heading>(&block))
      return headingBox(*heading).height() + 2.0 * kUnit + firstHeight(index + 1);
    if (const auto* paragraph = std::get_if<Paragraph>(&block)) {
      const double own = paragraphBox(*paragraph).height() + kUnit;
      // A note in front of a table or figure stands with it.
      return paragraph->tone == Tone::quiet ? own + firstHeight(index + 1) : std::min(own, 60.0);
    }
    if (const auto* table = std::get_if<Table>(&block))
      return PagedTable(*table, theme_).firstHeight() + kUnit;
    if (const auto* figures = std::get_if<Figures>(&block)) return figuresHeight(*figures) + kUnit;
    if (std::holds_alternative<Signatures>(block)) return 120.0;
    return 56.0;
  }

  [[nodiscard]] TextBox headingBox(const Heading& heading) const {
    const bool is_section = heading.level == 1;
    return box(heading.text, is_section ? look::TextSize::large : look::TextSize::normal, true,
               kContentWidth);
  }
  [[nodiscard]] TextBox paragraphBox(const Paragraph& paragraph) const {
    const bool quiet = paragraph.tone == Tone::quiet;
    return box(paragraph.text, quiet ? look::TextSize::small : look::TextSize::normal, false, kContentWidth,
               quiet);
  }

  void set(const Heading& heading) {
    const TextBox text = headingBox(heading);
    pages_.space(heading.level == 1 ? 2.5 * kUnit : kUnit);
    pages_.need(std::min(text.height() + firstHeight(at_ + 1) + kUnit, pages_.height()));
    placeBox(text, 0.0);
    pages_.space(heading.level == 1 ? 0.75 * kUnit : 0.5 * kUnit);
  }

  void set(const Paragraph& paragraph) {
    flowBox(paragraphBox(paragraph), 0.0);
    pages_.space(0.75 * kUnit);
  }

  void set(const Bullets& bullets) {
    for (const auto& item : bullets.items) {
      const TextBox text = box(item.lead + item.text, look::TextSize::normal, false, kContentWidth - kIndent,
                               false, static_cast<int>(item.lead.size()));
      const TextBox dot = box(QStringLiteral("•"), look::TextSize::normal, false, kIndent);
      pages_.need(std::min(3, text.lineCount()) * text.lineHeight());
      pages_.place(0.0, [dot](QCPPainter& painter, double y) { dot.draw(painter, QPointF(2.0, y)); });
      flowBox(text, kIndent);
      pages_.space(0.4 * kUnit);
    }
    pages_.space(0.4 * kUnit);
  }

  void set(const Facts& facts) {
    for (const auto& row : facts.rows) {
      const TextBox name = box(row.first, look::TextSize::small, false, kFactNames, true);
      const TextBox value = box(row.second, look::TextSize::small, false, kContentWidth - kFactNames);
      pages_.need(std::min(3, value.lineCount()) * value.lineHeight());
      pages_.place(0.0, [name](QCPPainter& painter, double y) { name.draw(painter, QPointF(0.0, y)); });
      flowBox(value, kFactNames);
      pages_.space(2.0);
    }
    pages_.space(0.5 * kUnit);
  }

  void set(const Table& table) {
    PagedTable(table, theme_).flow(pages_);
    pages_.space(kUnit);
  }

  [[nodiscard]] TextBox captionBox(const Figures::Figure& figure) const {
    return box(figure.caption, look::TextSize::small, false, figure.size.width(), true);
  }
  [[nodiscard]] double figuresHeight(const Figures& figures) const {
    double height = 0.0;
    for (const auto& figure : figures.figures)
      height = std::max(height, figure.size.height() + 4.0 + captionBox(figure).height());
    return height;
  }

  void set(const Figures& figures) {
    const double height = figuresHeight(figures);
    pages_.need(std::min(height, pages_.height()));
    double x = 0.0;
    for (const auto& figure : figures.figures) {
      const TextBox caption = captionBox(figure);
      const QSize size = figure.size;
      const auto paint = figure.paint;
      pages_.place(0.0, [caption, size, paint, x](QCPPainter& painter, double y) {
        painter.save();
        painter.translate(x, y);
        paint(painter);
        painter.restore();
        caption.draw(painter, QPointF(x, y + size.height() + 4.0));
      });
      x += size.width() + 2.0 * kUnit;
    }
    pages_.place(height, [](QCPPainter&, double) {});
    pages_.space(1.5 * kUnit);
  }

  void set(const Signatures& signatures) {
    constexpr double kLine = 52.0;
    pages_.need(kLine * static_cast<double>(signatures.roles.size()));
    for (const QString& role : signatures.roles) {
      const TextBox name = box(role, look::TextSize::small, false, 200.0, true);
      const TextBox date = box(QStringLiteral("Date"), look::TextSize::small, false, 200.0, true);
      const look::Theme& theme = theme_;
      pages_.place(kLine, [name, date, &theme](QCPPainter& painter, double y) {
        const double base = y + kLine - 18.0;
        painter.setPen(QPen(theme.text, 0.75));
        painter.drawLine(QPointF(0.0, base), QPointF(360.0, base));
        painter.drawLine(QPointF(400.0, base), QPointF(560.0, base));
        name.draw(painter, QPointF(0.0, base + 2.0));
        date.draw(painter, QPointF(400.0, base + 2.0));
      });
    }
  }

  const Content& content_;
  const look::Theme& theme_;
  PageFlow pages_;
  std::size_t at_ = 0;
};

} // namespace

PageFlow pagesOf(const Content& content, const look::Theme& theme, double height) {
  return Setter(content, theme, height).take();
}

} // namespace chronodrome::ui::report
