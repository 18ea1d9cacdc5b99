// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <cstddef>
#include <optional>
#include <span>
#include <vector>

#include "conduction/settings.h"

namespace chronodrome::conduction {

/// The usual delay from `to` back to `from`: median over runs of three or more `to` in a row that no `from`
/// precedes by 0.5 to 1.5 of the usual antegrade delay and that a `from` follows inside the window, at delays
/// that change by less than 10 % (or 5 ms). Without such a run 1.2 times the antegrade delay, held inside the
/// window. Times in seconds, rising.
double usual_retrograde_delay(std::span<const double> from, std::span<const double> to, double usual,
                              const DelayWindow& window);

/// Undoes retrograde links that stand alone and do not make their `from` early: the `from` came when it would
/// have come anyway. `partner`: for each `from` its `to`; retrograde where that is earlier.
void undo_unlikely_retrograde(std::span<const double> from, std::span<const double> to,
                              std::vector<std::optional<std::size_t>>& partner);

} // namespace chronodrome::conduction
