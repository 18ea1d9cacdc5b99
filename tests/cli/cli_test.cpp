// Chronodrome, GPL-3.0-or-later.
// The program as scripts see it: exit statuses, files, messages.
#include <array>
#include <catch2/catch.hpp>
#include <cstdlib>
#include <filesystem>
#include <fstream>
#include <iterator>
#include <map>
#include <nlohmann/json.hpp>
#include <regex>
#include <set>
#include <sstream>
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

const fs::path kFolder = fs::path(CHRONODROME_BUILD_DIR) / "test-cli";
const std::string kSamples = std::string(CHRONODROME_SOURCE_DIR) + "/sample-sessions/";

Run run(const std::string& words) {
  fs::create_directories(kFolder);
  const fs::path out = kFolder / "stdout.txt";
  const fs::path err = kFolder / "stderr.txt";
  const std::string command = std::string(CHRONODROME_BUILD_DIR) + "/bin/chronodrome-cli " + words + " >" +
                              out.string() + " 2>" + err.string();
  const int status = std::system(command.c_str());
  return {WEXITSTATUS(status), content_of(out), content_of(err)};
}

std::string session_of(const std::string& name) {
  return kSamples + name + "/" + name + ".session.json";
}

struct Fresh {
  Fresh() { fs::remove_all(kFolder); }
  ~Fresh() { fs::remove_all(kFolder); }
};

/// Each line of standard error is FILE:LINE[:COLUMN]: error|warning: what.
void check_messages(const std::string& text) {
  static const std::regex pattern(R"(^.+:\d+(:\d+)?: (error|warning): .+$)");
  std::istringstream lines(text);
  for (std::string line; std::getline(lines, line);) {
    CAPTURE(line);
    CHECK(std::regex_match(line, pattern));
  }
}

std::string first_line(const fs::path& path) {
  std::ifstream file(path);
  std::string line;
  std::getline(file, line);
  return line;
}

} // namespace

TEST_CASE("help is there for the program and each command", "[cli]") {
  const Fresh fresh;
  for (const char* words : {"--help", "inspect --help", "analyse --help", "fit --help", "simulate --help"}) {
    CAPTURE(words);
    const Run result = run(words);
    CHECK(result.status == 0);
    CHECK(result.out.find("Exit status") != std::string::npos);
  }
}

TEST_CASE("wrong usage is status 2 and does no work", "[cli]") {
  const Fresh fresh;
  const std::string out = " --out " + (kFolder / "out").string();
  for (const std::string& words :
       {std::string(), std::string("frob"), std::string("analyse"), "analyse " + session_of("atrial-strip"),
        "analyse a/x.session.json b/x.session.json" + out, "analyse recording.csv" + out,
        std::string("fit x.csv --model sigmoid"), std::string("fit"), std::string("simulate x.json"),
        "analyse x.session.json --frob" + out}) {
    CAPTURE(words);
    const Run result = run(words);
    CHECK(result.status == 2);
    CHECK(result.out.empty());
    CHECK_FALSE(result.err.empty());
    CHECK_FALSE(fs::exists(kFolder / "out"));
  }
}

TEST_CASE("some failed is status 1, nothing done is 3, all done is 0", "[cli]") {
  const Fresh fresh;
  const std::string out = " --out " + (kFolder / "out").string();
  CHECK(run("analyse nowhere.session.json" + out).status == 3);
  const Run some = run("analyse nowhere.session.json " + session_of("atrial-strip") + out);
  CHECK(some.status == 1);
  check_messages(some.err);
  CHECK(run("analyse " + session_of("atrial-strip") + out).status == 0);
}

TEST_CASE("the results of a session are all files of the contract, and the same bytes on every run",
          "[cli]") {
  const Fresh fresh;
  const fs::path out = kFolder / "out";
  const std::string sessions = session_of("rabbit-heart") + " " + session_of("guinea-pig-heart");
  REQUIRE(run("analyse " + sessions + " --out " + out.string() + " --jobs 1").status == 0);
  const std::map<std::string, std::string> heads = {
      {"activations.csv", "channel,index,time_s,amplitude,confidence,origin"},
      {"intervals.csv", "channel,index,time_s,interval_s,rate_bpm,flag"},
      {"delays.csv", "pathway,index,from_time_s,to_time_s,delay_ms,state"},
      {"rhythm.csv", "start_s,end_s,kind,detail"},
      {"responses.csv", "curve,agent,background,concentration_mol_per_l,measure,unit,value,sem,n_beats,"
                        "window_start_s,window_end_s,"
                        "status,limit,limit_side"},
  };
  std::map<std::string, std::string> first;
  for (const char* name : {"rabbit-heart", "guinea-pig-heart"}) {
    for (const auto& head : heads)
      CHECK(first_line(out / name / head.first) == head.second);
    for (const auto& entry : fs::directory_iterator(out / name))
      first[std::string(name) + entry.path().filename().string()] = content_of(entry.path());
    CHECK(nlohmann::json::parse(content_of(out / name / "curves.json")).is_array());
    CHECK(nlohmann::json::parse(content_of(out / name / "summary.json"))["format"] == "chronodrome-summary");
  }
  CHECK(fs::exists(out / "rabbit-heart" / "mechanics.csv"));
  REQUIRE(run("analyse " + sessions + " --out " + out.string() + " --jobs 2").status == 0);
  for (const char* name : {"rabbit-heart", "guinea-pig-heart"}) {
    for (const auto& entry : fs::directory_iterator(out / name)) {
      CAPTURE(entry.path());
      CHECK(first[std::string(name) + entry.path().filename().string()] == content_of(entry.path()));
    }
  }
}

TEST_CASE("an output folder with other files is left alone", "[cli]") {
  const Fresh fresh;
  const fs::path out = kFolder / "out";
  fs::create_directories(out / "atrial-strip");
  std::ofstream(out / "atrial-strip" / "thesis.txt") << "mine";
  const Run result = run("analyse " + session_of("atrial-strip") + " --out " + out.string());
  CHECK(result.status == 2);
  check_messages(result.err);
  CHECK(std::distance(fs::directory_iterator(out / "atrial-strip"), fs::directory_iterator()) == 1);
}

TEST_CASE("each activation stands in one row of its pathway", "[cli]") {
  const Fresh fresh;
  const fs::path out = kFolder / "out";
  REQUIRE(run("analyse " + session_of("guinea-pig-heart") + " --out " + out.string()).status == 0);
  std::map<std::string, std::multiset<std::string>> marks;
  std::ifstream activations(out / "guinea-pig-heart" / "activations.csv");
  for (std::string line; std::getline(activations, line);) {
    std::istringstream cells(line);
    std::array<std::string, 3> cell;
    for (auto& text : cell)
      std::getline(cells, text, ',');
    if (cell[0] != "channel") marks[cell[0]].insert(cell[2]);
  }
  std::ifstream delays(out / "guinea-pig-heart" / "delays.csv");
  std::multiset<std::string> from, to;
  for (std::string line; std::getline(delays, line);) {
    std::istringstream cells(line);
    std::array<std::string, 4> cell;
    for (auto& text : cell)
      std::getline(cells, text, ',');
    if (cell[0] == "pathway") continue;
    if (!cell[2].empty()) from.insert(cell[2]);
    if (!cell[3].empty()) to.insert(cell[3]);
  }
  CHECK(from == marks["RA"]);
  CHECK(to == marks["RV"]);
}

TEST_CASE("fit prints a list as JSON, and a declined fit is no failure", "[cli]") {
  const Fresh fresh;
  fs::create_directories(kFolder);
  std::ofstream(kFolder / "three.csv") << "concentration_mol_per_l,response\n0,200\n1e-8,180\n1e-7,140\n";
  const Run result = run("fit " + (kFolder / "three.csv").string() + " --json");
  CHECK(result.status == 0);
  const auto fits = nlohmann::json::parse(result.out);
  REQUIRE(fits.size() == 1);
  CHECK(fits[0]["flags"][0] == "declined");
  CHECK(fits[0]["parameters"]["pec50"]["estimate"].is_null());
  std::ofstream(kFolder / "bad.csv") << "concentration_mol_per_l,response\n0,200\n-1e-8,180\n";
  const Run bad = run("fit " + (kFolder / "bad.csv").string());
  CHECK(bad.status == 3);
  check_messages(bad.err);
  CHECK(bad.err.find("bad.csv:3:1: error:") != std::string::npos);
}

TEST_CASE("a scenario becomes a session that can be analysed", "[cli]") {
  const Fresh fresh;
  const std::string made = (kFolder / "made").string();
  REQUIRE(run("simulate " + kSamples + "atrial-strip/scenario.json --out " + made).status == 0);
  for (const char* name : {"recording.csv", "protocol.csv", "truth.json", "atrial-strip.session.json"})
    CHECK(fs::exists(fs::path(made) / name));
  CHECK(run("analyse " + made + "/atrial-strip.session.json --out " + (kFolder / "out").string()).status ==
        0);
}

TEST_CASE("inspect says what a recording holds, and what it needs to know", "[cli]") {
  const Fresh fresh;
  const Run edf = run("inspect " + kSamples + "rabbit-heart/recording.edf --json");
  CHECK(edf.status == 0);
  const auto found = nlohmann::json::parse(edf.out);
  CHECK(found["signals"].size() == 3);
  CHECK(found["signals"][2]["rate_hz"] == 250);
  const Run csv = run("inspect " + kSamples + "atrial-strip/recording.csv");
  CHECK(csv.status == 3);
  check_messages(csv.err);
  CHECK(csv.err.find("--rate-hz") != std::string::npos);
  CHECK(run("inspect " + kSamples + "atrial-strip/recording.csv --rate-hz 500").status == 0);
}

TEST_CASE("output that cannot be written is no success", "[cli]") {
  const Fresh fresh;
  const std::string program = std::string(CHRONODROME_BUILD_DIR) + "/bin/chronodrome-cli";
  const std::string command =
      program + " inspect " + kSamples + "rabbit-heart/recording.edf >/dev/full 2>/dev/null";
  CHECK(WEXITSTATUS(std::system(command.c_str())) == 3);
}

TEST_CASE("a session leads to report, workbook and dictionary, and --no-report leaves out the reports",
          "[cli]") {
  const Fresh fresh;
  const fs::path out = kFolder / "out";
  REQUIRE(run("analyse " + session_of("guinea-pig-heart") + " --out " + out.string()).status == 0);
  const fs::path made = out / "guinea-pig-heart";
  CHECK(content_of(made / "report.pdf").rfind("%PDF-", 0) == 0);
  CHECK(content_of(made / "report.html").rfind("<!DOCTYPE html>", 0) == 0);
  CHECK(content_of(made / "workbook.xlsx").rfind("PK", 0) == 0);
  CHECK(first_line(made / "dictionary.csv") == "file,column,meaning,unit,values");
  const std::string workbook = content_of(made / "workbook.xlsx");
  // Into the same folder: the reports of the run before would tell of another run, so they go.
  REQUIRE(run("analyse " + session_of("guinea-pig-heart") + " --no-report --out " + out.string()).status ==
          0);
  CHECK_FALSE(fs::exists(made / "report.pdf"));
  CHECK_FALSE(fs::exists(made / "report.html"));
  CHECK(content_of(made / "workbook.xlsx") == workbook);
  CHECK(fs::exists(made / "dictionary.csv"));
}

TEST_CASE("a report needs no display and says nothing of its own on standard error", "[cli]") {
  const Fresh fresh;
  const fs::path out = kFolder / "out";
  const std::string bare = "env -u DISPLAY -u WAYLAND_DISPLAY -u XDG_RUNTIME_DIR -u QT_QPA_PLATFORM LC_ALL=C "
                           "QT_SCALE_FACTOR=2 ";
  const std::string words = " analyse " + session_of("rabbit-heart") + " --out " + out.string();
  const std::string program = std::string(CHRONODROME_BUILD_DIR) + "/bin/chronodrome-cli";
  fs::create_directories(kFolder);
  const std::string err = (kFolder / "err.txt").string();
  CHECK(WEXITSTATUS(std::system((bare + program + words + " >/dev/null 2>" + err).c_str())) == 0);
  CHECK(content_of(err).empty()); // this session has no warnings
  const std::string pdf = content_of(out / "rabbit-heart" / "report.pdf");
  CHECK(pdf.size() > 50000);
  REQUIRE(run("analyse " + session_of("rabbit-heart") + " --out " + out.string()).status == 0);
  CHECK(content_of(out / "rabbit-heart" / "report.pdf") == pdf); // whatever the desk is set to
}

TEST_CASE("without a font the tables are there and the missing report is said", "[cli]") {
  const Fresh fresh;
  const fs::path out = kFolder / "out";
  fs::create_directories(kFolder / "no-fonts");
  std::ofstream(kFolder / "fonts.conf")
      << "<?xml version=\"1.0\"?><fontconfig><dir>" << (kFolder / "no-fonts").string() << "</dir><cachedir>"
      << (kFolder / "no-fonts").string() << "</cachedir></fontconfig>";
  const std::string program = std::string(CHRONODROME_BUILD_DIR) + "/bin/chronodrome-cli";
  const std::string err = (kFolder / "err.txt").string();
  const std::string command = "env FONTCONFIG_FILE=" + (kFolder / "fonts.conf").string() + " " + program +
                              " analyse " + session_of("atrial-strip") + " --out " + out.string() +
                              " >/dev/null 2>" + err;
  CHECK(WEXITSTATUS(std::system(command.c_str())) == 0);
  const std::string said = content_of(err);
  check_messages(said);
  CHECK(said.find("report.pdf:1: warning: no font is installed") != std::string::npos);
  CHECK_FALSE(fs::exists(out / "atrial-strip" / "report.pdf"));
  CHECK(fs::exists(out / "atrial-strip" / "workbook.xlsx"));
  const auto summary = nlohmann::json::parse(content_of(out / "atrial-strip" / "summary.json"));
  CHECK(summary["warnings"].dump().find("no font is installed") != std::string::npos);
}

TEST_CASE("results that cannot be written are an error, and no half file stays", "[cli]") {
  const Fresh fresh;
  const fs::path out = kFolder / "out";
  REQUIRE(run("analyse " + session_of("atrial-strip") + " --out " + out.string()).status == 0);
  std::map<std::string, std::string> before;
  for (const auto& entry : fs::directory_iterator(out / "atrial-strip"))
    before[entry.path().filename().string()] = content_of(entry.path());
  // No file above 50 kB, as on a full disk.
  const std::string program = std::string(CHRONODROME_BUILD_DIR) + "/bin/chronodrome-cli";
  const std::string err = (kFolder / "err.txt").string();
  const std::string command = "sh -c 'trap \"\" XFSZ; ulimit -f 100; exec " + program + " analyse " +
                              session_of("atrial-strip") + " --out " + out.string() + "' >/dev/null 2>" + err;
  CHECK(WEXITSTATUS(std::system(command.c_str())) == 3);
  check_messages(content_of(err));
  CHECK(content_of(err).find("error: ") != std::string::npos);
  for (const auto& entry : fs::directory_iterator(out / "atrial-strip"))
    CHECK(before[entry.path().filename().string()] == content_of(entry.path()));
}
