// Chronodrome, GPL-3.0-or-later.
#include "intake/csv_layout.h"

#include <algorithm>
#include <set>

#include "intake/csv_column_kinds.h"
#include "intake/csv_headings.h"
#include "intake/csv_text.h"
#include "intake/units.h"

namespace chronodrome::intake {
namespace {

/// Building the layout in steps, with the texts for errors at hand.
class LayoutFinder {
public:
  LayoutFinder(const HeadReading& reading, std::string_view head, const std::string& path,
               const ReadSettings& settings)
      : reading_(reading), path_(path), settings_(settings), headings_(find_headings(reading, head)) {}

  Result<TableLayout> find() {
    layout_.dialect = reading_.dialect;
    layout_.data_at = reading_.records[reading_.first_data].at;
    layout_.data_line = reading_.records[reading_.first_data].line;
    layout_.notes = headings_.notes;
    layout_.stated_rate = rate_in(headings_.notes);
    if (!headings_.names.empty()) layout_.heading_rows.push_back(headings_.names);
    if (!headings_.units.empty()) layout_.heading_rows.push_back(headings_.units);
    if (auto fault = name_columns()) return *std::move(fault);
    number_repeated_names();
    if (auto fault = choose_time_column()) return *std::move(fault);
    look_at_time_column();
    look_at_last_column();
    return std::move(layout_);
  }

private:
  void warn(std::size_t line, const std::string& what, const std::string& remedy) {
    layout_.warnings.push_back({path_, Place::at_line(line), what, remedy});
  }
  [[nodiscard]] std::size_t heading_line() const {
    return headings_.names_record ? reading_.records[*headings_.names_record].line : layout_.data_line;
  }

  std::optional<Error> name_columns() {
    const std::size_t width = std::max(reading_.width, headings_.names.size());
    if (width > settings_.limits.signals)
      return Error{ErrorCode::over_limit, path_, Place::at_line(layout_.data_line),
                   "the table has " + std::to_string(width) + " columns; the limit is " +
                       std::to_string(settings_.limits.signals),
                   "export fewer columns"};
    if (headings_.names.empty())
      warn(layout_.data_line,
           "the table has no row of column names; the columns are called \"column 1\" and so on",
           "check that the first row is data, or add a row of names");
    for (std::size_t c = 0; c < width; ++c) {
      TableColumn column;
      column.kind = kind_of_column(reading_, c);
      const std::string text = c < headings_.names.size() ? headings_.names[c] : "";
      if (c >= headings_.names.size() && !headings_.names.empty() && column.kind == ColumnKind::number)
        return Error{ErrorCode::wrong_format, path_, Place::at(heading_line(), c + 1),
                     "column " + std::to_string(c + 1) +
                         " holds numbers but has no name, so that names and columns "
                         "may not belong together",
                     "give every column of numbers a name"};
      const Heading heading = heading_of(text.empty() ? "column " + std::to_string(c + 1) : text);
      column.source = heading.name;
      column.source_as_written = text.empty() ? heading.name : text;
      column.unit = normalised_unit(heading.unit);
      if (c < headings_.units.size() && is_known_unit(headings_.units[c])) {
        const std::string unit = normalised_unit(headings_.units[c]);
        if (column.unit.empty() && unit != "-" && unit != "--" && unit != "1" && unit != "none")
          column.unit = unit;
      }
      if (column.unit == "-" || column.unit == "--") column.unit.clear();
      layout_.columns.push_back(std::move(column));
    }
    // Cells behind the last comment are no columns.
    while (layout_.columns.size() > 1 && layout_.columns.back().kind == ColumnKind::open &&
           layout_.columns.size() > headings_.names.size())
      layout_.columns.pop_back();
    return std::nullopt;
  }

  void number_repeated_names() {
    std::set<std::string> taken;
    for (TableColumn& column : layout_.columns) {
      if (column.kind == ColumnKind::open) continue;
      if (taken.insert(column.source).second) continue;
      const std::string name = column.source;
      for (int number = 2; !taken.insert(column.source = name + " " + std::to_string(number)).second;
           ++number) {
      }
      const Heading heading = heading_of(column.source_as_written);
      column.source_as_written = heading.name == column.source_as_written
                                     ? column.source
                                     : column.source + " (" + heading.unit + ")";
      warn(heading_line(),
           "two columns are called '" + name + "'; the later one is called '" + column.source + "'",
           "give every column a name of its own");
    }
  }

  std::optional<Error> choose_time_column() {
    if (settings_.time_column) {
      layout_.time_column_told = true;
      if (settings_.time_column->empty()) return set_counters_aside(), std::nullopt;
      for (std::size_t c = 0; c < layout_.columns.size(); ++c) {
        const TableColumn& column = layout_.columns[c];
        if (column.source_as_written != *settings_.time_column && column.source != *settings_.time_column)
          continue;
        if (column.kind != ColumnKind::number && column.kind != ColumnKind::clock)
          return Error{
              ErrorCode::bad_usage, path_, Place::at(layout_.data_line, c + 1),
              "column '" + *settings_.time_column + "' holds no times",
              "set recording.csv.time_column to another column, or to \"\" and recording.csv.rate_hz"};
        layout_.time_column = c;
        set_counters_aside();
        return std::nullopt;
      }
      return Error{ErrorCode::bad_usage, path_, Place::at_line(heading_line()),
                   "there is no column '" + *settings_.time_column + "'",
                   "set recording.csv.time_column to one of: " + column_list()};
    }
    const auto first_of = [&](auto&& fits) {
      for (std::size_t c = 0; c < layout_.columns.size() && !layout_.time_column; ++c) {
        if (fits(c)) layout_.time_column = c;
      }
    };
    const auto kind = [&](std::size_t c) { return layout_.columns[c].kind; };
    first_of([&](std::size_t c) { return kind(c) == ColumnKind::number && is_called_time(c); });
    first_of([&](std::size_t c) { return kind(c) == ColumnKind::clock; });
    layout_.time_column_told = layout_.time_column.has_value();
    const TableColumn& first = layout_.columns.front();
    const bool may_be_time = first.unit.empty() || seconds_in(first.unit);
    if (!layout_.time_column && first.kind == ColumnKind::number && may_be_time && !is_counter(0) &&
        rises_evenly(values_of(reading_, 0)))
      layout_.time_column = 0;
    set_counters_aside();
    return std::nullopt;
  }

  /// By its name, if its unit does not speak against it; "T" may be tension and must rise.
  [[nodiscard]] bool is_called_time(std::size_t c) const {
    const TableColumn& column = layout_.columns[c];
    if (!is_time_name(column.source) || !(column.unit.empty() || seconds_in(column.unit))) return false;
    return column.source.size() > 2 || seconds_in(column.unit) || never_falls(values_of(reading_, c));
  }

  /// A column of row numbers: by its name, or the one without a name that tables with an index begin with.
  [[nodiscard]] bool is_counter(std::size_t c) const {
    const bool unnamed = c == 0 && !headings_.names.empty() && headings_.names[0].empty();
    return (unnamed || is_counter_name(layout_.columns[c].source)) && counts_rows(values_of(reading_, c));
  }

  void set_counters_aside() {
    for (std::size_t c = 0; c < layout_.columns.size(); ++c) {
      TableColumn& column = layout_.columns[c];
      if (c == layout_.time_column || column.kind != ColumnKind::number) continue;
      if (is_counter(c)) {
        column.kind = ColumnKind::counter;
        layout_.notes.push_back("column '" + column.source + "' counts the rows and is not read");
      } else if (layout_.time_column && (is_time_name(column.source) || seconds_in(column.unit)) &&
                 rises_evenly(values_of(reading_, c))) {
        column.kind = ColumnKind::counter;
        warn(heading_line(),
             "column '" + column.source + "' holds times too; times are taken from '" +
                 layout_.columns[*layout_.time_column].source + "'",
             "set recording.csv.time_column to choose the other one");
      }
    }
    for (std::size_t c = 0; c < layout_.columns.size(); ++c) {
      if (c != layout_.time_column && layout_.columns[c].kind == ColumnKind::clock)
        layout_.columns[c].kind = ColumnKind::counter;
    }
  }

  void look_at_time_column() {
    if (!layout_.time_column) return;
    const TableColumn& column = layout_.columns[*layout_.time_column];
    layout_.time_decimals = 0;
    if (column.kind == ColumnKind::clock) {
      look_at_clock(*layout_.time_column);
      return;
    }
    layout_.time_unit = seconds_in(column.unit);
    if (!layout_.time_unit) layout_.time_unit = seconds_in(column.source); // a column called "ms"
    if (seconds_in(column.source) && column.source.size() == 1 && column.source != "s")
      layout_.time_unit.reset();
    for (const Cell& cell : cells_of(reading_, *layout_.time_column)) {
      if (read_number(cell.text, reading_.dialect.decimal).form == NumberForm::none) continue;
      const auto decimals = decimals_of(cell.text, reading_.dialect.decimal);
      if (!decimals || !layout_.time_decimals) {
        layout_.time_decimals.reset();
        return;
      }
      layout_.time_decimals = std::max(*layout_.time_decimals, *decimals);
    }
  }

  void look_at_clock(std::size_t column) {
    std::vector<ClockCell> clocks, dates;
    for (std::size_t c = 0; c < layout_.columns.size(); ++c) {
      if (c != column && layout_.columns[c].kind != ColumnKind::date) continue;
      for (const Cell& cell : cells_of(reading_, c)) {
        const auto read = c == column ? read_clock(cell.text) : read_date(cell.text);
        if (!read) continue;
        if (c == column) clocks.push_back(*read);
        if (read->order != DateOrder::none) dates.push_back(*read);
      }
    }
    layout_.time_unit = 1.0;
    for (const ClockCell& clock : clocks)
      layout_.time_decimals = std::max(*layout_.time_decimals, clock.decimals);
    layout_.clock_has_hours = clocks.empty() || clocks.front().has_hours;
    if (dates.empty() || clocks.empty() || !clocks.front().has_hours) return;
    layout_.date_order = order_of(dates);
    const auto day = day_of(dates.front(), layout_.date_order);
    if (day && clocks.front().seconds < 86400.0) {
      layout_.clock_zero = ClockTime{*day, clocks.front().seconds};
      layout_.clock_has_days = clocks.front().order != DateOrder::none;
    } else if (!day) {
      warn(layout_.data_line, "the date can be read with the day or the month first; it is not used",
           "the recording's time does not need it; write dates as 2026-03-04 to keep them");
    }
  }

  void look_at_last_column() {
    std::optional<int> decimals;
    for (const Cell& cell : cells_of(reading_, layout_.columns.size() - 1)) {
      if (read_number(cell.text, reading_.dialect.decimal).form == NumberForm::none) return;
      const auto found = decimals_of(cell.text, reading_.dialect.decimal);
      if (!found || (decimals && *decimals != *found)) return;
      decimals = found;
    }
    layout_.last_decimals = decimals;
  }

  [[nodiscard]] std::string column_list() const {
    std::string list;
    for (const TableColumn& column : layout_.columns)
      list += (list.empty() ? "'" : ", '") + column.source_as_written + "'";
    return shortened(list, 400);
  }

  const HeadReading& reading_;
  const std::string& path_;
  const ReadSettings& settings_;
  Headings headings_;
  TableLayout layout_;
};

} // namespace

Result<TableLayout> find_layout(const HeadReading& reading, std::string_view head, const std::string& path,
                                const ReadSettings& settings) {
  return LayoutFinder(reading, head, path, settings).find();
}

} // namespace chronodrome::intake
