// Chronodrome, GPL-3.0-or-later.
#include "base/number_text.h"
#include "session/analysis_settings.h"

namespace chronodrome::session {
namespace {

using document::SettingValue;

double to_number(double value) {
  return value;
}
double to_number(std::size_t value) {
  return static_cast<double>(value);
}
template <class Unit>
double to_number(Quantity<Unit> value) {
  return value.value();
}

bool from_number(double number, double& field) {
  return field = number, true;
}
bool from_number(double number, std::size_t& field) {
  if (!(number >= 0.0 && number <= 1e9) || number != static_cast<double>(static_cast<std::size_t>(number)))
    return false;
  return field = static_cast<std::size_t>(number), true;
}
template <class Unit>
bool from_number(double number, Quantity<Unit>& field) {
  return field = Quantity<Unit>(number), true;
}

/// A numeric setting; `field` gives the place in the settings.
template <class Field>
SettingRow number(std::string key, std::string unit, std::string meaning, Field field) {
  SettingRow row{std::move(key), std::move(unit), std::move(meaning), "", false, {}, {}};
  row.get = [field](const AnalysisSettings& s) {
    return SettingValue(to_number(field(const_cast<AnalysisSettings&>(s))));
  };
  row.set = [field](AnalysisSettings& s, const SettingValue& value) {
    const auto* given = std::get_if<double>(&value);
    return given != nullptr && from_number(*given, field(s));
  };
  return row;
}

/// A numeric setting that follows the species as long as it is not given; `usual` is what it then is.
template <class Field, class Usual>
SettingRow by_species(std::string key, std::string unit, std::string meaning, Field field, Usual usual) {
  SettingRow row{std::move(key), std::move(unit), std::move(meaning), "", true, {}, {}};
  row.get = [field, usual](const AnalysisSettings& s) {
    const auto& value = field(const_cast<AnalysisSettings&>(s));
    if (value) return SettingValue(to_number(*value));
    return SettingValue(usual(conditioning::traits_of(s.activation.conditioning.species)));
  };
  row.set = [field](AnalysisSettings& s, const SettingValue& value) {
    const auto* given = std::get_if<double>(&value);
    if (given == nullptr) return false;
    auto& place = field(s);
    place.emplace();
    return from_number(*given, *place);
  };
  return row;
}

using Traits = conditioning::SpeciesTraits;

struct MainsWord {
  const char* word;
  conditioning::MainsChoice choice;
};
constexpr MainsWord kMainsWords[] = {{"automatic", conditioning::MainsChoice::automatic},
                                     {"50", conditioning::MainsChoice::fifty},
                                     {"60", conditioning::MainsChoice::sixty},
                                     {"off", conditioning::MainsChoice::off}};

SettingRow mains_row() {
  SettingRow row{
      "conditioning.mains", "Hz", "mains hum to take out", "automatic, 50, 60 or off", false, {}, {}};
  row.get = [](const AnalysisSettings& s) {
    for (const auto& word : kMainsWords) {
      if (word.choice == s.activation.conditioning.mains.nominal) return SettingValue(std::string(word.word));
    }
    return SettingValue(std::string());
  };
  row.set = [](AnalysisSettings& s, const SettingValue& value) {
    std::string given;
    if (const auto* text = std::get_if<std::string>(&value)) given = *text;
    if (const auto* hertz = std::get_if<double>(&value))
      given = *hertz == 50.0 ? "50" : *hertz == 60.0 ? "60" : "";
    for (const auto& word : kMainsWords) {
      if (given == word.word) return s.activation.conditioning.mains.nominal = word.choice, true;
    }
    return false;
  };
  return row;
}

SettingRow model_row() {
  std::string allowed;
  for (const auto& meaning : pharmacology::model_meanings()) {
    allowed += (allowed.empty() ? "" : ", ") + std::string(meaning.name);
  }
  SettingRow row{"pharmacology.model", "", "model fitted to each curve", allowed, false, {}, {}};
  row.get = [](const AnalysisSettings& s) { return SettingValue(pharmacology::model_name(s.model)); };
  row.set = [](AnalysisSettings& s, const SettingValue& value) {
    const auto* text = std::get_if<std::string>(&value);
    const auto model = text != nullptr ? pharmacology::model_named(*text) : std::nullopt;
    if (model) s.model = *model;
    return model.has_value();
  };
  return row;
}

using S = AnalysisSettings;

void add_signal_rows(std::vector<SettingRow>& rows) {
  rows.push_back(mains_row());
  rows.push_back(number(
      "conditioning.timing_low_pass_hz", "Hz",
      "zero-phase low-pass of the signal that activations are timed on (electrograms); 0: none",
      [](S & s) -> auto& { return s.activation.conditioning.timing_low_pass; }));
  rows.push_back(by_species(
      "conditioning.detection_high_pass_hz", "Hz",
      "zero-phase high-pass of the signal that beats are found on (electrograms)",
      [](S & s) -> auto& { return s.activation.conditioning.detection_high_pass; },
      [](const Traits& t) { return t.detection_high_pass.value(); }));
  rows.push_back(by_species(
      "conditioning.mechanical_low_pass_hz", "Hz", "zero-phase low-pass of tension and pressure",
      [](S & s) -> auto& { return s.activation.conditioning.mechanical_low_pass; },
      [](const Traits& t) {
        return number_text(t.tension_low_pass.value()) + " (tension), " +
               number_text(t.pressure_low_pass.value()) + " (pressure)";
      }));
  rows.push_back(number(
      "conditioning.longest_clip_s", "s", "a clipped run this long or longer cannot be read",
      [](S & s) -> auto& { return s.activation.conditioning.longest_clip; }));
  rows.push_back(number(
      "conditioning.clip_recovery_s", "s", "not readable after such a run either",
      [](S & s) -> auto& { return s.activation.conditioning.clip_recovery; }));
  rows.push_back(by_species(
      "activation.refractory_atrial_s", "s", "shortest spacing of two atrial activations",
      [](S & s) -> auto& { return s.activation.refractory_atrial; },
      [](const Traits& t) { return t.refractory_atrial.value(); }));
  rows.push_back(by_species(
      "activation.refractory_ventricular_s", "s",
      "shortest spacing of two ventricular activations or contractions",
      [](S & s) -> auto& { return s.activation.refractory_ventricular; },
      [](const Traits& t) { return t.refractory_ventricular.value(); }));
  rows.push_back(number(
      "activation.threshold_share", "", "of the way from noise to the local beats that a beat must reach",
      [](S & s) -> auto& { return s.activation.threshold_share; }));
  rows.push_back(number(
      "activation.noise_ratio", "", "times the noise that a beat must exceed",
      [](S & s) -> auto& { return s.activation.noise_ratio; }));
  rows.push_back(number(
      "activation.near_field_share", "",
      "slope over that of the local beats from which a deflection is always an activation",
      [](S & s) -> auto& { return s.activation.near_field_share; }));
  rows.push_back(number(
      "activation.far_field_share", "",
      "slope below which a deflection at the other chamber's beat is its far field",
      [](S & s) -> auto& { return s.activation.far_field_share; }));
  rows.push_back(number(
      "activation.twitch_share", "", "of the local steepest rises that a contraction must reach",
      [](S & s) -> auto& { return s.activation.twitch_share; }));
}

void add_rhythm_rows(std::vector<SettingRow>& rows) {
  rows.push_back(number(
      "rhythm.first_degree_ratio", "", "conducted delay over that of the reference period",
      [](S & s) -> auto& { return s.rhythm.first_degree_ratio; }));
  rows.push_back(number(
      "rhythm.reference_period_s", "s", "reference period from the start of the recording",
      [](S & s) -> auto& { return s.rhythm.reference_period; }));
  rows.push_back(number(
      "rhythm.pause_ratio", "", "interval over the running cycle that is a pause",
      [](S & s) -> auto& { return s.rhythm.pause_ratio; }));
  rows.push_back(number(
      "rhythm.arrest_shortest_s", "s", "silence of the leading chamber that is arrest, at the least",
      [](S & s) -> auto& { return s.rhythm.arrest_shortest; }));
  rows.push_back(number(
      "rhythm.arrest_cycles", "", "... and that many running cycles",
      [](S & s) -> auto& { return s.rhythm.arrest_cycles; }));
  rows.push_back(number(
      "rhythm.complete_block_beats", "", "atrial beats unconducted in a row that are complete block",
      [](S & s) -> auto& { return s.rhythm.complete_block_beats; }));
  rows.push_back(number(
      "rhythm.complete_block_s", "s", "... or that long",
      [](S & s) -> auto& { return s.rhythm.complete_block_time; }));
  rows.push_back(number(
      "rhythm.running_beats", "", "intervals whose median is the running cycle",
      [](S & s) -> auto& { return s.rhythm.running_beats; }));
  rows.push_back(number(
      "rhythm.longest_group", "", "conducted beats that one group before a dropped beat can hold",
      [](S & s) -> auto& { return s.rhythm.longest_group; }));
  rows.push_back(number(
      "rhythm.timing_tolerance_s", "s", "two delays that differ by less count as equal",
      [](S & s) -> auto& { return s.rhythm.timing_tolerance; }));
  rows.push_back(number(
      "intervals.premature_ratio", "", "interval below this share of the running cycle is flagged premature",
      [](S & s) -> auto& { return s.intervals.premature_ratio; }));
  rows.push_back(number(
      "intervals.low_confidence", "", "a mark below this is flagged",
      [](S & s) -> auto& { return s.intervals.low_confidence; }));
}

void add_response_rows(std::vector<SettingRow>& rows) {
  rows.push_back(number(
      "response.window_s", "s", "window at the end of a step, at least",
      [](S & s) -> auto& { return s.response.window; }));
  rows.push_back(number(
      "response.window_beats", "", "... or this many beats, whichever is longer",
      [](S & s) -> auto& { return s.response.window_beats; }));
  rows.push_back(number(
      "response.max_share", "", "of the step that the window may take",
      [](S & s) -> auto& { return s.response.max_share; }));
  rows.push_back(number(
      "response.steady_tolerance", "", "change between windows that counts as none, as a share of the value",
      [](S & s) -> auto& { return s.response.steady_tolerance; }));
  rows.push_back(number(
      "response.steady_range_share", "", "... as a share of the curve's range so far",
      [](S & s) -> auto& { return s.response.steady_range_share; }));
  rows.push_back(number(
      "response.steady_standard_errors", "", "... in standard errors of the difference",
      [](S & s) -> auto& { return s.response.steady_standard_errors; }));
  rows.push_back(number(
      "response.most_lost", "", "share of a window that may be unreadable or excluded",
      [](S & s) -> auto& { return s.response.most_lost; }));
  rows.push_back(model_row());
  rows.push_back(number(
      "pharmacology.response_level", "", "level of the F test against no response; 0 switches it off",
      [](S & s) -> auto& { return s.fit.response_level; }));
  rows.push_back(number(
      "pharmacology.lack_of_fit_level", "", "level of the test for lack of fit (repeated concentrations)",
      [](S & s) -> auto& { return s.fit.lack_of_fit_level; }));
}

} // namespace

std::span<const SettingRow> setting_rows() {
  static const std::vector<SettingRow> rows = [] {
    std::vector<SettingRow> all;
    add_signal_rows(all);
    add_rhythm_rows(all);
    add_response_rows(all);
    return all;
  }();
  return rows;
}

} // namespace chronodrome::session
