// Chronodrome, GPL-3.0-or-later.
// An analysis that keeps what the signals said gives what a fresh one gives, follows its own progress and
// stops.
#include <atomic>
#include <catch2/catch.hpp>
#include <random>

#include "results/tables.h"
#include "session/analysis.h"
#include "session/channels.h"
#include "session/detection.h"

using namespace chronodrome;
using document::Correction;
using document::CorrectionKind;

namespace {

session::SessionInputs sample(const std::string& name) {
  session::LoadOptions options;
  options.use_cache = false;
  const std::string path =
      std::string(CHRONODROME_SOURCE_DIR) + "/sample-sessions/" + name + "/" + name + ".session.json";
  auto inputs = session::load_session(path, options);
  if (!inputs) FAIL(describe(inputs.error()));
  return *inputs;
}

std::vector<results::OutputFile> files_of(const Result<session::SessionResult>& result) {
  if (!result) FAIL(describe(result.error()));
  return results::result_files(*result, "x");
}

void check_equal(const std::vector<results::OutputFile>& some,
                 const std::vector<results::OutputFile>& other) {
  REQUIRE(some.size() == other.size());
  for (std::size_t i = 0; i < some.size(); ++i) {
    CAPTURE(some[i].name);
    CHECK(some[i].name == other[i].name);
    CHECK((some[i].content == other[i].content)); // not shown: these are megabytes
  }
}

/// Corrections at and beside marks of the session, some of which meet nothing.
std::vector<Correction> made_up(const session::SessionResult& result, unsigned seed) {
  std::mt19937 random(seed);
  const auto below = [&](std::size_t n) { return random() % n; };
  constexpr CorrectionKind kKinds[] = {CorrectionKind::add, CorrectionKind::remove, CorrectionKind::move,
                                       CorrectionKind::exclude, CorrectionKind::include};
  std::vector<Correction> review;
  for (int seq = 1; seq <= 12; ++seq) {
    const auto& channel = result.activations[below(result.activations.size())];
    const auto& mark = channel.marks[below(channel.marks.size())];
    Correction correction;
    correction.seq = seq;
    correction.what = kKinds[below(5)];
    correction.channel = channel.channel;
    const double off = correction.what == CorrectionKind::add ? 0.06 : 0.002;
    correction.time = mark.time + Seconds(off);
    if (correction.what == CorrectionKind::move) correction.to_time = mark.time + Seconds(0.02);
    const bool stretch =
        correction.what == CorrectionKind::exclude || correction.what == CorrectionKind::include;
    if (stretch) correction.to_time = mark.time + Seconds(static_cast<double>(1 + below(60)));
    review.push_back(correction);
  }
  return review;
}

/// Counts what an analysis tells, and stops it at a share of the work.
struct Follower {
  std::vector<double> shares;
  std::vector<std::string> words;
  std::atomic<bool> stop{false};
  std::atomic<int> inside{0};
  bool overlapped = false;
  double stop_at = 2.0;

  session::Watch watch() {
    session::Watch watch;
    watch.cancelled = &stop;
    watch.progress = [this](double share, const std::string& doing) {
      overlapped = overlapped || inside.fetch_add(1) != 0;
      shares.push_back(share);
      words.push_back(doing);
      if (share >= stop_at) stop = true;
      --inside;
    };
    return watch;
  }
  [[nodiscard]] bool told(const std::string& doing) const {
    return std::find(words.begin(), words.end(), doing) != words.end();
  }
};

} // namespace

TEST_CASE("a kept detection gives what a fresh analysis gives, whatever is corrected", "[session]") {
  for (const std::string name : {"guinea-pig-heart", "rabbit-heart", "atrial-strip"}) {
    CAPTURE(name);
    auto inputs = sample(name);
    session::Detection kept;
    const auto first = session::analyse(inputs, 2, kept, {});
    check_equal(files_of(first), files_of(session::analyse(inputs, 1)));
    const std::string key = kept.key;
    CHECK(key.size() == 64);
    for (unsigned seed = 1; seed <= 4; ++seed) {
      CAPTURE(seed);
      inputs.session.review = made_up(*first, seed);
      inputs.settings.response.window = Seconds(10.0 + seed);
      Follower follower;
      const auto again = session::analyse(inputs, 2, kept, follower.watch());
      check_equal(files_of(again), files_of(session::analyse(inputs, 1)));
      CHECK(kept.key == key);
      CHECK_FALSE(follower.told("finding activations on " + inputs.session.channels.front().label));
      CHECK(files_of(again)[0].content != files_of(first)[0].content); // the corrections did reach the marks
    }
  }
}

TEST_CASE("a changed channel or setting of detection renews it", "[session]") {
  const auto inputs = sample("atrial-strip");
  struct Change {
    const char* what;
    std::function<void(session::SessionInputs&)> make;
  };
  const std::vector<Change> changes = {
      {"invert", [](auto& in) { in.session.channels[0].invert = true; }},
      {"skew", [](auto& in) { in.session.channels[0].skew = Seconds(0.01); }},
      {"role", [](auto& in) { in.session.channels[0].role = "ventricular"; }},
      {"lead", [](auto& in) { in.session.channels[0].lead = "unipolar"; }},
      {"calibration",
       [](auto& in) {
         in.session.channels[1].calibration = document::Calibration{{0, 1}, {0, 2}, "mN"};
       }},
      {"species", [](auto& in) { in.settings.activation.conditioning.species = "mouse"; }},
      {"mains",
       [](auto& in) { in.settings.activation.conditioning.mains.nominal = conditioning::MainsChoice::off; }},
      {"low-pass", [](auto& in) { in.settings.activation.conditioning.timing_low_pass = Hertz(0); }},
      {"threshold", [](auto& in) { in.settings.activation.threshold_share = 0.5; }},
      {"refractory", [](auto& in) { in.settings.activation.refractory_atrial = Seconds(0.3); }}};
  session::Detection kept;
  REQUIRE(session::analyse(inputs, 2, kept, {}).ok());
  const std::string key = kept.key;
  for (const auto& change : changes) {
    CAPTURE(change.what);
    auto changed = inputs;
    change.make(changed);
    session::Detection detection = kept;
    check_equal(files_of(session::analyse(changed, 2, detection, {})),
                files_of(session::analyse(changed, 1)));
    CHECK(detection.key != key);
  }
}

TEST_CASE("the key of a detection leaves later stages out and holds every field before", "[session]") {
  const auto inputs = sample("atrial-strip");
  const auto channels = session::channels_of(inputs.session, inputs.recording)->channels;
  const auto& settings = inputs.settings.activation;
  const auto key = session::detection_key(channels, settings);
  CHECK(key == session::detection_key(channels, settings));

  auto placed = channels;
  placed[0].position_mm = {1.0, 2.0};
  CHECK(session::detection_key(placed, settings) == key);
  auto renamed = channels;
  renamed[0].label = "LA";
  CHECK(session::detection_key(renamed, settings) != key);
  auto swapped = channels;
  std::swap(swapped[0], swapped[1]);
  CHECK(session::detection_key(swapped, settings) != key);

  auto other = *inputs.recording;
  other.files[0].sha256[0] = other.files[0].sha256[0] == '0' ? '1' : '0';
  auto moved = channels;
  for (auto& channel : moved)
    channel.recording = std::make_shared<const recording::Recording>(other);
  CHECK(session::detection_key(moved, settings) != key);
  other = *inputs.recording;
  other.convention = "decimal comma";
  for (auto& channel : moved)
    channel.recording = std::make_shared<const recording::Recording>(other);
  CHECK(session::detection_key(moved, settings) != key);
  // Without a digest nothing says that two recordings are the same.
  other.files.clear();
  for (auto& channel : moved)
    channel.recording = std::make_shared<const recording::Recording>(other);
  CHECK(session::detection_key(moved, settings).empty());
}

TEST_CASE("progress rises from 0 to 1, one call at a time, in words", "[session]") {
  const auto inputs = sample("guinea-pig-heart");
  for (const unsigned threads : {1U, 3U}) {
    Follower follower;
    session::Detection detection;
    REQUIRE(session::analyse(inputs, threads, detection, follower.watch()).ok());
    CHECK_FALSE(follower.overlapped);
    CHECK(follower.shares.front() == 0.0);
    CHECK(follower.shares.back() == 1.0);
    CHECK(std::is_sorted(follower.shares.begin(), follower.shares.end()));
    for (const std::string words : {"finding activations on RA", "finding activations on RV",
                                    "pairing electrodes", "reading responses", "fitting curves"}) {
      CAPTURE(words);
      CHECK(follower.told(words));
    }
    // Blocks of the two channels: far more steps than stages, the last of them at nine tenths.
    CHECK(follower.shares.size() > 12);
    CHECK(std::count(follower.shares.begin(), follower.shares.end(), 0.9) >= 2);
  }
}

TEST_CASE("an analysis ends within a block of being told, and what was kept stays", "[session]") {
  const auto inputs = sample("guinea-pig-heart");
  session::Detection kept;
  kept.key = "another recording";
  for (const double stop_at : {0.0, 0.2, 0.5, 0.9, 0.94, 0.95}) {
    CAPTURE(stop_at);
    Follower follower;
    follower.stop_at = stop_at;
    session::Detection detection = kept;
    const auto result = session::analyse(inputs, 1, detection, follower.watch());
    REQUIRE_FALSE(result.ok());
    CHECK(result.error().code == ErrorCode::cancelled);
    CHECK(result.error().file == inputs.session.path);
    CHECK_FALSE(result.error().what.empty());
    CHECK(follower.shares.back() >= stop_at);
    // Nothing more is told once the caller wants the end.
    const auto after = std::find_if(follower.shares.begin(), follower.shares.end(),
                                    [&](double share) { return share >= stop_at; });
    CHECK(follower.shares.end() - after == 1);
    if (stop_at < 0.9) CHECK(detection.key == kept.key);
  }
  // With three threads the other two end at their next block.
  Follower follower;
  follower.stop_at = 0.2;
  const auto result = session::analyse(inputs, 3, kept, follower.watch());
  REQUIRE_FALSE(result.ok());
  CHECK(result.error().code == ErrorCode::cancelled);
  CHECK(kept.key == "another recording");
}

TEST_CASE("inputs made from an edited session are those of loading it", "[session]") {
  const auto loaded = sample("rabbit-heart");
  const auto made = session::inputs_of(loaded.session, loaded.protocol, loaded.recording);
  REQUIRE(made.ok());
  CHECK(made->session_sha256 == loaded.session_sha256);
  REQUIRE(made->warnings.size() == loaded.warnings.size());
  check_equal(files_of(session::analyse(*made, 1)), files_of(session::analyse(loaded, 1)));
  auto edited = loaded.session;
  edited.analysis["response.window_s"] = 12.0;
  CHECK(session::inputs_of(edited, loaded.protocol, loaded.recording)->settings.response.window ==
        Seconds(12));
  edited.analysis["response.window_s"] = -1.0;
  CHECK_FALSE(session::inputs_of(edited, loaded.protocol, loaded.recording).ok());
}
