// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <optional>
#include <string>
#include <string_view>

namespace chronodrome::intake {

/// "uV" for "µV" and "μV" (U+00B5, U+03BC), and so on for every unit that begins with a micro sign; else the
/// text as it stands, trimmed.
std::string normalised_unit(std::string_view text);

/// True for units that recordings of isolated hearts are written in, and for words that say there is none.
bool is_known_unit(std::string_view text);

/// Seconds that one of this unit of time lasts (s, sec, ms, msec, us, min, h), or nothing.
std::optional<double> seconds_in(std::string_view unit);

/// A heading and the unit that stands behind it.
struct Heading {
  std::string name; ///< without the unit
  std::string unit; ///< as written; empty: none
};
/// `ATR [mV]`, `ATR (mV)`, `ATR/mV`, `ATR, mV`: in square brackets whatever stands there, else known units
/// only.
Heading heading_of(std::string_view text);

} // namespace chronodrome::intake
