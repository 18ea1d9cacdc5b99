// Chronodrome, GPL-3.0-or-later.
#include <algorithm>
#include <array>

#include "conditioning/species.h"
#include "conduction/settings.h"

namespace chronodrome::conduction {
namespace {

struct Row {
  const char* species;
  double shortest_ms, longest_ms;
};

constexpr std::array<Row, 8> kRows = {{{"guinea pig", 25, 350},
                                       {"mouse", 15, 150},
                                       {"rat", 20, 300},
                                       {"rabbit", 30, 450},
                                       {"zebrafish", 25, 400},
                                       {"frog", 100, 1500},
                                       {"human", 60, 600},
                                       {"dog", 60, 600}}};

bool is_wrong(const std::optional<DelayWindow>& window) {
  return window && !(window->shortest >= Seconds(0.0) && window->longest > window->shortest);
}

} // namespace

std::optional<Error> ConductionSettings::check() const {
  const auto wrong = [](const char* what, const char* remedy) {
    return Error{ErrorCode::bad_usage, "", {}, what, remedy};
  };
  if (is_wrong(antegrade) || is_wrong(retrograde)) {
    return wrong("a delay window must run from 0 or more to a longer time",
                 "leave it out for that of the species");
  }
  if ((within_chamber && !(*within_chamber > Seconds(0.0))) ||
      (control_delay && !(*control_delay > Seconds(0.0))) || !(control_period > Seconds(0.0))) {
    return wrong("conduction.within_chamber_s, conduction.control_delay_s and conduction.control_period_s "
                 "must exceed 0",
                 "leave them out");
  }
  if (!(unpaired_cost > 0.0) || !(longest_link_cost > 0.0) || longest_link_cost >= 2.0 * unpaired_cost ||
      !(shortening_share > 0.0) || retrograde_cost < 0.0) {
    return wrong(
        "the costs of pairing must exceed 0, and a link must cost less than leaving both ends unpaired",
        "leave them out for 4, 6, 0.25 and 2");
  }
  if (!(ambiguous_share > 0.0 && ambiguous_share <= 1.0) || !(dissociation_ratio > 1.0) ||
      !(dissociation_scatter > 0.0)) {
    return wrong(
        "conduction.ambiguous_share must lie between 0 and 1, conduction.dissociation_ratio exceed 1 and "
        "conduction.dissociation_scatter exceed 0",
        "leave them out for 0.9, 1.2 and 0.05");
  }
  return std::nullopt;
}

DelayWindow antegrade_window(const std::string& species, recording::Role from, recording::Role to) {
  using recording::Role;
  const std::string name = conditioning::traits_of(species).name;
  const auto* row = std::find_if(kRows.begin(), kRows.end(), [&](const Row& r) { return name == r.species; });
  if (row == kRows.end()) row = kRows.begin();
  const bool is_large = name == "human" || name == "dog";
  if (from == Role::his && to != Role::atrial && to != Role::sinus)
    return is_large ? DelayWindow{milliseconds(20.0), milliseconds(90.0)}
                    : DelayWindow{milliseconds(5.0), milliseconds(40.0)};
  DelayWindow window{milliseconds(row->shortest_ms), milliseconds(row->longest_ms)};
  if (to == Role::his) window.shortest = milliseconds(10.0);
  return window;
}

bool within_one_chamber(recording::Role from, recording::Role to) {
  using recording::Role;
  const auto is_atrial = [](Role role) { return role == Role::atrial || role == Role::sinus; };
  return from == to || (is_atrial(from) && is_atrial(to));
}

} // namespace chronodrome::conduction
