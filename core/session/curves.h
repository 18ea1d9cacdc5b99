// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <string>
#include <vector>

#include "pharmacology/fit.h"
#include "response/response.h"
#include "session/session_result.h"

namespace chronodrome::session {

/// A fit of every curve and measure of the responses: first the main ones (measured responses only), then,
/// for curves with censored or arrested responses, the censored ones. A curve that cannot be fitted has an
/// entry that says why.
std::vector<FittedCurve> fit_curves(const response::Responses& responses, const std::string& preparation,
                                    pharmacology::Model model, const pharmacology::FitOptions& options,
                                    unsigned threads);

} // namespace chronodrome::session
