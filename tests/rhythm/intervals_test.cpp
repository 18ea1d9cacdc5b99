// Chronodrome, GPL-3.0-or-later.
#include <catch2/catch.hpp>

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
