// Chronodrome, GPL-3.0-or-later.
#pragma once

#include "ui/look/custom_plot.h"

#include <functional>
#include <utility>
#include <variant>
#include <vector>

#include <QSize>
#include <QString>
#include <QStringList>

// What a report says, in order, before anyone decides how it looks: PDF and HTML are two printings of one
// content, so that neither can say what the other does not.
namespace chronodrome::ui::report {

struct Heading {
  int level = 1; ///< 1: section, 2: part of one
  QString text;
};

enum class Tone { normal, quiet };

struct Paragraph {
  QString text;
  Tone tone = Tone::normal;
};

struct Bullets {
  struct Item {
    QString lead; ///< set off at the front; may be empty
    QString text;
  };
  std::vector<Item> items;
};

/// Names and values.
struct Facts {
  std::vector<std::pair<QString, QString>> rows;
};

struct Table {
  struct Column {
    QString head;
    bool is_number = false; ///< set to the right
  };
  struct Row {
    QStringList cells;
    bool is_group = false; ///< one cell, a heading for the rows below it
  };
  std::vector<Column> columns;
  std::vector<Row> rows;
};

/// Figures side by side. Sizes in pixels of 1/96 inch; the page is kContentWidth wide.
struct Figures {
  struct Figure {
    QSize size;
    QString caption;
    QString spoken; ///< what it shows, for a reader who cannot see it
    std::function<void(QCPPainter&)> paint;
  };
  std::vector<Figure> figures;
};

/// Lines to sign on, each with a date.
struct Signatures {
  QStringList roles;
};

using Block = std::variant<Heading, Paragraph, Bullets, Facts, Table, Figures, Signatures>;

struct Content {
  QString title;
  QString subtitle;
  QString running_head; ///< at the top of each page
  QString running_foot; ///< at the bottom, beside the page number
  QString program;      ///< name and version
  std::vector<Block> blocks;
};

/// The same table without the columns in which no row has anything.
Table withoutEmptyColumns(Table table);

/// A4 without margins of 18 mm, in pixels of 1/96 inch.
inline constexpr int kContentWidth = 657;

} // namespace chronodrome::ui::report
