// Chronodrome, GPL-3.0-or-later.
#include <catch2/catch.hpp>

#include "base/number_text.h"

using namespace chronodrome;

TEST_CASE("a number is the whole text or nothing", "[number]") {
  CHECK(parse_number("1.5") == 1.5);
  CHECK(parse_number(" -2e-7\t") == -2e-7);
  CHECK(parse_number("+3") == 3.0);
  CHECK(parse_number("1,5", ',') == 1.5);
  CHECK(parse_number("1.5D-08") == 1.5e-8);
  CHECK(parse_number("1,5E-08", ',') == 1.5e-8);
  for (const char* bad :
       {"", " ", "1,5", "1.5x", "nan", "inf", "1e400", "0x10", "--1", "+-1", "OVER", "1 2"}) {
    CAPTURE(bad);
    CHECK_FALSE(parse_number(bad).has_value());
  }
}

TEST_CASE("a whole number is digits only", "[number]") {
  CHECK(parse_integer("-1 ") == -1);
  CHECK(parse_integer("8192") == 8192);
  CHECK_FALSE(parse_integer("8192.0").has_value());
  CHECK_FALSE(parse_integer("99999999999999999999").has_value());
}

TEST_CASE("numbers in files have a point, no trailing zeros and no minus zero", "[number]") {
  CHECK(number_text(0.1) == "0.1");
  CHECK(number_text(1.0 / 3.0) == "0.333333333333");
  CHECK(number_text(-0.0) == "0");
  CHECK(number_text(3e-7) == "3e-07");
  CHECK(fixed_text(-0.0001, 2) == "0.00");
  CHECK(fixed_text(1234.5678, 2) == "1234.57");
  CHECK(parse_number(exact_text(0.1 + 0.2)) == 0.1 + 0.2);
}
