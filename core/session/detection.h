// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <optional>
#include <string>
#include <vector>

#include "activation/settings.h"
#include "recording/recording.h"
#include "session/analysis.h"
#include "session/progress.h"

namespace chronodrome::session {

/// Raised whenever conditioning or activation would find something else on the same signals.
inline constexpr int kDetectionVersion = 1;

/// SHA-256 over all that activations depend on: the files' digests and how they were read, the channels as
/// the session resolves them, every setting of conditioning and activation, species included. Empty where the
/// recording names no file: then nothing says that two recordings are the same.
std::string detection_key(const std::vector<recording::Channel>& channels,
                          const activation::ActivationSettings& settings);

/// Leaves a `detection` whose key fits as it is, and renews any other. After an error it is what it was.
/// Errors: those of activation::compute_all.
std::optional<Error> bring_up_to_date(Detection& detection, const std::vector<recording::Channel>& channels,
                                      const activation::ActivationSettings& settings, unsigned threads,
                                      Progress& progress);

} // namespace chronodrome::session
