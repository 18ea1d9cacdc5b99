// Chronodrome, GPL-3.0-or-later.
#include <iostream>

#include "commands.h"
#include "simulation/simulate.h"

namespace chronodrome::cli {

int simulate(const SimulateWords& words) {
  const auto scenario = simulation::read_scenario(words.scenario);
  if (!scenario) return refuse(scenario.error());
  for (const auto& warning : scenario->warnings)
    report(warning);
  const auto simulated = simulation::simulate(*scenario);
  if (!simulated) return refuse(simulated.error());
  if (const Done written = simulation::write_simulated(*simulated, words.out); !written)
    return refuse(written.error());
  std::cout << "simulated " << scenario->name << ", seed " << scenario->seed
            << ": invented data with known truth\nfiles: " << words.out << "/\n";
  return kAllDone;
}

} // namespace chronodrome::cli
