// Chronodrome, GPL-3.0-or-later.
#include <catch2/catch.hpp>
#include <limits>
#include <nlohmann/json.hpp>

#include "base/json_text.h"

using namespace chronodrome;

TEST_CASE("JSON keeps the order, escapes text and never holds NaN", "[base]") {
  JsonText json;
  json.open_object()
      .text("a", "say \"\xc2\xb5V\"\n\x01")
      .number("b", 0.1)
      .number("c", std::numeric_limits<double>::quiet_NaN());
  json.number("d", std::optional<double>())
      .open_list("e")
      .item("x")
      .item("y")
      .close_list()
      .open_list("f")
      .close_list();
  json.truth("g", true).count("h", 7).null("i").close_object();
  const std::string text = json.take();
  CHECK(text == "{\n  \"a\": \"say \\\"\xc2\xb5V\\\"\\n\\u0001\",\n  \"b\": 0.1,\n  \"c\": null,\n  \"d\": "
                "null,\n  \"e\": [\n    \"x\",\n"
                "    \"y\"\n  ],\n  \"f\": [],\n  \"g\": true,\n  \"h\": 7,\n  \"i\": null\n}\n");
  CHECK(nlohmann::json::parse(text)["a"] == "say \"\xc2\xb5V\"\n\x01");
}

TEST_CASE("bytes that are not UTF-8 are replaced, so that every reader takes the file", "[base]") {
  for (const std::string bad :
       {"\xff", "a\xc3", "\xc0\xaf", "\xed\xa0\x80", "\xe0\x80\x80", "\xf4\x90\x80\x80"}) {
    CAPTURE(bad);
    CHECK_NOTHROW(nlohmann::json::parse(json_quoted(bad)));
  }
  CHECK(json_quoted("\xe2\x89\xa5") == "\"\xe2\x89\xa5\"");
}

TEST_CASE("deeper levels stand in one line, and numbers can be exact", "[base]") {
  JsonText json(JsonDigits::exact, 2);
  json.open_object().number("a", 0.1 + 0.2).open_list("b");
  json.open_object().number("c", 1.0).open_list("d").item(2.0).item("x").close_list().close_object();
  json.open_object().close_object().close_list().close_object();
  CHECK(json.take() ==
        "{\n  \"a\": 0.30000000000000004,\n  \"b\": [\n    {\"c\": 1, \"d\": [2, \"x\"]},\n    {}\n  ]\n}\n");
}
