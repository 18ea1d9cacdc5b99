// Chronodrome, GPL-3.0-or-later.
#include "base/number_text.h"

#include <algorithm>
#include <array>
#include <charconv>
#include <cmath>
#include <fast_float/fast_float.h>

namespace chronodrome {
namespace {

template <class... Format>
std::string to_text(double value, Format... format) {
  std::array<char, 400> buffer{}; // a fixed double needs at most 309 digits before the point
  const auto end = std::to_chars(buffer.data(), buffer.data() + buffer.size(), value, format...);
  return {buffer.data(), end.ptr};
}

bool is_blank(char c) {
  return c == ' ' || c == '\t' || c == '\r' || c == '\n';
}

} // namespace

std::string_view trimmed(std::string_view text) {
  while (!text.empty() && is_blank(text.front()))
    text.remove_prefix(1);
  while (!text.empty() && is_blank(text.back()))
    text.remove_suffix(1);
  return text;
}

std::string lower_case(std::string_view text) {
  std::string lower(text);
  std::transform(lower.begin(), lower.end(), lower.begin(),
                 [](char c) { return c >= 'A' && c <= 'Z' ? static_cast<char>(c - 'A' + 'a') : c; });
  return lower;
}

std::optional<double> parse_number(std::string_view text, char decimal) {
  text = trimmed(text);
  if (text.size() > 1 && text.front() == '+' && text[1] != '-') text.remove_prefix(1);
  if (text.empty()) return std::nullopt;
  std::string fortran; // 1.5D-8, as some instruments write it
  const auto exponent = text.find_first_of("dD");
  if (exponent != std::string_view::npos) {
    fortran = text;
    fortran[exponent] = 'e';
    text = fortran;
  }
  double value = 0.0;
  const fast_float::parse_options options(fast_float::chars_format::general, decimal);
  const auto [end, status] =
      fast_float::from_chars_advanced(text.data(), text.data() + text.size(), value, options);
  if (status != std::errc() || end != text.data() + text.size() || !std::isfinite(value)) return std::nullopt;
  return value;
}

std::optional<std::int64_t> parse_integer(std::string_view text) {
  text = trimmed(text);
  if (text.size() > 1 && text.front() == '+' && text[1] != '-') text.remove_prefix(1);
  std::int64_t value = 0;
  const auto [end, status] = std::from_chars(text.data(), text.data() + text.size(), value);
  if (text.empty() || status != std::errc() || end != text.data() + text.size()) return std::nullopt;
  return value;
}

std::string number_text(double value) {
  return number_text(value, 12);
}

std::string number_text(double value, int digits) {
  if (value == 0.0) return "0"; // no "-0" in a file
  return to_text(value, std::chars_format::general, digits);
}

std::string fixed_text(double value, int decimals) {
  std::string text = to_text(value, std::chars_format::fixed, decimals);
  const bool all_zero = text.find_first_of("123456789") == std::string::npos;
  if (all_zero && text.front() == '-') text.erase(0, 1);
  return text;
}

std::string exact_text(double value) {
  return value == 0.0 ? "0" : to_text(value);
}

} // namespace chronodrome
