// Chronodrome, GPL-3.0-or-later.
#include "protocol/typed_concentration.h"

#include <algorithm>
#include <utility>

#include "base/number_text.h"
#include "protocol/concentration.h"

namespace chronodrome::protocol {
namespace {

void replace_all(std::string& text, const std::string& from, const std::string& to) {
  for (auto at = text.find(from); at != std::string::npos; at = text.find(from, at + to.size()))
    text.replace(at, from.size(), to);
}

/// `3·10⁻⁸` as `3e-8`, `10^-7` as `1e-7`; anything else as it is.
std::string with_plain_power(std::string text) {
  static const std::pair<const char*, const char*> kSigns[] = {
      {"\xE2\x88\x92", "-"}, {"\xE2\x81\xBB", "-"}, {"\xE2\x81\xB0", "0"},
      {"\xC2\xB9", "1"},     {"\xC2\xB2", "2"},     {"\xC2\xB3", "3"},
      {"\xE2\x81\xB4", "4"}, {"\xE2\x81\xB5", "5"}, {"\xE2\x81\xB6", "6"},
      {"\xE2\x81\xB7", "7"}, {"\xE2\x81\xB8", "8"}, {"\xE2\x81\xB9", "9"},
      {"\xC3\x97", "x"},     {"\xC2\xB7", "x"},     {"*", "x"}};
  for (const auto& [from, to] : kSigns)
    replace_all(text, from, to);
  text.erase(std::remove(text.begin(), text.end(), ' '), text.end());
  for (const char* times_ten : {"x10^", "x10"}) {
    const auto at = text.find(times_ten);
    if (at == std::string::npos) continue;
    return text.substr(0, at) + "e" + text.substr(at + std::string(times_ten).size());
  }
  if (text.compare(0, 3, "10^") == 0) return "1e" + text.substr(3);
  return text;
}

/// The unit that stands at the end of the text; the longest, so that `mM` is not read as `M`.
std::string unit_at_end(const std::string& text) {
  for (const char* unit : {"mol/L", "mol/l", "\xC2\xB5M", "\xCE\xBCM", "mM", "uM", "nM", "pM", "M"}) {
    const std::string name = unit;
    if (text.size() > name.size() && text.compare(text.size() - name.size(), name.size(), name) == 0)
      return name;
  }
  return "";
}

Error bad_value(std::string what, std::string remedy) {
  return {ErrorCode::bad_value, "", {}, std::move(what), std::move(remedy)};
}

} // namespace

Result<TypedConcentration> typed_concentration(const std::string& text, const std::string& unit) {
  std::string number(trimmed(text));
  TypedConcentration typed;
  typed.unit = std::string(trimmed(unit));
  if (const std::string attached = unit_at_end(number); !attached.empty()) {
    number = std::string(trimmed(std::string_view(number).substr(0, number.size() - attached.size())));
    typed.unit = attached;
  }
  if (typed.unit == "mol/L" || typed.unit == "mol/l") typed.unit = "M";
  number = with_plain_power(number);
  const bool comma = number.find(',') != std::string::npos;
  if (comma && number.find('.') != std::string::npos)
    return bad_value("\"" + text + "\" holds a point and a comma", "keep the decimal mark only");
  if (comma) std::replace(number.begin(), number.end(), ',', '.');
  const auto value = parse_number(number);
  if (!value) return bad_value("\"" + text + "\" is no concentration", "write a number, such as 1e-7 or 100");
  if (*value < 0.0)
    return bad_value("\"" + text + "\" is negative, perhaps a logarithm",
                     "write the concentration itself, such as 1e-7 M");
  const auto molar = concentration_in(*value, typed.unit);
  if (!molar) {
    return bad_value(typed.unit.empty() ? "the concentration has no unit"
                                        : "\"" + typed.unit + "\" is no unit of concentration",
                     "use one of " + concentration_units());
  }
  typed.value = *molar;
  typed.number = number;
  return typed;
}

} // namespace chronodrome::protocol
