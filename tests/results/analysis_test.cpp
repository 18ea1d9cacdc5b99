// Chronodrome, GPL-3.0-or-later.
#include <catch2/catch.hpp>
#include <filesystem>
#include <fstream>
#include <iterator>
#include <locale>
#include <sstream>

#include "results/tables.h"
#include "session/analysis.h"

namespace fs = std::filesystem;
using namespace chronodrome;

namespace {

const std::string kSamples = std::string(CHRONODROME_SOURCE_DIR) + "/sample-sessions/";

/// A copy of the atrial strip whose files a test may change.
struct Strip {
  fs::path folder = fs::path(CHRONODROME_BUILD_DIR) / "test-session-strip";
  Strip() {
    fs::remove_all(folder);
    fs::create_directories(folder);
    for (const char* name : {"atrial-strip.session.json", "recording.csv", "protocol.csv"})
      fs::copy(kSamples + "atrial-strip/" + name, folder / name);
  }
  ~Strip() { fs::remove_all(folder); }
  [[nodiscard]] std::string session() const { return (folder / "atrial-strip.session.json").string(); }

  void replace(const std::string& from, const std::string& to) const {
    std::ifstream in(session());
    std::string text{std::istreambuf_iterator<char>(in), {}};
    const auto at = text.find(from);
    REQUIRE(at != std::string::npos);
    std::ofstream(session()) << text.replace(at, from.size(), to);
  }
};

session::SessionResult analysed(const std::string& path, unsigned threads = 1) {
  session::LoadOptions options;
  options.use_cache = false;
  options.threads = threads;
  const auto inputs = session::load_session(path, options);
  if (!inputs) FAIL(describe(inputs.error()));
  const auto result = session::analyse(*inputs, threads);
  if (!result) FAIL(describe(result.error()));
  return *result;
}

Error load_error(const std::string& path) {
  session::LoadOptions options;
  options.use_cache = false;
  const auto inputs = session::load_session(path, options);
  if (inputs) {
    const auto result = session::analyse(*inputs, 1);
    REQUIRE_FALSE(result.ok());
    return result.error();
  }
  return inputs.error();
}

} // namespace

TEST_CASE("the same bits for one thread and for three", "[session]") {
  const std::string path = kSamples + "guinea-pig-heart/guinea-pig-heart.session.json";
  const auto one = analysed(path, 1);
  const auto three = analysed(path, 3);
  const auto first = results::result_files(one, "x");
  const auto second = results::result_files(three, "x");
  REQUIRE(first.size() == second.size());
  for (std::size_t i = 0; i < first.size(); ++i) {
    CAPTURE(first[i].name);
    CHECK(first[i].content == second[i].content);
  }
}

TEST_CASE("files are the same under a locale with a decimal comma and thousands marks", "[session]") {
  struct Continental : std::numpunct<char> {
    char do_decimal_point() const override { return ','; }
    char do_thousands_sep() const override { return '.'; }
    std::string do_grouping() const override { return "\3"; }
  };
  const std::string path = kSamples + "atrial-strip/atrial-strip.session.json";
  const auto plain = results::result_files(analysed(path), "x");
  const std::locale before = std::locale::global(std::locale(std::locale::classic(), new Continental));
  std::ostringstream probe;
  probe << 1234.5;
  CHECK(probe.str() == "1.234,5"); // the locale does reach streams
  const auto continental = results::result_files(analysed(path), "x");
  std::locale::global(before);
  REQUIRE(plain.size() == continental.size());
  for (std::size_t i = 0; i < plain.size(); ++i)
    CHECK(plain[i].content == continental[i].content);
}

TEST_CASE("one row a step, curve and measure, the control first", "[session]") {
  const Strip strip;
  const auto result = analysed(strip.session());
  // Nine concentrations with the control, two measures.
  REQUIRE(result.responses.rows.size() == 18);
  CHECK(result.responses.rows.front().concentration == Molar(0.0));
  CHECK(result.responses.rows.front().measure == "rate:RA");
  REQUIRE(result.curves.size() == 2);
  CHECK(result.curves[0].measure == "rate:RA");
  CHECK(result.curves[0].agent == "carbachol");
  CHECK(result.intervals[0].size() + 1 == result.activations[0].marks.size());
}

TEST_CASE("corrections are replayed on every run and counted", "[session]") {
  const Strip strip;
  const auto before = analysed(strip.session());
  const double third = before.activations[0].marks[2].time.value();
  strip.replace("\"review\": []", "\"review\": [{\"seq\": 1, \"when\": \"2026-03-05T10:00:00Z\", \"who\": "
                                  "\"A. Bench\", \"what\": \"delete\", "
                                  "\"channel\": \"RA\", \"time_s\": " +
                                      std::to_string(third) +
                                      ", \"to_time_s\": null, \"why\": \"test\"}, "
                                      "{\"seq\": 2, \"when\": \"2026-03-05T10:01:00Z\", \"who\": \"A. "
                                      "Bench\", \"what\": \"add\", \"channel\": \"RA\", "
                                      "\"time_s\": 0.300, \"to_time_s\": null, \"why\": \"test\"}]");
  const auto after = analysed(strip.session());
  CHECK(after.activations[0].marks.size() == before.activations[0].marks.size());
  CHECK(after.corrections[0].added == 1);
  CHECK(after.corrections[0].removed == 1);
  CHECK(after.activations[0].marks[1].origin == activation::Origin::added);
}

TEST_CASE("a raw file that is not the session's is refused with both digests", "[session]") {
  const Strip strip;
  const std::string wrong(64, 'a');
  strip.replace("{\"path\": \"recording.csv\"}",
                "{\"path\": \"recording.csv\", \"sha256\": \"" + wrong + "\"}");
  const Error error = load_error(strip.session());
  CHECK(error.code == ErrorCode::digest_mismatch);
  CHECK(error.what.find(wrong) != std::string::npos);
}

TEST_CASE("a source that the recording does not hold is answered with those it holds", "[session]") {
  const Strip strip;
  strip.replace("\"source\": \"EG (mV)\"", "\"source\": \"EGG\"");
  const Error error = load_error(strip.session());
  CHECK(error.code == ErrorCode::bad_value);
  CHECK(error.what.find("EGG") != std::string::npos);
  CHECK(error.what.find("EG (mV)") != std::string::npos);
}

TEST_CASE("a recording that is not there is one clear line", "[session]") {
  const Strip strip;
  fs::remove(strip.folder / "recording.csv");
  const Error error = load_error(strip.session());
  CHECK(error.code == ErrorCode::file_missing);
  CHECK(error.file.find("recording.csv") != std::string::npos);
}

TEST_CASE("calibration and inversion change the values, not the times of force", "[session]") {
  const Strip strip;
  const auto before = analysed(strip.session());
  strip.replace("\"label\": \"T\"",
                "\"label\": \"T\", \"calibration\": {\"raw\": [0, 1], \"value\": [0, 2], \"unit\": \"mN\"}");
  const auto after = analysed(strip.session());
  REQUIRE(after.activations[1].marks.size() == before.activations[1].marks.size());
  CHECK_THAT(after.activations[1].beats[5].developed,
             Catch::Matchers::WithinRel(2.0 * before.activations[1].beats[5].developed, 1e-9));
  CHECK_THAT(after.activations[1].marks[5].time.value(),
             Catch::Matchers::WithinAbs(before.activations[1].marks[5].time.value(), 1e-9));
}

TEST_CASE("an excluded stretch enters no response", "[session]") {
  const Strip strip;
  strip.replace("\"review\": []",
                "\"review\": [{\"seq\": 1, \"when\": \"2026-03-05T10:00:00Z\", \"who\": \"A. Bench\", "
                "\"what\": \"exclude\", "
                "\"channel\": \"RA\", \"time_s\": 80, \"to_time_s\": 125, \"why\": \"test\"}]");
  const auto result = analysed(strip.session());
  CHECK(result.responses.rows[0].status == response::Status::excluded);
  CHECK_FALSE(result.responses.rows[0].value.has_value());
  CHECK(result.curves[0].fit.n_points == 8);
}
