// Chronodrome, GPL-3.0-or-later.
#include <catch2/catch.hpp>

#include "intake/json_tree.h"

using namespace chronodrome;
using intake::JsonValue;
using intake::parse_json;

namespace {

std::string fault_of(const std::string& text) {
  const auto tree = parse_json(text, "f.json");
  return tree.ok() ? "accepted" : describe(tree.error());
}

} // namespace

TEST_CASE("every value and key of a JSON text knows its line and column", "[session]") {
  const auto tree = parse_json(
      "{\n  \"a\" : [1, -2.5e3,\n\t true], \"\xc3\xa9\\\"x\":{\"b\":null},\r\n\"c\":\"\\u00e9\"}", "f");
  REQUIRE(tree.ok());
  REQUIRE(tree->members.size() == 3);
  const auto& a = tree->members[0];
  CHECK((a.line == 2 && a.column == 3));
  CHECK((a.value.line == 2 && a.value.column == 9));
  REQUIRE(a.value.items.size() == 3);
  CHECK((a.value.items[0].line == 2 && a.value.items[0].column == 10));
  CHECK((a.value.items[1].line == 2 && a.value.items[1].column == 13));
  CHECK(a.value.items[1].number == -2500.0);
  CHECK((a.value.items[2].line == 3 && a.value.items[2].column == 3));
  CHECK(a.value.items[2].truth);
  const auto& b = tree->members[1];
  CHECK(b.key == "\xc3\xa9\"x");
  CHECK((b.line == 3 && b.column == 10));
  CHECK((b.value.column == 17)); // columns count characters, not bytes
  CHECK(b.value.members[0].value.kind == JsonValue::Kind::null);
  CHECK((b.value.members[0].line == 3 && b.value.members[0].column == 18));
  CHECK((tree->members[2].line == 4 && tree->members[2].column == 1));
  CHECK(tree->members[2].value.text == "\xc3\xa9");
}

TEST_CASE("broken JSON is refused at the place where it breaks", "[session]") {
  CHECK(fault_of("{\"a\": 1,\n \"b\" 2}").find("f.json:2:6: error: this is not valid JSON: ") == 0);
  CHECK(fault_of("{\"a\": 1,\n}").find("f.json:2:1: error: ") == 0);
  CHECK(fault_of("{\"a\": 01}").find("f.json:1:8: error: ") == 0);
  CHECK(fault_of("").find("f.json:1:1: error: ") == 0);
  CHECK(fault_of("{} x").find("f.json:1:4: error: ") == 0);
  CHECK(fault_of("{\"a\": \"\xff\"}").find("f.json:1:8: error: ") == 0);
  CHECK(fault_of("{\"a\": [1,\n2").find("f.json:2:2: error: ") == 0);
}

TEST_CASE("numbers that no double holds, NaN and infinity are refused", "[session]") {
  CHECK(fault_of("[1e400]").find("beyond what a double holds") != std::string::npos);
  CHECK(fault_of("[-1e999]").find("f.json:1:") == 0);
  CHECK(fault_of("[NaN]") != "accepted");
  CHECK(fault_of("[Infinity]") != "accepted");
  CHECK(parse_json("[1e-400]", "f")->items[0].number == 0.0); // the nearest double
  CHECK(parse_json("[9007199254740993]", "f")->items[0].number == 9007199254740992.0);
}

TEST_CASE("a key that stands twice is refused at its second place", "[session]") {
  CHECK(fault_of("{\"a\": 1,\n \"a\": 2}") ==
        "f.json:2:2: error: the key \"a\" stands twice in one object; keep one of the two");
  std::string many = "{";
  for (int i = 0; i < 100; ++i)
    many += "\"k" + std::to_string(i) + "\": {\"k1\": 1},\n";
  CHECK(parse_json(many + "\"last\": 1}", "f").ok());
  CHECK(parse_json("[" + many + "\"last\": 1}, " + many + "\"last\": 1}]", "f").ok()); // each its own keys
  CHECK(fault_of(many + "\"k7\": 1}").find("f.json:101:1: error: the key \"k7\" stands twice") == 0);
}

TEST_CASE("nesting is limited, so that no text exhausts the stack", "[session]") {
  const auto nested = [](std::size_t depth) { return std::string(depth, '[') + std::string(depth, ']'); };
  CHECK(parse_json(nested(64), "f").ok());
  CHECK(parse_json(nested(65), "f").error().code == ErrorCode::over_limit);
  CHECK_FALSE(parse_json(nested(65), "f").error().remedy.empty());
  CHECK(parse_json(std::string(1'000'000, '['), "f").error().code == ErrorCode::over_limit);
}

TEST_CASE("the number of values is limited", "[session][.long]") {
  std::string many = "[0";
  for (int i = 0; i < 4'000'001; ++i)
    many += ",0";
  CHECK(parse_json(many + "]", "f").error().code == ErrorCode::over_limit);
}
