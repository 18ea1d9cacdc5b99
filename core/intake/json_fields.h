// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <array>
#include <functional>
#include <optional>
#include <set>
#include <string>
#include <vector>

#include "base/result.h"
#include "intake/json_tree.h"

namespace chronodrome::intake {

/// What a reader has to say about a file: the first error, and every warning.
struct JsonNotes {
  std::string file;
  std::optional<Error> error;
  std::vector<Warning> warnings;

  /// Keeps the first error only.
  void fail(Place place, std::string what, std::string remedy, ErrorCode code = ErrorCode::bad_value);
  void warn(Place place, std::string what, std::string remedy);
  [[nodiscard]] bool failed() const { return error.has_value(); }
};

enum class Range { any, not_negative, positive };

/// Reads the members of one object by key, names faults by their path (`channels[1].role`) and place, and
/// warns of every key that nobody asked for. A member that is null counts as missing.
class JsonObject {
public:
  /// `path` names the object in messages; empty: the file itself.
  JsonObject(const JsonValue& value, std::string path, JsonNotes& notes);

  [[nodiscard]] const JsonValue* find(const std::string& key);
  /// As find(); an error if it is missing. `meaning` says what belongs there.
  [[nodiscard]] const JsonValue* require(const std::string& key, const std::string& meaning);

  /// Empty if missing.
  std::string text(const std::string& key);
  std::string required_text(const std::string& key, const std::string& meaning);
  std::optional<std::string> optional_text(const std::string& key);
  std::optional<double> number(const std::string& key, Range range = Range::any);
  /// From `low` to `high`, or an error that names both with their unit.
  std::optional<double> number_between(const std::string& key, double low, double high,
                                       const std::string& unit);
  /// Within int, or an error.
  std::optional<int> whole_number(const std::string& key);
  bool truth(const std::string& key);
  std::optional<std::array<double, 2>> pair(const std::string& key);
  /// A text for which `named` gives a value; otherwise an error that lists `allowed`.
  template <class T>
  std::optional<T> one_of(const std::string& key,
                          const std::function<std::optional<T>(const std::string&)>& named,
                          const std::string& allowed) {
    const JsonValue* value = require(key, "one of " + allowed);
    if (value == nullptr || !is(*value, key, JsonValue::Kind::text)) return std::nullopt;
    const auto found = named(value->text);
    if (!found) refuse(key, *value, "use one of " + allowed);
    return found;
  }
  /// Calls `each(item, path)` for every item of a list; a missing list has none.
  void for_each(const std::string& key,
                const std::function<void(const JsonValue&, const std::string&)>& each);

  /// Error at a member's value: `PATH is VALUE; remedy`.
  void refuse(const std::string& key, const JsonValue& value, const std::string& remedy);
  /// Warns of unknown keys. Call once, last.
  void finish();
  [[nodiscard]] std::string path_of(const std::string& key) const;
  [[nodiscard]] Place place() const { return value_.place(); }

private:
  bool is(const JsonValue& value, const std::string& key, JsonValue::Kind kind);

  const JsonValue& value_;
  std::string path_;
  JsonNotes& notes_;
  std::set<std::string> known_;
};

/// The value as a message shows it.
std::string shown(const JsonValue& value);

} // namespace chronodrome::intake
