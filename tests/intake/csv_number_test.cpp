// Chronodrome, GPL-3.0-or-later.
#include <catch2/catch.hpp>
#include <random>

#include "base/number_text.h"
#include "intake/csv_cells.h"
#include "intake/csv_clock.h"
#include "intake/csv_quick_number.h"
#include "intake/units.h"

using namespace chronodrome;
using namespace chronodrome::intake;

namespace {

std::optional<double> quick(const std::string& cell, char decimal = '.', char delimiter = ';') {
  const std::string text = cell + delimiter;
  const char* p = text.data();
  double value = 0.0;
  if (!quick_number(p, text.data() + text.size(), delimiter, decimal, value)) return std::nullopt;
  CHECK(*p == delimiter);
  return value;
}

} // namespace

TEST_CASE("the quick number equals fast_float's on any decimal text, bit for bit", "[csv]") {
  std::mt19937_64 random(42);
  for (int round = 0; round < 200'000; ++round) {
    std::string text = random() % 3 == 0 ? "-" : "";
    const std::size_t before = random() % 12, behind = random() % 12;
    for (std::size_t i = 0; i < before; ++i)
      text += static_cast<char>('0' + random() % 10);
    if (behind > 0 || before == 0) text += '.';
    for (std::size_t i = 0; i < behind + (before == 0 ? 1U : 0U); ++i)
      text += static_cast<char>('0' + random() % 10);
    if (random() % 8 == 0) text += "e" + std::to_string(static_cast<int>(random() % 40) - 20);
    const auto expected = parse_number(text);
    const auto found = quick(text);
    if (found != expected) {
      CAPTURE(text);
      CHECK(found == expected);
    }
  }
}

TEST_CASE("the quick number leaves what it does not know to the careful one", "[csv]") {
  CHECK(quick("1,5", ',') == 1.5);
  CHECK(quick("+.5") == 0.5);
  CHECK(quick("5.") == 5.0);
  CHECK(quick("123456789012345678901234567890") == 123456789012345678901234567890.0);
  for (const char* cell :
       {"", "-", "+", ".", "NaN", "1,234", "1.2.3", "1e", "1e308", "0x10", "\"1\"", "12:30", "--1"})
    CHECK_FALSE(quick(cell).has_value());
  const std::string cut = "12.5";
  const char* p = cut.data();
  double value = 0.0;
  CHECK_FALSE(quick_number(p, cut.data() + cut.size(), ',', '.', value)); // more digits may follow
}

TEST_CASE("thousands marks stand in groups of three behind one to three digits", "[csv]") {
  CHECK(read_number("1,234.5", '.').form == NumberForm::grouped_fully);
  CHECK(read_number("1,234.5", '.').value == 1234.5);
  CHECK(read_number("1,234", '.').form == NumberForm::grouped);
  CHECK(read_number("1,234,567", '.').form == NumberForm::grouped_fully); // two commas are no decimal mark
  CHECK(read_number("1 234", '.').form == NumberForm::grouped_fully);
  CHECK(read_number("-1.234,5", ',').value == -1234.5);
  for (const char* cell : {"0,234", "12,34", "1234,567", "1,2345", ",123", "1,,234", "1,234.5.6", "a1,234"})
    CHECK(read_number(cell, '.').form == NumberForm::none);
}

TEST_CASE("clock times are read in the forms that exports use", "[csv]") {
  CHECK(read_clock("09:30:00")->seconds == 34200.0);
  CHECK(read_clock("9:30:00,125")->seconds == 34200.125);
  CHECK(read_clock("9:30:00.125")->decimals == 3);
  CHECK(read_clock("09:30:00 PM")->seconds == 77400.0);
  CHECK(read_clock("12:00:00 AM")->seconds == 0.0);
  CHECK(read_clock("12:00:00 pm")->seconds == 43200.0);
  CHECK(read_clock("30:15.5")->seconds == 1815.5);
  CHECK_FALSE(read_clock("30:15.5")->has_hours);
  CHECK(read_clock("2026-03-04T09:30:00.5Z")->order == DateOrder::year_month_day);
  for (const char* cell :
       {"09:30", "25:00:00", "09:60:00", "9.30.00", "13:00:00 PM", "09:30:00 xx", "a09:30:00", "2026-03-04"})
    CHECK_FALSE(read_clock(cell).has_value());
}

TEST_CASE("the order of day and month is settled for the whole column, or not at all", "[csv]") {
  const auto dates = [](std::initializer_list<const char*> texts) {
    std::vector<ClockCell> cells;
    for (const char* text : texts)
      cells.push_back(*read_date(text));
    return cells;
  };
  CHECK(order_of(dates({"03/04/2026", "25/04/2026"})) == DateOrder::day_month_year);
  CHECK(order_of(dates({"03/04/2026", "04/25/2026"})) == DateOrder::month_day_year);
  CHECK(order_of(dates({"03/04/2026", "05/06/2026"})) == DateOrder::unknown);
  CHECK(order_of(dates({"25/04/2026", "04/25/2026"})) == DateOrder::unknown);
  CHECK(order_of(dates({"2026-03-04"})) == DateOrder::year_month_day);
  CHECK(day_of(*read_date("03/04/2026"), DateOrder::day_month_year) !=
        day_of(*read_date("03/04/2026"), DateOrder::month_day_year));
  CHECK_FALSE(day_of(*read_date("31.02.2026"), DateOrder::day_month_year).has_value());
}

TEST_CASE("headings give their units up only where these are sure", "[csv]") {
  const auto check = [](const char* text, const char* name, const char* unit) {
    CAPTURE(text);
    CHECK(heading_of(text).name == name);
    CHECK(heading_of(text).unit == unit);
  };
  check("ATR (mV)", "ATR", "mV");
  check("ATR[ mV ]", "ATR", "mV");
  check("RA (left)", "RA (left)", "");
  check("RA [left]", "RA", "left");
  check("ATR/mV", "ATR/mV", "mV");
  check("A/V", "A/V", "");
  check("lead_C", "lead_C", "");
  check("EG_1", "EG_1", "");
  check("LVP, mmHg", "LVP, mmHg", "mmHg");
  check("(mV)", "(mV)", "");
  CHECK(normalised_unit("\xC2\xB5V") == "uV");
  CHECK(normalised_unit("(\xCE\xBCN)") == "uN");
  CHECK(normalised_unit(" mmHg ") == "mmHg");
  CHECK(seconds_in("msec") == 1e-3);
  CHECK(seconds_in("\xC2\xB5s") == 1e-6);
  CHECK_FALSE(seconds_in("mV").has_value());
}
