// Chronodrome, GPL-3.0-or-later.
// The time axis that is rebuilt from a column of stamps.
#include <catch2/catch.hpp>
#include <cmath>
#include <limits>
#include <random>

#include "intake/csv_time.h"

using namespace chronodrome;
using namespace chronodrome::intake;
using Catch::Matchers::WithinAbs;
using Catch::Matchers::WithinRel;

namespace {

constexpr double kNone = std::numeric_limits<double>::quiet_NaN();

struct Gap {
  std::size_t row; ///< first row behind it
  double length;   ///< seconds
};

std::vector<double> stamps_of(std::size_t rows, double rate, const std::vector<Gap>& gaps,
                              double rounding = 0.0, double start = 0.0) {
  std::vector<double> stamps(rows);
  double shift = start;
  std::size_t next = 0;
  for (std::size_t i = 0; i < rows; ++i) {
    if (next < gaps.size() && i == gaps[next].row) shift += gaps[next++].length;
    const double time = static_cast<double>(i) / rate + shift;
    stamps[i] = rounding > 0.0 ? std::round(time / rounding) * rounding : time;
  }
  return stamps;
}

TimeAxis axis_of(const std::vector<double>& stamps, std::optional<double> printed, double unit = 1.0) {
  const auto found = find_step(stamps, printed);
  REQUIRE(found.has_value());
  const auto axis = find_axis(stamps, *found, unit, std::nullopt, "t.csv");
  if (!axis) FAIL(describe(axis.error()));
  return *axis;
}

} // namespace

TEST_CASE("even stamps give their step, their rate and one run", "[csv]") {
  for (const double rate : {10.0, 250.0, 1000.0, 1234.567, 20'000.0}) {
    for (const double start : {0.0, 3600.0, 1e6}) {
      const auto stamps = stamps_of(5000, rate, {}, 0.0, start);
      const auto found = find_step(stamps, 1e-9);
      REQUIRE(found.has_value());
      // Stamps of 1e6 s are doubles to 1.2e-10 s.
      CHECK_THAT(found->step, WithinRel(1.0 / rate, 1e-9 * rate + 1e-9));
      CHECK(found->quantum == 0.0);
      const TimeAxis axis = axis_of(stamps, 1e-9);
      CHECK(axis.runs.size() == 1);
      CHECK(axis.runs[0].count == 5000);
      CHECK_THAT(axis.rate.value(), WithinRel(rate, 1e-9 + 3e-10 * rate / 5000.0));
      CHECK(axis.zero == stamps[0]);
      CHECK(axis.residual_max < 1e-8);
    }
  }
}

TEST_CASE("a whole rate comes out whole in spite of the rounding of doubles", "[csv]") {
  for (const double rate : {1.0, 3.0, 7.0, 100.0, 333.0, 1000.0, 4096.0, 30'000.0})
    CHECK(axis_of(stamps_of(100'000, rate, {}), std::nullopt).rate == Hertz(rate));
}

TEST_CASE("every gap is found where it is, with its length", "[csv]") {
  std::mt19937_64 random(11);
  for (int round = 0; round < 60; ++round) {
    const double rate = 50.0 + static_cast<double>(random() % 5000);
    std::vector<Gap> gaps;
    std::size_t row = 0;
    for (std::size_t k = random() % 6; k > 0; --k) {
      row += 2 + random() % 500;
      // From 0.6 of a sample on: 0.5 is where a gap begins.
      gaps.push_back({row, (0.6 + static_cast<double>(random() % 10'000) / 100.0) / rate});
    }
    const auto stamps = stamps_of(row + 500, rate, gaps);
    const TimeAxis axis = axis_of(stamps, std::nullopt);
    CAPTURE(rate, gaps.size());
    REQUIRE(axis.runs.size() == gaps.size() + 1);
    CHECK_THAT(axis.rate.value(), WithinRel(rate, 1e-9));
    double missing = 0.0;
    for (std::size_t k = 0; k < gaps.size(); ++k) {
      missing += gaps[k].length;
      CHECK(axis.runs[k + 1].row == gaps[k].row);
      CHECK_THAT(axis.runs[k + 1].start, WithinAbs(static_cast<double>(gaps[k].row) / rate + missing, 1e-8));
    }
  }
}

TEST_CASE("the limit between jitter and a gap is one and a half steps", "[csv]") {
  const auto runs = [](double late) {
    std::vector<double> stamps = stamps_of(1000, 1000.0, {{500, late}});
    return axis_of(stamps, 1e-7).runs.size();
  };
  CHECK(runs(0.00049) == 1);
  CHECK(runs(0.00051) == 2);
}

TEST_CASE("rounded stamps keep their rate for every rate and rounding", "[csv]") {
  std::mt19937_64 random(3);
  for (int round = 0; round < 40; ++round) {
    const double rate = 200.0 + static_cast<double>(random() % 30'000) / 10.0;
    const double rounding = random() % 2 == 0 ? 1e-3 : 1e-2;
    const std::size_t rows = 30'000;
    const auto stamps = stamps_of(rows, rate, {}, rounding, 12.0);
    CAPTURE(rate, rounding);
    const TimeAxis axis = axis_of(stamps, rounding);
    CHECK(axis.runs.size() == 1);
    // First and last stamp are off by half the rounding each.
    CHECK_THAT(axis.rate.value(), WithinRel(rate, 1.01 * rounding * rate / static_cast<double>(rows)));
    CHECK(axis.residual_max <= 1.01 * rounding);
    if (axis.quantum > 0.0)
      CHECK_THAT(axis.residual_sd, WithinAbs(rounding / std::sqrt(12.0), 0.25 * rounding));
  }
}

TEST_CASE("a long gap among rounded stamps is found", "[csv]") {
  const auto stamps = stamps_of(20'000, 1024.0, {{9000, 0.75}}, 1e-3);
  const TimeAxis axis = axis_of(stamps, 1e-3);
  REQUIRE(axis.runs.size() == 2);
  CHECK(axis.runs[1].row == 9000);
  CHECK_THAT(axis.runs[1].start, WithinAbs(9000 / 1024.0 + 0.75, 0.6e-3)); // within the rounding
}

TEST_CASE("the unit of the column scales the axis", "[csv]") {
  const TimeAxis axis = axis_of({500.0, 501.0, 502.0, 503.0, 510.0, 511.0}, 1.0, 1e-3);
  CHECK_THAT(axis.rate.value(), WithinRel(1000.0, 1e-12));
  CHECK_THAT(axis.zero, WithinAbs(0.5, 1e-15));
  REQUIRE(axis.runs.size() == 2);
  CHECK_THAT(axis.runs[1].start, WithinAbs(0.010, 1e-12));
}

TEST_CASE("rows without a stamp are placed by the rows around them", "[csv]") {
  std::vector<double> stamps = stamps_of(100, 500.0, {{60, 1.0}});
  for (const std::size_t row : {0UL, 1UL, 20UL, 21UL, 22UL, 99UL})
    stamps[row] = kNone;
  const TimeAxis axis = axis_of(stamps, std::nullopt);
  REQUIRE(axis.runs.size() == 2);
  CHECK(axis.runs[1].row == 60);
  CHECK_THAT(axis.zero, WithinAbs(0.0, 1e-12)); // where row 0 must have been
  CHECK_THAT(axis.runs[1].start, WithinAbs(60 / 500.0 + 1.0, 1e-9));
}

TEST_CASE("stamps that tell nothing give no step", "[csv]") {
  CHECK_FALSE(find_step(std::vector<double>{}, std::nullopt).has_value());
  CHECK_FALSE(find_step(std::vector<double>{1.0}, std::nullopt).has_value());
  CHECK_FALSE(find_step(std::vector<double>{2.0, 2.0, 2.0}, std::nullopt).has_value());
  CHECK_FALSE(find_step(std::vector<double>{kNone, kNone}, std::nullopt).has_value());
  CHECK_FALSE(find_step(std::vector<double>{kNone, 3.0, kNone}, std::nullopt).has_value());
}

TEST_CASE("a rate that is set overrides the measured one", "[csv]") {
  const auto stamps = stamps_of(1000, 999.0, {});
  const auto found = find_step(stamps, std::nullopt);
  REQUIRE(found.has_value());
  const auto axis = find_axis(stamps, *found, 1.0, Hertz(1000.0), "t.csv");
  REQUIRE(axis.ok());
  CHECK(axis->rate == Hertz(1000.0));
  CHECK_THAT(axis->residual_max, WithinRel(999.0 / 999.0 - 999.0 / 1000.0, 1e-6)); // the last stamp
  CHECK(axis->worst_row == 999);
}

TEST_CASE("rows at a rate without stamps are one run", "[csv]") {
  const TimeAxis axis = plain_axis(42, Hertz(250.0));
  REQUIRE(axis.runs.size() == 1);
  CHECK(axis.runs[0].count == 42);
  CHECK(plain_axis(0, Hertz(250.0)).runs.empty());
}

TEST_CASE("a clock of whole seconds gives the exact rate, wherever the table begins", "[csv]") {
  for (const double rate : {10.0, 100.0, 1000.0}) {
    for (const double seconds : {4.0, 10.0, 120.0}) {
      for (const double begin : {0.0, 0.3, 0.9}) {
        const auto rows = static_cast<std::size_t>(rate * seconds);
        std::vector<double> stamps(rows);
        for (std::size_t i = 0; i < rows; ++i) // cut, as clocks show it; the hair keeps 0.3 + 0.7 at 1
          stamps[i] = 36'000.0 + std::floor(begin + static_cast<double>(i) / rate + 1e-9);
        CAPTURE(rate, seconds, begin);
        const TimeAxis axis = axis_of(stamps, 1.0);
        CHECK(axis.runs.size() == 1);
        CHECK(axis.quantum == 1.0);
        CHECK_THAT(axis.rate.value(), WithinRel(rate, 1e-12)); // rounding of doubles
        CHECK(axis.zero == stamps[0]);
      }
    }
  }
}

TEST_CASE("stamps rounded up and down at their halves still give the exact rate", "[csv]") {
  // 2 kHz written to the millisecond: every other row lies on a half, which goes either way.
  std::mt19937_64 random(5);
  std::vector<double> stamps(1000);
  for (std::size_t i = 0; i < stamps.size(); ++i)
    stamps[i] = static_cast<double>(i % 2 == 0 ? i / 2 : i / 2 + random() % 2) * 1e-3;
  CHECK_THAT(axis_of(stamps, 1e-3).rate.value(), WithinRel(2000.0, 1e-9)); // rounding of doubles
}

TEST_CASE("a gap between rounded stamps leaves the rate as it is", "[csv]") {
  std::vector<double> stamps(3000);
  for (std::size_t i = 0; i < stamps.size(); ++i)
    stamps[i] = std::floor(static_cast<double>(i) / 100.0 + 1e-9) + (i < 1250 ? 0.0 : 40.0);
  const TimeAxis axis = axis_of(stamps, 1.0);
  REQUIRE(axis.runs.size() == 2);
  CHECK(axis.runs[1].row == 1250);
  CHECK_THAT(axis.rate.value(), WithinRel(100.0, 1e-12));
}

TEST_CASE("stamps that scatter beyond their rounding are regressed", "[csv]") {
  std::mt19937_64 random(9);
  const std::size_t rows = 20'000;
  std::vector<double> stamps(rows);
  double last = 0.0;
  for (std::size_t i = 0; i < rows; ++i) { // 250 Hz, each stamp up to 1.5 ms late, written to 0.1 ms
    const double late = static_cast<double>(random() % 1500) * 1e-6;
    last = stamps[i] = std::max(last, std::round((static_cast<double>(i) / 250.0 + late) * 1e4) / 1e4);
  }
  const TimeAxis axis = axis_of(stamps, 1e-4);
  // Uniform scatter of SD 0.433 ms: SD of the least-squares slope 0.433 ms sqrt(12) / rows^1.5, four of them.
  const double slope_sd = 0.433e-3 * std::sqrt(12.0) / std::pow(static_cast<double>(rows), 1.5);
  CHECK_THAT(1.0 / axis.rate.value(), WithinAbs(1.0 / 250.0, 4.0 * slope_sd));
}

TEST_CASE("the rate that the stamps tell is kept beside one that is set", "[csv]") {
  const auto stamps = stamps_of(1000, 100.0, {}, 1.0);
  const auto found = find_step(stamps, 1.0);
  REQUIRE(found.has_value());
  const auto axis = find_axis(stamps, *found, 1.0, Hertz(99.0), "t.csv");
  REQUIRE(axis.ok());
  CHECK(axis->rate == Hertz(99.0));
  REQUIRE(axis->measured.has_value());
  CHECK_THAT(axis->measured->value(), WithinRel(100.0, 1e-12));
}
