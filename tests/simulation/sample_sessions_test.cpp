// Chronodrome, GPL-3.0-or-later.
// The sample sessions are what the simulator makes of their scenarios, and read without a warning.
#include <algorithm>
#include <catch2/catch.hpp>
#include <cmath>
#include <filesystem>

#include "intake/recording_reader.h"
#include "intake/session_reader.h"
#include "intake/text_file.h"
#include "simulation/simulate.h"

using namespace chronodrome;
using namespace chronodrome::simulation;
using Catch::Matchers::Contains;
using Catch::Matchers::WithinAbs;
namespace fs = std::filesystem;

namespace {

struct Sample {
  std::string name, recording;
  double table_quantum; ///< of a CSV; 0: the converter's
};

const std::vector<Sample> kSamples = {{"atrial-strip", "recording.csv", 0.01},
                                      {"guinea-pig-heart", "recording.edf", 0.0},
                                      {"rabbit-heart", "recording.edf", 0.0}};

fs::path folder_of(const Sample& sample) {
  return fs::path(CHRONODROME_SOURCE_DIR) / "sample-sessions" / sample.name;
}

std::string text_of(const fs::path& path) {
  const auto text = intake::read_text_file(path.string(), std::size_t{16} << 20U);
  REQUIRE(text.ok());
  return *text;
}

Simulated made_of(const Sample& sample) {
  const auto scenario = read_scenario((folder_of(sample) / "scenario.json").string());
  if (!scenario) FAIL(describe(scenario.error()));
  CHECK(scenario->warnings.empty());
  return simulate(*scenario).value();
}

recording::Recording read_sample(const Sample& sample) {
  const auto session = intake::read_session((folder_of(sample) / (sample.name + ".session.json")).string());
  if (!session) FAIL(describe(session.error()));
  CHECK(session->warnings.empty());
  REQUIRE(session->files.size() == 1);
  CHECK(session->files[0].path == sample.recording);
  intake::ReadSettings settings;
  settings.use_cache = false;
  if (session->csv.rate_hz) settings.rate = Hertz(*session->csv.rate_hz);
  settings.delimiter = session->csv.delimiter;
  settings.decimal = session->csv.decimal;
  settings.time_column = session->csv.time_column;
  auto recording = intake::read_recording((folder_of(sample) / sample.recording).string(), settings);
  if (!recording) FAIL(describe(recording.error()));
  for (const auto& channel : session->channels)
    CHECK(recording->find(channel.source) != nullptr);
  return *std::move(recording);
}

} // namespace

TEST_CASE("each sample session is what its scenario makes", "[simulation][samples]") {
  const Sample sample = GENERATE(from_range(kSamples));
  CAPTURE(sample.name);
  const Simulated made = made_of(sample);
  const auto recording = read_sample(sample);
  REQUIRE(recording.signals.size() == made.recording.signals.size());
  for (std::size_t c = 0; c < recording.signals.size(); ++c) {
    const auto& written = made.recording.signals[c];
    std::vector<double> samples(recording.signals[c].samples->size());
    recording.signals[c].samples->read(0, samples);
    REQUIRE(samples.size() == written.samples.size());
    const bool is_table = sample.table_quantum > 0.0;
    const double quantum = is_table ? sample.table_quantum
                                    : (written.physical_max - written.physical_min) /
                                          (written.digital_max - written.digital_min);
    // A mathematics library that rounds otherwise may move a value by one quantum; a table also rounds.
    const double allowed = is_table ? 1.5 * quantum : 1.001 * quantum;
    std::size_t moved = 0, wrong = 0;
    for (std::size_t i = 0; i < samples.size(); ++i) {
      const double difference = std::abs(samples[i] - written.samples[i]);
      if (difference > allowed) ++wrong;
      if (difference > (is_table ? 0.5001 : 0.001) * quantum) ++moved;
    }
    CHECK(wrong == 0);
    CHECK(moved <= samples.size() / 1000);
  }
}

TEST_CASE("the texts of each sample session are those that its scenario makes", "[simulation][samples]") {
  const Sample sample = GENERATE(from_range(kSamples));
  CAPTURE(sample.name);
  const Simulated made = made_of(sample);
  CHECK(text_of(folder_of(sample) / (sample.name + ".session.json")) == session_text(made.scenario));
  if (made.scenario.file.protocol_in_annotations)
    CHECK_FALSE(fs::exists(folder_of(sample) / "protocol.csv"));
  else
    CHECK(text_of(folder_of(sample) / "protocol.csv") == protocol_text(made.scenario));
  // Times have nine decimals; another mathematics library may move the last of some.
  const std::string truth = text_of(folder_of(sample) / "truth.json"), again = truth_text(made);
  CHECK(std::abs(static_cast<double>(truth.size()) - static_cast<double>(again.size())) <
        0.01 * static_cast<double>(truth.size()));
  CHECK(std::count(truth.begin(), truth.end(), ',') == std::count(again.begin(), again.end(), ','));
}

TEST_CASE("each sample session is small and says that it is invented", "[simulation][samples]") {
  const Sample sample = GENERATE(from_range(kSamples));
  CAPTURE(sample.name);
  std::uintmax_t bytes = 0;
  for (const auto& entry : fs::directory_iterator(folder_of(sample)))
    bytes += entry.file_size();
  CHECK(bytes < 8'000'000);
  CHECK_THAT(text_of(folder_of(sample) / "README.md"), Contains("INVENTED") && Contains("scenario.json"));
  CHECK_THAT(text_of(folder_of(sample) / (sample.name + ".session.json")), Contains("INVENTED"));
}

TEST_CASE("the sample curves span both plateaus", "[simulation][samples]") {
  const Sample sample = GENERATE(from_range(kSamples));
  CAPTURE(sample.name);
  const Truth truth = made_of(sample).truth;
  REQUIRE_FALSE(truth.curves.empty());
  for (const TrueCurve& curve : truth.curves) {
    CAPTURE(curve.measure);
    double lowest = 1e9, highest = 0.0;
    for (const TrueResponse& row : truth.responses) {
      if (row.measure != curve.measure || row.concentration <= 0.0) continue;
      const double share =
          1.0 / (1.0 + std::pow(10.0, -curve.nh * (curve.pec50 + std::log10(row.concentration))));
      lowest = std::min(lowest, share);
      highest = std::max(highest, share);
    }
    CHECK(lowest < 0.05);
    CHECK(highest > 0.95);
  }
}

TEST_CASE("the guinea-pig sample runs from 1:1 through Wenckebach into 2:1", "[simulation][samples]") {
  const Truth truth = made_of(kSamples[1]).truth;
  std::vector<std::string> kinds;
  for (const TrueEpisode& episode : truth.rhythm) {
    if (episode.end - episode.start > Seconds(60)) kinds.push_back(episode.kind);
  }
  const std::vector<std::string> expected = {"regular", "first_degree_av_block", "wenckebach", "two_to_one"};
  CHECK(kinds == expected);
}
