// Chronodrome, GPL-3.0-or-later.
#include "intake/units.h"

#include <algorithm>
#include <array>

#include "base/number_text.h"

namespace chronodrome::intake {
namespace {

bool starts_with(std::string_view text, std::string_view start) {
  return text.substr(0, start.size()) == start;
}

std::string_view without_brackets(std::string_view text) {
  text = trimmed(text);
  const bool round = text.size() >= 2 && text.front() == '(' && text.back() == ')';
  const bool square = text.size() >= 2 && text.front() == '[' && text.back() == ']';
  return round || square ? trimmed(text.substr(1, text.size() - 2)) : text;
}

bool is_word_for_time(const std::string& name) {
  const std::string word = lower_case(name);
  return word == "t" || word == "time" || word == "zeit" || word == "temps" || word == "tiempo" ||
         word == "tempo" || word == "elapsed";
}

} // namespace

std::string normalised_unit(std::string_view text) {
  text = without_brackets(text);
  for (const std::string_view micro : {"\xC2\xB5", "\xCE\xBC"}) {
    if (starts_with(text, micro)) return "u" + std::string(text.substr(micro.size()));
  }
  return std::string(text);
}

bool is_known_unit(std::string_view text) {
  static constexpr std::array<std::string_view, 62> kUnits = {"V",
                                                              "mV",
                                                              "uV",
                                                              "nV",
                                                              "Volt",
                                                              "Volts",
                                                              "volt",
                                                              "volts",
                                                              "A",
                                                              "mA",
                                                              "uA",
                                                              "nA",
                                                              "N",
                                                              "mN",
                                                              "uN",
                                                              "g",
                                                              "mg",
                                                              "kg",
                                                              "gf",
                                                              "mmHg",
                                                              "cmH2O",
                                                              "kPa",
                                                              "Pa",
                                                              "bar",
                                                              "mbar",
                                                              "mL/min",
                                                              "ml/min",
                                                              "L/min",
                                                              "l/min",
                                                              "mL/s",
                                                              "uL/min",
                                                              "\xC2\xB0"
                                                              "C",
                                                              "C",
                                                              "degC",
                                                              "\xC2\xB0",
                                                              "K",
                                                              "s",
                                                              "sec",
                                                              "secs",
                                                              "second",
                                                              "seconds",
                                                              "ms",
                                                              "msec",
                                                              "us",
                                                              "min",
                                                              "h",
                                                              "Hz",
                                                              "kHz",
                                                              "bpm",
                                                              "BPM",
                                                              "1/min",
                                                              "%",
                                                              "M",
                                                              "mM",
                                                              "uM",
                                                              "nM",
                                                              "mol/L",
                                                              "counts",
                                                              "a.u.",
                                                              "mm",
                                                              "ohm",
                                                              "dBm"};
  static constexpr std::array<std::string_view, 6> kNone = {"", "-", "--", "none", "n/a", "1"};
  const std::string unit = normalised_unit(text);
  return std::find(kUnits.begin(), kUnits.end(), unit) != kUnits.end() ||
         std::find(kNone.begin(), kNone.end(), lower_case(unit)) != kNone.end();
}

std::optional<double> seconds_in(std::string_view text) {
  const std::string unit = lower_case(normalised_unit(text));
  for (const char* name : {"s", "sec", "secs", "sec.", "second", "seconds", "sek"}) {
    if (unit == name) return 1.0;
  }
  for (const char* name : {"ms", "msec", "msecs", "millisecond", "milliseconds"}) {
    if (unit == name) return 1e-3;
  }
  for (const char* name : {"us", "usec", "microsecond", "microseconds"}) {
    if (unit == name) return 1e-6;
  }
  for (const char* name : {"min", "minute", "minutes"}) {
    if (unit == name) return 60.0;
  }
  for (const char* name : {"h", "hour", "hours"}) {
    if (unit == name) return 3600.0;
  }
  return std::nullopt;
}

Heading heading_of(std::string_view text) {
  text = trimmed(text);
  const auto split = [&](std::size_t at, std::size_t unit_at, std::size_t unit_end) {
    return Heading{std::string(trimmed(text.substr(0, at))),
                   std::string(trimmed(text.substr(unit_at, unit_end - unit_at)))};
  };
  if (text.size() > 2 && (text.back() == ']' || text.back() == ')')) {
    const auto open = text.rfind(text.back() == ']' ? '[' : '(');
    if (open != std::string_view::npos && open > 0) {
      const Heading heading = split(open, open + 1, text.size() - 1);
      if (!heading.name.empty() && (text.back() == ']' || is_known_unit(heading.unit))) return heading;
    }
  }
  for (const std::string_view mark : {"/", ",", ";", "_"}) {
    const auto at = text.rfind(mark);
    if (at == std::string_view::npos || at == 0) continue;
    const Heading heading = split(at, at + 1, text.size());
    // Only what can be nothing else: "A/V" and "lead_C" are names.
    const bool sure =
        heading.unit.size() > 1 && is_known_unit(heading.unit) && lower_case(heading.unit) != "n/a";
    if ((sure && heading.unit.front() != '-') || heading.unit == "%" ||
        (heading.unit == "s" && is_word_for_time(heading.name))) {
      // The mark belongs to the name that a session calls the column by.
      return {std::string(text), heading.unit};
    }
  }
  return {std::string(text), ""};
}

} // namespace chronodrome::intake
