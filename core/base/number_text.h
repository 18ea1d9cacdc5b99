// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <cstddef>
#include <cstdint>
#include <optional>
#include <string>
#include <string_view>

namespace chronodrome {

/// The number that the whole of `text` spells (surrounding blanks allowed; `1.5`, `-2e-7`, `1.5D-8`), with
/// `decimal` as its decimal mark, whatever the locale. Nothing for anything else, for "nan", "inf" and values
/// beyond a double.
std::optional<double> parse_number(std::string_view text, char decimal = '.');

/// A whole number within the range of int64, or nothing.
std::optional<std::int64_t> parse_integer(std::string_view text);

/// Twelve significant digits, shortest form, point as the decimal mark: what every results file holds.
std::string number_text(double value);

/// `digits` significant digits (1 to 17), shortest form: for tables that people read.
std::string number_text(double value, int digits);

/// Exactly `decimals` digits behind the point.
std::string fixed_text(double value, int decimals);

/// Shortest text that reads back to the same double: for session files.
std::string exact_text(double value);

/// Without blanks, tabs and line ends at either side.
std::string_view trimmed(std::string_view text);

/// ASCII letters in lower case.
std::string lower_case(std::string_view text);

} // namespace chronodrome
