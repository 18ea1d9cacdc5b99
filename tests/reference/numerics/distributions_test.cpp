// Chronodrome, GPL-3.0-or-later.
#include <catch2/catch.hpp>

#include <string>

#include "numerics/distributions.h"
#include "reference/reference_data.h"

using namespace chronodrome::numerics;
using Catch::Matchers::WithinRel;

// The files' own rule: relative 1e-10, P down to 1e-17 (the reference was computed with 50 digits).
constexpr double kStated = 1e-10;

TEST_CASE("quantiles agree with the 50-digit reference", "[reference][numerics]") {
  REQUIRE(reference::json("distribution_quantiles.json").at("tolerance").at("rule") == "relative 1e-10");
  const reference::Table table = reference::table("distribution_quantiles.csv");
  REQUIRE(table.rows.size() == 124);
  for (std::size_t row = 0; row < table.rows.size(); ++row) {
    const std::string kind = table.text(row, "distribution");
    const double p = table.number(row, "p");
    const double expected = table.number(row, "quantile");
    const double df1 = kind == "normal" ? 0.0 : table.number(row, "df1");
    CAPTURE(row, kind, df1, p);
    if (kind == "t") {
      CHECK_THAT(student_t_quantile(p, df1), WithinRel(expected, kStated));
      CHECK_THAT(student_t_cdf(expected, df1), WithinRel(p, kStated));
      CHECK_THAT(student_t_quantile(1.0 - p, df1), WithinRel(-expected, kStated));
    } else if (kind == "F") {
      CHECK_THAT(f_quantile(p, df1, table.number(row, "df2")), WithinRel(expected, kStated));
      CHECK_THAT(f_upper_tail(expected, df1, table.number(row, "df2")), WithinRel(1.0 - p, kStated));
    } else if (kind == "normal") {
      CHECK_THAT(normal_quantile(p), WithinRel(expected, kStated));
      CHECK_THAT(normal_upper_tail(expected), WithinRel(1.0 - p, kStated));
    } else if (kind == "chisq") {
      CHECK_THAT(chi_squared_quantile(p, df1), WithinRel(expected, kStated));
      CHECK_THAT(chi_squared_upper_tail(expected, df1), WithinRel(1.0 - p, kStated));
    } else {
      FAIL("unknown distribution " << kind);
    }
  }
}

TEST_CASE("tail probabilities agree with the 50-digit reference", "[reference][numerics]") {
  const reference::Table table = reference::table("distribution_pvalues.csv");
  REQUIRE(table.rows.size() == 13);
  for (std::size_t row = 0; row < table.rows.size(); ++row) {
    const std::string kind = table.text(row, "test");
    const double statistic = table.number(row, "statistic");
    const double df1 = table.number(row, "df1");
    const double expected = table.number(row, "p");
    CAPTURE(row, kind, statistic);
    if (kind == "t_two_sided") {
      CHECK_THAT(student_t_two_sided(statistic, df1), WithinRel(expected, kStated));
      CHECK_THAT(student_t_two_sided(-statistic, df1), WithinRel(expected, kStated));
    } else {
      REQUIRE(kind == "F_upper");
      CHECK_THAT(f_upper_tail(statistic, df1, table.number(row, "df2")), WithinRel(expected, kStated));
    }
  }
}

TEST_CASE("the t quantile for 12 degrees of freedom has all its digits", "[reference][numerics]") {
  // A well-known library gives 2.1788128296634, wrong from the 12th digit; the value below was computed with
  // 50 digits.
  CHECK_THAT(student_t_quantile(0.975, 12.0), WithinRel(2.178812829667229, 1e-14));
}
