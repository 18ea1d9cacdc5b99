// Chronodrome, GPL-3.0-or-later.
#include "simulation/simulate.h"

#include <catch2/catch.hpp>
#include <chrono>
#include <cmath>
#include <filesystem>

#include "intake/annotation_protocol.h"
#include "intake/json_tree.h"
#include "intake/protocol_reader.h"
#include "intake/recording_reader.h"
#include "intake/session_reader.h"
#include "intake/text_file.h"
#include "scenarios.h"
#include "simulation/bath_effects.h"
#include "simulation/vary.h"

using namespace chronodrome;
using namespace chronodrome::test_simulation;
using Catch::Matchers::WithinAbs;
namespace fs = std::filesystem;

namespace {

Scenario noisy_heart(double seconds) {
  Scenario scenario = quiet_heart(300, seconds);
  scenario.sinus.jitter_sd = milliseconds(1);
  scenario.fluctuation = {BeatsPerMinute(2), Seconds(8), milliseconds(0.8), Seconds(8), 0.02, Seconds(8)};
  for (ChannelPlan& channel : scenario.channels) {
    channel.disturbance.white_sd = 0.03;
    channel.disturbance.pink_sd = 0.02;
    channel.disturbance.mains_amplitude = 0.05;
    channel.disturbance.wander_amplitude = 0.1;
    channel.amplitude_sd_ratio = 0.02;
    channel.range = {-5.0, 5.0};
  }
  scenario.agents = {{"acetylcholine", {effect_on(EffectTarget::rate, 0.6, 6.5, 1.0)}, {}}};
  scenario.protocol = {addition(20, "acetylcholine", 1e-7)};
  return scenario;
}

std::string fresh_folder(const std::string& name) {
  const fs::path folder = fs::path(CHRONODROME_BUILD_DIR) / "test-simulation" / name;
  fs::remove_all(folder);
  return folder.string();
}

recording::Recording read_back(const std::string& path) {
  intake::ReadSettings settings;
  settings.use_cache = false;
  auto recording = intake::read_recording(path, settings);
  if (!recording) FAIL(describe(recording.error()));
  return *std::move(recording);
}

std::vector<double> all_samples(const recording::Signal& signal) {
  std::vector<double> samples(signal.samples->size());
  signal.samples->read(0, samples);
  return samples;
}

} // namespace

TEST_CASE("a seed gives the same recording and truth bit for bit", "[simulation]") {
  const Scenario scenario = noisy_heart(60);
  const Simulated first = simulate(scenario).value(), second = simulate(scenario).value();
  for (std::size_t c = 0; c < 2; ++c)
    CHECK(first.recording.signals[c].samples == second.recording.signals[c].samples);
  CHECK(truth_text(first) == truth_text(second));
}

TEST_CASE("another seed gives another recording", "[simulation]") {
  Scenario scenario = noisy_heart(60);
  const Simulated first = simulate(scenario).value();
  scenario.seed += 1;
  const Simulated second = simulate(scenario).value();
  CHECK(first.recording.signals[0].samples != second.recording.signals[0].samples);
  CHECK(first.truth.activations[0].times != second.truth.activations[0].times);
}

TEST_CASE("another channel or more noise does not change the beats", "[simulation]") {
  Scenario scenario = noisy_heart(60);
  const Simulated first = simulate(scenario).value();
  scenario.channels.push_back(electrode("LA", recording::Role::atrial, recording::Lead::bipolar));
  scenario.channels[0].disturbance.white_sd = 0.2;
  const Simulated second = simulate(scenario).value();
  CHECK(first.truth.activations[0].times == second.truth.activations[0].times);
  CHECK(first.recording.signals[1].samples == second.recording.signals[1].samples);
}

TEST_CASE("the mean rate over a plateau scatters about its Hill value", "[simulation]") {
  // 40 plateaus of 30 s; fluctuation SD 2 bpm, tau 8 s: SD of a window mean about 2 * 0.63 = 1.3 bpm.
  double sum = 0, squares = 0;
  for (std::uint64_t seed = 1; seed <= 40; ++seed) {
    Scenario scenario = noisy_heart(120);
    scenario.seed = seed;
    for (ChannelPlan& channel : scenario.channels)
      channel.rate = Hertz(50); // only the beats matter here
    const Simulated made = simulate(scenario).value();
    double first = -1, last = -1, count = -1;
    for (const Seconds time : made.truth.activations[0].times) {
      if (time < Seconds(90)) continue;
      if (first < 0) first = time.value();
      last = time.value();
      count += 1;
    }
    const double rate = 60 * count / (last - first);
    const double error = rate - 200 * (1 - 0.4 * hill_fraction(1e-7, 6.5, 1.0));
    sum += error, squares += error * error;
  }
  CHECK_THAT(sum / 40, WithinAbs(0.0, 4 * 1.3 / std::sqrt(40.0)));
  CHECK_THAT(std::sqrt(squares / 40), WithinAbs(1.27, 0.5)); // SE of an SD from 40 values: 11 %
}

TEST_CASE("an EDF+ file carries samples and drug log back through the readers", "[simulation][files]") {
  Scenario scenario = noisy_heart(60);
  scenario.name = "edf-heart";
  scenario.file.kind = FileKind::edf_plus;
  scenario.file.protocol_in_annotations = true;
  scenario.file.clock_start = "2026-03-04T09:30:00";
  scenario.channels[1].rate = Hertz(250);
  scenario.channels[1].bits = 12;
  LoggedEvent washout;
  washout.time = Seconds(50.25);
  washout.kind = protocol::EventKind::washout;
  scenario.protocol.push_back(washout);
  const Simulated made = simulate(scenario).value();
  const std::string folder = fresh_folder("edf");
  REQUIRE(write_simulated(made, folder).ok());
  CHECK_FALSE(fs::exists(fs::path(folder) / "protocol.csv"));
  const auto recording = read_back(folder + "/recording.edf");
  REQUIRE(recording.signals.size() == 2);
  for (std::size_t c = 0; c < 2; ++c) {
    const auto samples = all_samples(recording.signals[c]);
    const auto& written = made.recording.signals[c].samples;
    REQUIRE(samples.size() == written.size());
    // The simulator quantises as the file does; what is left is the rounding of scale and offset.
    for (std::size_t i = 0; i < samples.size(); ++i)
      REQUIRE_THAT(samples[i], WithinAbs(written[i], 1e-9));
  }
  const auto log = intake::protocol_from_annotations(recording.annotations, "recording.edf");
  CHECK(log.warnings.empty());
  REQUIRE(log.events.size() == 2);
  CHECK(log.events[0].kind == protocol::EventKind::addition);
  CHECK(log.events[0].agent == "acetylcholine");
  CHECK(log.events[0].concentration == std::optional(Molar(1e-7)));
  CHECK(log.events[0].time == Seconds(20));
  CHECK(log.events[1].kind == protocol::EventKind::washout);
  CHECK_THAT(log.events[1].time.value(), WithinAbs(50.25, 1e-9));
  const auto session = intake::read_session(folder + "/edf-heart.session.json");
  REQUIRE(session.ok());
  CHECK(session->warnings.empty());
  CHECK_FALSE(session->protocol_file.has_value());
  CHECK(session->channels.at(1).role == "ventricular");
  CHECK(session->pathways.at(0).label == "AV");
}

TEST_CASE("a table with decimal commas comes back through the readers", "[simulation][files]") {
  Scenario scenario = noisy_heart(30);
  scenario.name = "table";
  scenario.preparation.species = "rat";
  scenario.file.csv.delimiter = ';';
  scenario.file.csv.decimal = ',';
  scenario.file.csv.value_decimals = 3;
  scenario.file.csv.header_lines = {"a laboratory;bench 2", "rate;1000"};
  for (ChannelPlan& channel : scenario.channels)
    channel.range.reset();
  const Simulated made = simulate(scenario).value();
  const std::string folder = fresh_folder("csv");
  REQUIRE(write_simulated(made, folder).ok());
  const auto session = intake::read_session(folder + "/table.session.json");
  REQUIRE(session.ok());
  CHECK(session->warnings.empty());
  CHECK(session->preparation.species == "rat");
  CHECK(session->protocol_file == std::optional<std::string>("protocol.csv"));
  CHECK(session->measures == std::vector<std::string>{"rate:RA", "rate:RV", "delay:AV"});
  intake::ReadSettings settings;
  settings.use_cache = false;
  settings.rate = Hertz(session->csv.rate_hz.value());
  settings.delimiter = session->csv.delimiter;
  settings.decimal = session->csv.decimal;
  settings.time_column = session->csv.time_column;
  const auto recording = intake::read_recording(folder + "/recording.csv", settings);
  REQUIRE(recording.ok());
  for (std::size_t c = 0; c < 2; ++c) {
    const recording::Signal* signal = recording->find(session->channels[c].source);
    REQUIRE(signal != nullptr);
    const auto samples = all_samples(*signal);
    REQUIRE(samples.size() == 30000);
    for (std::size_t i = 0; i < samples.size(); ++i)
      REQUIRE_THAT(samples[i], WithinAbs(made.recording.signals[c].samples[i], 0.000501)); // three decimals
  }
  const auto log = intake::read_protocol(folder + "/protocol.csv");
  REQUIRE(log.ok());
  CHECK(log->warnings.empty());
  REQUIRE(log->events.size() == 1);
  CHECK(log->events[0].concentration == std::optional(Molar(1e-7)));
}

TEST_CASE("gaps are not written and keep their length", "[simulation][files]") {
  Scenario scenario = quiet_heart(300, 20);
  scenario.file.kind = FileKind::edf_plus;
  scenario.file.gaps = {{Seconds(5), Seconds(9)}};
  const std::string folder = fresh_folder("gaps");
  REQUIRE(write_simulated(simulate(scenario).value(), folder).ok());
  const auto recording = read_back(folder + "/recording.edf");
  const auto gaps = recording.signals[0].time_base.gaps();
  REQUIRE(gaps.size() == 1);
  CHECK(gaps[0].start == Seconds(5));
  CHECK(gaps[0].end == Seconds(9));
}

TEST_CASE("trains of stimuli stand in the drug log", "[simulation][files]") {
  Scenario scenario = quiet_heart(300, 20);
  PacingTrain train;
  train.start = Seconds(4);
  train.cycle = Seconds(0.2);
  train.beats = 11;
  scenario.pacing = {train};
  const auto log = intake::parse_protocol(protocol_text(scenario), "protocol.csv");
  REQUIRE(log.ok());
  REQUIRE(log->events.size() == 2);
  CHECK(log->events[0].kind == protocol::EventKind::pacing_start);
  CHECK_THAT(log->events[1].time.value(), WithinAbs(6.0, 1e-9));
}

TEST_CASE("the truth file is JSON that holds the truth", "[simulation][files]") {
  Scenario scenario = noisy_heart(60);
  scenario.name = "a \"quoted\" name";
  const Simulated made = simulate(scenario).value();
  const auto json = intake::parse_json(truth_text(made), "truth.json");
  REQUIRE(json.ok());
  CHECK(json->find("format")->value.text == "chronodrome-truth");
  CHECK(json->find("scenario")->value.text == scenario.name);
  const auto& times = json->find("activations")->value.find("RA")->value.items;
  REQUIRE(times.size() == made.truth.activations[0].times.size());
  for (std::size_t i = 0; i < times.size(); ++i)
    CHECK_THAT(times[i].number, WithinAbs(made.truth.activations[0].times[i].value(), 0.51e-9));
  CHECK(json->find("pathways")->value.items[0].find("rows")->value.items.size() ==
        made.truth.pathways[0].rows.size());
  CHECK(json->find("responses")->value.items.size() == made.truth.responses.size());
  CHECK(json->find("curves")->value.items[0].find("pec50")->value.number == 6.5);
}

TEST_CASE("a folder that cannot be made is an error", "[simulation][files]") {
  const auto done = write_simulated(simulate(quiet_heart(300, 2)).value(), "/proc/no/such");
  REQUIRE_FALSE(done.ok());
  CHECK(done.error().code == ErrorCode::cannot_write);
}

TEST_CASE("a varied preparation is fixed by its seed and stays within its ranges", "[simulation][vary]") {
  const Scenario base = noisy_heart(60);
  CHECK(truth_text(simulate(varied(base, 5)).value()) == truth_text(simulate(varied(base, 5)).value()));
  double least = 1e9, most = -1e9;
  for (std::uint64_t seed = 1; seed <= 200; ++seed) {
    const Scenario other = varied(base, seed);
    REQUIRE_FALSE(other.check().has_value());
    const Effect& effect = other.agents[0].effects[0];
    CHECK(std::abs(effect.pec50 - 6.5) <= 0.4);
    CHECK((effect.nh >= 0.8 && effect.nh <= 1.6));
    CHECK((effect.emax_ratio >= 1 - 0.4 * 1.2 - 1e-12 && effect.emax_ratio <= 1 - 0.4 * 0.8 + 1e-12));
    CHECK(std::abs(other.sinus.rate.value() / 200 - 1) <= 0.12 + 1e-12);
    CHECK(other.protocol.size() == base.protocol.size());
    least = std::min(least, effect.pec50);
    most = std::max(most, effect.pec50);
  }
  CHECK(most - least > 0.7); // 200 uniform draws over 0.8 miss the outer eighth with p = 1e-11
}

TEST_CASE("twenty minutes of two channels at 1 kHz take well under a second", "[.long][simulation]") {
  Scenario scenario = noisy_heart(1200);
  const auto start = std::chrono::steady_clock::now();
  const Simulated made = simulate(scenario).value();
  const std::chrono::duration<double> took = std::chrono::steady_clock::now() - start;
  CHECK(made.recording.signals[0].samples.size() == 1'200'000);
  WARN("took " << took.count() << " s");
  CHECK(took.count() < 1.0);
}
