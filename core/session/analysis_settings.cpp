// Chronodrome, GPL-3.0-or-later.
#include "session/analysis_settings.h"

#include <algorithm>

#include "base/number_text.h"
#include "document/text_place.h"

namespace chronodrome::session {
namespace {

using document::SettingValue;

std::string text_of(const SettingValue& value) {
  if (const auto* number = std::get_if<double>(&value)) return number_text(*number);
  if (const auto* truth = std::get_if<bool>(&value)) return *truth ? "true" : "false";
  return std::get<std::string>(value);
}

std::optional<Error> first_fault(const AnalysisSettings& settings) {
  if (auto error = settings.activation.check()) return error;
  if (auto error = settings.conduction.check()) return error;
  if (auto error = settings.rhythm.check()) return error;
  if (auto error = settings.intervals.check()) return error;
  if (auto error = settings.response.check()) return error;
  if (const Done checked = settings.fit.check(); !checked) return checked.error();
  return std::nullopt;
}

} // namespace

Result<ChosenSettings> settings_of(const document::SessionFile& session) {
  ChosenSettings chosen;
  chosen.settings.activation.conditioning.species = session.preparation.species;
  chosen.settings.conduction.species = session.preparation.species;
  const AnalysisSettings defaults = chosen.settings;
  for (const auto& entry : session.analysis) {
    const std::string& key = entry.first;
    const auto rows = setting_rows();
    const auto row =
        std::find_if(rows.begin(), rows.end(), [&](const SettingRow& r) { return r.key == key; });
    if (row == rows.end()) {
      chosen.warnings.push_back({session.path, document::place_of(session.as_read, key),
                                 "analysis key \"" + key + "\" is not known and changes nothing",
                                 "resources/formats/settings.md lists the keys"});
      continue;
    }
    if (!row->set(chosen.settings, entry.second)) {
      const std::string expected =
          row->allowed.empty() ? "a number" + (row->unit.empty() ? "" : " in " + row->unit) : row->allowed;
      return Error{ErrorCode::bad_value, session.path, document::place_of(session.as_read, key),
                   "analysis key \"" + key + "\" is \"" + text_of(entry.second) + "\", expected " + expected,
                   "correct it or leave it out"};
    }
    if (row->get(chosen.settings) != row->get(defaults)) chosen.changed.push_back(key);
  }
  // The rows that a window and the rhythm judge block and silence by are one and the same rule.
  chosen.settings.intervals.pause_ratio = chosen.settings.rhythm.pause_ratio;
  chosen.settings.intervals.running_beats = chosen.settings.rhythm.running_beats;
  chosen.settings.response.silence = chosen.settings.rhythm.arrest_shortest;
  chosen.settings.response.silence_cycles = chosen.settings.rhythm.arrest_cycles;
  chosen.settings.response.complete_block_beats = chosen.settings.rhythm.complete_block_beats;
  chosen.settings.response.complete_block_time = chosen.settings.rhythm.complete_block_time;
  if (auto error = first_fault(chosen.settings)) {
    error->file = session.path;
    // A range error begins with the key.
    error->place = document::place_of(session.as_read, error->what.substr(0, error->what.find(' ')));
    return *error;
  }
  return chosen;
}

std::map<std::string, SettingValue> in_effect(const AnalysisSettings& settings) {
  std::map<std::string, SettingValue> values;
  for (const auto& row : setting_rows())
    values[row.key] = row.get(settings);
  return values;
}

std::string settings_page() {
  std::string page =
      "# Settings\n\n"
      "Keys of `analysis` in a session file. A session stores only what differs from the defaults; "
      "`summary.json` lists\n"
      "all in effect. This page is made from the program's own table (a test compares them).\n\n"
      "| key | unit | default | meaning |\n| --- | --- | --- | --- |\n";
  const AnalysisSettings defaults;
  for (const auto& row : setting_rows()) {
    std::string meaning = row.meaning;
    if (!row.allowed.empty()) meaning += " (" + row.allowed + ")";
    page += "| `" + row.key + "` | " + row.unit + " | " +
            (row.follows_species ? std::string("by species") : text_of(row.get(defaults))) + " | " + meaning +
            " |\n";
  }
  return page;
}

} // namespace chronodrome::session
