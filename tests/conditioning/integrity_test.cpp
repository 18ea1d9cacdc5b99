// Chronodrome, GPL-3.0-or-later.
#include "conditioning/integrity.h"

#include <algorithm>
#include <catch2/catch.hpp>
#include <cmath>
#include <numbers>

#include "conditioning/still_watch.h"
#include "support/electrogram_waves.h"

using namespace chronodrome;
using conditioning::SampleRange;
using test_support::Trace;

namespace {

/// Rounds to steps, as a converter does.
std::vector<double> quantised(std::vector<double> samples, double step) {
  for (double& s : samples)
    s = step * std::round(s / step);
  return samples;
}

} // namespace

TEST_CASE("a sine cut at two thirds is clipped ten times for 53.5 ms each", "[integrity]") {
  // clip(1.5 sin(2 pi 5 t), -1, 1) over 1 s: each half cycle is cut for (pi - 2 asin(2/3)) / (2 pi 5) =
  // 53.54 ms.
  std::vector<double> x(1000);
  for (std::size_t i = 0; i < x.size(); ++i)
    x[i] =
        std::clamp(1.5 * std::sin(2.0 * std::numbers::pi * 5.0 * static_cast<double>(i) / 1000.0), -1.0, 1.0);
  const bool with_rails = GENERATE(false, true);
  const std::optional<std::array<double, 2>> rails =
      with_rails ? std::optional(std::array<double, 2>{-1.0, 1.0}) : std::nullopt;
  // A step as of a 16-bit converter over +-4.
  const auto runs = conditioning::find_clipping(x, Hertz(1000.0), 8.0 / 65536.0, rails);
  REQUIRE(runs.size() == 10);
  std::size_t total = 0;
  for (const SampleRange& run : runs)
    total += run.end - run.first;
  // Each run can hold one sample less or more than its length.
  CHECK(total >= 525);
  CHECK(total <= 545);
}

TEST_CASE("rounded peaks of a coarse converter are no clipping", "[integrity]") {
  Trace trace(20.0, 2000.0);
  for (double t = 0.5; t < 19.5; t += 0.5)
    trace.add_bump(t, 1.0, 0.02); // tops several samples wide at one level
  const auto x = quantised(trace.samples, 0.02);
  CHECK(conditioning::find_clipping(x, Hertz(2000.0), 0.02, std::nullopt).empty());
}

TEST_CASE("beats cut off by the amplifier are found without stated rails", "[integrity]") {
  Trace trace(20.0, 2000.0);
  for (double t = 0.5; t < 19.5; t += 0.5)
    trace.add_front(t, 5.0, 4e-3);
  trace.add_noise(0.01, 2);
  auto x = quantised(trace.samples, 0.001);
  for (double& s : x)
    s = std::clamp(s, -3.0, 3.0);
  const auto runs = conditioning::find_clipping(x, Hertz(2000.0), 0.001, std::nullopt);
  CHECK(runs.size() == 76); // 38 beats, both lobes
}

TEST_CASE("a constant stretch inside noise is one flat line", "[integrity]") {
  Trace trace(20.0, 1000.0);
  trace.add_noise(0.05, 1);
  auto x = quantised(trace.samples, 0.001);
  std::fill(x.begin() + 8000, x.begin() + 8400, 0.0); // 0.4 s
  conditioning::StillWatch watch(Hertz(1000.0), 0, x.size());
  watch.look_at(x, 0, 0, x.size(), 0.001);
  const auto flat = watch.flat_lines();
  REQUIRE(flat.size() == 1);
  // A neighbour that happens to lie at zero belongs to it.
  CHECK(std::abs(static_cast<double>(flat[0].first) - 8000.0) <= 2.0);
  CHECK(std::abs(static_cast<double>(flat[0].end) - 8400.0) <= 2.0);
}

TEST_CASE("a silent preparation on a quiet amplifier is no flat line", "[integrity]") {
  // Beats until 10 s, then arrest; the noise never moves the converter by more than a step or two.
  Trace trace(30.0, 1000.0);
  for (double t = 0.5; t < 10.0; t += 0.25)
    trace.add_front(t, 1.0, 2e-3);
  trace.add_noise(0.002, 3);
  const auto x = quantised(trace.samples, 0.01);
  conditioning::StillWatch watch(Hertz(1000.0), 0, x.size());
  watch.look_at(x, 0, 0, x.size(), 0.01);
  CHECK(watch.flat_lines().empty());
}

TEST_CASE("a channel that never moves is flat throughout", "[integrity]") {
  const std::vector<double> x(5000, 1.25);
  conditioning::StillWatch watch(Hertz(1000.0), 0, x.size());
  watch.look_at(x, 0, 0, x.size(), conditioning::smallest_step(x));
  const auto flat = watch.flat_lines();
  REQUIRE(flat.size() == 1);
  CHECK(flat[0].first == 0);
  CHECK(flat[0].end == 5000);
}

TEST_CASE("a flat line that several blocks share is one", "[integrity]") {
  Trace trace(60.0, 1000.0);
  trace.add_noise(0.05, 4);
  auto x = quantised(trace.samples, 0.001);
  std::fill(x.begin() + 15000, x.begin() + 45000, 0.5);
  conditioning::StillWatch watch(Hertz(1000.0), 0, x.size());
  for (std::size_t core = 0; core < 60000; core += 10000) {
    const std::size_t low = core > 5000 ? core - 5000 : 0;
    const std::size_t high = std::min<std::size_t>(60000, core + 15000);
    watch.look_at(std::span(x).subspan(low, high - low), low, core, core + 10000, 0.001);
  }
  const auto flat = watch.flat_lines();
  REQUIRE(flat.size() == 1);
  CHECK(flat[0].first == 15000);
  CHECK(flat[0].end == 45000);
}

TEST_CASE("the smallest step is the converter's", "[integrity]") {
  const std::vector<double> x = {0.0, 0.3, 0.3, 0.1, -0.4, -0.4};
  CHECK(std::abs(conditioning::smallest_step(x) - 0.2) < 1e-12);
  const std::vector<double> constant(5, 2.0);
  CHECK(conditioning::smallest_step(constant) == 0.0);
  CHECK(conditioning::smallest_step({}) == 0.0);
}

TEST_CASE("ranges that touch are joined", "[integrity]") {
  const auto found = conditioning::joined({{5, 7}, {0, 2}, {2, 3}, {6, 9}});
  REQUIRE(found.size() == 2);
  CHECK(found[0].first == 0);
  CHECK(found[0].end == 3);
  CHECK(found[1].first == 5);
  CHECK(found[1].end == 9);
}
