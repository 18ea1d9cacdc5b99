// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <string>

#include "base/result.h"
#include "intake/recording_writer.h"
#include "simulation/scenario.h"
#include "simulation/truth.h"

namespace chronodrome::simulation {

/// A recording made from a scenario, in memory, with its truth.
struct Simulated {
  Scenario scenario;
  intake::WrittenRecording recording; ///< signals in the order of the scenario's channels
  Truth truth;
};

/// Makes the recording. The same scenario gives the same numbers on every run; between machines samples may
/// differ by one quantum of the converter where their mathematics libraries round differently.
/// Errors: bad_usage (Scenario::check). Cost: about 25 ns a sample.
Result<Simulated> simulate(const Scenario& scenario);

/// The drug log as protocol events, trains of stimuli included, in order of time.
std::vector<LoggedEvent> protocol_of(const Scenario& scenario);

/// Writes into `folder` (made if it is not there) recording.csv or recording.edf, NAME.session.json,
/// protocol.csv (unless annotations carry the log) and truth.json. Errors: cannot_write, bad_usage (what the
/// recording's format cannot hold).
Done write_simulated(const Simulated& simulated, const std::string& folder);

/// The text of truth.json. Format page: resources/formats/truth.md.
std::string truth_text(const Simulated& simulated);

/// The text of NAME.session.json.
std::string session_text(const Scenario& scenario);

/// The text of protocol.csv.
std::string protocol_text(const Scenario& scenario);

} // namespace chronodrome::simulation
