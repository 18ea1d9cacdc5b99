// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <cstddef>
#include <memory>
#include <vector>

#include "recording/recording.h"
#include "recording/trace.h"

namespace chronodrome::session {

/// A stretch of one signal, ready to be drawn.
struct PreviewTrace {
  recording::Span span;
  recording::MinMax range;                   ///< of what is drawn
  std::vector<recording::TracePiece> pieces; ///< empty: nothing lies in the stretch
};

/// What a form shows of a signal before anybody has said what it is.
struct SignalPreview {
  PreviewTrace whole; ///< the whole recording
  PreviewTrace close; ///< two seconds about the middle of the signal's longest run
};

/// One preview a signal, in `columns` pixels each.
std::vector<SignalPreview> preview_traces(const std::shared_ptr<const recording::Recording>& recording,
                                          std::size_t columns);

} // namespace chronodrome::session
