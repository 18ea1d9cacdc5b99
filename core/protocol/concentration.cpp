// Chronodrome, GPL-3.0-or-later.
#include "protocol/concentration.h"

#include <array>
#include <utility>

#include "base/number_text.h"

namespace chronodrome::protocol {
namespace {

/// How many of the unit make one mol/L: exact in binary, unlike the powers below one.
constexpr std::array<std::pair<const char*, double>, 7> kUnits = {{
    {"M", 1.0},
    {"mM", 1e3},
    {"uM", 1e6},
    {"\xc2\xb5M", 1e6}, // U+00B5, the micro sign
    {"\xce\xbcM", 1e6}, // U+03BC, the Greek letter
    {"nM", 1e9},
    {"pM", 1e12},
}};

} // namespace

std::optional<Molar> concentration_in(double value, const std::string& unit) {
  for (const auto& [name, per_molar] : kUnits) {
    if (unit == name) return Molar(value / per_molar);
  }
  return std::nullopt;
}

std::string concentration_units() {
  return "M, mM, uM (or \xc2\xb5M), nM, pM";
}

std::string concentration_text(Molar concentration) {
  return number_text(concentration.value()) + " M";
}

} // namespace chronodrome::protocol
