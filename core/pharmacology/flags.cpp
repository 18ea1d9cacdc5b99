// Chronodrome, GPL-3.0-or-later.
#include "pharmacology/flags.h"

#include <array>

namespace chronodrome::pharmacology {

namespace {

constexpr std::array kMeanings{
    FlagMeaning{
        flags::kDeclined,
        "the model was not fitted: too few distinct concentrations for its parameters, or points that "
        "cannot be used; all estimates are missing",
        "add concentrations, or choose a model with fewer parameters (hill_unit_slope)"},
    FlagMeaning{
        flags::kNoResponse,
        "the responses do not differ from a constant (all equal, or F test against the constant with P "
        ">= 0.05); basal is their mean, everything else is missing",
        "report that no concentration-related response was detected; do not print an EC50"},
    FlagMeaning{flags::kNotConverged, "the search ended without reaching a minimum; no interval is given",
                "look at the points; try a model with fewer parameters"},
    FlagMeaning{
        flags::kSelectedBeats,
        "responses of this curve were read from conducted beats only while others were blocked (or while a "
        "slower pacemaker drove the chamber): they are survivors, not the drug's effect on every beat",
        "read the conducted share and the atrial rate beside it; leave those steps out, or report the "
        "censored fit"},
    FlagMeaning{
        flags::kNotSeparable,
        "two or more parameters change the curve in the same way (condition number above 1e8, an "
        "asymmetry at its limit, two components that are one, or one without weight); where many sets of "
        "parameters fit alike, all of them are missing",
        "trust the curve, not the single parameters; fix one of them or take a simpler model"},
    FlagMeaning{
        flags::kSlopeUndetermined,
        "the Hill coefficient is outside 0.2 to 10, has no finite optimum, or has no upper or lower limit "
        "although both plateaus were reached: the response changes between two neighbouring "
        "concentrations, or hardly at all",
        "read the EC50 as its interval; add concentrations in between"},
    FlagMeaning{
        flags::kUpperPlateauOpen,
        "the plateau at high concentration was not reached: the EC50, the maximum or both have no limit "
        "on that side",
        "report pEC50 at most its upper limit and the maximum at least its limit; add higher "
        "concentrations"},
    FlagMeaning{flags::kLowerPlateauOpen,
                "the plateau at low concentration was not reached: even the lowest concentration acts",
                "report pEC50 at least its lower limit; add lower concentrations and a control"},
    FlagMeaning{flags::kExtrapolated, "the EC50 or one of its limits lies outside the concentrations tested",
                "treat the number as a prediction; add concentrations on that side"},
    FlagMeaning{flags::kHeavilyCensored,
                "more than a third of the responses between 20 and 80 % of the effect are only known as "
                "limits; the EC50 is missing",
                "report the concentration of first arrest or block instead"},
    FlagMeaning{
        flags::kFewPoints,
        "five distinct concentrations or fewer (the control counts), or fewer than ten for a model with "
        "five or more parameters",
        "take the standard errors as rough; add concentrations"},
    FlagMeaning{flags::kLackOfFit,
                "repeated additions agree with each other better than with the curve (F test, P < 0.05); not "
                "meaningful for repeated readings of one addition",
                "look for two components, fade, or a wrong concentration"},
    FlagMeaning{
        flags::kExactFit,
        "the curve passes through all points to rounding: there is no scatter to take errors from, so "
        "standard errors and limits are missing",
        "nothing, if the data were computed; otherwise check that they were measured"},
};

} // namespace

std::span<const FlagMeaning> flag_meanings() {
  return kMeanings;
}

} // namespace chronodrome::pharmacology
