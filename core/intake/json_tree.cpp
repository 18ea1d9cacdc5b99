// Chronodrome, GPL-3.0-or-later.
// The grammar is nlohmann::json's; it reports events without places, so a cursor walks the text beside it:
// each event is one token, and a token that has been accepted is easily found and measured.
#include "intake/json_tree.h"

#include <algorithm>
#include <map>
#include <nlohmann/json.hpp>
#include <optional>
#include <set>
#include <string_view>

#include "base/number_text.h"
#include "intake/text_file.h"

namespace chronodrome::intake {
namespace {

constexpr std::size_t kDeepest = 64;
constexpr std::size_t kMostValues = 4'000'000;

/// A place that moves forward through a text.
class Cursor {
public:
  explicit Cursor(std::string_view text) : text_(text) {}

  void skip(std::string_view unwanted) {
    while (at_ < text_.size() && unwanted.find(text_[at_]) != std::string_view::npos)
      step();
  }
  /// Past the accepted token that starts here.
  std::string_view token() {
    const std::size_t from = at_;
    if (at_ < text_.size() && text_[at_] == '"') {
      step();
      while (at_ < text_.size() && text_[at_] != '"') {
        if (text_[at_] == '\\') step();
        step();
      }
      step();
    } else {
      static constexpr std::string_view kPlain = "+-.0123456789abcdefghijklmnopqrstuvwxyzE";
      while (at_ < text_.size() && kPlain.find(text_[at_]) != std::string_view::npos)
        step();
    }
    return text_.substr(from, at_ - from);
  }
  void step() {
    if (at_ >= text_.size()) return;
    const char c = text_[at_++];
    if (c == '\n') {
      ++line_;
      column_ = 1;
    } else if ((static_cast<unsigned char>(c) & 0xc0U) != 0x80) {
      ++column_;
    }
  }
  void go_to(std::size_t offset) {
    while (at_ < std::min(offset, text_.size()))
      step();
  }
  [[nodiscard]] std::uint32_t line() const { return line_; }
  [[nodiscard]] std::uint32_t column() const { return column_; }

private:
  std::string_view text_;
  std::size_t at_ = 0;
  std::uint32_t line_ = 1;
  std::uint32_t column_ = 1;
};

/// The reason out of the parser's sentence, in printable ASCII.
std::string reason_of(const std::string& sentence) {
  static constexpr std::string_view kLead = "syntax error ";
  const auto at = sentence.find(kLead);
  std::string reason = at == std::string::npos ? sentence : sentence.substr(at + kLead.size());
  for (char& c : reason) {
    if (c < 0x20 || c > 0x7e) c = '?';
    if (c == ';') c = ',';
  }
  return reason;
}

class TreeBuilder : public nlohmann::json_sax<nlohmann::json> {
public:
  TreeBuilder(std::string_view text, std::string file) : text_(text), file_(std::move(file)), cursor_(text) {}

  bool null() override { return put(JsonValue::Kind::null); }
  bool boolean(bool value) override {
    if (!put(JsonValue::Kind::truth)) return false;
    last_->truth = value;
    return true;
  }
  bool number_integer(number_integer_t) override { return put_number(); }
  bool number_unsigned(number_unsigned_t) override { return put_number(); }
  bool number_float(number_float_t, const string_t&) override { return put_number(); }
  bool string(string_t& value) override {
    if (!put(JsonValue::Kind::text)) return false;
    last_->text = std::move(value);
    return true;
  }
  bool binary(binary_t&) override { return false; }
  bool start_object(std::size_t) override { return open(JsonValue::Kind::object); }
  bool start_array(std::size_t) override { return open(JsonValue::Kind::list); }
  bool end_object() override { return close(); }
  bool end_array() override { return close(); }

  bool key(string_t& value) override {
    cursor_.skip(" \t\r\n,");
    JsonValue& object = *open_.back();
    if (object.members.size() < kFewKeys ? object.find(value) != nullptr
                                         : !keys_seen(object).insert(value).second)
      return fail(ErrorCode::bad_value, "the key " + shown(value) + " stands twice in one object",
                  "keep one of the two");
    JsonMember member;
    member.key = std::move(value);
    member.line = cursor_.line();
    member.column = cursor_.column();
    object.members.push_back(std::move(member));
    cursor_.token();
    return true;
  }

  bool parse_error(std::size_t position, const std::string&,
                   const nlohmann::json::exception& error) override {
    Cursor place(text_);
    place.go_to(position > 0 ? position - 1 : 0);
    const bool range = std::string_view(error.what()).find("out_of_range") != std::string_view::npos;
    error_ = Error{ErrorCode::damaged, file_, Place::at(place.line(), place.column()),
                   range ? "the number before here is beyond what a double holds"
                         : "this is not valid JSON: " + reason_of(error.what()),
                   range ? "write a smaller number" : "correct the text here or just before it"};
    return false;
  }

  Result<JsonValue> take(bool finished) {
    if (error_) return *error_;
    if (!finished) return Error{ErrorCode::internal_fault, file_, {}, "the JSON could not be built", ""};
    return std::move(root_);
  }

private:
  // Objects of more keys than this look them up in a set.
  static constexpr std::size_t kFewKeys = 32;

  bool put(JsonValue::Kind kind) {
    cursor_.skip(" \t\r\n,:");
    if (++values_ > kMostValues) return fail(ErrorCode::over_limit, "more than 4 million values", "");
    JsonValue* slot = &root_;
    if (!open_.empty()) {
      JsonValue& parent = *open_.back();
      if (parent.kind == JsonValue::Kind::list) {
        parent.items.emplace_back();
        slot = &parent.items.back();
      } else {
        slot = &parent.members.back().value;
      }
    }
    slot->kind = kind;
    slot->line = cursor_.line();
    slot->column = cursor_.column();
    last_ = slot;
    if (kind != JsonValue::Kind::list && kind != JsonValue::Kind::object) token_ = cursor_.token();
    return true;
  }

  bool put_number() {
    if (!put(JsonValue::Kind::number)) return false;
    const auto value = parse_number(token_); // the house's reading, whatever the locale
    if (!value)
      return fail(ErrorCode::damaged, shown(token_) + " is beyond what a double holds",
                  "write a smaller number");
    last_->number = *value;
    return true;
  }

  bool open(JsonValue::Kind kind) {
    if (open_.size() >= kDeepest)
      return fail(ErrorCode::over_limit, "nested deeper than " + std::to_string(kDeepest) + " levels",
                  "check where a bracket is not closed; a session needs no more than five levels");
    if (!put(kind)) return false;
    cursor_.step();
    // An open container is the last child of its parent, which therefore does not grow: the pointer holds.
    open_.push_back(last_);
    return true;
  }

  bool close() {
    cursor_.skip(" \t\r\n,");
    cursor_.step();
    seen_.erase(open_.size());
    open_.pop_back();
    return true;
  }

  std::set<std::string>& keys_seen(const JsonValue& object) {
    auto& seen = seen_[open_.size()];
    if (seen.empty()) {
      for (const auto& member : object.members)
        seen.insert(member.key);
    }
    return seen;
  }

  bool fail(ErrorCode code, std::string what, std::string remedy) {
    error_ =
        Error{code, file_, Place::at(cursor_.line(), cursor_.column()), std::move(what), std::move(remedy)};
    return false;
  }

  std::string_view text_;
  std::string file_;
  Cursor cursor_;
  JsonValue root_;
  JsonValue* last_ = nullptr;
  std::string_view token_;
  std::vector<JsonValue*> open_;
  std::map<std::size_t, std::set<std::string>> seen_; // keys of big objects, by depth
  std::size_t values_ = 0;
  std::optional<Error> error_;
};

} // namespace

const JsonMember* JsonValue::find(const std::string& key) const {
  for (const auto& member : members) {
    if (member.key == key) return &member;
  }
  return nullptr;
}

std::string kind_text(JsonValue::Kind kind) {
  switch (kind) {
  case JsonValue::Kind::null:
    return "null";
  case JsonValue::Kind::truth:
    return "true or false";
  case JsonValue::Kind::number:
    return "a number";
  case JsonValue::Kind::text:
    return "a text";
  case JsonValue::Kind::list:
    return "a list";
  case JsonValue::Kind::object:
    return "an object";
  }
  return "";
}

Result<JsonValue> parse_json(const std::string& text, const std::string& file) {
  const std::string_view content = without_byte_order_mark(text);
  TreeBuilder builder(content, file);
  const bool finished = nlohmann::json::sax_parse(content.begin(), content.end(), &builder);
  return builder.take(finished);
}

} // namespace chronodrome::intake
