// Chronodrome, GPL-3.0-or-later.
#include "protocol/typed_concentration.h"

#include <catch2/catch.hpp>

using namespace chronodrome;
using protocol::typed_concentration;

TEST_CASE("a concentration is read in every form that people type", "[protocol]") {
  struct Case {
    const char* text;
    const char* unit;
    double molar;
    const char* kept; ///< unit afterwards
  };
  const auto c = GENERATE(values<Case>({{"1e-7", "M", 1e-7, "M"},
                                        {"1E-07", "M", 1e-7, "M"},
                                        {"1,00E-07", "M", 1e-7, "M"},
                                        {"10^-7", "M", 1e-7, "M"},
                                        {"3x10^-8", "M", 3e-8, "M"},
                                        {"3 x 10-8", "M", 3e-8, "M"},
                                        {"3\xC2\xB7"
                                         "10\xE2\x81\xBB\xE2\x81\xB8",
                                         "M", 3e-8, "M"},
                                        {"3\xC3\x97"
                                         "10\xE2\x88\x92"
                                         "8",
                                         "M", 3e-8, "M"},
                                        {"100", "nM", 1e-7, "nM"},
                                        {"100 nM", "", 1e-7, "nM"},
                                        {"0,1 uM", "M", 1e-7, "uM"},
                                        {"0.1\xC2\xB5M", "", 1e-7, "\xC2\xB5M"},
                                        {"1e-7 mol/L", "", 1e-7, "M"},
                                        {"0", "M", 0.0, "M"},
                                        {" 30 ", " nM ", 3e-8, "nM"}}));
  CAPTURE(c.text, c.unit);
  const auto typed = typed_concentration(c.text, c.unit);
  REQUIRE(typed.ok());
  // One division or none: the same double as the literal, but for the last bit.
  CHECK_THAT(typed->value.value(), Catch::Matchers::WithinULP(c.molar, 1));
  CHECK(typed->unit == c.kept);
}

TEST_CASE("what is no concentration says what to write", "[protocol]") {
  for (const auto& [text, unit] : std::vector<std::pair<std::string, std::string>>{{"", "M"},
                                                                                   {"-7", "M"},
                                                                                   {"abc", "M"},
                                                                                   {"1.000,5", "nM"},
                                                                                   {"1,000,5", "nM"},
                                                                                   {"100", ""},
                                                                                   {"100", "ng/mL"},
                                                                                   {"1-Sep", "M"},
                                                                                   {"#REF!", "M"},
                                                                                   {"100 nm", ""},
                                                                                   {"1e-7 M M", ""},
                                                                                   {"nM", ""}}) {
    CAPTURE(text, unit);
    const auto typed = typed_concentration(text, unit);
    REQUIRE_FALSE(typed.ok());
    CHECK_FALSE(typed.error().what.empty());
    CHECK_FALSE(typed.error().remedy.empty());
  }
}
