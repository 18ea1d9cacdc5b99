// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <map>
#include <memory>
#include <string>
#include <vector>

#include "activation/activation.h"
#include "conduction/conduction.h"
#include "document/session_file.h"
#include "pharmacology/curve_fit.h"
#include "protocol/curve_plan.h"
#include "protocol/protocol.h"
#include "recording/recording.h"
#include "response/response.h"
#include "rhythm/intervals.h"
#include "rhythm/rhythm.h"

namespace chronodrome::session {

/// A fit with the curve and the measure it belongs to.
struct FittedCurve {
  int curve = 0;
  std::string agent, background, preparation, measure;
  pharmacology::CurveFit fit;
};

/// One number about a pathway over the whole recording, for `conduction.csv`.
struct ConductionFact {
  std::string pathway, measure, unit;
  std::optional<double> value, ci_low, ci_high;
  std::size_t n = 0;
  std::string detail;
};

/// How many corrections of each kind were applied to a channel.
struct CorrectionCounts {
  std::size_t added = 0, removed = 0, moved = 0;
};

/// All that was found in one session; a value, never edited in place. Vectors a channel are parallel to
/// `channels`.
struct SessionResult {
  document::SessionFile session;
  std::string session_sha256;
  std::shared_ptr<const recording::Recording> recording;
  protocol::Protocol protocol;
  protocol::CurvePlan plan; ///< curves, steps, exclusions and pacing of the drug log
  std::vector<recording::Channel> channels;
  std::vector<activation::ChannelActivations> activations; ///< empty marks for channels that carry no beats
  std::vector<std::vector<rhythm::Interval>> intervals;
  std::vector<CorrectionCounts> corrections;
  std::vector<conduction::PathwayDelays> pathways;
  std::vector<ConductionFact> conduction_facts;
  rhythm::Rhythm rhythm;
  response::Responses responses;
  std::vector<FittedCurve> curves;
  std::map<std::string, document::SettingValue> settings; ///< every key and its value in effect
  std::vector<std::string> settings_changed;              ///< keys that differ from the defaults
  std::vector<Warning> warnings;
};

} // namespace chronodrome::session
