// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <functional>
#include <map>
#include <span>
#include <string>
#include <vector>

#include "activation/settings.h"
#include "base/result.h"
#include "conduction/settings.h"
#include "document/session_file.h"
#include "pharmacology/fit.h"
#include "response/response.h"
#include "rhythm/intervals.h"
#include "rhythm/rhythm.h"

namespace chronodrome::session {

/// The settings of every stage. A session stores only what differs from the defaults.
struct AnalysisSettings {
  activation::ActivationSettings activation;
  conduction::ConductionSettings conduction;
  rhythm::RhythmSettings rhythm;
  rhythm::IntervalSettings intervals;
  response::Settings response;
  pharmacology::FitOptions fit;
  pharmacology::Model model = pharmacology::Model::hill;
};

/// One key of the session's `analysis`: `stage.setting`.
struct SettingRow {
  std::string key;
  std::string unit; ///< empty: none
  std::string meaning;
  std::string allowed;          ///< for words; empty for numbers
  bool follows_species = false; ///< as long as it is not given
  /// The value in effect; where it follows the species, that of the species.
  std::function<document::SettingValue(const AnalysisSettings&)> get;
  /// Sets it; false if the value is of the wrong kind or no allowed word.
  std::function<bool(AnalysisSettings&, const document::SettingValue&)> set;
};

/// Every key there is, in the order of the stages.
std::span<const SettingRow> setting_rows();

struct ChosenSettings {
  AnalysisSettings settings;
  std::vector<std::string> changed; ///< keys whose value differs from the default
  std::vector<Warning> warnings;    ///< keys that are not known
};

/// Defaults for the session's preparation, with what its `analysis` changes.
/// Errors: bad_value (a value of the wrong kind), bad_usage (a value out of range: each stage's check()).
Result<ChosenSettings> settings_of(const document::SessionFile& session);

/// The keys and values in effect.
std::map<std::string, document::SettingValue> in_effect(const AnalysisSettings& settings);

/// The page `resources/formats/settings.md`, made from setting_rows().
std::string settings_page();

} // namespace chronodrome::session
