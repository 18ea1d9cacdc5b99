// Chronodrome, GPL-3.0-or-later.
#include "simulation/json_text.h"

#include "base/number_text.h"

namespace chronodrome::simulation {
namespace {

std::string quoted(std::string_view text) {
  constexpr std::string_view kHex = "0123456789abcdef";
  std::string out = "\"";
  for (const char c : text) {
    if (c == '"' || c == '\\') {
      out += '\\';
      out += c;
    } else if (static_cast<unsigned char>(c) < 0x20U) {
      out += "\\u00";
      out += kHex[static_cast<unsigned char>(c) >> 4U];
      out += kHex[static_cast<unsigned char>(c) & 0xFU];
    } else {
      out += c;
    }
  }
  return out + "\"";
}

} // namespace

void JsonText::begin(std::string_view key) {
  const auto level = static_cast<int>(brackets_.size());
  if (!first_) out_ += ',';
  if (level > 0 && level <= open_levels_)
    out_ += "\n" + std::string(2 * brackets_.size(), ' ');
  else if (!first_)
    out_ += ' ';
  if (!key.empty()) out_ += quoted(key) + ": ";
  first_ = false;
}

JsonText& JsonText::open(char bracket, std::string_view key) {
  begin(key);
  out_ += bracket;
  brackets_ += bracket;
  first_ = true;
  return *this;
}

JsonText& JsonText::close() {
  const char bracket = brackets_.back();
  const auto level = static_cast<int>(brackets_.size());
  brackets_.pop_back();
  if (!first_ && level <= open_levels_) out_ += "\n" + std::string(2 * brackets_.size(), ' ');
  out_ += bracket == '{' ? '}' : ']';
  first_ = false;
  return *this;
}

JsonText& JsonText::text(std::string_view key, std::string_view value) {
  begin(key);
  out_ += quoted(value);
  return *this;
}

JsonText& JsonText::number(std::string_view key, double value) {
  begin(key);
  out_ += exact_text(value);
  return *this;
}

JsonText& JsonText::number(std::string_view key, std::optional<double> value) {
  return value ? number(key, *value) : null(key);
}

JsonText& JsonText::truth(std::string_view key, bool value) {
  begin(key);
  out_ += value ? "true" : "false";
  return *this;
}

JsonText& JsonText::null(std::string_view key) {
  begin(key);
  out_ += "null";
  return *this;
}

std::string JsonText::take() {
  return std::move(out_) + "\n";
}

} // namespace chronodrome::simulation
