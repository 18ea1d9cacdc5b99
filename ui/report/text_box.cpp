// Chronodrome, GPL-3.0-or-later.
#include "ui/report/text_box.h"

#include <algorithm>
#include <cmath>

#include <QFontMetricsF>
#include <QTextOption>

namespace chronodrome::ui::report {

TextBox::TextBox(const QString& text, const Style& style, double width)
    : layout_(std::make_shared<QTextLayout>(text, style.font)), color_(style.color) {
  QTextOption option(style.alignment);
  option.setWrapMode(QTextOption::WrapAtWordBoundaryOrAnywhere);
  layout_->setTextOption(option);
  if (style.bold_characters > 0) {
    QTextLayout::FormatRange range;
    range.start = 0;
    range.length = style.bold_characters;
    range.format.setFontWeight(QFont::Bold);
    layout_->setFormats({range});
  }
  line_height_ = std::ceil(QFontMetricsF(style.font).height() * 1.08);
  layout_->beginLayout();
  double y = 0.0;
  for (QTextLine line = layout_->createLine(); line.isValid(); line = layout_->createLine()) {
    line.setLineWidth(std::max(width, 1.0));
    line.setPosition(QPointF(0.0, y));
    y += line_height_;
  }
  layout_->endLayout();
}

int TextBox::lineCount() const {
  return layout_ ? std::max(1, layout_->lineCount()) : 0;
}

void TextBox::draw(QPainter& painter, QPointF at, int first, int last) const {
  if (!layout_) return;
  painter.setPen(color_);
  for (int i = std::max(first, 0); i < std::min(last, layout_->lineCount()); ++i)
    layout_->lineAt(i).draw(&painter, at - QPointF(0.0, first * line_height_));
}

double TextBox::naturalWidth(const QString& text, const QFont& font) {
  return std::ceil(QFontMetricsF(font).horizontalAdvance(text)) + 1.0;
}

double TextBox::leastWidth(const QString& text, const QFont& font) {
  double least = 0.0;
  for (const QString& word : text.split(QLatin1Char(' ')))
    least = std::max(least, naturalWidth(word, font));
  return least;
}

} // namespace chronodrome::ui::report
