// Chronodrome, GPL-3.0-or-later.
#include "intake/csv_dialect.h"

#include <algorithm>
#include <array>
#include <map>

#include "base/number_text.h"
#include "intake/csv_clock.h"
#include "intake/csv_text.h"

namespace chronodrome::intake {
namespace {

constexpr std::size_t kMostRecords = 5000;
constexpr double kSameShare = 0.02; // dialects whose shares of numbers differ by less compete
constexpr std::array<char, 5> kDelimiters = {';', '\t', ',', '|', ' '}; // in order of preference

CellKind kind_of(const Cell& cell, char decimal) {
  if (cell.text.empty()) return CellKind::empty;
  switch (read_number(cell.text, decimal).form) {
  case NumberForm::plain:
    return CellKind::number;
  case NumberForm::grouped:
    return CellKind::grouped;
  case NumberForm::grouped_fully:
    return CellKind::grouped_fully;
  case NumberForm::none:
    break;
  }
  if (is_missing(cell.text)) return CellKind::missing;
  return read_clock(cell.text) ? CellKind::clock : CellKind::text;
}

bool is_value(CellKind kind) {
  return kind == CellKind::number || kind == CellKind::grouped || kind == CellKind::grouped_fully ||
         kind == CellKind::clock;
}

std::size_t count_of(const HeadRecord& record, CellKind kind) {
  return static_cast<std::size_t>(std::count(record.kinds.begin(), record.kinds.end(), kind));
}

std::size_t values_of(const HeadRecord& record) {
  return static_cast<std::size_t>(std::count_if(record.kinds.begin(), record.kinds.end(), is_value));
}

bool looks_like_data(const HeadRecord& record) {
  const std::size_t values = values_of(record);
  return values > 0 && values + count_of(record, CellKind::missing) >= count_of(record, CellKind::text);
}

/// A delimiter behind the last cell opens no column of its own.
bool fits(const HeadRecord& record, std::size_t width) {
  const std::size_t count = record.cells.size();
  return count == width || (count == width + 1 && record.cells.back().text.empty()) || count + 1 == width;
}

struct Split {
  std::vector<HeadRecord> records;
  std::size_t open_quote_line = 0; ///< 0: none
};

Split split(std::string_view head, bool final, char delimiter) {
  Split result;
  std::size_t at = 0, line = 1;
  while (at < head.size() && result.records.size() < kMostRecords) {
    HeadRecord record;
    record.at = at;
    record.line = line;
    const RecordRead read = read_record(head, at, delimiter, final, record.cells);
    if (read.end == RecordEnd::open_quote) result.open_quote_line = line;
    if (read.end != RecordEnd::complete) break;
    // A last line without a line end may be cut: the others tell the layout.
    if (!read.terminated && result.records.size() > 2) break;
    at = read.next;
    line += read.lines;
    const bool blank = std::all_of(record.cells.begin(), record.cells.end(),
                                   [](const Cell& cell) { return cell.text.empty(); });
    if (!blank) result.records.push_back(std::move(record));
  }
  return result;
}

std::size_t usual_width(const std::vector<HeadRecord>& records) {
  std::map<std::size_t, std::size_t> counts;
  for (const HeadRecord& record : records) {
    if (looks_like_data(record)) ++counts[record.cells.size()];
  }
  std::size_t width = 0, most = 0;
  for (const auto& [cells, count] : counts) {
    if (count >= most) {
      width = cells;
      most = count;
    }
  }
  return width;
}

/// Columns in which numbers outnumber texts two to one: a remark typed into a column does not make it text.
std::vector<bool> numeric_columns(const std::vector<HeadRecord>& records, std::size_t width) {
  std::vector<std::size_t> values(width), texts(width);
  for (const HeadRecord& record : records) {
    if (!fits(record, width) || !looks_like_data(record)) continue;
    for (std::size_t c = 0; c < std::min(width, record.kinds.size()); ++c) {
      if (is_value(record.kinds[c])) ++values[c];
      if (record.kinds[c] == CellKind::text) ++texts[c];
    }
  }
  std::vector<bool> numeric(width);
  for (std::size_t c = 0; c < width; ++c)
    numeric[c] = values[c] > 0 && values[c] >= 2 * texts[c];
  return numeric;
}

bool is_data(const HeadRecord& record, const HeadReading& reading) {
  if (!fits(record, reading.width) || !looks_like_data(record)) return false;
  for (std::size_t c = 0; c < std::min(reading.width, record.kinds.size()); ++c) {
    if (reading.numeric[c] && record.kinds[c] == CellKind::text) return false;
  }
  return true;
}

bool has_mark(const Cell& cell) {
  return cell.text.find_first_of(".,") != std::string_view::npos;
}

HeadReading read_under(const Split& split, const Dialect& dialect) {
  HeadReading reading;
  reading.dialect = dialect;
  reading.records = split.records;
  for (HeadRecord& record : reading.records) {
    for (const Cell& cell : record.cells)
      record.kinds.push_back(kind_of(cell, dialect.decimal));
  }
  reading.width = usual_width(reading.records);
  reading.numeric = numeric_columns(reading.records, reading.width);
  const auto first = std::find_if(reading.records.begin(), reading.records.end(),
                                  [&](const HeadRecord& record) { return is_data(record, reading); });
  reading.first_data = static_cast<std::size_t>(first - reading.records.begin());
  std::size_t fitting = 0;
  for (auto record = first; record != reading.records.end(); ++record) {
    reading.cells +=
        record->cells.size() - count_of(*record, CellKind::empty) - count_of(*record, CellKind::missing);
    if (!fits(*record, reading.width) || !looks_like_data(*record)) continue;
    ++fitting;
    for (std::size_t c = 0; c < std::min(reading.width, record->kinds.size()); ++c) {
      if (!reading.numeric[c] || !is_value(record->kinds[c])) continue;
      ++reading.numbers;
      if (record->kinds[c] == CellKind::grouped) ++reading.grouped;
      if (record->kinds[c] != CellKind::clock && has_mark(record->cells[c])) ++reading.marked;
      if (record->kinds[c] == CellKind::grouped || record->kinds[c] == CellKind::grouped_fully)
        reading.dialect.grouped = true;
    }
  }
  reading.valid = fitting > 0 && 2 * fitting >= static_cast<std::size_t>(reading.records.end() - first);
  return reading;
}

/// Numbers in quotes hold their delimiter: "0,001","1,25".
bool has_quoted_comma_number(const Split& split) {
  return std::any_of(split.records.begin(), split.records.end(), [](const HeadRecord& record) {
    return std::any_of(record.cells.begin(), record.cells.end(), [](const Cell& cell) {
      return cell.quoted && cell.text.find(',') != std::string_view::npos &&
             read_number(cell.text, ',').form == NumberForm::plain;
    });
  });
}

std::string example_of(const HeadReading& reading) {
  for (std::size_t r = reading.first_data; r < reading.records.size(); ++r) {
    const HeadRecord& record = reading.records[r];
    for (const Cell& cell : record.cells) {
      if (has_mark(cell) && read_number(cell.text, reading.dialect.decimal).form != NumberForm::none)
        return as_utf8(cell.text);
    }
  }
  return "1,234";
}

/// The best decimal mark for one delimiter; two that fit equally well but differ make it undecided.
struct Choice {
  HeadReading reading;
  bool undecided = false;
};

std::optional<Choice> best_decimal(const Split& split, char delimiter, const ReadSettings& settings) {
  std::optional<Choice> best;
  for (const char decimal : {'.', ','}) {
    if (settings.decimal && *settings.decimal != decimal) continue;
    if (decimal == delimiter && !has_quoted_comma_number(split)) continue;
    HeadReading reading = read_under(split, {delimiter, decimal, false});
    if (!reading.valid) continue;
    if (!best) {
      best = Choice{std::move(reading), false};
    } else if (reading.numbers > best->reading.numbers) {
      best = Choice{std::move(reading), false};
    } else if (reading.numbers == best->reading.numbers && reading.marked > 0) {
      best->undecided = true;
    }
  }
  return best;
}

bool better(const Choice& a, const Choice& b) {
  const double difference = a.reading.share() - b.reading.share();
  if (difference > kSameShare || difference < -kSameShare) return difference > 0.0;
  if ((a.reading.width > 1) != (b.reading.width > 1)) return a.reading.width > 1;
  return false; // both as good: the order of preference stands
}

std::size_t names_above(const HeadReading& reading) {
  std::size_t most = 0;
  for (std::size_t r = 0; r < reading.first_data; ++r) {
    const HeadRecord& record = reading.records[r];
    if (values_of(record) > 0) continue;
    const std::size_t names = record.cells.size() - count_of(record, CellKind::empty);
    most = std::max(most, names);
  }
  return most;
}

bool all_whole_numbers(const HeadReading& reading) {
  for (std::size_t r = reading.first_data; r < reading.records.size(); ++r) {
    for (const Cell& cell : reading.records[r].cells) {
      if (cell.text.find('.') != std::string_view::npos) return false;
    }
  }
  return true;
}

Error ambiguous(const std::string& path, std::size_t line, const std::string& what,
                const std::string& remedy) {
  return {ErrorCode::ambiguous, path, Place::at_line(line), what, remedy};
}

/// Commas between whole numbers may be decimal commas: `0,001,1,25` is four numbers or two.
std::optional<Error> comma_doubt(const HeadReading& reading, const std::string& path,
                                 const ReadSettings& settings) {
  if (reading.dialect.delimiter != ',' || reading.dialect.decimal != '.' || settings.decimal)
    return std::nullopt;
  if (reading.width < 2 || reading.width % 2 != 0 || !all_whole_numbers(reading)) return std::nullopt;
  const std::size_t names = names_above(reading);
  if (names > reading.width / 2) return std::nullopt; // a name for each whole number
  const HeadRecord& record = reading.records[reading.first_data];
  std::string numbers;
  for (const Cell& cell : record.cells)
    numbers += (numbers.empty() ? "" : ",") + as_utf8(cell.text);
  return ambiguous(
      path, record.line,
      "'" + shortened(numbers, 60) + "' can be " + std::to_string(reading.width) + " whole numbers, or " +
          std::to_string(reading.width / 2) + " numbers with a decimal comma",
      "set recording.csv.decimal to \".\" if the numbers are whole, else export again with a semicolon "
      "or a tab between columns");
}

} // namespace

Result<HeadReading> find_dialect(std::string_view head, bool final, const std::string& path,
                                 const ReadSettings& settings) {
  std::optional<Choice> best;
  std::optional<HeadReading> single; // one column of decimal commas
  std::size_t open_quote_line = 0, last_line = 0;
  for (const char delimiter : kDelimiters) {
    if (settings.delimiter && *settings.delimiter != delimiter) continue;
    const Split records = split(head, final, delimiter);
    if (!records.records.empty()) last_line = std::max(last_line, records.records.back().line);
    open_quote_line = std::max(open_quote_line, records.open_quote_line);
    auto choice = best_decimal(records, delimiter, settings);
    if (!choice) continue;
    if (choice->reading.width == 1 && choice->reading.dialect.decimal == ',') single = choice->reading;
    if (!best || better(*choice, *best)) best = std::move(choice);
  }
  if (settings.delimiter &&
      std::find(kDelimiters.begin(), kDelimiters.end(), *settings.delimiter) == kDelimiters.end())
    best = best_decimal(split(head, final, *settings.delimiter), *settings.delimiter, settings);
  if (open_quote_line > 0 && (final || !best))
    return Error{ErrorCode::damaged, path, Place::at_line(open_quote_line),
                 "a quote opened on line " + std::to_string(open_quote_line) + " is not closed",
                 "close it or take it out, and check that the file is whole"};
  if (!best) {
    if (last_line == 0)
      return Error{ErrorCode::not_enough_data, path, Place::at_line(1), "the file holds no lines",
                   "check that the export was finished"};
    return Error{ErrorCode::not_enough_data, path, Place::at_line(last_line),
                 "no rows of numbers were found; the last line read is line " + std::to_string(last_line),
                 "export the recording as a table of numbers, or set recording.csv.delimiter and "
                 "recording.csv.decimal"};
  }
  HeadReading reading = std::move(best->reading);
  if (best->undecided)
    return ambiguous(path, reading.records[reading.first_data].line,
                     "'" + example_of(reading) +
                         "' can be read with its mark as decimal mark or as thousands mark",
                     "set recording.csv.decimal to \".\" or \",\"");
  // "ATR" above `1,25`: one name, one column.
  const bool one_name = names_above(reading) == 1 && reading.width == 2;
  if (single && one_name && reading.dialect.delimiter == ',' && !settings.delimiter &&
      all_whole_numbers(reading))
    return *std::move(single);
  if (auto doubt = comma_doubt(reading, path, settings)) return *std::move(doubt);
  return reading;
}

} // namespace chronodrome::intake
