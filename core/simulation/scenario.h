// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <cstdint>
#include <optional>
#include <string>
#include <string_view>
#include <vector>

#include "base/quantity.h"
#include "base/result.h"
#include "intake/recording_writer.h"
#include "recording/time_base.h"
#include "simulation/av_node.h"
#include "simulation/channel_plan.h"
#include "simulation/drug_plan.h"

namespace chronodrome::simulation {

inline constexpr int kScenarioVersion = 1;

/// The preparation, as the session file will state it.
struct PreparationPlan {
  std::string label = "simulated";
  std::string species, tissue, animal, sex, date, group, notes;
  std::optional<double> temperature_c, bath_volume_ml, mass_g;
  Seconds arrival_delay; ///< from the tap to the tissue
};

enum class FileKind { csv, edf, edf_plus };

/// The recording file.
struct FilePlan {
  FileKind kind = FileKind::csv;        ///< `csv`, `edf`, `edf+`; with gaps, `edf+` is discontinuous
  std::string clock_start;              ///< ISO 8601; empty: unknown
  std::string recording_text;           ///< free text of an EDF header
  intake::CsvLayout csv;                ///< of a CSV file
  Seconds record_duration{1.0};         ///< of an EDF file
  std::vector<recording::Span> gaps;    ///< not written
  bool protocol_in_annotations = false; ///< EDF+ only: the drug log as annotations, no protocol.csv
};

/// Overdrive suppression: after n driven beats in a row the next spontaneous cycle is 1 + strength
/// (1 - exp(-n / beats)) times as long; the excess fades by exp(-1/5) a beat. 0: none.
struct Overdrive {
  double strength = 0.0;
  double beats = 10.0;
};

struct SinusClock {
  BeatsPerMinute rate{200.0};  ///< basal
  Seconds jitter_sd;           ///< of each cycle, independent
  BeatsPerMinute slowest{6.0}; ///< below it the node is silent
  struct Pause {
    Seconds time, length;
  };
  std::vector<Pause> pauses; ///< no discharge from `time` for `length`
  Overdrive overdrive;       ///< after atrial pacing
};

/// Slow biological fluctuation on the axis of each response: the same size at every concentration, so that
/// plateau values scatter evenly; independent between steps that lie several time constants apart.
struct FluctuationPlan {
  BeatsPerMinute rate_sd;
  Seconds rate_tau{10.0};
  Seconds delay_sd;
  Seconds delay_tau{10.0};
  double force_sd_ratio = 0.0; ///< of developed force and pressure, over the basal value
  Seconds force_tau{10.0};
};

/// The node conducts more slowly after many beats that gave it little time to recover.
struct Fatigue {
  Seconds most;           ///< added to delay_min in the long run; 0: none
  Seconds tau{40.0};      ///< time constant of coming and going
  Seconds below_recovery; ///< beats that recovered for less than this tire the node
};

struct EscapePlan {
  Seconds junctional;  ///< silence of the ventricle after which the junction fires; 0: never
  Seconds ventricular; ///< silence after which a ventricular focus fires; 0: never
  Seconds jitter_sd;
  Overdrive overdrive; ///< after conducted beats in a row
};

struct PrematureBeat {
  Seconds time;
  Chamber chamber = Chamber::ventricular; ///< atrial or ventricular
  bool resets_sinus = true;               ///< atrial ones
};

/// A train of stimuli.
struct PacingTrain {
  Seconds start;
  Seconds cycle{0.2};
  int beats = 8;
  std::optional<Seconds> premature;  ///< one more stimulus, coupled by this to the last
  Chamber chamber = Chamber::atrial; ///< atrial or ventricular
  Seconds latency{0.009};            ///< stimulus to activation
};

/// A recording to be made, in full. Format page: resources/formats/scenario.md.
struct Scenario {
  std::string name = "simulated"; ///< NAME of NAME.session.json
  std::uint64_t seed = 1;
  Seconds duration{60.0};
  PreparationPlan preparation;
  FilePlan file;
  SinusClock sinus;
  AvNode node;
  Seconds his_to_ventricle{0.010};
  std::optional<AvNode> retrograde; ///< nothing: no conduction from ventricle to atrium
  Fatigue fatigue;
  Seconds atrial_refractory{0.060};
  Seconds ventricular_refractory{0.080};
  EscapePlan escape;
  FluctuationPlan fluctuation;
  std::vector<PrematureBeat> premature;
  std::vector<PacingTrain> pacing;
  std::vector<Agent> agents;
  std::vector<LoggedEvent> protocol; ///< in order of time
  std::vector<ChannelPlan> channels; ///< at least one
  std::vector<PathwayPlan> pathways;
  std::vector<std::string> measures; ///< of the session; empty: all that channels and pathways give
  std::vector<Warning> warnings;     ///< from reading: keys that are not known

  /// Errors: bad_usage, the first field that holds what it may not hold.
  [[nodiscard]] std::optional<Error> check() const;
};

/// Errors: file_missing, read_failed, and those of parse_scenario().
Result<Scenario> read_scenario(const std::string& path);

/// `file` is for messages. Errors: wrong_format (no JSON, another format), unsupported_version, bad_value
/// (with line and column).
Result<Scenario> parse_scenario(std::string_view text, const std::string& file);

/// All measures that the scenario's channels and pathways give, or those that it names.
std::vector<std::string> measures_of(const Scenario& scenario);

} // namespace chronodrome::simulation
