// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <cstdint>
#include <optional>
#include <string_view>
#include <vector>

namespace chronodrome::intake {

enum class DateOrder {
  none,
  year_month_day,
  day_month_year,
  month_day_year,
  unknown, ///< 03/04/2026: day or month first
};

/// A clock time as a cell spells it: `09:30:00.125`, `9:30:00,125 PM`, `2026-03-04 09:30:00`, `30:00.1`
/// (minutes and seconds).
struct ClockCell {
  double seconds = 0.0; ///< of the day, or of the hour where no hours are given
  int decimals = 0;     ///< digits behind the decimal mark
  bool has_hours = true;
  DateOrder order = DateOrder::none;
  int date[3] = {0, 0, 0}; ///< in the order written
};

std::optional<ClockCell> read_clock(std::string_view cell);

/// A date alone, as it may stand in a column of its own.
std::optional<ClockCell> read_date(std::string_view cell);

/// The order of all dates together: one that has 25 in its first place settles it for the column.
DateOrder order_of(const std::vector<ClockCell>& cells);

/// Days since 1970-01-01 under `order`; nothing if that is no day of the calendar.
std::optional<std::int64_t> day_of(const ClockCell& cell, DateOrder order);

} // namespace chronodrome::intake
