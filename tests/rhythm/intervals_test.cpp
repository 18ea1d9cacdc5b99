// Chronodrome, GPL-3.0-or-later.
#include <catch2/catch.hpp>

#include "numerics/robust.h"
#include "rhythm/intervals.h"

using namespace chronodrome;
using rhythm::IntervalFlag;

namespace {

activation::ChannelActivations beats(std::initializer_list<double> times_s) {
  activation::ChannelActivations channel;
  for (const double t : times_s) {
    activation::Activation mark;
    mark.time = Seconds(t);
    mark.confidence = 1.0;
    channel.marks.push_back(mark);
  }
  return channel;
}

std::vector<IntervalFlag> flags(const activation::ChannelActivations& channel,
                                std::vector<recording::Span> excluded = {}) {
  std::vector<IntervalFlag> found;
  for (const auto& interval : rhythm::intervals_of(channel, excluded, {}))
    found.push_back(interval.flag);
  return found;
}

} // namespace

TEST_CASE("an interval across missing signal is a gap whatever else it is", "[intervals]") {
  auto channel = beats({0.0, 0.2, 0.4, 0.6, 0.8, 3.0, 3.2});
  channel.unreadable.push_back({{Seconds(1.0), Seconds(2.9)}, "gap"});
  channel.marks[5].origin = activation::Origin::added;
  CHECK(flags(channel) == std::vector{IntervalFlag::none, IntervalFlag::none, IntervalFlag::none,
                                      IntervalFlag::none, IntervalFlag::gap, IntervalFlag::edited});
}

TEST_CASE("an early beat is premature and the beat after a pause says so", "[intervals]") {
  CHECK(flags(beats({0.0, 0.2, 0.4, 0.6, 0.76, 0.96, 1.31})) ==
        std::vector{IntervalFlag::none, IntervalFlag::none, IntervalFlag::none, IntervalFlag::premature,
                    IntervalFlag::none, IntervalFlag::after_pause});
}

TEST_CASE("low confidence and exclusion are told apart", "[intervals]") {
  auto channel = beats({0.0, 0.2, 0.4, 0.6});
  channel.marks[1].confidence = 0.4;
  CHECK(flags(channel, {{Seconds(0.5), Seconds(0.55)}}) ==
        std::vector{IntervalFlag::low_confidence, IntervalFlag::low_confidence, IntervalFlag::excluded});
}

TEST_CASE("one beat or none has no interval", "[intervals]") {
  CHECK(flags(beats({})).empty());
  CHECK(flags(beats({1.0})).empty());
}

TEST_CASE("a rate is that of the mean cycle; the mean of single rates is biased high", "[intervals]") {
  // In closed form: cycles of 300, 300, 300, 180, 420, 300, 300 ms have a mean of 300 ms (200/min), a median
  // of 300 ms, an SD of 69.2820 ms; their single rates have a mean of 210.884/min.
  const double cycles_ms[] = {300, 300, 300, 180, 420, 300, 300};
  activation::ChannelActivations channel = beats({0.0});
  for (const double cycle : cycles_ms) {
    auto mark = channel.marks.back();
    mark.time += milliseconds(cycle);
    channel.marks.push_back(mark);
  }
  const auto intervals = rhythm::intervals_of(channel, {}, {});
  std::vector<double> lengths_ms, rates;
  for (const auto& interval : intervals) {
    lengths_ms.push_back(in_milliseconds(interval.length));
    rates.push_back(rate_of(interval.length).value());
  }
  using Catch::Matchers::WithinAbs;
  REQUIRE(intervals.size() == 7);
  CHECK_THAT(60e3 / numerics::mean(lengths_ms), WithinAbs(200.0, 1e-9));
  CHECK_THAT(numerics::median(lengths_ms), WithinAbs(300.0, 1e-9));
  CHECK_THAT(numerics::sd(lengths_ms), WithinAbs(69.2820, 5e-5));
  CHECK_THAT(numerics::mean(rates), WithinAbs(210.884, 5e-4));
  CHECK(intervals[3].flag == IntervalFlag::premature);
}

TEST_CASE("rate by intervals is exact where counting beats is off by one", "[intervals]") {
  // In closed form: beats at 0, 0.2 ... 60.0 s are 301 beats and 300.000/min by intervals.
  activation::ChannelActivations channel = beats({0.0});
  for (int i = 1; i <= 300; ++i) {
    auto mark = channel.marks.front();
    mark.time = Seconds(0.2 * i);
    channel.marks.push_back(mark);
  }
  CHECK(channel.marks.size() == 301);
  const auto intervals = rhythm::intervals_of(channel, {}, {});
  double total = 0.0;
  for (const auto& interval : intervals)
    total += interval.length.value();
  CHECK_THAT(60.0 * static_cast<double>(intervals.size()) / total, Catch::Matchers::WithinAbs(300.0, 1e-9));
}
