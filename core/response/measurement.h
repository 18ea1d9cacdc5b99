// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <memory>
#include <optional>
#include <string>
#include <vector>

#include "base/quantity.h"
#include "recording/time_base.h"
#include "response/response.h"

namespace chronodrome::response {

/// What one measure is over one stretch of time.
struct Reading {
  /// Why there is no value.
  enum class Absence { none, no_beat, blocked, one_beat, no_samples, untested };
  Absence absence = Absence::none;
  std::optional<double> value, sem; ///< no sem from fewer than two readings
  std::size_t n_beats = 0;
  std::size_t n_values = 0; ///< what the value is the mean or median of
  std::optional<double> limit;
  std::string limit_side;
  bool is_selected = false; ///< as Response::is_selected
  std::vector<std::string> flags;
};

/// One measure of one channel or pathway, readable over any stretch.
class Measurement {
public:
  virtual ~Measurement() = default;
  [[nodiscard]] virtual Reading read(const recording::Span& span) const = 0;

  std::string unit;
  std::vector<double>
      beats; ///< s, rising: whose cycle sets the window's length; of a pathway, those of `from`
  std::vector<recording::Span> unreadable; ///< merged
  std::vector<recording::Span> excluded;   ///< merged
  bool beats_are_counted = false;          ///< a silence makes the value doubtful
};

/// The measurement that `measure` names. Errors: bad_usage.
Result<std::unique_ptr<Measurement>> measurement_of(const std::string& measure, const Inputs& inputs,
                                                    const Settings& settings);

/// Median with its standard error (see compute()).
void set_median(Reading& reading, const std::vector<double>& values);

/// "12 of 40".
std::string of_all(std::size_t part, std::size_t all);

} // namespace chronodrome::response
