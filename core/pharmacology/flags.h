// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <span>
#include <string_view>

namespace chronodrome::pharmacology {

/// A word that a fit may carry, what it means and what to do about it.
struct FlagMeaning {
  std::string_view flag;
  std::string_view meaning;
  std::string_view advice;
};

/// The closed list, gravest first; a fit's flags stand in this order.
std::span<const FlagMeaning> flag_meanings();

namespace flags {
inline constexpr std::string_view kDeclined = "declined";
inline constexpr std::string_view kNoResponse = "no_response";
inline constexpr std::string_view kNotConverged = "not_converged";
/// Set by the caller, who knows how the responses were read; fit_curve() and fit_censored() never set it.
inline constexpr std::string_view kSelectedBeats = "selected_beats";
inline constexpr std::string_view kNotSeparable = "not_separable";
inline constexpr std::string_view kSlopeUndetermined = "slope_undetermined";
inline constexpr std::string_view kUpperPlateauOpen = "upper_plateau_open";
inline constexpr std::string_view kLowerPlateauOpen = "lower_plateau_open";
inline constexpr std::string_view kExtrapolated = "extrapolated";
inline constexpr std::string_view kHeavilyCensored = "heavily_censored";
inline constexpr std::string_view kFewPoints = "few_points";
inline constexpr std::string_view kLackOfFit = "lack_of_fit";
inline constexpr std::string_view kExactFit = "exact_fit";
} // namespace flags

} // namespace chronodrome::pharmacology
