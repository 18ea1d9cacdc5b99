// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <string>

#include "base/quantity.h"

namespace chronodrome::conditioning {

/// What depends on whose heart it is: how short a coupling can be, how broad a deflection, how fast a twitch.
/// Defaults, not truths; every one can be overridden in the settings of its stage. The refractory times and
/// deflection widths are engineering defaults chosen below published refractory periods (mouse atrium
/// 27 +- 0.8 ms at 100 ms pacing; rabbit AV node 101 +- 14 ms, Tadros & Billette 2009). Human and canine rows
/// are common practice of surface ECG and catheter work.
struct SpeciesTraits {
  std::string name;               ///< as this table spells it
  bool known = true;              ///< false: not in the table, guinea-pig values are used
  Seconds refractory_atrial;      ///< shortest spacing of two marks
  Seconds refractory_ventricular; ///< also ECG, His and monophasic action potentials
  Seconds deflection_width;       ///< broadest ventricular deflection
  Seconds detection_mean;         ///< over which the slope is averaged to find a deflection
  Seconds refine_window;          ///< half width of the search for the fiducial point about the detection
  Hertz detection_high_pass;      ///< corner of the detection branch; timing signals are not high-passed
  Hertz tension_low_pass;
  Hertz pressure_low_pass;
  bool is_slow = false; ///< cycles can exceed a second as a rule: statistics over +-5 s instead of +-2 s
};

/// Traits of `species` ("guinea pig", "Guinea-pig", "rat" ...; case, blanks and hyphens do not matter). An
/// unknown name gives guinea-pig values with `known` false.
SpeciesTraits traits_of(const std::string& species);

} // namespace chronodrome::conditioning
