// Chronodrome, GPL-3.0-or-later.
#include "results/workbook.h"

#include <algorithm>
#include <array>

#include "base/number_text.h"
#include "results/dictionary.h"
#include "results/table_reader.h"
#include "results/workbook_tables.h"

namespace chronodrome::results {
namespace {

/// Order of the sheets behind the summary; tables that are not named follow.
constexpr std::array<std::string_view, 11> kOrder = {
    "responses.csv", "workbook.xlsx", "rhythm.csv",   "activations.csv", "intervals.csv", "delays.csv",
    "mechanics.csv", "quality.csv",   "impulses.csv", "pacing.csv",      "conduction.csv"};

bool carries_unit(std::string_view column, std::string_view unit) {
  constexpr std::array<std::pair<std::string_view, std::string_view>, 4> endings = {
      {{"s", "_s"}, {"ms", "_ms"}, {"bpm", "_bpm"}, {"mol/L", "_mol_per_l"}}};
  return std::any_of(endings.begin(), endings.end(), [&](const auto& ending) {
    return ending.first == unit && column.ends_with(ending.second);
  });
}

NumberShow show_of(const ColumnMeaning& meaning) {
  if (meaning.kind == ColumnKind::count) return NumberShow::whole;
  if (meaning.unit == "s") return NumberShow::seconds;
  if (meaning.unit == "ms") return NumberShow::milliseconds;
  if (meaning.unit == "bpm") return NumberShow::rate;
  if (meaning.unit == "mol/L") return NumberShow::concentration;
  if (meaning.column.ends_with("_share") || meaning.column == "confidence") return NumberShow::share;
  return NumberShow::general;
}

struct Column {
  SheetColumn sheet;
  bool is_text = true;
};

/// A column that the dictionary does not know is text: shown as it is.
Column column_of(const std::string& file, const std::string& head) {
  const auto* meaning = meaning_of(file, head);
  if (meaning == nullptr) return {{head, NumberShow::general}, true};
  std::string shown = head;
  if (!meaning->unit.empty() && !carries_unit(head, meaning->unit))
    shown += " (" + std::string(meaning->unit) + ")";
  return {{shown, show_of(*meaning)}, meaning->kind == ColumnKind::text};
}

SheetCell cell_of(const std::string& text, const Column& column) {
  if (text.empty()) return std::monostate{};
  if (!column.is_text) {
    if (const auto number = parse_number(text)) return *number;
  }
  return text;
}

void add_table(BookWriter& book, const std::string& sheet, const std::string& file, const std::string& text) {
  TableReader reader(text);
  std::vector<std::string> cells;
  if (!reader.next(cells)) return;
  std::vector<Column> columns;
  std::vector<SheetColumn> heads;
  for (const auto& head : cells) {
    columns.push_back(column_of(file, head));
    heads.push_back(columns.back().sheet);
  }
  book.open_sheet(sheet, std::move(heads));
  std::vector<SheetCell> row;
  while (reader.next(cells)) {
    row.clear();
    for (std::size_t i = 0; i < cells.size() && i < columns.size(); ++i)
      row.push_back(cell_of(cells[i], columns[i]));
    book.row(row);
  }
}

bool is_table(const std::string& name) {
  return name.ends_with(".csv");
}

std::string sheet_name(const std::string& file) {
  return file.substr(0, file.size() - std::string_view(".csv").size());
}

} // namespace

Result<OutputFile> workbook_file(const session::SessionResult& result, const std::string& program_version,
                                 std::span<const OutputFile> files, std::size_t sheet_rows) {
  BookWriter book(sheet_rows);
  book.describe("Chronodrome: " + result.session.name, "Chronodrome " + program_version);
  book.open_sheet("summary", {{"section"}, {"item"}, {"value"}, {"note"}});
  for (const auto& row : summary_rows(result, program_version))
    book.row(row);
  for (const auto& name : kOrder) {
    if (name == "workbook.xlsx") add_table(book, "fits", "workbook.xlsx", fits_table(result));
    for (const auto& file : files) {
      if (file.name == name) add_table(book, sheet_name(file.name), file.name, file.content);
    }
  }
  for (const auto& file : files) {
    const bool done = std::find(kOrder.begin(), kOrder.end(), file.name) != kOrder.end();
    if (is_table(file.name) && !done) add_table(book, sheet_name(file.name), file.name, file.content);
  }
  auto bytes = book.take();
  if (!bytes) return bytes.error();
  return OutputFile{"workbook.xlsx", *std::move(bytes)};
}

} // namespace chronodrome::results
