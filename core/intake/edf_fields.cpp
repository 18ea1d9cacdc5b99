// Chronodrome, GPL-3.0-or-later.
#include "intake/edf_fields.h"

#include <algorithm>
#include <array>
#include <cmath>
#include <sstream>

#include "base/number_text.h"
#include "intake/csv_text.h"

namespace chronodrome::intake {
namespace {

constexpr std::size_t kRecordingField = 88, kDateField = 168, kTimeField = 176;

/// Three numbers with any mark between them: 04.03.26, 04/03/26, 4-3-26.
std::optional<std::array<int, 3>> three_numbers(const std::string& text) {
  std::array<int, 3> numbers{};
  std::size_t part = 0, digits = 0;
  for (const char c : text) {
    if (c >= '0' && c <= '9') {
      if (++digits > 4) return std::nullopt;
      numbers[part] = numbers[part] * 10 + (c - '0');
    } else {
      if (digits == 0 || ++part > 2) return std::nullopt;
      digits = 0;
    }
  }
  return part == 2 && digits > 0 ? std::optional(numbers) : std::nullopt;
}

/// `Startdate 04-MAR-2026 ...`: the day; nothing: there is none, or it is unknown ("X").
std::optional<std::int64_t> long_date(const std::string& recording_field) {
  std::istringstream words(recording_field);
  std::string word, date;
  words >> word >> date;
  if (word != "Startdate" || date.size() != 11) return std::nullopt;
  constexpr std::array<const char*, 12> kMonths = {"jan", "feb", "mar", "apr", "may", "jun",
                                                   "jul", "aug", "sep", "oct", "nov", "dec"};
  const auto month = std::find(kMonths.begin(), kMonths.end(), lower_case(date.substr(3, 3)));
  const auto day = parse_integer(date.substr(0, 2)), year = parse_integer(date.substr(7, 4));
  if (month == kMonths.end() || !day || !year) return std::nullopt;
  return day_number(static_cast<int>(*year), static_cast<int>(month - kMonths.begin()) + 1,
                    static_cast<int>(*day));
}

std::optional<std::int64_t> short_date(const std::string& text) {
  const auto numbers = three_numbers(text);
  if (!numbers) return std::nullopt;
  const int year = (*numbers)[2];
  // Two digits: 85 to 99 are of the last century, 00 to 84 of this one (Kemp & Olivan 2003).
  return day_number(year >= 100  ? year
                    : year >= 85 ? 1900 + year
                                 : 2000 + year,
                    (*numbers)[1], (*numbers)[0]);
}

} // namespace

std::string EdfFields::text(std::size_t at, std::size_t width) const {
  std::string_view field = raw(at, width);
  const auto is_padding = [](char c) { return static_cast<unsigned char>(c) <= 32; };
  while (!field.empty() && is_padding(field.back()))
    field.remove_suffix(1);
  while (!field.empty() && is_padding(field.front()))
    field.remove_prefix(1);
  std::string text = as_utf8(field);
  std::replace_if(text.begin(), text.end(), is_padding, ' ');
  return text;
}

void EdfFields::warn(std::size_t byte, const std::string& what, const std::string& remedy) {
  warnings_.push_back({path_, Place::at_byte(byte), what, remedy});
}

Error EdfFields::fault(ErrorCode code, std::size_t byte, const std::string& what,
                       const std::string& remedy) const {
  return {code, path_, Place::at_byte(byte), what, remedy};
}

Result<double> EdfFields::number(std::size_t at, std::size_t width, const std::string& what) {
  const std::string field = text(at, width);
  if (const auto value = parse_number(field)) return *value;
  if (const auto value = parse_number(field, ',')) {
    warn(at, what + " is written with a decimal comma ('" + field + "')", "read as " + number_text(*value));
    return *value;
  }
  return fault(ErrorCode::bad_value, at, what + " is '" + field + "', expected a number",
               "the header is damaged; export the recording again");
}

Result<std::int64_t> EdfFields::integer(std::size_t at, std::size_t width, const std::string& what) {
  const auto value = number(at, width, what);
  if (!value) return value.error();
  if (*value != std::floor(*value) || std::abs(*value) > 9007199254740992.0)
    return fault(ErrorCode::bad_value, at, what + " is " + number_text(*value) + ", expected a whole number",
                 "the header is damaged; export the recording again");
  return static_cast<std::int64_t>(*value);
}

std::optional<ClockTime> edf_start(EdfFields& fields, bool plus, std::vector<std::string>& notes) {
  const std::string recording = fields.text(kRecordingField, 80);
  const std::string date = fields.text(kDateField, 8), time = fields.text(kTimeField, 8);
  const auto from_long = plus ? long_date(recording) : std::nullopt;
  const auto from_short = short_date(date);
  const bool anonymous =
      plus ? recording.rfind("Startdate X", 0) == 0 : date == "01.01.85" && time == "00.00.00";
  if (anonymous && !from_long) {
    notes.push_back("the file does not tell its date");
    return std::nullopt;
  }
  const auto day = from_long ? from_long : from_short;
  if (!day) {
    fields.warn(kDateField, "the start date '" + date + "' is no date of the calendar",
                "the date stays unknown");
    return std::nullopt;
  }
  if (from_long && from_short && *from_long != *from_short)
    fields.warn(kDateField, "the start date '" + date + "' and the date in the recording field differ",
                "the one with four digits of the year is used");
  const auto parts = three_numbers(time);
  if (!parts || (*parts)[0] > 23 || (*parts)[1] > 59 || (*parts)[2] > 59) {
    fields.warn(kTimeField, "the start time '" + time + "' is no time of day",
                "the clock time stays unknown");
    return std::nullopt;
  }
  return ClockTime{*day, (*parts)[0] * 3600.0 + (*parts)[1] * 60.0 + (*parts)[2]};
}

} // namespace chronodrome::intake
