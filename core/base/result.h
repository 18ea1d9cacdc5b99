// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <cassert>
#include <cstddef>
#include <optional>
#include <string>
#include <utility>
#include <variant>
#include <vector>

namespace chronodrome {

/// Where in a file something stands. Text files give line (from 1) and column (from 1); binary files a byte
/// offset.
struct Place {
  std::optional<std::size_t> line;
  std::optional<std::size_t> column;
  std::optional<std::size_t> byte;

  static Place at_line(std::size_t line) { return {line, std::nullopt, std::nullopt}; }
  static Place at(std::size_t line, std::size_t column) { return {line, column, std::nullopt}; }
  static Place at_byte(std::size_t byte) { return {std::nullopt, std::nullopt, byte}; }
};

enum class ErrorCode {
  file_missing,        ///< no such file, or it cannot be opened
  read_failed,         ///< the system could not deliver bytes of an open file
  wrong_format,        ///< not the kind of file it is taken for
  damaged,             ///< the right kind, but broken beyond use
  over_limit,          ///< larger than a stated limit
  ambiguous,           ///< can be read in two ways that give different numbers
  bad_value,           ///< a field holds something that it may not hold
  digest_mismatch,     ///< the raw file is not the one the session was made from
  unsupported_version, ///< written by a newer program
  bad_usage,           ///< the caller's words or settings are off
  cannot_write,        ///< output could not be written
  not_enough_data,     ///< the data cannot answer
  cancelled,           ///< the user stopped the work
  internal_fault,      ///< a bug in Chronodrome
};

/// What went wrong, in words a physiologist uses: `what` says what was found and what was expected, `remedy`
/// what to do.
struct Error {
  ErrorCode code = ErrorCode::internal_fault;
  std::string file;
  Place place;
  std::string what;
  std::string remedy;
};

/// The work went on; this was dropped, assumed or is doubtful.
struct Warning {
  std::string file;
  Place place;
  std::string what;
  std::string remedy;
};

/// `FILE:LINE: error: what; remedy` (line and column for text, byte offset for binary; place 1 or byte 0 if
/// none is known).
std::string describe(const Error& error);
std::string describe(const Warning& warning);

/// A value or an Error. Asking an Error for its value is a fault of the caller and stops a debug build.
template <class T>
class [[nodiscard]] Result {
public:
  Result(T value) : content_(std::move(value)) {}     // NOLINT(google-explicit-constructor)
  Result(Error error) : content_(std::move(error)) {} // NOLINT(google-explicit-constructor)

  [[nodiscard]] bool ok() const { return std::holds_alternative<T>(content_); }
  explicit operator bool() const { return ok(); }
  [[nodiscard]] T& value() & { return assert(ok()), std::get<T>(content_); }
  [[nodiscard]] const T& value() const& { return assert(ok()), std::get<T>(content_); }
  [[nodiscard]] T&& value() && { return assert(ok()), std::get<T>(std::move(content_)); }
  [[nodiscard]] const Error& error() const { return assert(!ok()), std::get<Error>(content_); }
  T* operator->() { return &value(); }
  const T* operator->() const { return &value(); }
  T& operator*() & { return value(); }
  const T& operator*() const& { return value(); }

private:
  std::variant<T, Error> content_;
};

/// Success without a value, or an Error.
using Done = Result<std::monostate>;
inline Done done() {
  return Done(std::monostate{});
}

} // namespace chronodrome
