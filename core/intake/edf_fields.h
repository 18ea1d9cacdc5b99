// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <cstddef>
#include <optional>
#include <string>
#include <string_view>
#include <vector>

#include "base/result.h"
#include "intake/clock_time.h"

namespace chronodrome::intake {

/// The text fields of an EDF header, with what is odd about them collected as warnings.
class EdfFields {
public:
  EdfFields(std::string bytes, std::string path) : bytes_(std::move(bytes)), path_(std::move(path)) {}

  /// Without padding by blanks or NULs, as UTF-8. Requires: at + width lies within the header.
  [[nodiscard]] std::string text(std::size_t at, std::size_t width) const;
  /// Errors: bad_value, with the byte. A decimal comma is read, with a warning.
  Result<double> number(std::size_t at, std::size_t width, const std::string& what);
  /// Whole and within +-2^53.
  Result<std::int64_t> integer(std::size_t at, std::size_t width, const std::string& what);
  void warn(std::size_t byte, const std::string& what, const std::string& remedy);
  [[nodiscard]] Error fault(ErrorCode code, std::size_t byte, const std::string& what,
                            const std::string& remedy) const;
  [[nodiscard]] std::vector<Warning> take_warnings() { return std::move(warnings_); }
  [[nodiscard]] std::string_view raw(std::size_t at, std::size_t width) const {
    return std::string_view(bytes_).substr(at, width);
  }

private:
  std::string bytes_;
  std::string path_;
  std::vector<Warning> warnings_;
};

/// Date and time of the header, the four-digit date of an EDF+ recording field first. Nothing, with a warning
/// or a note, where the file does not tell.
std::optional<ClockTime> edf_start(EdfFields& fields, bool plus, std::vector<std::string>& notes);

} // namespace chronodrome::intake
