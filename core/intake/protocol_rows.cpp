// Chronodrome, GPL-3.0-or-later.
#include "intake/protocol_rows.h"

#include <array>
#include <optional>

#include "base/number_text.h"
#include "intake/protocol_order.h"
#include "intake/text_file.h"
#include "protocol/concentration.h"

namespace chronodrome::intake {
namespace {

using protocol::Event;
using protocol::EventKind;
using protocol::Protocol;

constexpr std::array<const char*, 10> kColumns = {"time_s",    "event", "agent",           "concentration",
                                                  "unit",      "note",  "stock_mol_per_l", "volume_ml",
                                                  "arrival_s", "curve"};
constexpr std::size_t kUsualColumns = 6; // of a text without a header
constexpr std::array<const char*, 5> kNumbers = {"time_s", "concentration", "stock_mol_per_l", "volume_ml",
                                                 "arrival_s"};
constexpr std::int64_t kMostCurves = 10'000;

/// One row, by column name, and the first fault met in it.
class RowReader {
public:
  RowReader(const TableRow& row, const LogColumns& columns, LogDecimal decimal, const std::string& file)
      : row_(row), columns_(columns), decimal_(decimal), file_(file) {}

  Result<Event> read() {
    Event event;
    event.line = row_.cells.front().line;
    event.time = Seconds(required_number("time_s").value_or(0.0));
    event.kind = kind();
    event.agent = cell("agent").text;
    event.note = cell("note").text;
    read_concentration(event);
    read_pipetted(event);
    if (const auto arrival = number("arrival_s", "0 or more")) event.arrival = Seconds(*arrival);
    read_curve(event);
    check_whole(event);
    if (fault_) return *fault_;
    return event;
  }

private:
  /// An empty cell at the row's end if the row has no such cell.
  [[nodiscard]] TableCell cell(const std::string& column) const {
    const auto found = columns_.find(column);
    if (found != columns_.end() && found->second < row_.cells.size()) return row_.cells[found->second];
    return {"", row_.cells.back().line, row_.cells.back().column};
  }

  void fail(const TableCell& at, std::string what, std::string remedy,
            ErrorCode code = ErrorCode::bad_value) {
    if (!fault_) fault_ = Error{code, file_, at.place(), std::move(what), std::move(remedy)};
  }

  std::optional<double> parsed(const std::string& column) {
    const TableCell found = cell(column);
    if (found.text.empty()) return std::nullopt;
    const bool has_point = found.text.find('.') != std::string::npos;
    if (decimal_ == LogDecimal::comma && has_point && parse_number(found.text)) {
      fail(found, column + " is " + shown(found.text) + ", and other numbers have a decimal comma",
           "write all numbers with the same decimal mark", ErrorCode::ambiguous);
      return std::nullopt;
    }
    const auto value = parse_number(found.text, decimal_ == LogDecimal::comma ? ',' : '.');
    if (!value) refuse_number(found, column);
    return value;
  }

  void refuse_number(const TableCell& found, const std::string& column) {
    const bool comma = parse_number(found.text, ',').has_value();
    const std::string what = column + " is " + shown(found.text);
    if (comma && decimal_ == LogDecimal::doubtful) {
      return fail(found, what + ", whose comma may stand before decimals or thousands",
                  "write the number with a point, or without the comma", ErrorCode::ambiguous);
    }
    fail(found, what + ", not a number",
         comma ? "write a point, not a comma, before the decimals"
               : "write the number alone, with a decimal point");
  }

  std::optional<double> number(const std::string& column, const std::string& range) {
    const auto value = parsed(column);
    if (!value || *value > 0.0 || (*value == 0.0 && range == "0 or more")) return value;
    fail(cell(column), column + " is " + shown(cell(column).text), "write " + range);
    return std::nullopt;
  }

  std::optional<double> required_number(const std::string& column) {
    if (cell(column).text.empty()) fail(cell(column), column + " is empty", "fill it in");
    return parsed(column);
  }

  EventKind kind() {
    const TableCell found = cell("event");
    const auto known = protocol::event_named(found.text);
    if (!known) {
      fail(found, found.text.empty() ? "event is empty" : "event is " + shown(found.text),
           "use one of " + protocol::event_names());
    }
    return known.value_or(EventKind::note);
  }

  void read_concentration(Event& event) {
    const TableCell found = cell("concentration");
    event.unit = cell("unit").text;
    const auto value = parsed("concentration");
    if (!value) return;
    if (*value < 0.0) {
      return fail(found, "concentration is " + shown(found.text) + ", which is negative",
                  "write the concentration itself, for example 1e-7, not its logarithm");
    }
    event.concentration = protocol::concentration_in(*value, event.unit);
    if (!event.concentration) {
      fail(cell("unit"),
           event.unit.empty() ? "a concentration stands without a unit" : "unit is " + shown(event.unit),
           "use one of " + protocol::concentration_units());
    }
  }

  void read_pipetted(Event& event) {
    if (const auto stock = number("stock_mol_per_l", "a number above 0")) event.stock = Molar(*stock);
    event.volume_ml = number("volume_ml", "a number above 0");
    if (event.stock && !event.volume_ml)
      fail(cell("stock_mol_per_l"), "stock_mol_per_l stands without volume_ml",
           "fill in volume_ml, or empty both");
  }

  void read_curve(Event& event) {
    const TableCell found = cell("curve");
    if (found.text.empty()) return;
    const auto value = parse_integer(found.text);
    if (!value || *value < 1 || *value > kMostCurves)
      return fail(found, "curve is " + shown(found.text),
                  "use a whole number from 1 to " + std::to_string(kMostCurves));
    event.curve = static_cast<int>(*value);
  }

  void check_whole(const Event& event) {
    if (event.kind != EventKind::addition && event.kind != EventKind::antagonist) return;
    if (event.agent.empty()) fail(cell("agent"), name_of(event.kind) + " without an agent", "name the agent");
    if (!event.concentration && !event.stock) {
      fail(cell("concentration"), name_of(event.kind) + " without a concentration",
           "fill in concentration and unit, or stock_mol_per_l and volume_ml");
    }
  }

  const TableRow& row_;
  const LogColumns& columns_;
  LogDecimal decimal_;
  const std::string& file_;
  std::optional<Error> fault_;
};

std::optional<Error> surplus_cell(const TableRow& row, std::size_t width, const std::string& file) {
  for (std::size_t i = width; i < row.cells.size(); ++i) {
    const TableCell& cell = row.cells[i];
    if (cell.text.empty()) continue;
    return Error{ErrorCode::bad_value, file, cell.place(),
                 "cell " + std::to_string(i + 1) + " of a table of " + std::to_string(width) + " columns",
                 "put quotes around a text that holds a delimiter, and a point before decimals"};
  }
  return std::nullopt;
}

/// Groups of exactly three digits behind a comma: thousands, or decimals that happen to be three.
bool may_be_grouped(const std::string& text) {
  const auto comma = text.find(',');
  const std::string tail = text.substr(comma + 1);
  return comma >= 1 && comma <= 3 && text.front() != '0' && tail.size() == 3 &&
         tail.find_first_not_of("0123456789") == std::string::npos;
}

} // namespace

std::string log_columns() {
  std::string names;
  for (const char* name : kColumns)
    names += (names.empty() ? "" : ", ") + std::string(name);
  return names;
}

Result<LogColumns> read_log_header(const TableRow& row, Protocol& protocol) {
  LogColumns columns;
  for (std::size_t i = 0; i < row.cells.size(); ++i) {
    const TableCell& cell = row.cells[i];
    const std::string name = lower_case(cell.text);
    bool known = false;
    for (const char* column : kColumns)
      known = known || name == column;
    if (!known) {
      if (!cell.text.empty())
        protocol.warnings.push_back({protocol.file, cell.place(),
                                     "the column " + shown(cell.text) + " is not known",
                                     "it has no effect; known are " + log_columns()});
    } else if (!columns.emplace(name, i).second) {
      return Error{ErrorCode::wrong_format, protocol.file, cell.place(),
                   "the column " + name + " stands twice", "keep one of the two"};
    }
  }
  for (const std::string needed : {"time_s", "event"}) {
    if (columns.count(needed) == 0) {
      return Error{ErrorCode::wrong_format, protocol.file, row.cells.front().place(),
                   "the first row names no column " + needed,
                   "begin the file with the names " + log_columns()};
    }
  }
  return columns;
}

LogColumns usual_log_columns() {
  LogColumns columns;
  for (std::size_t i = 0; i < kUsualColumns; ++i)
    columns[kColumns[i]] = i;
  return columns;
}

LogDecimal decimal_of(std::span<const TableRow> rows, const LogColumns& columns) {
  bool has_point = false;
  bool has_comma = false;
  for (const TableRow& row : rows) {
    for (const char* name : kNumbers) {
      const auto column = columns.find(name);
      if (column == columns.end() || column->second >= row.cells.size()) continue;
      const std::string& text = row.cells[column->second].text;
      if (text.find(',') != std::string::npos && parse_number(text, ',')) {
        if (!may_be_grouped(text)) return LogDecimal::comma;
        has_comma = true;
      }
      has_point = has_point || text.find('.') != std::string::npos;
    }
  }
  return has_comma && !has_point ? LogDecimal::doubtful : LogDecimal::point;
}

Done read_log_rows(std::span<const TableRow> rows, const LogColumns& columns, std::size_t width,
                   LogDecimal decimal, Protocol& protocol) {
  for (const TableRow& row : rows) {
    if (auto surplus = surplus_cell(row, width, protocol.file)) return *surplus;
    auto event = RowReader(row, columns, decimal, protocol.file).read();
    if (!event) return event.error();
    protocol.events.push_back(std::move(*event));
  }
  put_in_order(protocol);
  return done();
}

} // namespace chronodrome::intake
