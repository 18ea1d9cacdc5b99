// Chronodrome, GPL-3.0-or-later.
#include <catch2/catch.hpp>
#include <cstdlib>
#include <fstream>
#include <iterator>
#include <set>

#include "session/analysis_settings.h"

using namespace chronodrome;
using document::SettingValue;

namespace {

document::SessionFile with(std::map<std::string, SettingValue> analysis) {
  document::SessionFile session;
  session.path = "a.session.json";
  session.preparation.species = "rabbit";
  session.analysis = std::move(analysis);
  return session;
}

} // namespace

TEST_CASE("an empty analysis gives the defaults for the species", "[session]") {
  const auto chosen = session::settings_of(with({}));
  REQUIRE(chosen.ok());
  CHECK(chosen->changed.empty());
  CHECK(chosen->warnings.empty());
  CHECK(chosen->settings.activation.conditioning.species == "rabbit");
  CHECK(chosen->settings.conduction.species == "rabbit");
}

TEST_CASE("every setting can be read and set, and no other changes with it", "[session]") {
  const session::AnalysisSettings defaults;
  const auto rows = session::setting_rows();
  CHECK(rows.size() >= 30);
  std::set<std::string> keys;
  for (const auto& row : rows) {
    CAPTURE(row.key);
    CHECK(keys.insert(row.key).second);
    CHECK_FALSE(row.meaning.empty());
    session::AnalysisSettings settings;
    SettingValue other = 17.0;
    if (row.key == "conditioning.mains") other = std::string("off");
    if (row.key == "pharmacology.model") other = std::string("constant");
    REQUIRE(row.set(settings, other));
    CHECK(row.get(settings) == other);
    CHECK_FALSE(row.set(settings, SettingValue(std::string("nonsense"))));
    for (const auto& rest : rows) {
      CAPTURE(rest.key);
      CHECK((rest.key == row.key || rest.get(settings) == rest.get(defaults)));
    }
  }
}

TEST_CASE("what follows the species is given as the species' value", "[session]") {
  const auto chosen = session::settings_of(with({}));
  REQUIRE(chosen.ok());
  const auto values = session::in_effect(chosen->settings);
  // Rabbit: 60 and 80 ms.
  CHECK(values.at("activation.refractory_atrial_s") == SettingValue(0.06));
  CHECK(values.at("activation.refractory_ventricular_s") == SettingValue(0.08));
}

TEST_CASE("a changed setting is used and listed", "[session]") {
  const auto chosen = session::settings_of(with({{"response.window_s", 45.0},
                                                 {"conditioning.mains", 60.0},
                                                 {"activation.refractory_atrial_s", 0.05},
                                                 {"pharmacology.model", std::string("hill_unit_slope")},
                                                 {"rhythm.pause_ratio", 1.7}}));
  REQUIRE(chosen.ok());
  CHECK(chosen->settings.response.window == Seconds(45.0));
  CHECK(chosen->settings.activation.conditioning.mains.nominal == conditioning::MainsChoice::sixty);
  CHECK(chosen->settings.activation.refractory_atrial == Seconds(0.05));
  CHECK(chosen->settings.model == pharmacology::Model::hill_unit_slope);
  // What equals the default is not a change.
  CHECK(chosen->changed == std::vector<std::string>{"activation.refractory_atrial_s", "conditioning.mains",
                                                    "pharmacology.model", "response.window_s"});
}

TEST_CASE("an unknown key is a warning that names it", "[session]") {
  const auto chosen = session::settings_of(with({{"response.windw_s", 45.0}}));
  REQUIRE(chosen.ok());
  REQUIRE(chosen->warnings.size() == 1);
  CHECK(chosen->warnings[0].what.find("response.windw_s") != std::string::npos);
}

TEST_CASE("a value of the wrong kind or out of range is an error that names the key", "[session]") {
  const std::string key =
      GENERATE("response.window_s", "pharmacology.model", "conditioning.mains", "rhythm.running_beats");
  const auto wrong_kind = session::settings_of(with({{key, std::string("many")}}));
  REQUIRE_FALSE(wrong_kind.ok());
  CHECK(wrong_kind.error().what.find(key) != std::string::npos);
  const auto out_of_range = session::settings_of(with({{"rhythm.pause_ratio", 0.5}}));
  REQUIRE_FALSE(out_of_range.ok());
  CHECK(out_of_range.error().what.find("pause_ratio") != std::string::npos);
  CHECK(out_of_range.error().file == "a.session.json");
}

TEST_CASE("the page of settings is the program's own table", "[session]") {
  const std::string path = std::string(CHRONODROME_SOURCE_DIR) + "/resources/formats/settings.md";
  // CHRONODROME_WRITE_PAGES=1 writes the page anew after a setting was added.
  if (std::getenv("CHRONODROME_WRITE_PAGES") != nullptr) std::ofstream(path) << session::settings_page();
  std::ifstream file(path);
  const std::string page{std::istreambuf_iterator<char>(file), {}};
  CHECK(page == session::settings_page());
}
