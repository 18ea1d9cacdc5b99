// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <cstddef>
#include <optional>
#include <string>
#include <vector>

#include "base/quantity.h"
#include "base/result.h"

namespace chronodrome::response {

enum class Status { ok, not_steady, censored, arrested, unreadable, excluded };
std::string name_of(Status status);

/// The value of one measure at one bath concentration.
struct Response {
  int curve = 0;
  std::string agent, background;
  Molar concentration;
  std::string measure; ///< `rate:RA`, `delay:AV` ...
  std::string unit;
  std::optional<double> value; ///< only where status is ok or not_steady
  std::optional<double> sem;   ///< over beats, corrected for lag-1 correlation; never an n of preparations
  std::size_t n_beats = 0;
  Seconds window_start, window_end;
  Status status = Status::ok;
  std::optional<double> limit;    ///< for censored
  std::string limit_side;         ///< "at_least" or "at_most"
  std::vector<std::string> flags; ///< in words, for the summary
};

struct Responses {
  std::vector<Response> rows; ///< by curve, measure (session order), concentration in order of time
  std::vector<Warning> warnings;
};

} // namespace chronodrome::response
