// Chronodrome, GPL-3.0-or-later.
#include "recording/trace.h"

#include <algorithm>
#include <catch2/catch.hpp>
#include <cmath>

#include "recording/stores.h"

using namespace chronodrome;
using Catch::Matchers::WithinAbs;
using recording::MinMax;

namespace {

recording::Channel channel_of(std::vector<double> samples, double rate,
                              std::vector<recording::Run> runs = {}) {
  auto holder = std::make_shared<recording::Recording>();
  recording::Signal signal;
  if (runs.empty()) runs = {{0, samples.size(), Seconds(0.0)}};
  signal.time_base = recording::TimeBase(Hertz(rate), std::move(runs));
  signal.samples = recording::store_of(std::move(samples));
  signal.envelope = recording::Envelope::of(*signal.samples);
  holder->duration = signal.time_base.end();
  holder->signals.push_back(std::move(signal));
  recording::Channel channel;
  channel.label = "X";
  channel.recording = std::move(holder);
  return channel;
}

} // namespace

TEST_CASE("a spike of one sample stands in the trace at every width", "[recording]") {
  std::vector<double> samples(100000, 0.0);
  samples[76543] = 3.5;
  const auto channel = channel_of(samples, 1000.0);
  for (const double width : {100.0, 30.0, 5.0, 1.0, 0.2, 0.02}) {
    for (const std::size_t columns : {7U, 300U, 1600U}) {
      const auto pieces = recording::trace_of(channel, Seconds(76.543 - 0.37 * width),
                                              Seconds(76.543 + 0.63 * width), columns);
      INFO(width << " s on " << columns);
      const auto range = recording::range_of(pieces);
      REQUIRE(range);
      CHECK(range->max == 3.5);
      // It is drawn within a column of where it is.
      const auto& piece = pieces.front();
      const auto at = std::max_element(piece.points.begin(), piece.points.end(),
                                       [](const MinMax& a, const MinMax& b) { return a.max < b.max; });
      const double time = piece.time_of(static_cast<std::size_t>(at - piece.points.begin())).value();
      CHECK_THAT(time, WithinAbs(76.543, std::max(0.0005, width / static_cast<double>(columns))));
    }
  }
}

TEST_CASE("below two samples a column the samples themselves are drawn, one more at either end",
          "[recording]") {
  std::vector<double> samples(1000);
  for (std::size_t i = 0; i < samples.size(); ++i)
    samples[i] = static_cast<double>(i);
  const auto channel = channel_of(samples, 1000.0);
  const auto pieces = recording::trace_of(channel, Seconds(0.1005), Seconds(0.1105), 800);
  REQUIRE(pieces.size() == 1);
  CHECK(pieces[0].is_samples);
  REQUIRE(pieces[0].points.size() == 12);
  CHECK(pieces[0].points.front().min == 100.0);
  CHECK(pieces[0].points.back().max == 111.0);
  CHECK_THAT(pieces[0].time_of(3).value(), WithinAbs(0.103, 1e-12));
}

TEST_CASE("columns hold true extremes, and stay where they are when the view moves", "[recording]") {
  std::vector<double> samples(60000);
  for (std::size_t i = 0; i < samples.size(); ++i)
    samples[i] = std::sin(0.37 * static_cast<double>(i)) * (1.0 + static_cast<double>(i % 977));
  const auto channel = channel_of(samples, 1000.0);
  const auto pieces = recording::trace_of(channel, Seconds(10.0), Seconds(20.0), 1000);
  const auto moved = recording::trace_of(channel, Seconds(10.003), Seconds(20.003), 1000);
  REQUIRE(pieces.size() == 1);
  const auto& piece = pieces[0];
  CHECK_FALSE(piece.is_samples);
  CHECK(piece.points.size() <= 1003);
  for (std::size_t c = 0; c < piece.points.size(); ++c) {
    const auto first = static_cast<std::size_t>(
        std::lround((piece.start + piece.step * static_cast<double>(c)).value() * 1000.0));
    const auto end = std::min(samples.size(), first + 10);
    const auto [low, high] = std::minmax_element(samples.begin() + static_cast<std::ptrdiff_t>(first),
                                                 samples.begin() + static_cast<std::ptrdiff_t>(end));
    REQUIRE_THAT(piece.points[c].min, WithinAbs(*low, 1e-4));
    REQUIRE_THAT(piece.points[c].max, WithinAbs(*high, 1e-4));
  }
  CHECK_THAT(std::remainder((moved[0].start - piece.start).value(), piece.step.value()),
             WithinAbs(0.0, 1e-9));
}

TEST_CASE("gaps stay open, and an inverted channel keeps its extremes in order", "[recording]") {
  std::vector<double> samples(4000, 1.0);
  samples[100] = -2.0;
  auto channel = channel_of(samples, 1000.0, {{0, 1500, Seconds(0.0)}, {1500, 2500, Seconds(5.0)}});
  channel.gain = -2.0;
  channel.offset = 0.5;
  channel.skew = Seconds(0.25);
  const auto pieces = recording::trace_of(channel, Seconds(0.0), Seconds(8.0), 400);
  REQUIRE(pieces.size() == 2);
  const auto end_of = [](const recording::TracePiece& piece) {
    return (piece.start + piece.step * static_cast<double>(piece.points.size())).value();
  };
  CHECK_THAT(pieces[0].start.value(), WithinAbs(0.25, 1e-9));
  CHECK(end_of(pieces[0]) < 1.75 + 0.02);
  CHECK(pieces[1].start.value() > 5.25 - 0.02);
  CHECK(recording::range_of(pieces)->max == 4.5);
  CHECK(recording::range_of(pieces)->min == -1.5);
  CHECK(recording::trace_of(channel, Seconds(2.5), Seconds(4.0), 100).size() <= 2);
  CHECK(recording::trace_of(channel, Seconds(20.0), Seconds(24.0), 100).size() <= 1);
}

TEST_CASE("limits are round, hold the data, and do not move with every beat", "[recording]") {
  const MinMax first = recording::settled_limits({-0.83, 1.94}, std::nullopt);
  CHECK(first.min <= -0.83);
  CHECK(first.max >= 1.94);
  CHECK_THAT(std::remainder(first.max, 0.1), WithinAbs(0.0, 1e-9));
  const MinMax kept = recording::settled_limits({-0.5, 1.1}, first);
  CHECK(kept.min == first.min);
  CHECK(kept.max == first.max);
  const MinMax wider = recording::settled_limits({-0.83, 2.9}, first);
  CHECK(wider.max >= 2.9);
  const MinMax narrow = recording::settled_limits({0.0, 0.3}, first);
  CHECK(narrow.max < 0.5);
  const MinMax still = recording::settled_limits({2.0, 2.0}, std::nullopt);
  CHECK(still.min < 2.0);
  CHECK(still.max > 2.0);
  CHECK(recording::settled_limits({0.0, 0.0}, std::nullopt).max > 0.0);
}
