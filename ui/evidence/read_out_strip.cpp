// Chronodrome, GPL-3.0-or-later.
#include "ui/evidence/read_out_strip.h"

#include <algorithm>

#include <QPainter>

namespace chronodrome::ui::evidence {
namespace {

constexpr int kLines = 5; // heads, two cursors, difference, intervals
constexpr int kLine = 2 * look::kUnit;

} // namespace

ReadOutStrip::ReadOutStrip(QWidget* parent) : QWidget(parent) {
  setObjectName(QStringLiteral("readOutStrip"));
  setAccessibleName(QStringLiteral("read-out of the cursors"));
  setSizePolicy(QSizePolicy::Expanding, QSizePolicy::Fixed);
}

QSize ReadOutStrip::sizeHint() const {
  return {40 * look::kUnit, kLines * kLine + look::kUnit};
}

void ReadOutStrip::setTheme(const look::Theme& theme) {
  theme_ = &theme;
  update();
}

void ReadOutStrip::show(const ReadOut& readOut) {
  read_out_ = readOut;
  setAccessibleDescription(readOut.text());
  update();
}

void ReadOutStrip::paintEvent(QPaintEvent*) {
  QPainter painter(this);
  painter.fillRect(rect(), theme_->surface);
  painter.fillRect(QRect(0, 0, width(), look::kThin), theme_->line);
  const QFont font = theme_->font(look::TextSize::small);
  painter.setFont(font);
  const QFontMetrics metrics(font);
  if (read_out_.rows.isEmpty()) {
    painter.setPen(theme_->text_quiet);
    painter.drawText(
        rect().adjusted(look::kUnit, 0, -look::kUnit, 0), Qt::AlignLeft | Qt::AlignVCenter,
        metrics.elidedText(QStringLiteral("Point at a trace to read it. R sets the reference cursor, a "
                                          "click the second one; A adds a mark, X leaves a stretch out."),
                           Qt::ElideRight, width() - 2 * look::kUnit));
    return;
  }
  // Columns as wide as their longest text; where that is too much for the strip, the later ones are cut.
  int left = look::kUnit;
  for (int column = 0; column < read_out_.heads.size(); ++column) {
    int wide = metrics.horizontalAdvance(read_out_.heads.at(column));
    for (const QStringList& row : read_out_.rows)
      wide = std::max(wide, metrics.horizontalAdvance(row.at(column)));
    // The first column does not move while the pointer does.
    if (column == 0) wide = std::max(wide, 33 * look::kUnit);
    wide += 2; // an exact fit is elided by the rounding of the font
    const int room = std::min(wide, width() - look::kUnit - left);
    if (room <= 0) break;
    const auto write = [&](int line, const QString& text, const QColor& ink) {
      painter.setPen(ink);
      painter.drawText(QRect(left, look::kUnit / 2 + line * kLine, room, kLine),
                       Qt::AlignLeft | Qt::AlignVCenter, metrics.elidedText(text, Qt::ElideRight, room));
    };
    write(0, read_out_.heads.at(column), theme_->text_quiet);
    for (int row = 0; row < read_out_.rows.size(); ++row)
      write(row + 1, read_out_.rows.at(row).at(column), theme_->text);
    left += wide + 3 * look::kUnit;
  }
}

} // namespace chronodrome::ui::evidence
