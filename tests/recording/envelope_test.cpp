// Chronodrome, GPL-3.0-or-later.
#include <algorithm>
#include <catch2/catch.hpp>
#include <cmath>
#include <random>

#include "recording/envelope.h"
#include "recording/envelope_builder.h"
#include "recording/stores.h"

using namespace chronodrome::recording;

namespace {

std::vector<double> noise(std::size_t count, std::uint64_t seed) {
  std::mt19937_64 random(seed);
  std::vector<double> samples(count);
  for (double& sample : samples)
    sample = static_cast<double>(random() >> 11U) * 0x1p-53 - 0.5;
  return samples;
}

MinMax brute_force(const std::vector<double>& samples, std::size_t from, std::size_t to) {
  const auto [low, high] = std::minmax_element(samples.begin() + static_cast<std::ptrdiff_t>(from),
                                               samples.begin() + static_cast<std::ptrdiff_t>(to));
  return {*low, *high};
}

/// Floats are rounded outwards by at most one unit in the last of their 24 bits.
bool equals_outwards(const MinMax& got, const MinMax& exact) {
  const double slack = 0x1p-23;
  return got.min <= exact.min && got.max >= exact.max && got.min >= exact.min - slack * std::abs(exact.min) &&
         got.max <= exact.max + slack * std::abs(exact.max);
}

} // namespace

TEST_CASE("the envelope is that of every sample, at every zoom and place", "[recording]") {
  for (const std::size_t length :
       {1UL, 2UL, 63UL, 64UL, 65UL, 511UL, 512UL, 4095UL, 4096UL, 33'000UL, 70'001UL}) {
    const std::vector<double> samples = noise(length, length);
    const auto store = store_of(samples);
    const auto envelope = Envelope::of(*store);
    REQUIRE(envelope->samples() == length);
    std::mt19937_64 random(length);
    for (int round = 0; round < 60; ++round) {
      const std::size_t first = random() % length;
      const std::size_t count = 1 + random() % (length - first);
      const std::size_t columns = 1 + random() % 300;
      const auto drawn = envelope->columns(*store, first, count, columns);
      REQUIRE(drawn.size() == columns);
      for (std::size_t c = 0; c < columns; ++c) {
        const std::size_t from = first + count * c / columns;
        const std::size_t to = std::max(from + 1, first + count * (c + 1) / columns);
        const MinMax exact = brute_force(samples, from, to);
        CAPTURE(length, first, count, columns, c);
        REQUIRE(equals_outwards(drawn[c], exact));
        if (to - from < Envelope::kFinest) {
          REQUIRE(drawn[c].min == exact.min);
          REQUIRE(drawn[c].max == exact.max);
        }
      }
    }
  }
}

TEST_CASE("a spike of one sample is seen at every zoom", "[recording]") {
  for (const std::size_t at : {0UL, 63UL, 64UL, 12'345UL, 99'999UL}) {
    std::vector<double> samples(100'000, 0.25);
    samples[at] = 7.0;
    samples[(at + 50'000) % samples.size()] = -3.0;
    const auto store = store_of(samples);
    const auto envelope = Envelope::of(*store);
    for (std::size_t columns = 1; columns <= 4096; columns *= 2) {
      const auto drawn = envelope->columns(*store, 0, samples.size(), columns);
      const auto highest = std::max_element(drawn.begin(), drawn.end(),
                                            [](const MinMax& a, const MinMax& b) { return a.max < b.max; });
      const auto lowest = std::min_element(drawn.begin(), drawn.end(),
                                           [](const MinMax& a, const MinMax& b) { return a.min < b.min; });
      CAPTURE(at, columns);
      CHECK(highest->max == 7.0);
      CHECK(lowest->min == -3.0);
      CHECK(static_cast<std::size_t>(highest - drawn.begin()) == at * columns / samples.size());
    }
  }
}

TEST_CASE("more columns than samples show the sample under each", "[recording]") {
  const auto store = store_of(std::vector<double>{1.0, 2.0, 3.0});
  const auto envelope = Envelope::of(*store);
  const auto drawn = envelope->columns(*store, 0, 3, 9);
  REQUIRE(drawn.size() == 9);
  CHECK(drawn[0].max == 1.0);
  CHECK(drawn[4].min == 2.0);
  CHECK(drawn[8].max == 3.0);
  CHECK(envelope->columns(*store, 1, 0, 5).empty());
}

TEST_CASE("an envelope does not depend on how its samples were cut", "[recording]") {
  const std::vector<double> samples = noise(10'000, 3);
  const auto whole = Envelope::of(*store_of(samples));
  for (const std::size_t piece : {1UL, 7UL, 64UL, 1000UL}) {
    EnvelopeBuilder builder;
    for (std::size_t at = 0; at < samples.size(); at += piece)
      builder.add(std::span(samples).subspan(at, std::min(piece, samples.size() - at)));
    CHECK(builder.finish()->levels() == whole->levels());
  }
}

TEST_CASE("values between two floats are rounded outwards", "[recording]") {
  const double value = 1.0 + 1e-9; // lies between the float 1 and the next one
  const auto store = store_of(std::vector<double>(200, value));
  const auto drawn = Envelope::of(*store)->columns(*store, 0, 200, 1);
  CHECK(drawn[0].min == 1.0);
  CHECK(drawn[0].max > value);
}
