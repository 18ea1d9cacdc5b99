// Chronodrome, GPL-3.0-or-later.
#include "results/csv_text.h"

#include <cmath>

#include "base/number_text.h"

namespace chronodrome::results {

std::string without_formula(std::string_view text) {
  std::string cell;
  if (!text.empty()) {
    const auto first = static_cast<unsigned char>(text.front());
    const bool formula = text.find_first_of("=+-@") == 0 || first < 0x20 || first == 0x7f;
    if (formula) cell += '\'';
  }
  return cell += text;
}

std::string text_cell(std::string_view text) {
  std::string cell = without_formula(text);
  if (cell.find_first_of(",\"\r\n") == std::string::npos) return cell;
  std::string quoted = "\"";
  for (const char c : cell) {
    if (c == '"') quoted += '"';
    quoted += c;
  }
  return quoted + '"';
}

CsvTable& CsvTable::number(double value) {
  return raw(number_text(value));
}

CsvTable& CsvTable::number(std::optional<double> value) {
  return value ? number(*value) : raw("");
}

CsvTable& CsvTable::time(std::optional<Seconds> value) {
  return value ? time(*value) : raw("");
}

void CsvTable::end_row() {
  text_ += '\n';
  row_started_ = false;
}

CsvTable& CsvTable::raw(std::string_view cell) {
  if (row_started_) text_ += ',';
  text_ += cell;
  row_started_ = true;
  return *this;
}

} // namespace chronodrome::results
