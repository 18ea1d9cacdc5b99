// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <optional>
#include <string>
#include <string_view>

#include "base/quantity.h"

namespace chronodrome::results {

/// A text that a spreadsheet would take for a formula, or that begins with a control character, with a
/// leading apostrophe; any other as it is.
std::string without_formula(std::string_view text);

/// A cell of a table file: quoted where it must be (RFC 4180); a text that a spreadsheet would take for a
/// formula, or that begins with a control character, gets a leading apostrophe.
std::string text_cell(std::string_view text);

/// Builds one table, cell by cell, row by row.
class CsvTable {
public:
  explicit CsvTable(std::string_view header) : text_(header) { text_ += '\n'; }

  CsvTable& text(std::string_view value) { return raw(text_cell(value)); }
  CsvTable& number(double value);                ///< empty if not finite
  CsvTable& number(std::optional<double> value); ///< empty if missing
  CsvTable& time(Seconds value) { return number(value.value()); }
  CsvTable& time(std::optional<Seconds> value);
  CsvTable& count(std::size_t value) { return raw(std::to_string(value)); }
  void end_row();
  [[nodiscard]] std::string take() { return std::move(text_); }

private:
  CsvTable& raw(std::string_view cell);

  std::string text_;
  bool row_started_ = false;
};

} // namespace chronodrome::results
