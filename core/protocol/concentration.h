// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <optional>
#include <string>

#include "base/quantity.h"

namespace chronodrome::protocol {

/// The concentration that `value` in `unit` is, or nothing for a unit that is not one of `M mM uM nM pM` (the
/// micro sign may be u, U+00B5 or U+03BC; letters count: "MM" and "um" are no units).
/// Accuracy: one division by an exact power of ten, so 100 nM is the same double as 1e-7 M.
std::optional<Molar> concentration_in(double value, const std::string& unit);

/// The units as a message lists them.
std::string concentration_units();

/// `1e-07 M`: as backgrounds are written.
std::string concentration_text(Molar concentration);

} // namespace chronodrome::protocol
