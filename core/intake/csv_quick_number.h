// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <array>
#include <cmath>
#include <cstddef>
#include <cstdint>
#include <limits>

#include "base/number_text.h"

namespace chronodrome::intake {

inline constexpr std::array<double, 19> kPowersOfTen = {
    1e0, 1e1, 1e2, 1e3, 1e4, 1e5, 1e6, 1e7, 1e8, 1e9, 1e10, 1e11, 1e12, 1e13, 1e14, 1e15, 1e16, 1e17, 1e18};

/// The number in the cell at `p`, correctly rounded; `p` moves to the end of the cell. False, for the careful
/// reader to look: no number, a thousands mark, a value beyond a float, or the text ends before the cell
/// does. Cost: a few nanoseconds for up to fifteen digits without exponent, else those of base/number_text.h.
inline bool quick_number(const char*& p, const char* end, char delimiter, char decimal, double& value) {
  const char* const begin = p;
  const auto is_digit = [](char c) { return static_cast<unsigned char>(c - '0') < 10; };
  const auto ends_cell = [&](char c) {
    return c == delimiter || c == '\n' || c == '\r' || c == ' ' || (c == '\t' && delimiter != '\t');
  };
  const bool negative = *p == '-';
  if (negative || *p == '+') ++p;
  std::uint64_t digits = 0;
  const char* const first = p;
  while (p < end && is_digit(*p))
    digits = digits * 10 + static_cast<std::uint64_t>(*p++ - '0');
  auto count = static_cast<std::size_t>(p - first);
  std::size_t decimals = 0;
  if (p < end && *p == decimal) {
    const char* const behind = ++p;
    while (p < end && is_digit(*p))
      digits = digits * 10 + static_cast<std::uint64_t>(*p++ - '0');
    decimals = static_cast<std::size_t>(p - behind);
    count += decimals;
  }
  if (count == 0 || p == end) return false;
  // Whole number and power of ten are both exact, so that their quotient is the nearest double.
  // Source: Clinger 1990, doi:10.1145/93542.93557.
  if (ends_cell(*p) && count < kPowersOfTen.size() && digits < (std::uint64_t{1} << 53U)) {
    value = static_cast<double>(digits) / kPowersOfTen[decimals];
    if (negative) value = -value;
    return true;
  }
  while (p < end && !ends_cell(*p))
    ++p;
  if (p == end) return false;
  const auto number = parse_number({begin, static_cast<std::size_t>(p - begin)}, decimal);
  if (!number || std::abs(*number) > static_cast<double>(std::numeric_limits<float>::max())) return false;
  value = *number;
  return true;
}

} // namespace chronodrome::intake
