// Chronodrome, GPL-3.0-or-later.
#include <catch2/catch.hpp>
#include <cmath>
#include <limits>
#include <map>
#include <random>

#include "intake/csv_columns.h"

using namespace chronodrome;
using namespace chronodrome::intake;
using Catch::Matchers::WithinAbs;

namespace {

constexpr double kNone = std::numeric_limits<double>::quiet_NaN();

/// Adds `values` in pieces of `piece` rows.
void add_all(ColumnCollector& collector, const std::vector<double>& values, std::size_t piece) {
  for (std::size_t row = 0; row < values.size(); row += piece) {
    const auto part = std::span(values).subspan(row, std::min(piece, values.size() - row));
    const auto missing = static_cast<std::size_t>(
        std::count_if(part.begin(), part.end(), [](double value) { return std::isnan(value); }));
    collector.add(row, part, missing);
  }
}

} // namespace

TEST_CASE("every value keeps the time of its row, whatever is missing and however rows are cut", "[csv]") {
  std::mt19937_64 random(99);
  for (int round = 0; round < 200; ++round) {
    const std::size_t rows = 20 + random() % 200;
    std::vector<double> values(rows);
    std::map<std::size_t, double> present;
    const std::uint64_t one_in = 1 + random() % 4;
    for (std::size_t i = 0; i < rows; ++i) {
      values[i] = random() % one_in == 0 ? static_cast<double>(i) + 0.5 : kNone;
      if (!std::isnan(values[i])) present[i] = values[i];
    }
    if (present.empty()) continue;
    TimeAxis axis;
    axis.rate = Hertz(100.0);
    const std::size_t cut = 5 + random() % 10;
    axis.runs = {{0, cut, 0.0}, {cut, rows - cut, static_cast<double>(cut) / 100.0 + 2.0}};
    recording::StoreFolder memory;
    ColumnCollector collector(memory, 0, 1000);
    add_all(collector, values, 1 + random() % 30);
    const auto base = collector.time_base(axis);
    const auto finished = collector.finish();
    REQUIRE(finished.samples->size() == present.size());
    REQUIRE(base.size() == present.size());
    std::vector<double> stored(present.size());
    finished.samples->read(0, stored);
    std::size_t index = 0;
    for (const auto& [row, value] : present) {
      const double time = static_cast<double>(row) / 100.0 + (row >= cut ? 2.0 : 0.0);
      CAPTURE(round, row, index);
      REQUIRE(stored[index] == value);
      REQUIRE_THAT(base.time_at(static_cast<double>(index)).value(), WithinAbs(time, 1e-9));
      ++index;
    }
  }
}

TEST_CASE("a column that is filled in every n-th row is one run of a slower rate", "[csv]") {
  for (const std::size_t every : {2UL, 5UL, 20UL}) {
    for (const std::size_t piece : {1UL, 7UL, 1000UL}) {
      std::vector<double> values(300, kNone);
      for (std::size_t i = 3; i < values.size(); i += every)
        values[i] = 1.0;
      recording::StoreFolder memory;
      ColumnCollector collector(memory, 0, 10); // the limit counts stretches, not values
      add_all(collector, values, piece);
      CHECK_FALSE(collector.over_limit());
      const auto base = collector.time_base(plain_axis(300, Hertz(1000.0)));
      CHECK(base.rate() == Hertz(1000.0 / static_cast<double>(every)));
      CHECK(base.runs().size() == 1);
      CHECK_THAT(base.start().value(), WithinAbs(0.003, 1e-12));
    }
  }
}

TEST_CASE("two values alone make no rate of their own", "[csv]") {
  std::vector<double> values(50, kNone);
  values[10] = values[20] = 1.0;
  recording::StoreFolder memory;
  ColumnCollector collector(memory, 0, 10);
  add_all(collector, values, 50);
  const auto base = collector.time_base(plain_axis(50, Hertz(1000.0)));
  CHECK(base.rate() == Hertz(1000.0));
  REQUIRE(base.runs().size() == 2);
  CHECK_THAT(base.runs()[1].start.value(), WithinAbs(0.020, 1e-12));
}

TEST_CASE("more gaps than the limit are noticed", "[csv]") {
  std::vector<double> values;
  for (int i = 0; i < 30; ++i)
    values.insert(values.end(), {1.0, 2.0, kNone});
  recording::StoreFolder memory;
  ColumnCollector at_limit(memory, 0, 30), beyond(memory, 1, 29);
  add_all(at_limit, values, 13);
  add_all(beyond, values, 13);
  CHECK_FALSE(at_limit.over_limit());
  CHECK(beyond.over_limit());
}
