// Chronodrome, GPL-3.0-or-later.
#include "simulation/scenario.h"

#include <catch2/catch.hpp>
#include <string>

#include "intake/text_file.h"
#include "scenarios.h"

using namespace chronodrome;
using namespace chronodrome::test_simulation;
using Catch::Matchers::Contains;

namespace {

/// A small good scenario with `extra` members in front.
std::string with(const std::string& extra) {
  return "{\"format\": \"chronodrome-scenario\", \"version\": 1,\n" + extra +
         "\"duration_s\": 10,\n\"channels\": [{\"label\": \"RA\", \"role\": \"atrial\", \"lead\": "
         "\"bipolar\", \"unit\": \"mV\"}]}";
}

Error error_of(const std::string& text) {
  const auto result = parse_scenario(text, "s.json");
  REQUIRE_FALSE(result.ok());
  return result.error();
}

} // namespace

TEST_CASE("a scenario is read with every value in its place", "[simulation][scenario]") {
  const auto scenario = parse_scenario(with(R"("name": "n", "seed": 77,
    "preparation": {"species": "rabbit", "temperature_c": 36.5, "arrival_delay_s": 4},
    "recording": {"kind": "csv", "csv": {"delimiter": ";", "decimal": ",", "time_column": "t", "header_lines": ["a"]}},
    "sinus": {"rate_bpm": 150, "jitter_sd_s": 0.001, "pauses": [{"time_s": 3, "length_s": 1}], "overdrive": {"strength": 0.2}},
    "av_node": {"delay_min_s": 0.05, "retrograde": {"recovery_tau_s": 0.069}, "fatigue": {"most_s": 0.012}},
    "refractory": {"atrial_s": 0.05}, "escape": {"junctional_s": 1.1},
    "fluctuation": {"rate_sd_bpm": 1.5, "force_tau_s": 7},
    "premature": [{"time_s": 5, "chamber": "atrial", "resets_sinus": false}],
    "pacing": [{"start_s": 6, "cycle_s": 0.3, "beats": 5, "premature_s": 0.2}],
    "agents": [{"name": "x", "effects": [{"target": "delay_span", "emax_ratio": 2, "pec50": 7.5, "nh": 0.9}],
                "antagonises": [{"agent": "y", "pkb": 8.5}]}],
    "protocol": [{"time_s": 1, "event": "addition", "agent": "x", "concentration": 3, "unit": "nM"}],
  )"),
                                       "s.json");
  REQUIRE(scenario.ok());
  CHECK(scenario->warnings.empty());
  CHECK(scenario->seed == 77);
  CHECK(scenario->preparation.temperature_c == 36.5);
  CHECK(scenario->preparation.arrival_delay == Seconds(4));
  CHECK(scenario->file.csv.delimiter == ';');
  CHECK(scenario->file.csv.time_column == std::optional<std::string>("t"));
  CHECK(scenario->sinus.rate == BeatsPerMinute(150));
  CHECK(scenario->sinus.pauses.at(0).length == Seconds(1));
  CHECK(scenario->sinus.overdrive.strength == 0.2);
  CHECK(scenario->node.delay_min == Seconds(0.05));
  CHECK(scenario->node.recovery_tau == Seconds(0.05)); // default
  CHECK(scenario->retrograde->recovery_tau == Seconds(0.069));
  CHECK(scenario->fatigue.most == Seconds(0.012));
  CHECK(scenario->escape.junctional == Seconds(1.1));
  CHECK(scenario->fluctuation.rate_sd == BeatsPerMinute(1.5));
  CHECK_FALSE(scenario->premature.at(0).resets_sinus);
  CHECK(scenario->pacing.at(0).premature == std::optional(Seconds(0.2)));
  CHECK(scenario->agents.at(0).effects.at(0).target == EffectTarget::delay_span);
  CHECK(scenario->agents.at(0).antagonisms.at(0).pkb == 8.5);
  CHECK(scenario->protocol.at(0).unit == "nM");
  CHECK(measures_of(*scenario) == std::vector<std::string>{"rate:RA"});
}

TEST_CASE("a channel is read with all that disturbs it", "[simulation][scenario]") {
  const auto scenario =
      parse_scenario(R"({"format": "chronodrome-scenario", "version": 1, "duration_s": 5, "channels": [
    {"label": "V", "source": "EG2", "role": "ventricular", "lead": "unipolar", "unit": "mV", "rate_hz": 2000, "amplitude": 3,
     "width_s": 0.003, "offset_s": 0.005, "far_fields": [{"from": "atrial", "ratio": 0.2, "width_s": 0.007}],
     "repolarisation": {"ratio": 0.1, "width_s": 0.03, "offset_s": 0.2}, "range": [-5, 5], "bits": 12, "position_mm": [1, 2],
     "noise": {"white_sd": 0.1, "mains_hz": 60, "mains_harmonics": [0.1, 0.2], "mains_steps": [{"time_s": 1, "value": 2}],
               "dropouts": [{"start_s": 2, "end_s": 3}], "artefact_amplitude": 4}}]})",
                     "s.json");
  REQUIRE(scenario.ok());
  const ChannelPlan& channel = scenario->channels.at(0);
  CHECK(channel.source == "EG2");
  CHECK(channel.lead == recording::Lead::unipolar);
  CHECK(channel.far_fields.at(0).wave.ratio == 0.2);
  CHECK(channel.far_fields.at(0).from == Chamber::atrial);
  CHECK(channel.repolarisation->offset == Seconds(0.2));
  CHECK_FALSE(channel.motion.has_value());
  CHECK(channel.range.value()[0] == -5.0);
  CHECK(channel.bits == 12);
  CHECK(channel.position_mm.value()[1] == 2.0);
  CHECK(channel.disturbance.mains == Hertz(60));
  CHECK(channel.disturbance.mains_harmonics.size() == 2);
  CHECK(channel.disturbance.mains_steps.at(0).value == 2.0);
  CHECK(channel.disturbance.dropouts.at(0).end == Seconds(3));
}

TEST_CASE("an unknown key is a warning that names it and its line", "[simulation][scenario]") {
  const auto scenario = parse_scenario(with("\"sinus\": {\n  \"rate\": 200},\n"), "s.json");
  REQUIRE(scenario.ok());
  REQUIRE(scenario->warnings.size() == 1);
  CHECK_THAT(scenario->warnings[0].what, Contains("sinus.rate"));
  CHECK(scenario->warnings[0].place.line == std::optional<std::size_t>(3));
}

TEST_CASE("a broken scenario is refused with its place", "[simulation][scenario]") {
  SECTION("no JSON") {
    const Error error = error_of("{\"format\": \"chronodrome-scenario\",\n  \"version\" 1}");
    CHECK(error.place.line == std::optional<std::size_t>(2));
  }
  SECTION("another format") {
    CHECK(error_of("{\"format\": \"chronodrome-session\", \"version\": 1}").code == ErrorCode::wrong_format);
    CHECK(error_of("[1, 2]").code == ErrorCode::wrong_format);
  }
  SECTION("a newer version") {
    CHECK(error_of("{\"format\": \"chronodrome-scenario\", \"version\": 2}").code ==
          ErrorCode::unsupported_version);
  }
  SECTION("no version") {
    CHECK(error_of("{\"format\": \"chronodrome-scenario\"}").code == ErrorCode::bad_value);
  }
  SECTION("no duration") {
    CHECK_THAT(error_of("{\"format\": \"chronodrome-scenario\", \"version\": 1}").what,
               Contains("duration_s"));
  }
  SECTION("a seed that is no whole number") {
    CHECK_THAT(error_of(with("\"seed\": 1.5,\n")).what, Contains("seed"));
    CHECK_THAT(error_of(with("\"seed\": -1,\n")).what, Contains("seed"));
  }
}

TEST_CASE("a value that may not stand there is refused with its line and column", "[simulation][scenario]") {
  const auto [text, key, line] = GENERATE(table<std::string, std::string, std::size_t>({
      {"\"sinus\": {\n\"rate_bpm\": \"fast\"},\n", "sinus.rate_bpm", 3},
      {"\"sinus\": {\n\"rate_bpm\": 0},\n", "sinus.rate_bpm", 3},
      {"\"sinus\": {\n\"rate_bpm\": 1e9},\n", "sinus.rate_bpm", 3},
      {"\"av_node\": {\n\n\"recovery_tau_s\": -1},\n", "av_node.recovery_tau_s", 4},
      {"\"agents\": [{\"name\": \"x\",\n\"effects\": [{\"target\": \"mood\"}]}],\n",
       "agents[0].effects[0].target", 3},
      {"\"agents\": [{\"name\": \"x\", \"effects\": [{\"target\": \"rate\",\n\"nh\": 0}]}],\n",
       "agents[0].effects[0].nh", 3},
      {"\"protocol\": [{\"time_s\": 5, \"event\": \"note\"},\n{\"time_s\": 4, \"event\": \"note\"}],\n",
       "protocol[1].time_s", 3},
      {"\"protocol\": [{\"time_s\": 1, \"event\": \"addition\", \"agent\": \"x\",\n\"concentration\": 1, "
       "\"unit\": \"mg\"}],\n",
       "protocol[0].unit", 3},
      {"\"protocol\": [{\"time_s\": 1,\n\"event\": \"pacing_start\"}],\n", "protocol[0].event", 3},
      {"\"pathways\": [{\"label\": \"AV\",\n\"from\": \"XX\", \"to\": \"RA\"}],\n", "pathways[0].from", 3},
      {"\"measures\": [\n\"delay:AV\"],\n", "measures[0]", 3},
      {"\"name\": \"a/b\",\n", "name", 2},
      {"\"recording\": {\"kind\": \"csv\",\n\"protocol\": \"annotations\"},\n", "recording.protocol", 3},
      {"\"pacing\": [{\"cycle_s\": 0.1,\n\"latency_s\": 0.2}],\n", "pacing[0].latency_s", 3},
  }));
  CAPTURE(text);
  const Error error = error_of(with(text));
  CHECK(error.code == ErrorCode::bad_value);
  CHECK(error.file == "s.json");
  CHECK_THAT(error.what, Contains(key));
  CHECK(error.place.line == std::optional(line));
  CHECK_FALSE(error.remedy.empty());
}

TEST_CASE("a scenario that would fill the memory is refused", "[simulation][scenario]") {
  Scenario scenario = quiet_heart(300, 10);
  scenario.duration = Seconds(500000);
  for (ChannelPlan& channel : scenario.channels)
    channel.rate = Hertz(10000);
  REQUIRE(scenario.check().has_value());
  CHECK_THAT(scenario.check()->what, Contains("4e+08") || Contains("4e8"));
}

TEST_CASE("contradictions are refused before anything is made", "[simulation][scenario]") {
  Scenario scenario = quiet_heart(300, 10);
  CHECK_FALSE(scenario.check().has_value());
  SECTION("two channels with one label") {
    scenario.channels[1].label = "RA";
  }
  SECTION("an electrogram without a lead") {
    scenario.channels[1].lead = recording::Lead::none;
  }
  SECTION("rails upside down") {
    scenario.channels[1].range = {5.0, -5.0};
  }
  SECTION("two rates in a table") {
    scenario.channels[1].rate = Hertz(500);
  }
  SECTION("a gap in a plain edf file") {
    scenario.file.kind = FileKind::edf;
    scenario.file.gaps = {{Seconds(1), Seconds(2)}};
  }
  SECTION("a gap in a table without times") {
    scenario.file.csv.time_column.reset();
    scenario.file.gaps = {{Seconds(1), Seconds(2)}};
  }
  SECTION("delay and delay_min acted on at once") {
    scenario.agents = {
        {"x", {effect_on(EffectTarget::delay, 1.5, 6, 1), effect_on(EffectTarget::delay_min, 2, 6, 1)}, {}}};
  }
  SECTION("a delay acted on without 1:1 conduction") {
    scenario = quiet_heart(150, 10);
    scenario.agents = {{"x", {effect_on(EffectTarget::delay, 1.5, 6, 1)}, {}}};
  }
  SECTION("one effect twice") {
    scenario.agents = {
        {"x", {effect_on(EffectTarget::rate, 1.5, 6, 1), effect_on(EffectTarget::rate, 2, 6, 1)}, {}}};
  }
  SECTION("no channel") {
    scenario.channels.clear(), scenario.pathways.clear();
  }
  const auto error = scenario.check();
  REQUIRE(error.has_value());
  CHECK(error->code == ErrorCode::bad_usage);
}

TEST_CASE("the example of the format page is a scenario", "[simulation][scenario]") {
  const auto page = intake::read_text_file(
      std::string(CHRONODROME_SOURCE_DIR) + "/resources/formats/scenario.md", std::size_t{1} << 20U);
  REQUIRE(page.ok());
  const std::size_t start = page->find("```json\n") + 8, end = page->find("```", start);
  const auto scenario = parse_scenario(page->substr(start, end - start), "scenario.md");
  if (!scenario) FAIL(describe(scenario.error()));
  CHECK(scenario->warnings.empty());
  CHECK(scenario->file.protocol_in_annotations);
  // Its table of defaults, where a default is no zero.
  const Scenario defaults;
  CHECK(defaults.sinus.rate == BeatsPerMinute(200));
  CHECK(defaults.sinus.slowest == BeatsPerMinute(6));
  CHECK(defaults.his_to_ventricle == Seconds(0.01));
  CHECK(defaults.atrial_refractory == Seconds(0.06));
  CHECK(defaults.ventricular_refractory == Seconds(0.08));
  CHECK(Effect{}.washout_tau == Seconds(20));
  CHECK(ChannelPlan{}.fall == Seconds(0.09));
  CHECK(PacingTrain{}.latency == Seconds(0.009));
}

TEST_CASE("a scenario file that is not there is an error", "[simulation][scenario]") {
  CHECK(read_scenario("/nowhere/scenario.json").error().code == ErrorCode::file_missing);
}
