// Chronodrome, GPL-3.0-or-later.
#include "pharmacology/curve_fit.h"

#include <algorithm>

namespace chronodrome::pharmacology {

const Estimate* CurveFit::find(const std::string& name) const {
  for (const auto* list : {&parameters, &derived}) {
    for (const NamedEstimate& one : *list) {
      if (one.name == name) return &one.value;
    }
  }
  return nullptr;
}

bool CurveFit::has_flag(std::string_view flag) const {
  return std::find(flags.begin(), flags.end(), flag) != flags.end();
}

} // namespace chronodrome::pharmacology
