// Chronodrome, GPL-3.0-or-later.
#include "conditioning/species.h"

#include <algorithm>
#include <array>

#include "base/number_text.h"

namespace chronodrome::conditioning {
namespace {

struct Row {
  const char* name;
  double atrial_ms, ventricular_ms, width_ms, mean_ms, refine_ms;
  double high_pass_hz, tension_hz, pressure_hz;
  bool slow;
};

constexpr std::array<Row, 8> kRows = {{{"guinea pig", 60, 80, 30, 5, 8, 10, 30, 100, false},
                                       {"mouse", 25, 35, 15, 5, 6, 20, 60, 200, false},
                                       {"rat", 40, 50, 25, 5, 8, 15, 30, 100, false},
                                       {"rabbit", 60, 80, 40, 5, 8, 10, 30, 100, false},
                                       {"zebrafish", 80, 100, 40, 5, 10, 8, 30, 100, false},
                                       {"frog", 200, 250, 120, 10, 25, 2, 30, 100, true},
                                       {"human", 150, 200, 110, 10, 30, 5, 30, 100, false},
                                       {"dog", 120, 150, 80, 10, 15, 5, 30, 100, false}}};

std::string plain(const std::string& species) {
  std::string text = lower_case(trimmed(species));
  std::replace(text.begin(), text.end(), '-', ' ');
  std::replace(text.begin(), text.end(), '_', ' ');
  return text == "guineapig" ? "guinea pig" : text;
}

} // namespace

SpeciesTraits traits_of(const std::string& species) {
  const std::string name = plain(species);
  const auto* row = std::find_if(kRows.begin(), kRows.end(), [&](const Row& r) { return name == r.name; });
  SpeciesTraits traits;
  traits.known = row != kRows.end();
  if (!traits.known) row = kRows.begin();
  traits.name = row->name;
  traits.refractory_atrial = milliseconds(row->atrial_ms);
  traits.refractory_ventricular = milliseconds(row->ventricular_ms);
  traits.deflection_width = milliseconds(row->width_ms);
  traits.detection_mean = milliseconds(row->mean_ms);
  traits.refine_window = milliseconds(row->refine_ms);
  traits.detection_high_pass = Hertz(row->high_pass_hz);
  traits.tension_low_pass = Hertz(row->tension_hz);
  traits.pressure_low_pass = Hertz(row->pressure_hz);
  traits.is_slow = row->slow;
  return traits;
}

} // namespace chronodrome::conditioning
