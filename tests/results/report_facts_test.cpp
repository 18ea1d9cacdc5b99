// Chronodrome, GPL-3.0-or-later.
#include <algorithm>
#include <catch2/catch.hpp>
#include <set>

#include "results/report_facts.h"
#include "support/sample_sessions.h"

using namespace chronodrome;
using Catch::Matchers::WithinAbs;

TEST_CASE("typical beats lie in their windows, with one time scale a curve", "[results]") {
  const std::string name = GENERATE("atrial-strip", "guinea-pig-heart", "rabbit-heart");
  CAPTURE(name);
  const auto result = test_support::sample_session(name);
  const auto excerpts = results::typical_beats(result);
  REQUIRE(excerpts.size() == 3);
  CHECK(excerpts[0].concentration == Molar(0.0));
  const auto top =
      std::max_element(result.responses.rows.begin(), result.responses.rows.end(),
                       [](const auto& a, const auto& b) { return a.concentration < b.concentration; });
  CHECK(excerpts[2].concentration == top->concentration);
  for (const auto& excerpt : excerpts) {
    CHECK(excerpt.start >= excerpt.window_start);
    CHECK(excerpt.end <= excerpt.window_end);
    CHECK_THAT((excerpt.end - excerpt.start).value(),
               WithinAbs((excerpts[0].end - excerpts[0].start).value(), 1e-9));
    const auto& marks = result.activations[0].marks;
    const auto beats = std::count_if(marks.begin(), marks.end(), [&](const auto& mark) {
      return mark.time >= excerpt.start && mark.time < excerpt.end;
    });
    CHECK(beats >= 3);
  }
}

TEST_CASE("a preparation that stands still is shown as it is", "[results]") {
  auto result = test_support::sample_session("atrial-strip");
  for (auto& channel : result.activations)
    channel.marks.resize(3); // all beats in the first seconds, none in any window
  const auto excerpts = results::typical_beats(result);
  REQUIRE(excerpts.size() == 3);
  for (const auto& excerpt : excerpts)
    CHECK(excerpt.end > excerpt.start);
  for (auto& channel : result.activations)
    channel.marks.clear();
  CHECK(results::typical_beats(result).empty());
}

TEST_CASE("quality of a channel sums its windows by their length", "[results]") {
  auto result = test_support::sample_session("atrial-strip");
  auto& found = result.activations[0];
  found.quality = {{{Seconds(0.0), Seconds(10.0)}, 8.0, 0.1, 0.02, 0.2, 0.0, 90},
                   {{Seconds(10.0), Seconds(20.0)}, 0.0, 0.1, 0.04, 0.0, 1.0, 12},
                   {{Seconds(20.0), Seconds(25.0)}, 4.0, 0.1, 0.06, 0.0, 0.0, 70}};
  found.mains_hz = 50.0;
  const auto one = results::channel_qualities(result)[0];
  CHECK_THAT(one.clipped_share, WithinAbs(0.2 * 10.0 / 25.0, 1e-12));
  CHECK_THAT(one.unreadable_share, WithinAbs(10.0 / 25.0, 1e-12));
  CHECK(one.signal_to_noise == 6.0); // median of 8 and 4: a window without beats has none
  CHECK(one.mains_rms == 0.04);
  CHECK(one.lowest_index == 12.0);
  CHECK(one.lowest_start == Seconds(10.0));
  CHECK(one.activations == found.marks.size());
}

TEST_CASE("kinds of rhythm are counted and summed", "[results]") {
  auto result = test_support::sample_session("atrial-strip");
  result.rhythm.episodes = {{Seconds(0.0), Seconds(5.0), "regular", ""},
                            {Seconds(5.0), Seconds(7.0), "wenckebach", ""},
                            {Seconds(7.0), Seconds(8.0), "two_to_one", ""},
                            {Seconds(8.0), Seconds(18.0), "wenckebach", ""}};
  const auto sums = results::rhythm_sums(result);
  REQUIRE(sums.size() == 3);
  CHECK(sums[1].kind == "wenckebach");
  CHECK(sums[1].episodes == 2);
  CHECK(sums[1].total == Seconds(12.0));
  CHECK(sums[1].longest == Seconds(10.0));
  CHECK(sums[1].first_start == Seconds(5.0));
}
