// Chronodrome, GPL-3.0-or-later.
#include "intake/protocol_reader.h"

#include <array>
#include <map>
#include <optional>

#include "base/number_text.h"
#include "intake/protocol_order.h"
#include "intake/protocol_table.h"
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
constexpr std::int64_t kMostCurves = 10'000;

/// One row, by column name, and the first fault met in it.
class RowReader {
public:
  RowReader(const TableRow& row, const std::map<std::string, std::size_t>& columns, const std::string& file)
      : row_(row), columns_(columns), file_(file) {}

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

  void fail(const TableCell& at, std::string what, std::string remedy) {
    if (!fault_) fault_ = Error{ErrorCode::bad_value, file_, at.place(), std::move(what), std::move(remedy)};
  }

  std::optional<double> parsed(const std::string& column) {
    const TableCell found = cell(column);
    if (found.text.empty()) return std::nullopt;
    const auto value = parse_number(found.text);
    if (!value) {
      const bool comma = parse_number(found.text, ',').has_value();
      fail(found, column + " is " + shown(found.text) + ", not a number",
           comma ? "write a point, not a comma, before the decimals"
                 : "write the number alone, with a decimal point");
    }
    return value;
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
  const std::map<std::string, std::size_t>& columns_;
  const std::string& file_;
  std::optional<Error> fault_;
};

std::string all_columns() {
  std::string names;
  for (const char* name : kColumns)
    names += (names.empty() ? "" : ", ") + std::string(name);
  return names;
}

/// Which cell of a row holds which column.
Result<std::map<std::string, std::size_t>> read_header(const TableRow& row, Protocol& protocol) {
  std::map<std::string, std::size_t> columns;
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
                                     "it has no effect; known are " + all_columns()});
    } else if (!columns.emplace(name, i).second) {
      return Error{ErrorCode::wrong_format, protocol.file, cell.place(),
                   "the column " + name + " stands twice", "keep one of the two"};
    }
  }
  for (const std::string needed : {"time_s", "event"}) {
    if (columns.count(needed) == 0) {
      return Error{ErrorCode::wrong_format, protocol.file, row.cells.front().place(),
                   "the first row names no column " + needed,
                   "begin the file with the names " + all_columns()};
    }
  }
  return columns;
}

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

} // namespace

Result<Protocol> parse_protocol(const std::string& text, const std::string& file) {
  auto rows = split_table(text, file);
  if (!rows) return rows.error();
  Protocol protocol;
  protocol.file = file;
  if (rows->empty()) {
    return Error{ErrorCode::wrong_format, file, Place::at(1, 1), "the file is empty",
                 "begin it with the names " + all_columns()};
  }
  const auto columns = read_header(rows->front(), protocol);
  if (!columns) return columns.error();
  const std::size_t width = rows->front().cells.size();
  for (std::size_t i = 1; i < rows->size(); ++i) {
    const TableRow& row = (*rows)[i];
    if (auto surplus = surplus_cell(row, width, file)) return *surplus;
    auto event = RowReader(row, *columns, file).read();
    if (!event) return event.error();
    protocol.events.push_back(std::move(*event));
  }
  put_in_order(protocol);
  return protocol;
}

Result<Protocol> read_protocol(const std::string& path) {
  auto text = read_text_file(path, kLargestProtocol);
  if (!text) return text.error();
  return parse_protocol(*text, path);
}

} // namespace chronodrome::intake
