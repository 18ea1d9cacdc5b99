// Chronodrome, GPL-3.0-or-later.
#include "intake/json_fields.h"

#include <cmath>
#include <limits>

#include "base/number_text.h"
#include "intake/text_file.h"

namespace chronodrome::intake {

void JsonNotes::fail(Place place, std::string what, std::string remedy, ErrorCode code) {
  if (!error) error = Error{code, file, place, std::move(what), std::move(remedy)};
}

void JsonNotes::warn(Place place, std::string what, std::string remedy) {
  warnings.push_back({file, place, std::move(what), std::move(remedy)});
}

std::string shown(const JsonValue& value) {
  switch (value.kind) {
  case JsonValue::Kind::truth:
    return value.truth ? "true" : "false";
  case JsonValue::Kind::number:
    return exact_text(value.number);
  case JsonValue::Kind::text:
    return shown(std::string_view(value.text));
  case JsonValue::Kind::null:
  case JsonValue::Kind::list:
  case JsonValue::Kind::object:
    return kind_text(value.kind);
  }
  return "";
}

JsonObject::JsonObject(const JsonValue& value, std::string path, JsonNotes& notes)
    : value_(value), path_(std::move(path)), notes_(notes) {
  if (value.kind != JsonValue::Kind::object) {
    notes_.fail(value.place(), (path_.empty() ? "the file" : path_) + " is " + shown(value),
                "put an object in braces here");
  }
}

std::string JsonObject::path_of(const std::string& key) const {
  return path_.empty() ? key : path_ + "." + key;
}

const JsonValue* JsonObject::find(const std::string& key) {
  known_.insert(key);
  const JsonMember* member = value_.find(key);
  return member == nullptr || member->value.kind == JsonValue::Kind::null ? nullptr : &member->value;
}

const JsonValue* JsonObject::require(const std::string& key, const std::string& meaning) {
  const JsonValue* value = find(key);
  if (value == nullptr) {
    const JsonMember* null = value_.find(key);
    notes_.fail(null == nullptr ? value_.place() : null->value.place(), path_of(key) + " is missing",
                "add it: " + meaning);
  }
  return value;
}

bool JsonObject::is(const JsonValue& value, const std::string& key, JsonValue::Kind kind) {
  if (value.kind == kind) return true;
  refuse(key, value, "put " + kind_text(kind) + " here");
  return false;
}

void JsonObject::refuse(const std::string& key, const JsonValue& value, const std::string& remedy) {
  notes_.fail(value.place(), path_of(key) + " is " + shown(value), remedy);
}

std::string JsonObject::text(const std::string& key) {
  return optional_text(key).value_or("");
}

std::optional<std::string> JsonObject::optional_text(const std::string& key) {
  const JsonValue* value = find(key);
  if (value == nullptr || !is(*value, key, JsonValue::Kind::text)) return std::nullopt;
  return value->text;
}

std::string JsonObject::required_text(const std::string& key, const std::string& meaning) {
  const JsonValue* value = require(key, meaning);
  if (value == nullptr || !is(*value, key, JsonValue::Kind::text)) return "";
  for (const char c : value->text) {
    if (static_cast<unsigned char>(c) < 0x20) {
      refuse(key, *value, "take the control characters out");
      return "";
    }
  }
  if (trimmed(value->text).empty()) refuse(key, *value, "fill it in: " + meaning);
  return value->text;
}

std::optional<double> JsonObject::number(const std::string& key, Range range) {
  const JsonValue* value = find(key);
  if (value == nullptr || !is(*value, key, JsonValue::Kind::number)) return std::nullopt;
  if (range == Range::positive && !(value->number > 0.0)) {
    refuse(key, *value, "use a number above 0");
    return std::nullopt;
  }
  if (range == Range::not_negative && !(value->number >= 0.0)) {
    refuse(key, *value, "use 0 or a number above 0");
    return std::nullopt;
  }
  return value->number;
}

std::optional<double> JsonObject::number_between(const std::string& key, double low, double high,
                                                 const std::string& unit) {
  const JsonValue* value = find(key);
  if (value == nullptr || !is(*value, key, JsonValue::Kind::number)) return std::nullopt;
  if (value->number >= low && value->number <= high) return value->number;
  refuse(key, *value, "use a number from " + number_text(low) + " to " + number_text(high) + " " + unit);
  return std::nullopt;
}

std::optional<int> JsonObject::whole_number(const std::string& key) {
  const JsonValue* value = find(key);
  if (value == nullptr || !is(*value, key, JsonValue::Kind::number)) return std::nullopt;
  const double number = value->number;
  if (number != std::floor(number) || std::abs(number) > std::numeric_limits<int>::max()) {
    refuse(key, *value, "use a whole number");
    return std::nullopt;
  }
  return static_cast<int>(number);
}

bool JsonObject::truth(const std::string& key) {
  const JsonValue* value = find(key);
  return value != nullptr && is(*value, key, JsonValue::Kind::truth) && value->truth;
}

std::optional<std::array<double, 2>> JsonObject::pair(const std::string& key) {
  const JsonValue* value = find(key);
  if (value == nullptr || !is(*value, key, JsonValue::Kind::list)) return std::nullopt;
  if (value->items.size() != 2 || value->items[0].kind != JsonValue::Kind::number ||
      value->items[1].kind != JsonValue::Kind::number) {
    notes_.fail(value->place(), path_of(key) + " does not hold two numbers", "write it as [0.0, 0.0]");
    return std::nullopt;
  }
  return std::array<double, 2>{value->items[0].number, value->items[1].number};
}

void JsonObject::for_each(const std::string& key,
                          const std::function<void(const JsonValue&, const std::string&)>& each) {
  const JsonValue* list = find(key);
  if (list == nullptr || !is(*list, key, JsonValue::Kind::list)) return;
  for (std::size_t i = 0; i < list->items.size() && !notes_.failed(); ++i)
    each(list->items[i], path_of(key) + "[" + std::to_string(i) + "]");
}

void JsonObject::finish() {
  for (const auto& member : value_.members) {
    if (known_.count(member.key) > 0) continue;
    notes_.warn(member.place(), "the key " + shown(std::string_view(path_of(member.key))) + " is not known",
                "correct its spelling, or leave it: it is kept, but has no effect");
  }
}

} // namespace chronodrome::intake
