// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <cstddef>
#include <functional>
#include <optional>
#include <span>
#include <vector>

namespace chronodrome::conduction {

/// Cost of linking `from` i with `to` j; nothing: they cannot be linked.
using LinkCost = std::function<std::optional<double>(std::size_t i, std::size_t j)>;

/// The cheapest set of links between two rising lists of times in which each has at most one link and links
/// do not cross. Links can join `from` i only with `to` from reach_before earlier to reach_after later; every
/// activation without a link costs `unpaired`. Of equally cheap answers the one that links the later
/// activations first is taken, so that the answer is always the same.
/// Returns for each `from` the index of its `to`, if any. Cost: n k, k the activations inside the reach.
std::vector<std::optional<std::size_t>> assign(std::span<const double> from, std::span<const double> to,
                                               double reach_before, double reach_after, double unpaired,
                                               const LinkCost& cost);

} // namespace chronodrome::conduction
