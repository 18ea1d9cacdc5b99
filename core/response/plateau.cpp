// Chronodrome, GPL-3.0-or-later.
#include "response/plateau.h"

#include <cmath>

namespace chronodrome::response {

Plateau assess_plateau(const std::array<double, 3>& means, double tolerance) {
  Plateau plateau;
  const double first = means[1] - means[0];
  plateau.drift = means[2] - means[1];
  plateau.steady = std::abs(plateau.drift) <= tolerance;
  const bool slows_down = std::abs(plateau.drift) < std::abs(first) && plateau.drift * first > 0.0;
  if (!plateau.steady && slows_down) {
    // The same as the formula in the header, without the difference of large products.
    plateau.remaining = plateau.drift * plateau.drift / (first - plateau.drift);
    plateau.asymptote = means[2] + *plateau.remaining;
  }
  return plateau;
}

} // namespace chronodrome::response
