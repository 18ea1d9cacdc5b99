// Chronodrome, GPL-3.0-or-later.
#include <catch2/catch.hpp>

#include "document/text_place.h"

using namespace chronodrome;

TEST_CASE("a word of a session is found with its line and column", "[document]") {
  const std::string text = "{\n  \"analysis\": {\n    \"response.window_s\": 45}\n}\n";
  const Place place = document::place_of(text, "response.window_s");
  CHECK(place.line == 3);
  CHECK(place.column == 5);
  CHECK(document::place_of("{\"a\": 1}", "a").column == 2);
  CHECK_FALSE(document::place_of(text, "window_s").line.has_value());
}
