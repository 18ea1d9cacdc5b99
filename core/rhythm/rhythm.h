// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <string>
#include <vector>

#include "base/quantity.h"

namespace chronodrome::rhythm {

/// A stretch of rhythm of one kind (contract section 5), with the rule's numbers as `key=value;...`.
struct Episode {
  Seconds start;
  Seconds end;
  std::string kind;
  std::string detail;
};

struct Rhythm {
  std::vector<Episode> episodes; ///< in order of start; rows may overlap
};

} // namespace chronodrome::rhythm
