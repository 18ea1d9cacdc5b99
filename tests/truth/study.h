// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <cstddef>
#include <map>
#include <string>
#include <vector>

#include "session/analysis.h"
#include "simulation/simulate.h"

namespace truth {

/// How the activations of one channel compare with the truth, matched one to one in order of time within 1
/// ms.
struct BeatScore {
  std::string channel;
  std::size_t hits = 0, missed = 0, invented = 0;
  std::vector<double> errors_ms; ///< found minus true, of the hits

  [[nodiscard]] double sensitivity() const;
  [[nodiscard]] double positive_predictivity() const;
};

/// Conducted delays of one pathway, matched by both of their times within 1 ms.
struct DelayScore {
  std::string pathway;
  std::size_t conducted = 0; ///< true conducted rows
  std::size_t paired = 0;    ///< of these, rows found conducted between the same two activations
  std::size_t wrong = 0;     ///< rows found conducted that are not in the truth
  std::vector<double> errors_ms;
};

/// pEC50 of one curve and measure whose truth is a Hill curve.
struct CurveScore {
  std::string measure;
  double truth = 0.0;
  bool estimated = false;
  double error = 0.0;
  bool bounded = false; ///< both limits are there
  bool covered = false; ///< the interval holds the truth (an open side holds everything beyond)
};

/// One step and measure: what was read against what the heart would show there in the long run.
struct ResponseScore {
  std::string measure;
  double concentration = 0.0;
  std::string true_status, status;
  double relative_error = 0.0; ///< of the value, where both are there
};

/// Total time of one kind of rhythm.
struct RhythmScore {
  double true_seconds = 0.0, seconds = 0.0;
};

struct SessionScore {
  std::vector<ResponseScore> responses;
  std::map<std::string, RhythmScore> rhythm;
  std::vector<BeatScore> beats;
  std::vector<DelayScore> delays;
  std::vector<CurveScore> curves;
};

/// Simulates, writes the files into `folder`, loads the session from them, analyses and compares.
SessionScore score_scenario(const chronodrome::simulation::Scenario& scenario, const std::string& folder);

/// Compares a result with a truth.
SessionScore score(const chronodrome::session::SessionResult& result,
                   const chronodrome::simulation::Truth& truth);

} // namespace truth
