// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <cstdint>
#include <optional>
#include <string>
#include <string_view>

namespace chronodrome::intake {

/// A local date and time of day, without a zone.
struct ClockTime {
  std::int64_t day = 0; ///< days since 1970-01-01 (proleptic Gregorian)
  double second = 0.0;  ///< of the day, 0 <= second < 86400
};

/// Days since 1970-01-01, or nothing if the calendar has no such day.
std::optional<std::int64_t> day_number(int year, int month, int day);

struct CalendarDay {
  int year = 1970, month = 1, day = 1;
};
CalendarDay calendar_day(std::int64_t day);

/// `2026-03-04T09:30:00`, with a fraction of a second if there is one. Nothing for anything else.
std::optional<ClockTime> parse_clock_time(std::string_view text);

/// The same text form; fractions to a tenth of a microsecond, without trailing zeros.
std::string clock_text(const ClockTime& time);

/// `seconds` later (or earlier), carried over midnight.
ClockTime later_by(const ClockTime& time, double seconds);

/// later - earlier, in seconds.
double seconds_between(const ClockTime& earlier, const ClockTime& later);

} // namespace chronodrome::intake
