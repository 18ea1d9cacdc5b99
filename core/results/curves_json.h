// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <span>
#include <string>

#include "session/session_result.h"

namespace chronodrome::results {

/// A fit and what it belongs to.
using LabelledFit = session::FittedCurve;

/// `curves.json`: always a list, one entry a fit in the order given. Keys in the order of the contract,
/// parameters and derived numbers in the order of the model (pharmacology/model.h). What the data do not give
/// is null; numbers have at most twelve significant digits and are the same on every machine. Concentrations
/// (names that end in `_mol_per_l`) carry estimate, ci_low and ci_high, everything else also se and
/// ci_method.
std::string curves_json(std::span<const LabelledFit> fits);

} // namespace chronodrome::results
