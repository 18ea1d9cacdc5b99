// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <memory>
#include <string>
#include <vector>

#include "base/result.h"
#include "recording/recording.h"

namespace chronodrome::session {

/// What one signal of a recording looks like before anybody has said what it is.
struct SignalLook {
  double min = 0.0; ///< over the whole signal, in its unit
  double max = 0.0;
  double noise_sd = 0.0;            ///< of white noise, from differences of neighbours
  double clipped_share = 0.0;       ///< 0 to 1
  double unreadable_share = 0.0;    ///< 0 to 1
  std::vector<std::string> reasons; ///< why stretches cannot be read, each once
  std::size_t gaps = 0;
  Seconds missing; ///< total length of the gaps
};

/// Looks at every signal, in order, on up to `threads` threads (0: all cores).
/// Errors: those of reading a channel.
Result<std::vector<SignalLook>> inspect(const std::shared_ptr<const recording::Recording>& recording,
                                        unsigned threads);

} // namespace chronodrome::session
