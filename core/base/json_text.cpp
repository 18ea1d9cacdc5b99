// Chronodrome, GPL-3.0-or-later.
#include "base/json_text.h"

#include <cmath>

#include "base/number_text.h"

namespace chronodrome {
namespace {

/// Length of the UTF-8 sequence at the front, or 0 if it is none (overlong forms and surrogates included).
std::size_t sequence_length(std::string_view text) {
  const auto byte = [&](std::size_t i) { return static_cast<unsigned char>(text[i]); };
  const unsigned lead = byte(0);
  std::size_t length = lead < 0x80                   ? 1
                       : lead >= 0xc2 && lead < 0xe0 ? 2
                       : lead >= 0xe0 && lead < 0xf0 ? 3
                       : lead >= 0xf0 && lead < 0xf5 ? 4
                                                     : 0;
  if (length == 0 || length > text.size()) return 0;
  for (std::size_t i = 1; i < length; ++i) {
    if ((byte(i) & 0xc0U) != 0x80) return 0;
  }
  if (lead == 0xe0 && byte(1) < 0xa0) return 0;
  if (lead == 0xed && byte(1) >= 0xa0) return 0;
  if (lead == 0xf0 && byte(1) < 0x90) return 0;
  if (lead == 0xf4 && byte(1) >= 0x90) return 0;
  return length;
}

} // namespace

std::string json_quoted(std::string_view text) {
  static constexpr char kHex[] = "0123456789abcdef";
  std::string quoted = "\"";
  while (!text.empty()) {
    const std::size_t length = sequence_length(text);
    if (length == 0) {
      quoted += "\xef\xbf\xbd";
      text.remove_prefix(1);
      continue;
    }
    const char c = text.front();
    const auto code = static_cast<unsigned char>(c);
    if (c == '"' || c == '\\') {
      quoted += '\\';
      quoted += c;
    } else if (code < 0x20) {
      quoted += c == '\n'   ? "\\n"
                : c == '\t' ? "\\t"
                            : std::string("\\u00") + kHex[code >> 4U] + kHex[code & 15U];
    } else {
      quoted += text.substr(0, length);
    }
    text.remove_prefix(length);
  }
  return quoted + '"';
}

JsonText& JsonText::open_object(std::string_view key) {
  begin(key);
  text_ += '{';
  has_items_.push_back(false);
  return *this;
}

JsonText& JsonText::open_list(std::string_view key) {
  begin(key);
  text_ += '[';
  has_items_.push_back(false);
  return *this;
}

JsonText& JsonText::text(std::string_view key, std::string_view value) {
  begin(key);
  text_ += json_quoted(value);
  return *this;
}

JsonText& JsonText::number(std::string_view key, double value) {
  begin(key);
  if (!std::isfinite(value)) {
    text_ += "null";
  } else {
    text_ += digits_ == JsonDigits::exact ? exact_text(value) : number_text(value);
  }
  return *this;
}

JsonText& JsonText::number(std::string_view key, std::optional<double> value) {
  return value ? number(key, *value) : null(key);
}

JsonText& JsonText::count(std::string_view key, std::size_t value) {
  begin(key);
  text_ += std::to_string(value);
  return *this;
}

JsonText& JsonText::truth(std::string_view key, bool value) {
  begin(key);
  text_ += value ? "true" : "false";
  return *this;
}

JsonText& JsonText::null(std::string_view key) {
  begin(key);
  text_ += "null";
  return *this;
}

std::string JsonText::take() {
  return std::move(text_) + '\n';
}

JsonText& JsonText::begin(std::string_view key) {
  if (!has_items_.empty()) {
    if (has_items_.back()) text_ += is_open() ? "," : ", ";
    has_items_.back() = true;
    if (is_open()) new_line();
  }
  if (!key.empty()) text_ += json_quoted(key) + ": ";
  return *this;
}

JsonText& JsonText::close(char bracket) {
  const bool has_lines = has_items_.back() && is_open();
  has_items_.pop_back();
  if (has_lines) new_line();
  text_ += bracket;
  return *this;
}

bool JsonText::is_open() const {
  return has_items_.size() <= static_cast<std::size_t>(open_levels_);
}

void JsonText::new_line() {
  text_ += '\n';
  text_.append(2 * has_items_.size(), ' ');
}

} // namespace chronodrome
