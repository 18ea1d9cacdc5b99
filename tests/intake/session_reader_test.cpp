// Chronodrome, GPL-3.0-or-later.
#include <catch2/catch.hpp>
#include <filesystem>
#include <fstream>

#include "intake/session_reader.h"

using namespace chronodrome;
using intake::NewerSession;
using intake::parse_session;
namespace fs = std::filesystem;

namespace {

/// The example of the format page. The preparation is invented.
const std::string kWhole = R"({
  "format": "chronodrome-session", "version": 1,
  "preparation": {"label": "GP-03", "species": "guinea pig", "tissue": "perfused heart", "temperature_c": 37.0,
                  "bath_volume_ml": 20.0, "animal": "", "sex": "", "mass_g": null, "date": "", "operator": "",
                  "group": "", "arrival_delay_s": 4.5, "notes": ""},
  "recording": {"files": [{"path": "raw/recording.edf",
                           "sha256": "0123456789ABCDEF0123456789abcdef0123456789abcdef0123456789abcdef"}],
                "csv": {"rate_hz": null, "delimiter": null, "decimal": null, "time_column": null}},
  "channels": [
    {"source": "EG1", "label": "RA", "role": "atrial", "lead": "bipolar", "unit": "mV", "invert": false,
     "position_mm": [0.0, 1.5]},
    {"source": "EG1", "label": "RV", "role": "ventricular", "lead": "unipolar", "unit": "mV", "invert": true},
    {"source": "F", "label": "F", "role": "tension", "unit": "mN", "skew_s": 0.0002,
     "calibration": {"raw": [0, 5], "value": [0, 49.05], "unit": "mN"}}
  ],
  "pathways": [{"label": "AV", "from": "RA", "to": "RV", "distance_mm": 12.5}],
  "protocol": {"file": "protocol.csv"},
  "measures": ["rate:RA", "delay:AV", "velocity:AV", "force:F"],
  "analysis": {"response.window_s": 60, "conduction.sides": "both", "activation.merge": true},
  "review": [
    {"seq": 2, "when": "2026-03-04T09:30:00Z", "who": "AB", "what": "delete", "channel": "RA", "time_s": 12.25, "why": "artefact"},
    {"seq": 3, "when": "2026-03-04T09:31:00.5+01:00", "who": "AB", "what": "exclude", "time_s": 20, "to_time_s": 25, "why": "spill"}
  ]
}
)";

std::string with(const std::string& from, const std::string& to) {
  std::string text = kWhole;
  const auto at = text.find(from);
  REQUIRE(at != std::string::npos);
  text.replace(at, from.size(), to);
  return text;
}

/// The message for the example with one change.
std::string fault_with(const std::string& from, const std::string& to) {
  const auto session = parse_session(with(from, to), "a.session.json");
  return session.ok() ? "accepted" : describe(session.error());
}

} // namespace

TEST_CASE("the example session reads as it is written", "[session]") {
  const auto read = parse_session(kWhole, "lab/day1/gp03.session.json");
  REQUIRE(read.ok());
  const auto& session = *read;
  CHECK(session.name == "gp03");
  CHECK(session.folder == "lab/day1");
  CHECK(session.warnings.empty());
  CHECK(session.preparation.label == "GP-03");
  CHECK(session.preparation.temperature_c == 37.0);
  CHECK(session.preparation.bath_volume_ml == 20.0);
  CHECK_FALSE(session.preparation.mass_g.has_value());
  CHECK(session.preparation.arrival_delay == Seconds(4.5));
  REQUIRE(session.files.size() == 1);
  CHECK(session.files[0].path == "raw/recording.edf");
  CHECK(session.files[0].sha256 == "0123456789abcdef0123456789abcdef0123456789abcdef0123456789abcdef");
  CHECK_FALSE(session.csv.delimiter.has_value());
  REQUIRE(session.channels.size() == 3);
  CHECK(session.channels[1].source == session.channels[0].source); // two channels may share a source
  CHECK(session.channels[0].lead == "bipolar");
  CHECK((*session.channels[0].position_mm)[1] == 1.5);
  CHECK(session.channels[1].invert);
  CHECK(session.channels[2].lead.empty());
  CHECK(session.channels[2].skew == Seconds(0.0002));
  CHECK(session.channels[2].calibration->value[1] == 49.05);
  CHECK(session.pathways[0].distance_mm == 12.5);
  CHECK(session.protocol_file == "protocol.csv");
  CHECK(session.measures == std::vector<std::string>{"rate:RA", "delay:AV", "velocity:AV", "force:F"});
  CHECK(std::get<double>(session.analysis.at("response.window_s")) == 60.0);
  CHECK(std::get<std::string>(session.analysis.at("conduction.sides")) == "both");
  CHECK(std::get<bool>(session.analysis.at("activation.merge")));
  REQUIRE(session.review.size() == 2);
  CHECK(session.review[0].what == document::CorrectionKind::remove);
  CHECK(session.review[0].time == Seconds(12.25));
  CHECK_FALSE(session.review[0].to_time.has_value());
  CHECK(session.review[1].channel.empty());
  CHECK(session.as_read == kWhole);
}

TEST_CASE("a byte order mark and CR LF line ends change nothing", "[session]") {
  std::string text = "\xef\xbb\xbf";
  for (const char c : kWhole)
    text += c == '\n' ? std::string("\r\n") : std::string(1, c);
  const auto read = parse_session(text, "a.session.json");
  REQUIRE(read.ok());
  CHECK(read->channels.size() == 3);
}

TEST_CASE("faults are named with their line, column, path and what may stand there", "[session]") {
  CHECK(fault_with("\"atrial\"", "\"atrail\"") ==
        "a.session.json:10:46: error: channels[0].role is \"atrail\"; use one of sinus, atrial, his, "
        "ventricular, "
        "ecg, map, stimulus, tension, pressure, flow, temperature, other");
  CHECK(fault_with("\"lead\": \"bipolar\"", "\"lead\": \"monopolar\"") ==
        "a.session.json:10:64: error: channels[0].lead is \"monopolar\"; use one of unipolar, bipolar");
  CHECK(fault_with("\"unit\": \"mN\", \"skew_s\"", "\"lead\": \"bipolar\", \"skew_s\"") ==
        "a.session.json:13:62: error: channels[2].lead is \"bipolar\"; leave it out: a lead belongs to "
        "electrograms, not to role tension");
  CHECK(fault_with("\"label\": \"RV\"", "\"label\": \"RA\"") ==
        "a.session.json:12:32: error: channels[1].label is \"RA\"; give every channel a label of its own");
  CHECK(fault_with("\"to\": \"RV\"", "\"to\": \"LV\"") ==
        "a.session.json:16:52: error: pathways[0].to is \"LV\"; use the label of a channel: RA, RV, F");
  CHECK(fault_with("\"to\": \"RV\"", "\"to\": \"RA\"") ==
        "a.session.json:16:52: error: pathways[0].to is \"RA\"; end at another channel than \"from\"");
  CHECK(fault_with("\"rate:RA\"", "\"rate:LA\"") ==
        "a.session.json:18:16: error: measures[0] is \"rate:LA\"; name a channel: RA, RV, F");
  CHECK(
      fault_with("\"rate:RA\"", "\"speed:RA\"") ==
      "a.session.json:18:16: error: measures[0] is \"speed:RA\"; use one of rate:CHANNEL, delay:PATHWAY, "
      "conducted:PATHWAY, velocity:PATHWAY, force:CHANNEL, pressure:CHANNEL, dpdt_max:CHANNEL, flow:CHANNEL");
  CHECK(fault_with("\"force:F\"", "\"pressure:F\"") ==
        "a.session.json:18:54: error: measures[3] is \"pressure:F\"; the channel's role is tension; pressure "
        "is "
        "read from pressure");
  CHECK(fault_with("\"distance_mm\": 12.5", "\"distance_mm\": null") ==
        "a.session.json:18:39: error: measures[2] is \"velocity:AV\"; set distance_mm of the pathway AV");
  CHECK(fault_with("\"temperature_c\": 37.0", "\"temperature_c\": \"37,0\"") ==
        "a.session.json:3:107: error: preparation.temperature_c is \"37,0\"; put a number here");
  CHECK(fault_with("\"bath_volume_ml\": 20.0", "\"bath_volume_ml\": 0") ==
        "a.session.json:4:37: error: preparation.bath_volume_ml is 0; use a number above 0");
  CHECK(fault_with("\"arrival_delay_s\": 4.5", "\"arrival_delay_s\": -1") ==
        "a.session.json:5:51: error: preparation.arrival_delay_s is -1; use 0 or a number above 0");
  CHECK(fault_with("[0.0, 1.5]", "[0.0]") == "a.session.json:11:21: error: channels[0].position_mm does not "
                                             "hold two numbers; write it as [0.0, 0.0]");
  CHECK(
      fault_with("\"raw\": [0, 5]", "\"raw\": [5, 5]") ==
      "a.session.json:14:21: error: channels[2].calibration.raw and value need two different readings each; "
      "take the second reading at another load");
  CHECK(fault_with("0123456789ABCDEF", "0123") ==
        "a.session.json:7:38: error: recording.files[0].sha256 is "
        "\"01230123456789abcdef0123456789abcdef0123...\"; use 64 hex digits, or null");
  CHECK(fault_with("\"response.window_s\": 60", "\"response.window_s\": [60]") ==
        "a.session.json:19:37: error: analysis.response.window_s is a list; use a number, a text, true or "
        "false; "
        "leave a key out for its default");
}

TEST_CASE("a skew or a rate that no recorder has is refused with its place", "[session]") {
  for (const std::string skew : {"1e9", "-1000", "1.001"})
    CHECK(fault_with("\"skew_s\": 0.0002", "\"skew_s\": " + skew) ==
          "a.session.json:13:78: error: channels[2].skew_s is " +
              (skew == "1e9" ? std::string("1e+09") : skew) + "; use a number from -1 to 1 s");
  CHECK(fault_with("\"skew_s\": 0.0002", "\"skew_s\": -1") == "accepted");
  for (const std::string rate : {"1e-9", "1e12", "0", "-5"}) {
    const std::string fault = fault_with("\"rate_hz\": null", "\"rate_hz\": " + rate);
    CHECK(fault.find("a.session.json:8:36: error: recording.csv.rate_hz is ") == 0);
    CHECK(fault.find("; use a number from 0.01 to 10000000 Hz") != std::string::npos);
  }
  CHECK(fault_with("\"rate_hz\": null", "\"rate_hz\": 0.01") == "accepted");
}

TEST_CASE("an empty list of channels is blamed itself", "[session]") {
  std::string text = kWhole;
  const auto from = text.find("\"channels\": [") + 13, to = text.find("\"pathways\"");
  text = text.substr(0, from) + "],\n" + text.substr(to);
  const auto read = parse_session(text, "a.session.json");
  REQUIRE_FALSE(read.ok());
  CHECK(read.error().what == "channels is empty");
  CHECK(read.error().place.line == 9);
}

TEST_CASE("a missing key is named at the object that should hold it", "[session]") {
  CHECK(
      fault_with("\"source\": \"F\", ", "") ==
      "a.session.json:13:5: error: channels[2].source is missing; add it: the header text or EDF label as it "
      "stands in the file");
  CHECK(fault_with("\"channels\": [", "\"chanels\": [") ==
        "a.session.json:1:1: error: channels is missing; add it: a list of channels");
  CHECK(fault_with("\"label\": \"RV\", \"role\"", "\"label\": \" \", \"role\"") ==
        "a.session.json:12:32: error: channels[1].label is \" \"; fill it in: a short name for this channel");
}

TEST_CASE("corrections are checked: kind, number, moment, channel and what the kind needs", "[session]") {
  CHECK(fault_with("\"what\": \"delete\"", "\"what\": \"remove\"") ==
        "a.session.json:21:69: error: review[0].what is \"remove\"; use one of add, delete, move, retype, "
        "exclude, include, redetect");
  CHECK(fault_with("\"seq\": 3", "\"seq\": 2") ==
        "a.session.json:22:13: error: review[1].seq is 2; give every correction a number of its own");
  CHECK(fault_with("\"seq\": 3", "\"seq\": 2.5") ==
        "a.session.json:22:13: error: review[1].seq is 2.5; use a whole number");
  CHECK(fault_with("2026-03-04T09:30:00Z", "yesterday") ==
        "a.session.json:21:24: error: review[0].when is \"yesterday\"; write it as 2026-03-04T09:30:00Z (ISO "
        "8601)");
  CHECK(fault_with("\"channel\": \"RA\", ", "\"channel\": \"LA\", ") ==
        "a.session.json:21:90: error: review[0].channel is \"LA\"; use the label of a channel");
  CHECK(fault_with("\"channel\": \"RA\", ", "") == "a.session.json:21:5: error: review[0].channel is "
                                                   "missing; add it: a correction of kind delete needs it");
  CHECK(fault_with("\"time_s\": 12.25, ", "") == "a.session.json:21:5: error: review[0].time_s is missing; "
                                                 "add it: a correction of kind delete needs it");
  CHECK(fault_with("\"what\": \"delete\"", "\"what\": \"move\"") ==
        "a.session.json:21:5: error: review[0].to_time_s is missing; add it: a correction of kind move needs "
        "it");
  CHECK(fault_with("\"to_time_s\": 25", "\"to_time_s\": 20") ==
        "a.session.json:22:114: error: review[1].to_time_s is 20; end the stretch after time_s");
}

TEST_CASE("corrections out of order are sorted by their number, with notice", "[session]") {
  const auto read = parse_session(with("\"seq\": 2", "\"seq\": 9"), "a.session.json");
  REQUIRE(read.ok());
  CHECK(read->review[0].seq == 3);
  CHECK(read->review[1].seq == 9);
  REQUIRE(read->warnings.size() == 1);
  CHECK(read->warnings[0].place.line == 20U);
}

TEST_CASE("paths stay inside the session's folder", "[session]") {
  for (const auto& [path, reason] : std::vector<std::pair<std::string, std::string>>{
           {"../r.edf", "which leads out of the session's folder"},
           {"raw/../../r.edf", "which leads out of the session's folder"},
           {"/data/r.edf", "which is not relative"},
           {"C:/r.edf", "which is not relative"},
           {"raw\\\\r.edf", "which holds a backslash"}}) {
    const std::string message = fault_with("raw/recording.edf", path);
    INFO(message);
    CHECK(message.find("a.session.json:6:36: error: recording.files[0].path is ") == 0);
    CHECK(message.find(reason) != std::string::npos);
  }
  CHECK(fault_with("\"protocol.csv\"", "\"../protocol.csv\"") ==
        "a.session.json:17:24: error: protocol.file is \"../protocol.csv\", which leads out of the session's "
        "folder; use a path below the session's own folder, with / between folders");
  CHECK(fault_with("raw/recording.edf", "raw/..recording.edf") == "accepted"); // a name, not a way up
}

TEST_CASE("a symbolic link that leads out of the folder is refused", "[session]") {
  const fs::path root = fs::path(CHRONODROME_BUILD_DIR) / "test-session-links";
  fs::remove_all(root);
  fs::create_directories(root / "home" / "raw");
  fs::create_directories(root / "outside");
  std::ofstream(root / "outside" / "recording.edf") << "x";
  std::ofstream(root / "home" / "a.session.json") << kWhole;
  const std::string path = (root / "home" / "a.session.json").string();
  CHECK(intake::read_session(path).ok()); // a missing recording is not this reader's concern
  fs::remove(root / "home" / "raw");
  fs::create_directory_symlink(root / "outside", root / "home" / "raw");
  const auto read = intake::read_session(path);
  REQUIRE_FALSE(read.ok());
  CHECK(read.error().code == ErrorCode::bad_value);
  CHECK(read.error().place.line == 6U);
  fs::remove(root / "home" / "raw");
  fs::create_directories(root / "home" / "data");
  fs::create_directory_symlink("data", root / "home" / "raw"); // inside: fine
  CHECK(intake::read_session(path).ok());
  fs::remove_all(root);
}

TEST_CASE("an unknown key is a warning at its own line, at every level", "[session]") {
  auto read = parse_session(with("\"review\": [", "\"mood\": \"good\",\n  \"review\": ["), "a.session.json");
  REQUIRE(read.ok());
  REQUIRE(read->warnings.size() == 1);
  CHECK(describe(read->warnings[0]) ==
        "a.session.json:20:3: warning: the key \"mood\" is not known; correct its "
        "spelling, or leave it: it is kept, but has no effect");
  read = parse_session(with("\"invert\": true", "\"invert\": true, \"gain\": 10"), "a.session.json");
  REQUIRE(read.ok());
  REQUIRE(read->warnings.size() == 1);
  CHECK(read->warnings[0].what == "the key \"channels[1].gain\" is not known");
  CHECK(read->warnings[0].place.line == 12U);
  read = parse_session(with("\"rate_hz\": null", "\"rate\": 1000"), "a.session.json");
  REQUIRE(read->warnings.size() == 1);
  CHECK(read->warnings[0].what == "the key \"recording.csv.rate\" is not known");
}

TEST_CASE("a measure named twice is read once, with notice", "[session]") {
  const auto read = parse_session(with("\"force:F\"", "\"rate:RA\""), "a.session.json");
  REQUIRE(read.ok());
  CHECK(read->measures.size() == 3);
  CHECK(read->warnings.size() == 1);
}

TEST_CASE("another format is refused as such, a newer version can only be looked at", "[session]") {
  auto read = parse_session(with("chronodrome-session", "chronodrome-study"), "a.session.json");
  REQUIRE_FALSE(read.ok());
  CHECK(read.error().code == ErrorCode::wrong_format);
  CHECK(read.error().place.line == 2U);
  CHECK(parse_session("[]", "a").error().code == ErrorCode::wrong_format);
  CHECK(parse_session("{}", "a").error().code == ErrorCode::wrong_format);
  const std::string newer = with("\"version\": 1", "\"version\": 2");
  read = parse_session(newer, "a.session.json");
  REQUIRE_FALSE(read.ok());
  CHECK(read.error().code == ErrorCode::unsupported_version);
  CHECK(read.error().place.column == 47U);
  read = parse_session(newer, "a.session.json", NewerSession::open_read_only);
  REQUIRE(read.ok());
  CHECK(read->version == 2);
  CHECK(read->warnings.size() == 1);
  CHECK(fault_with("\"version\": 1", "\"version\": 0") == "a.session.json:2:47: error: version is 0; use 1");
  CHECK(fault_with("\"version\": 1", "\"version\": \"1\"") ==
        "a.session.json:2:47: error: version is \"1\"; put a number here");
}

TEST_CASE("a CSV's marks are checked", "[session]") {
  CHECK(fault_with("\"delimiter\": null, \"decimal\": null", "\"delimiter\": \";\", \"decimal\": \",\"") ==
        "accepted");
  CHECK(fault_with("\"delimiter\": null, \"decimal\": null", "\"delimiter\": \"\\t\", \"decimal\": \".\"") ==
        "accepted");
  CHECK(fault_with("\"delimiter\": null, \"decimal\": null", "\"delimiter\": \",\", \"decimal\": \",\"") ==
        "a.session.json:8:71: error: recording.csv.decimal is \",\"; use another mark than the delimiter");
  CHECK(fault_with("\"delimiter\": null", "\"delimiter\": \"tab\"")
            .find("recording.csv.delimiter is \"tab\"") != std::string::npos);
}

TEST_CASE("a session file that is missing, a folder or too large is refused before it is parsed",
          "[session]") {
  CHECK(intake::read_session("/nowhere/a.session.json").error().code == ErrorCode::file_missing);
  CHECK(intake::read_session(CHRONODROME_BUILD_DIR).error().code == ErrorCode::wrong_format);
  const fs::path large = fs::path(CHRONODROME_BUILD_DIR) / "test-large.session.json";
  std::ofstream(large).close();
  fs::resize_file(large, intake::kLargestSession + 1); // sparse: no bytes on the disk
  CHECK(intake::read_session(large.string()).error().code == ErrorCode::over_limit);
  fs::remove(large);
}

TEST_CASE("a session cut at any byte is an error with a place, never a crash", "[session]") {
  for (std::size_t length = 0; length + 2 < kWhole.size(); ++length) {
    const auto read = parse_session(kWhole.substr(0, length), "a.session.json");
    if (read.ok() || !read.error().place.line) FAIL("cut after " << length << " bytes");
  }
  SUCCEED();
}

TEST_CASE("a session with any byte changed reads or fails, never crashes", "[session]") {
  std::size_t failed = 0;
  for (std::size_t at = 0; at < kWhole.size(); ++at) {
    for (const char change : {'\0', '"', '{', '\xff', '9', '\\'}) {
      std::string text = kWhole;
      text[at] = change;
      if (!parse_session(text, "a.session.json").ok()) ++failed;
    }
  }
  CHECK(failed > kWhole.size()); // most changes break the grammar
}
