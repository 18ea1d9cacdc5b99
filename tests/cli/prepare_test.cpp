// Chronodrome, GPL-3.0-or-later.
// `prepare` as scripts see it: a session that `analyse` takes, and nothing written where a doubt is an error.
#include <catch2/catch.hpp>
#include <cstdlib>
#include <filesystem>
#include <fstream>
#include <iterator>
#include <nlohmann/json.hpp>
#include <sys/wait.h>

namespace fs = std::filesystem;

namespace {

struct Run {
  int status = -1;
  std::string out, err;
};

std::string content_of(const fs::path& path) {
  std::ifstream file(path);
  return {std::istreambuf_iterator<char>(file), {}};
}

/// A folder with copies of the sample recordings, gone at the end.
class Bench {
public:
  Bench() {
    fs::remove_all(folder_);
    fs::create_directories(folder_);
    fs::copy(fs::path(CHRONODROME_SOURCE_DIR) / "sample-sessions", folder_, fs::copy_options::recursive);
  }
  ~Bench() { fs::remove_all(folder_); }
  Bench(const Bench&) = delete;
  Bench& operator=(const Bench&) = delete;

  [[nodiscard]] Run run(const std::string& words) const {
    const std::string command = "cd " + folder_.string() + " && " + CHRONODROME_BUILD_DIR +
                                "/bin/chronodrome-cli " + words + " >out.txt 2>err.txt";
    const int status = std::system(command.c_str());
    return {WEXITSTATUS(status), content_of(folder_ / "out.txt"), content_of(folder_ / "err.txt")};
  }
  [[nodiscard]] fs::path path(const std::string& name) const { return folder_ / name; }
  [[nodiscard]] nlohmann::json session(const std::string& name) const {
    return nlohmann::json::parse(content_of(folder_ / name));
  }
  void write(const std::string& name, const std::string& text) const {
    std::ofstream(folder_ / name) << text;
  }

private:
  fs::path folder_ = fs::path(CHRONODROME_BUILD_DIR) / "test-cli-prepare";
};

bool holds(const std::string& text, const std::string& part) {
  return text.find(part) != std::string::npos;
}

} // namespace

TEST_CASE("a recording whose labels tell its roles becomes a session that can be analysed",
          "[cli][prepare]") {
  const Bench bench;
  const Run run = bench.run("prepare rabbit-heart/recording.edf --out rabbit-heart/new.session.json");
  CAPTURE(run.err);
  REQUIRE(run.status == 0);
  CHECK(holds(run.out, "atrial"));
  CHECK(holds(run.out, "abbreviation")); // a guess says why it is one
  const auto session = bench.session("rabbit-heart/new.session.json");
  CHECK(session["channels"][0]["role"] == "atrial");
  CHECK(session["channels"][1]["role"] == "ventricular");
  CHECK(session["channels"][2]["role"] == "pressure");
  CHECK(session["pathways"][0]["label"] == "AV");
  CHECK(session["recording"]["files"][0]["path"] == "recording.edf");
  CHECK(session["recording"]["files"][0]["sha256"].get<std::string>().size() == 64);
  CHECK(session["protocol"]["file"] == "protocol.csv");
  CHECK(session["measures"].size() == 6);
  CHECK(bench.run("analyse rabbit-heart/new.session.json --no-report --out results").status == 0);
}

TEST_CASE("what no label tells is other, with a warning; the order of the beats is mentioned",
          "[cli][prepare]") {
  const Bench bench;
  const Run run = bench.run("prepare guinea-pig-heart/recording.edf --out new.session.json");
  REQUIRE(run.status == 0);
  CHECK(holds(run.err, "new.session.json:1: warning: \"EG1\" has role other"));
  CHECK(holds(run.err, "EG1 fires 60 ms before EG2"));
  const auto session = bench.session("new.session.json");
  CHECK(session["channels"][0]["role"] == "other");
  CHECK(session["recording"]["files"][0]["path"] == "guinea-pig-heart/recording.edf");
  CHECK(session["protocol"]["file"].is_null());
  CHECK(holds(run.out, "annotations of the recording, 9 events"));
}

TEST_CASE("a layout gives channels, pathways, measures, settings and the way a table is read",
          "[cli][prepare]") {
  const Bench bench;
  const Run run =
      bench.run("prepare atrial-strip/recording.csv --layout atrial-strip/atrial-strip.session.json "
                "--protocol atrial-strip/protocol.csv --out atrial-strip/new.session.json");
  CAPTURE(run.err);
  REQUIRE(run.status == 0);
  const auto session = bench.session("atrial-strip/new.session.json");
  const auto layout = bench.session("atrial-strip/atrial-strip.session.json");
  CHECK(session["channels"] == layout["channels"]);
  CHECK(session["measures"] == layout["measures"]);
  CHECK(session["recording"]["csv"] == layout["recording"]["csv"]);
  CHECK(session["preparation"]["species"] == "rat");
  CHECK(session["preparation"]["label"] == "");
  CHECK(bench.run("analyse atrial-strip/new.session.json --no-report --out results").status == 0);
}

TEST_CASE("what of a layout does not match is said, nothing at all is an error", "[cli][prepare]") {
  const Bench bench;
  const Run part =
      bench.run("prepare rabbit-heart/recording.edf --layout atrial-strip/atrial-strip.session.json "
                "--out rabbit-heart/new.session.json");
  CHECK(part.status == 3);
  CHECK(holds(part.err, "none of the layout's channels"));
  CHECK_FALSE(fs::exists(bench.path("rabbit-heart/new.session.json")));
}

TEST_CASE("a table that can be read in two ways is refused until an option says which", "[cli][prepare]") {
  const Bench bench;
  const Run run = bench.run("prepare atrial-strip/recording.csv --out atrial-strip/new.session.json");
  CHECK(run.status == 3);
  CHECK(holds(run.err, "--rate-hz"));
  CHECK_FALSE(fs::exists(bench.path("atrial-strip/new.session.json")));
  REQUIRE(bench.run("prepare atrial-strip/recording.csv --rate-hz 500 --out atrial-strip/new.session.json")
              .status == 0);
  CHECK(bench.session("atrial-strip/new.session.json")["recording"]["csv"]["rate_hz"] == 500.0);
}

TEST_CASE("a session that is there is not written over without --replace", "[cli][prepare]") {
  const Bench bench;
  const std::string words = "prepare rabbit-heart/recording.edf --out rabbit-heart/rabbit-heart.session.json";
  const std::string before = content_of(bench.path("rabbit-heart/rabbit-heart.session.json"));
  const Run refused = bench.run(words);
  CHECK(refused.status == 2);
  CHECK(holds(refused.err, "--replace"));
  CHECK(content_of(bench.path("rabbit-heart/rabbit-heart.session.json")) == before);
  CHECK(bench.run(words + " --replace").status == 0);
  CHECK(content_of(bench.path("rabbit-heart/rabbit-heart.session.json")) != before);
}

TEST_CASE("recording and drug log lie in the session's folder or below", "[cli][prepare]") {
  const Bench bench;
  const Run outside = bench.run("prepare rabbit-heart/recording.edf --out atrial-strip/new.session.json");
  CHECK(outside.status == 2);
  CHECK(holds(outside.err,
              "rabbit-heart/recording.edf:1: error: the file lies outside the folder of the session"));
  CHECK(bench
            .run("prepare rabbit-heart/recording.edf --protocol atrial-strip/protocol.csv "
                 "--out rabbit-heart/new.session.json")
            .status == 2);
  // A link that leads out is outside, too: analyse would refuse it.
  fs::create_symlink(bench.path("rabbit-heart/recording.edf"), bench.path("atrial-strip/link.edf"));
  CHECK(bench.run("prepare atrial-strip/link.edf --out atrial-strip/new.session.json").status == 2);
  CHECK_FALSE(fs::exists(bench.path("atrial-strip/new.session.json")));
}

TEST_CASE("names, folders and files that cannot be are refused with their status", "[cli][prepare]") {
  const Bench bench;
  CHECK(bench.run("prepare rabbit-heart/recording.edf").status == 2);
  CHECK(bench.run("prepare rabbit-heart/recording.edf --out rabbit-heart/new.json").status == 2);
  CHECK(bench.run("prepare rabbit-heart/recording.edf --out .session.json").status == 2);
  CHECK(bench.run("prepare rabbit-heart/recording.edf --out nowhere/new.session.json").status == 2);
  CHECK(bench.run("prepare nowhere.edf --out new.session.json").status == 3);
  CHECK(bench.run("prepare rabbit-heart/recording.edf --layout nowhere.json --out new.session.json").status ==
        3);
  bench.write("rabbit-heart/protocol.csv", "time_s,event\nx,addition\n");
  const Run bad_log = bench.run("prepare rabbit-heart/recording.edf --out rabbit-heart/new.session.json");
  CHECK(bad_log.status == 3);
  CHECK(holds(bad_log.err, "protocol.csv:2"));
  CHECK_FALSE(fs::exists(bench.path("rabbit-heart/new.session.json")));
  CHECK(bench.run("prepare --help").status == 0);
}
