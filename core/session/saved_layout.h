// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <string>
#include <vector>

#include "document/session_file.h"
#include "recording/recording.h"

namespace chronodrome::session {

/// A session for a recording, made from another session of the same set-up.
struct LayoutMatch {
  document::SessionFile session; ///< paths and name are left to the caller
  std::size_t matched = 0;       ///< channels of the layout whose source is there
  std::vector<std::string>
      unmatched; ///< in words: what of the layout did not fit, what of the recording is left
};

/// Takes from `layout` its channels (those whose source the recording holds; capital letters and blanks do
/// not matter where one signal alone fits), pathways, measures, settings, the way a table is read, and what
/// belongs to the set-up: species, tissue, temperature, bath volume, arrival delay. Leaves what belongs to
/// one animal or one day: label, animal, sex, mass, date, operator, group, notes, corrections, placed
/// windows, drug log.
LayoutMatch apply_layout(const document::SessionFile& layout, const recording::Recording& recording);

} // namespace chronodrome::session
