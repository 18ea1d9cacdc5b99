// Chronodrome, GPL-3.0-or-later.
#include <atomic>
#include <catch2/catch.hpp>
#include <stdexcept>
#include <type_traits>

#include "base/digest.h"
#include "base/parallel.h"
#include "base/quantity.h"
#include "base/result.h"

using namespace chronodrome;

TEST_CASE("quantities keep their kind", "[quantity]") {
  STATIC_REQUIRE(sizeof(Seconds) == 8);
  STATIC_REQUIRE(std::is_trivially_copyable_v<Seconds>);
  STATIC_REQUIRE_FALSE(std::is_convertible_v<double, Seconds>);
  STATIC_REQUIRE_FALSE(std::is_convertible_v<Seconds, Hertz>);
  STATIC_REQUIRE_FALSE(std::is_convertible_v<LogMolar, Molar>);
  CHECK_THAT(in_milliseconds(milliseconds(2.5)), Catch::Matchers::WithinRel(2.5, 1e-15));
  CHECK(minutes(1.0) / Seconds(2.0) == 30.0);
  CHECK(rate_of(Seconds(0.25)) == BeatsPerMinute(240.0));
  CHECK(Seconds(1.0) < Seconds(2.0));
}

TEST_CASE("a message is one line with its place", "[result]") {
  CHECK(describe(Error{ErrorCode::bad_value, "a.csv", Place::at(7, 3), "found \"OVER\"",
                       "choose another column"}) ==
        "a.csv:7:3: error: found \"OVER\"; choose another column");
  CHECK(describe(Error{ErrorCode::damaged, "b.edf", Place::at_byte(252), "zero signals", ""}) ==
        "b.edf:252: error: zero signals");
  CHECK(describe(Warning{"c.csv", {}, "two\nlines", "look"}) == "c.csv:1: warning: two lines; look");
}

TEST_CASE("SHA-256 of the published examples", "[digest]") {
  // NIST, example values for SHA-256 (FIPS 180-4): "abc" and the 448-bit message; the empty message from
  // memory.
  CHECK(sha256_of(std::string("abc")) == "ba7816bf8f01cfea414140de5dae2223b00361a396177a9cb410ff61f20015ad");
  CHECK(sha256_of(std::string("abcdbcdecdefdefgefghfghighijhijkijkljklmklmnlmnomnopnopq")) ==
        "248d6a61d20638b8e5c026930c3e6039a33ce45964ff2167f6ecedd419db06c1");
  CHECK(sha256_of(std::string()) == "e3b0c44298fc1c149afbf4c8996fb92427ae41e4649b934ca495991b7852b855");
}

TEST_CASE("every index is worked on once, whatever the number of threads", "[parallel]") {
  const unsigned threads = GENERATE(1U, 2U, 5U);
  std::vector<int> seen(100, 0);
  parallel_for(seen.size(), threads, [&](std::size_t i) { ++seen[i]; });
  CHECK(seen == std::vector<int>(100, 1));
}

TEST_CASE("the failure of the lowest index is thrown after all have ended", "[parallel]") {
  std::atomic<int> ended{0};
  const auto work = [&](std::size_t i) {
    ++ended;
    if (i == 3 || i == 7) throw std::runtime_error(std::to_string(i));
  };
  CHECK_THROWS_WITH(parallel_for(10, 2, work), "3");
  CHECK(ended == 10);
}
