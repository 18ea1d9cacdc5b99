// Chronodrome, GPL-3.0-or-later.
#include "intake/csv_clock.h"

#include "base/number_text.h"
#include "intake/clock_time.h"

namespace chronodrome::intake {
namespace {

bool is_digit(char c) {
  return c >= '0' && c <= '9';
}

/// One to `most` digits at the front, taken off.
std::optional<int> take_number(std::string_view& text, std::size_t most) {
  int value = 0;
  std::size_t count = 0;
  while (count < text.size() && count < most && is_digit(text[count]))
    value = value * 10 + (text[count++] - '0');
  if (count == 0) return std::nullopt;
  text.remove_prefix(count);
  return value;
}

bool take(std::string_view& text, char c) {
  if (text.empty() || text.front() != c) return false;
  text.remove_prefix(1);
  return true;
}

bool take_date(std::string_view& text, ClockCell& cell) {
  std::string_view rest = text;
  const auto first = take_number(rest, 4);
  if (!first || rest.empty()) return false;
  const char mark = rest.front();
  if (mark != '-' && mark != '/' && mark != '.') return false;
  rest.remove_prefix(1);
  const auto second = take_number(rest, 2);
  if (!second || !take(rest, mark)) return false;
  const auto third = take_number(rest, 4);
  if (!third) return false;
  if (*first > 31) {
    cell.order = DateOrder::year_month_day;
  } else {
    cell.order = mark == '.' ? DateOrder::day_month_year : DateOrder::unknown; // 04.03.2026: common practice
  }
  cell.date[0] = *first;
  cell.date[1] = *second;
  cell.date[2] = *third;
  text = rest;
  return true;
}

/// The digits behind a decimal mark, as a fraction.
bool take_fraction(std::string_view& text, ClockCell& cell) {
  if (text.empty() || (text.front() != '.' && text.front() != ',')) return true;
  std::size_t end = 1;
  while (end < text.size() && is_digit(text[end]))
    ++end;
  if (end == 1 || end > 18) return false;
  cell.decimals = static_cast<int>(end - 1);
  double scale = 1.0, digits = 0.0;
  for (std::size_t i = 1; i < end; ++i) {
    digits = digits * 10.0 + (text[i] - '0');
    scale *= 10.0;
  }
  cell.seconds += digits / scale;
  text.remove_prefix(end);
  return true;
}

bool take_half_of_day(std::string_view text, ClockCell& cell, int hours) {
  text = trimmed(text);
  if (text.empty()) return true;
  const std::string word = lower_case(text);
  if ((word != "am" && word != "pm") || hours < 1 || hours > 12) return false;
  if (word == "pm" && hours != 12) cell.seconds += 43200.0;
  if (word == "am" && hours == 12) cell.seconds -= 43200.0;
  return true;
}

} // namespace

std::optional<ClockCell> read_clock(std::string_view text) {
  text = trimmed(text);
  if (text.size() < 4 || !is_digit(text.front())) return std::nullopt;
  ClockCell cell;
  if (take_date(text, cell)) {
    if (text.empty() || (text.front() != 'T' && text.front() != ' ')) return std::nullopt;
    text = trimmed(text.substr(1));
  }
  const auto first = take_number(text, 2);
  if (!first || !take(text, ':')) return std::nullopt;
  const auto second = take_number(text, 2);
  if (!second || *second > 59) return std::nullopt;
  if (!take(text, ':')) { // minutes and seconds, if there is a fraction to show it
    if (cell.order != DateOrder::none || text.empty()) return std::nullopt;
    cell.has_hours = false;
    cell.seconds = *first * 60.0 + *second;
    return *first < 60 && take_fraction(text, cell) && text.empty() ? std::optional(cell) : std::nullopt;
  }
  const auto third = take_number(text, 2);
  if (!third || *first > 24 || *third > 60) return std::nullopt; // 24:00:00 and leap seconds
  cell.seconds = *first * 3600.0 + *second * 60.0 + *third;
  if (!take_fraction(text, cell)) return std::nullopt;
  if (take(text, 'Z') && !text.empty()) return std::nullopt;
  return take_half_of_day(text, cell, *first) ? std::optional(cell) : std::nullopt;
}

std::optional<ClockCell> read_date(std::string_view text) {
  text = trimmed(text);
  ClockCell cell;
  return take_date(text, cell) && text.empty() ? std::optional(cell) : std::nullopt;
}

DateOrder order_of(const std::vector<ClockCell>& cells) {
  bool day_first = false, month_first = false;
  for (const ClockCell& cell : cells) {
    if (cell.order != DateOrder::unknown) return cell.order;
    day_first = day_first || cell.date[0] > 12;
    month_first = month_first || cell.date[1] > 12;
  }
  if (cells.empty()) return DateOrder::none;
  if (day_first == month_first) return DateOrder::unknown;
  return day_first ? DateOrder::day_month_year : DateOrder::month_day_year;
}

std::optional<std::int64_t> day_of(const ClockCell& cell, DateOrder order) {
  const auto full = [](int year) { return year < 100 ? (year < 85 ? 2000 + year : 1900 + year) : year; };
  switch (order) {
  case DateOrder::year_month_day:
    return day_number(full(cell.date[0]), cell.date[1], cell.date[2]);
  case DateOrder::day_month_year:
    return day_number(full(cell.date[2]), cell.date[1], cell.date[0]);
  case DateOrder::month_day_year:
    return day_number(full(cell.date[2]), cell.date[0], cell.date[1]);
  case DateOrder::none:
  case DateOrder::unknown:
    break;
  }
  return std::nullopt;
}

} // namespace chronodrome::intake
