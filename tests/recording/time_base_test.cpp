// Chronodrome, GPL-3.0-or-later.
#include <catch2/catch.hpp>
#include <cmath>
#include <random>

#include "recording/time_base.h"

using namespace chronodrome;
using namespace chronodrome::recording;
using Catch::Matchers::WithinAbs;

namespace {

/// Runs of random length with random gaps, at a rate that no double holds exactly.
TimeBase random_time_base(std::mt19937_64& random, std::size_t runs) {
  const double rate = 100.0 + static_cast<double>(random() % 100'000) / 7.0;
  std::vector<Run> made;
  double start = static_cast<double>(random() % 1000) * 1e-3;
  std::size_t first = 0;
  for (std::size_t k = 0; k < runs; ++k) {
    const std::size_t count = 1 + random() % 50;
    made.push_back({first, count, Seconds(start)});
    first += count;
    start += (static_cast<double>(count) + 1.0 + static_cast<double>(random() % 500) / 13.0) / rate;
  }
  return {Hertz(rate), made};
}

} // namespace

TEST_CASE("a time base without gaps is a rate and a start", "[recording]") {
  const TimeBase base(Hertz(1000.0), {{0, 2000, Seconds(0.5)}});
  CHECK(base.size() == 2000);
  CHECK(base.start() == Seconds(0.5));
  CHECK(base.end() == Seconds(2.5));
  CHECK(base.time_at(0.0) == Seconds(0.5));
  CHECK(base.time_at(100.5) == Seconds(0.6005));
  CHECK_FALSE(base.position_at(Seconds(0.4)).has_value());
  CHECK_FALSE(base.position_at(Seconds(2.5)).has_value());
  CHECK(base.first_at_or_after(Seconds(0.5)) == 0);
  CHECK(base.first_at_or_after(Seconds(0.5001)) == 1);
  CHECK(base.first_at_or_after(Seconds(9.0)) == 2000);
  CHECK(base.gaps().empty());
}

TEST_CASE("an empty time base has no time", "[recording]") {
  const TimeBase base;
  CHECK(base.size() == 0);
  CHECK(base.start() == Seconds(0.0));
  CHECK(base.end() == Seconds(0.0));
  CHECK_FALSE(base.position_at(Seconds(0.0)).has_value());
  CHECK(base.first_at_or_after(Seconds(0.0)) == 0);
  CHECK_FALSE(base.contiguous(Seconds(0.0), Seconds(0.0)));
}

TEST_CASE("a gap keeps its length and nothing spans it", "[recording]") {
  const TimeBase base(Hertz(100.0), {{0, 100, Seconds(0.0)}, {100, 50, Seconds(3.0)}});
  REQUIRE(base.gaps().size() == 1);
  CHECK(base.gaps()[0].start == Seconds(1.0));
  CHECK(base.gaps()[0].end == Seconds(3.0));
  CHECK(base.time_at(99.0) == Seconds(0.99));
  CHECK(base.time_at(100.0) == Seconds(3.0));
  CHECK_THAT(base.time_at(99.5).value(), WithinAbs(0.995, 1e-12)); // the half step stays in the first run
  CHECK_FALSE(base.position_at(Seconds(2.0)).has_value());
  CHECK(base.first_at_or_after(Seconds(2.0)) == 100);
  CHECK(base.run_of(99) == 0);
  CHECK(base.run_of(100) == 1);
  CHECK(base.contiguous(Seconds(0.2), Seconds(0.9)));
  CHECK(base.contiguous(Seconds(0.2), Seconds(1.0)));
  CHECK_FALSE(base.contiguous(Seconds(0.2), Seconds(1.1)));
  CHECK_FALSE(base.contiguous(Seconds(0.9), Seconds(3.1)));
  CHECK_FALSE(base.contiguous(Seconds(2.0), Seconds(2.5)));
  CHECK_FALSE(base.contiguous(Seconds(3.2), Seconds(3.1)));
}

TEST_CASE("a time that falls short of a run by rounding belongs to it", "[recording]") {
  const TimeBase base(Hertz(100.0), {{0, 100, Seconds(0.0)}, {100, 50, Seconds(10.0 / 3.0)}});
  const auto position = base.position_at(Seconds(3.33333333333)); // twelve digits, as files hold them
  REQUIRE(position.has_value());
  CHECK(*position == 100.0);
}

TEST_CASE("times and positions of random time bases agree with counting", "[recording]") {
  std::mt19937_64 random(20260304);
  for (int round = 0; round < 200; ++round) {
    const TimeBase base = random_time_base(random, 1 + random() % 8);
    const double period = 1.0 / base.rate().value();
    for (std::size_t i = 0; i < base.size(); ++i) {
      const Seconds time = base.time_at(static_cast<double>(i));
      const auto position = base.position_at(time);
      REQUIRE(position.has_value());
      // Times below 100 s at up to 15 kHz: doubles resolve 1e-14 s, that is 1e-9 of a sample.
      CHECK_THAT(*position, WithinAbs(static_cast<double>(i), 1e-8));
      CHECK(base.first_at_or_after(time) == i);
      if (i > 0) {
        CHECK(time > base.time_at(static_cast<double>(i - 1)));
        CHECK(base.first_at_or_after(time - Seconds(0.25 * period)) == i);
      }
      const Run& run = base.runs()[base.run_of(i)];
      CHECK((i >= run.first && i < run.first + run.count));
    }
    for (const Span& gap : base.gaps()) {
      CHECK(gap.end > gap.start);
      const Seconds middle = 0.5 * (gap.start + gap.end);
      CHECK_FALSE(base.position_at(middle).has_value());
      CHECK_FALSE(base.contiguous(gap.start - Seconds(0.5 * period), gap.end));
    }
  }
}

TEST_CASE("first_at_or_after is the first sample that a walk finds", "[recording]") {
  std::mt19937_64 random(7);
  for (int round = 0; round < 50; ++round) {
    const TimeBase base = random_time_base(random, 5);
    for (int k = 0; k < 40; ++k) {
      const double share = static_cast<double>(random() % 1200) / 1000.0 - 0.1;
      const Seconds time = base.start() + share * (base.end() - base.start());
      std::size_t walked = 0;
      while (walked < base.size() && base.time_at(static_cast<double>(walked)) < time)
        ++walked;
      CHECK(base.first_at_or_after(time) == walked);
    }
  }
}
