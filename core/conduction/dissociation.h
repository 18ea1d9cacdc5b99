// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <cstddef>
#include <initializer_list>
#include <span>
#include <vector>

#include "activation/activation.h"
#include "conduction/settings.h"
#include "recording/time_base.h"

namespace chronodrome::conduction {

/// True for each `to` that belongs to a stretch without conduction: 6, 10, 20 or 40 beats in a row that are
/// regular (coefficient of variation below dissociation_scatter; 0.6 of it for six beats), on average at
/// least dissociation_ratio times slower than `from`, and whose phases in the cycle of `from` spread evenly:
/// mean resultant length below sqrt(3 / n), the 5 % point of the Rayleigh test. The longer stretches see
/// rhythms that drift past each other slowly. No stretch spans one of `unreadable`. Both lists in seconds,
/// rising.
std::vector<char> dissociated_beats(std::span<const double> from, std::span<const double> to,
                                    std::span<const recording::Span> unreadable,
                                    const ConductionSettings& settings);

/// What any of these channels cannot read, in order, joined.
std::vector<recording::Span>
unreadable_of(std::initializer_list<const activation::ChannelActivations*> channels);

/// True if any of the ordered, disjoint `stretches` meets the time between `a` and `b`.
bool meets_any(std::span<const recording::Span> stretches, double a, double b);

} // namespace chronodrome::conduction
