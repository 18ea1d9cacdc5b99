// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <optional>
#include <string>
#include <vector>

#include "simulation/scenario.h"

namespace chronodrome::simulation {

/// What is wrong with a scenario, and where: keys and list indices from the top of the file.
struct ScenarioFault {
  std::vector<std::string> path;
  std::string what, remedy;
};

/// The first fault found, or nothing.
std::optional<ScenarioFault> fault_in(const Scenario& scenario);

/// `channels[0].width_s`
std::string path_text(const std::vector<std::string>& path);

} // namespace chronodrome::simulation
