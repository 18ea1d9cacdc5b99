// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <cstddef>
#include <cstdint>
#include <string>
#include <vector>

#include "base/result.h"

namespace chronodrome::intake {

struct JsonMember;

/// A JSON value that knows where it stands in its text.
struct JsonValue {
  enum class Kind : std::uint8_t { null, truth, number, text, list, object };
  Kind kind = Kind::null;
  bool truth = false;
  std::uint32_t line = 1;   ///< of its first character, from 1
  std::uint32_t column = 1; ///< in characters, from 1
  double number = 0.0;      ///< finite
  std::string text;
  std::vector<JsonValue> items;
  std::vector<JsonMember> members; ///< in the text's order, no key twice

  [[nodiscard]] Place place() const { return Place::at(line, column); }
  /// The member with this key, or nothing. Requires nothing of the kind.
  [[nodiscard]] const JsonMember* find(const std::string& key) const;
};

struct JsonMember {
  std::string key;
  std::uint32_t line = 1; ///< of the key
  std::uint32_t column = 1;
  JsonValue value;

  [[nodiscard]] Place place() const { return Place::at(line, column); }
};

/// "a number", "a list" ...: for messages.
std::string kind_text(JsonValue::Kind kind);

/// Parses JSON (RFC 8259); a UTF-8 byte order mark in front is passed over. Never throws on any bytes.
/// Errors, each with line and column: damaged (not JSON, not UTF-8, a number beyond a double), bad_value (a
/// key twice in one object), over_limit (nested deeper than 64, more than 4 million values).
Result<JsonValue> parse_json(const std::string& text, const std::string& file);

} // namespace chronodrome::intake
