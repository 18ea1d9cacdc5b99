// Chronodrome, GPL-3.0-or-later.
#include "intake/clock_time.h"

#include <cmath>

#include "base/number_text.h"

namespace chronodrome::intake {
namespace {

constexpr double kDay = 86400.0;

bool is_leap(int year) {
  return (year % 4 == 0 && year % 100 != 0) || year % 400 == 0;
}

int days_in(int year, int month) {
  constexpr int kDays[] = {31, 28, 31, 30, 31, 30, 31, 31, 30, 31, 30, 31};
  return month == 2 && is_leap(year) ? 29 : kDays[month - 1];
}

std::optional<int> digits(std::string_view text, std::size_t at, std::size_t count) {
  if (at + count > text.size()) return std::nullopt;
  int value = 0;
  for (const char c : text.substr(at, count)) {
    if (c < '0' || c > '9') return std::nullopt;
    value = value * 10 + (c - '0');
  }
  return value;
}

std::string padded(int value, std::size_t width) {
  std::string text = std::to_string(value);
  if (text.size() < width) text.insert(0, width - text.size(), '0');
  return text;
}

} // namespace

std::optional<std::int64_t> day_number(int year, int month, int day) {
  if (year < 1 || year > 9999 || month < 1 || month > 12 || day < 1 || day > days_in(year, month))
    return std::nullopt;
  // Years counted from March, so that the leap day is the last of its year.
  const std::int64_t y = month > 2 ? year : year - 1;
  const std::int64_t m = month > 2 ? month - 3 : month + 9;
  const std::int64_t in_year = (153 * m + 2) / 5 + day - 1;
  return 365 * y + y / 4 - y / 100 + y / 400 + in_year - 719468;
}

CalendarDay calendar_day(std::int64_t day) {
  const auto first_of = [](int year) { return *day_number(year, 1, 1); };
  CalendarDay found;
  found.year = static_cast<int>(1970 + day / 366);
  while (found.year < 9999 && first_of(found.year + 1) <= day)
    ++found.year;
  while (found.year > 1 && first_of(found.year) > day)
    --found.year;
  auto rest = static_cast<int>(day - first_of(found.year));
  while (found.month < 12 && rest >= days_in(found.year, found.month))
    rest -= days_in(found.year, found.month++);
  found.day = rest + 1;
  return found;
}

std::optional<ClockTime> parse_clock_time(std::string_view text) {
  if (text.size() < 19 || text[4] != '-' || text[7] != '-' || (text[10] != 'T' && text[10] != ' ') ||
      text[13] != ':' || text[16] != ':')
    return std::nullopt;
  const auto year = digits(text, 0, 4), month = digits(text, 5, 2), day = digits(text, 8, 2);
  const auto hour = digits(text, 11, 2), minute = digits(text, 14, 2), second = digits(text, 17, 2);
  if (!year || !month || !day || !hour || !minute || !second) return std::nullopt;
  const auto number = day_number(*year, *month, *day);
  if (!number || *hour > 23 || *minute > 59 || *second > 59) return std::nullopt;
  double fraction = 0.0;
  if (text.size() > 19) {
    if (text[19] != '.' || text.size() == 20 ||
        text.find_first_not_of("0123456789", 20) != std::string_view::npos)
      return std::nullopt;
    fraction = parse_number("0" + std::string(text.substr(19))).value_or(0.0);
  }
  return ClockTime{*number, *hour * 3600 + *minute * 60 + *second + fraction};
}

std::string clock_text(const ClockTime& time) {
  ClockTime rounded = time;
  rounded.second = std::round(time.second * 1e7) / 1e7;
  if (rounded.second >= kDay) rounded = {time.day + 1, 0.0};
  const CalendarDay date = calendar_day(rounded.day);
  const int whole = static_cast<int>(rounded.second);
  std::string text = padded(date.year, 4) + "-" + padded(date.month, 2) + "-" + padded(date.day, 2) + "T" +
                     padded(whole / 3600, 2) + ":" + padded(whole / 60 % 60, 2) + ":" + padded(whole % 60, 2);
  std::string fraction = fixed_text(rounded.second - whole, 7).substr(1);
  while (fraction.back() == '0')
    fraction.pop_back();
  return fraction == "." ? text : text + fraction;
}

ClockTime later_by(const ClockTime& time, double seconds) {
  const double sum = time.second + seconds;
  const double days = std::floor(sum / kDay);
  return {time.day + static_cast<std::int64_t>(days), sum - days * kDay};
}

double seconds_between(const ClockTime& earlier, const ClockTime& later) {
  return static_cast<double>(later.day - earlier.day) * kDay + (later.second - earlier.second);
}

} // namespace chronodrome::intake
