// Chronodrome, GPL-3.0-or-later.
#include "intake/csv_headings.h"

#include <algorithm>

#include "base/number_text.h"
#include "intake/csv_text.h"
#include "intake/units.h"

namespace chronodrome::intake {
namespace {

/// Cells as texts. Where blanks delimit, "ATR (mV)" is one heading: a bracket belongs to the word before it.
std::vector<std::string> texts_of(const HeadRecord& record, char delimiter) {
  std::vector<std::string> texts;
  for (const Cell& cell : record.cells) {
    const std::string text = text_of(cell);
    const bool bracket = !text.empty() && (text.front() == '(' || text.front() == '[');
    const bool after_name = !texts.empty() && texts.back().find_first_of("([") == std::string::npos;
    if (delimiter == ' ' && bracket && after_name) {
      texts.back() += " " + text;
    } else {
      texts.push_back(text);
    }
  }
  while (!texts.empty() && texts.back().empty())
    texts.pop_back();
  return texts;
}

/// Every cell is a unit or empty, and one at least says more than "none".
bool is_units_row(const std::vector<std::string>& texts) {
  bool any = false;
  for (const std::string& text : texts) {
    if (!is_known_unit(text)) return false;
    any = any || (!text.empty() && text != "-" && text != "1");
  }
  return any;
}

bool may_be_names(const HeadRecord& record, const HeadReading& reading) {
  const auto texts = texts_of(record, reading.dialect.delimiter);
  if (texts.empty() || texts.size() > reading.width + 1) return false;
  const auto named = static_cast<std::size_t>(
      std::count_if(texts.begin(), texts.end(), [](const std::string& text) { return !text.empty(); }));
  const auto numeric =
      static_cast<std::size_t>(std::count(reading.numeric.begin(), reading.numeric.end(), true));
  // A table with an index begins its names with an empty one.
  if (texts.front().empty() && texts.size() == reading.width && named + 1 == texts.size()) return true;
  // A line of one cell above a table of several columns is a title.
  return named >= numeric || (named > 1 && 2 * named > numeric);
}

std::string line_text(const HeadRecord& record, std::string_view head) {
  const auto end = head.find_first_of("\r\n", record.at);
  return as_utf8(trimmed(head.substr(record.at, end == std::string_view::npos ? end : end - record.at)));
}

/// The first number behind position `at`, if hertz follow it.
std::optional<double> hertz_behind(const std::string& line, std::size_t at) {
  const auto begin = line.find_first_of("0123456789", at);
  if (begin == std::string::npos) return std::nullopt;
  const auto end = line.find_first_not_of("0123456789.,", begin);
  const auto value = parse_number(line.substr(begin, end == std::string::npos ? end : end - begin));
  if (!value || !(*value > 0.0)) return std::nullopt;
  const std::string unit = end == std::string::npos ? "" : lower_case(line.substr(end));
  if (unit.find("khz") != std::string::npos) return *value * 1000.0;
  if (unit.find("hz") != std::string::npos ||
      lower_case(line.substr(0, begin)).find("hz") != std::string::npos)
    return *value;
  return std::nullopt;
}

} // namespace

Headings find_headings(const HeadReading& reading, std::string_view head) {
  Headings found;
  const auto& records = reading.records;
  const char delimiter = reading.dialect.delimiter;
  const std::size_t data = reading.first_data;
  for (std::size_t r = data; r-- > 0 && !found.units_record;) {
    if (texts_of(records[r], delimiter).size() + 1 < reading.width) break;
    if (is_units_row(texts_of(records[r], delimiter))) found.units_record = r;
  }
  const std::size_t below = found.units_record.value_or(data);
  if (below > 0 && may_be_names(records[below - 1], reading)) found.names_record = below - 1;
  if (!found.names_record && found.units_record && *found.units_record + 1 < data &&
      may_be_names(records[*found.units_record + 1], reading))
    found.names_record = *found.units_record + 1; // units above the names
  if (found.names_record) found.names = texts_of(records[*found.names_record], delimiter);
  if (found.units_record) found.units = texts_of(records[*found.units_record], delimiter);
  for (std::size_t r = 0; r < data; ++r) {
    if (r != found.names_record && r != found.units_record)
      found.notes.push_back(line_text(records[r], head));
  }
  return found;
}

std::optional<double> rate_in(const std::vector<std::string>& notes) {
  for (const std::string& note : notes) {
    const std::string lower = lower_case(note);
    for (const char* word : {"sampl", "rate", "fs", "frequency", "abtast"}) {
      const auto at = lower.find(word);
      if (at == std::string::npos) continue;
      if (const auto rate = hertz_behind(note, at)) return rate;
    }
  }
  return std::nullopt;
}

} // namespace chronodrome::intake
