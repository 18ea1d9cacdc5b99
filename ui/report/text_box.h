// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <memory>

#include <QColor>
#include <QFont>
#include <QPainter>
#include <QString>
#include <QTextLayout>

namespace chronodrome::ui::report {

/// A text set into lines of one width, measured once and drawn as measured. Breaks inside a word where a word
/// is longer than the line, so that a path or a digest is never clipped.
class TextBox {
public:
  struct Style {
    QFont font;
    QColor color;
    Qt::Alignment alignment = Qt::AlignLeft;
    int bold_characters = 0; ///< at the front
  };

  TextBox() = default;
  TextBox(const QString& text, const Style& style, double width);

  [[nodiscard]] int lineCount() const;
  [[nodiscard]] double lineHeight() const { return line_height_; }
  [[nodiscard]] double height() const { return lineCount() * line_height_; }
  /// Lines first ... last - 1, the first of them at `at`.
  void draw(QPainter& painter, QPointF at, int first, int last) const;
  void draw(QPainter& painter, QPointF at) const { draw(painter, at, 0, lineCount()); }

  /// Width of the text on one line, and of its widest piece that should not be broken.
  static double naturalWidth(const QString& text, const QFont& font);
  static double leastWidth(const QString& text, const QFont& font);

private:
  std::shared_ptr<QTextLayout> layout_;
  QColor color_;
  double line_height_ = 0.0;
};

} // namespace chronodrome::ui::report
