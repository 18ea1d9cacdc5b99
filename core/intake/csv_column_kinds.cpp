// Chronodrome, GPL-3.0-or-later.
#include "intake/csv_column_kinds.h"

#include <algorithm>
#include <cmath>
#include <initializer_list>

#include "base/number_text.h"
#include "intake/csv_clock.h"

namespace chronodrome::intake {
namespace {

bool is_one_of(const std::string& word, std::initializer_list<const char*> words) {
  return std::any_of(words.begin(), words.end(), [&](const char* other) { return word == other; });
}

} // namespace

bool is_time_name(const std::string& name) {
  const std::string word = lower_case(trimmed(name));
  if (is_one_of(word, {"t",          "time",       "times",     "zeit",         "temps",      "tiempo",
                       "tempo",      "tijd",       "tid",       "czas",         "cas",        "timestamp",
                       "time stamp", "timestamps", "elapsed",   "elapsed time", "reltime",    "relative time",
                       "seconds",    "sec",        "s",         "ms",           "msec",       "milliseconds",
                       "clock",      "clock time", "date time", "datetime",     "time of day"}))
    return true;
  for (const char* start :
       {"time ", "time_", "time/", "time,", "t_", "t/", "zeit_", "zeit/", "zeit ", "temps_"}) {
    if (word.rfind(start, 0) == 0 && word.size() <= 16) return true;
  }
  return false;
}

bool is_counter_name(const std::string& name) {
  return is_one_of(
      lower_case(trimmed(name)),
      {"sample",     "samples", "sample number", "sample no", "sample no.", "index", "idx", "row",
       "row number", "no",      "no.",           "nr",        "nr.",        "n",     "#",   "point",
       "points",     "scan",    "scans",         "count",     "record"});
}

std::vector<Cell> cells_of(const HeadReading& reading, std::size_t column) {
  std::vector<Cell> cells;
  for (std::size_t r = reading.first_data; r < reading.records.size(); ++r) {
    if (column < reading.records[r].cells.size()) cells.push_back(reading.records[r].cells[column]);
  }
  return cells;
}

ColumnKind kind_of_column(const HeadReading& reading, std::size_t column) {
  std::size_t numbers = 0, clocks = 0, dates = 0, texts = 0;
  for (std::size_t r = reading.first_data; r < reading.records.size(); ++r) {
    const HeadRecord& record = reading.records[r];
    if (column >= record.kinds.size()) continue;
    switch (record.kinds[column]) {
    case CellKind::number:
    case CellKind::grouped:
    case CellKind::grouped_fully:
      ++numbers;
      break;
    case CellKind::clock:
      ++clocks;
      break;
    case CellKind::text:
      read_date(record.cells[column].text) ? ++dates : ++texts;
      break;
    case CellKind::empty:
    case CellKind::missing:
      break;
    }
  }
  if (clocks > 0 && clocks >= numbers + texts) return ColumnKind::clock;
  if (dates > numbers + texts) return ColumnKind::date;
  if (column < reading.numeric.size() && reading.numeric[column]) return ColumnKind::number;
  return numbers + texts + dates > 0 ? ColumnKind::text : ColumnKind::open;
}

std::vector<double> values_of(const HeadReading& reading, std::size_t column) {
  std::vector<double> values;
  for (const Cell& cell : cells_of(reading, column)) {
    const NumberRead number = read_number(cell.text, reading.dialect.decimal);
    if (number.form != NumberForm::none) values.push_back(number.value);
  }
  return values;
}

bool rises_evenly(const std::vector<double>& values) {
  if (values.size() < 3) return false;
  const double step = (values.back() - values.front()) / static_cast<double>(values.size() - 1);
  for (std::size_t i = 1; i < values.size(); ++i) {
    if (!(values[i] > values[i - 1]) || std::abs(values[i] - values[i - 1] - step) > 0.01 * step)
      return false;
  }
  return true;
}

bool never_falls(const std::vector<double>& values) {
  return values.size() > 1 && std::is_sorted(values.begin(), values.end()) && values.back() > values.front();
}

bool counts_rows(const std::vector<double>& values) {
  for (std::size_t i = 1; i < values.size(); ++i) {
    if (values[i] != values[i - 1] + 1.0) return false;
  }
  return values.size() > 1;
}

} // namespace chronodrome::intake
