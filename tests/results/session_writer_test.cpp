// Chronodrome, GPL-3.0-or-later.
#include <catch2/catch.hpp>
#include <filesystem>
#include <fstream>
#include <sstream>

#include "intake/session_reader.h"
#include "results/session_writer.h"

using namespace chronodrome;
using document::SessionFile;
using results::session_text;
namespace fs = std::filesystem;

namespace {

SessionFile parsed(const std::string& text) {
  auto session = intake::parse_session(text, "a.session.json");
  if (!session) FAIL(describe(session.error()));
  return *session;
}

std::string content_of(const fs::path& path) {
  std::ifstream file(path);
  std::stringstream text;
  text << file.rdbuf();
  return text.str();
}

/// What the writer makes of a full session: the format page's layout, written by hand.
const std::string kCanonical = R"({
  "format": "chronodrome-session",
  "version": 1,
  "preparation": {
    "label": "GP-03",
    "species": "guinea pig",
    "tissue": "perfused heart",
    "temperature_c": 37,
    "bath_volume_ml": 20.5,
    "animal": "",
    "sex": "",
    "mass_g": null,
    "date": "",
    "operator": "",
    "group": "",
    "arrival_delay_s": 0.1,
    "notes": "said \"fine\"\nμ",
    "colour": "brown"
  },
  "recording": {
    "files": [
      {"path": "recording.edf", "sha256": "0123456789abcdef0123456789abcdef0123456789abcdef0123456789abcdef", "seen": [1, 2.5]}
    ],
    "csv": {"rate_hz": null, "delimiter": "\t", "decimal": ".", "time_column": ""}
  },
  "channels": [
    {"source": "EG1", "label": "RA", "role": "atrial", "lead": "bipolar", "unit": "mV", "invert": false, "position_mm": [0, 1.5], "depth": {"mm": 2}},
    {"source": "F", "label": "F", "role": "tension", "unit": "mN", "invert": true, "calibration": {"raw": [0, 5], "value": [0, 49.05], "unit": "mN"}, "skew_s": 2e-04}
  ],
  "pathways": [
    {"label": "AF", "from": "RA", "to": "F", "distance_mm": null}
  ],
  "protocol": {"file": null},
  "measures": ["rate:RA", "force:F"],
  "analysis": {
    "a.text": "both",
    "b.number": 1e-07,
    "c.truth": true
  },
  "review": [
    {"seq": 4, "when": "2026-03-04T09:30:00Z", "who": "AB", "what": "delete", "channel": "RA", "time_s": 0.30000000000000004, "why": "artefact"},
    {"seq": 5, "when": "", "who": "", "what": "exclude", "channel": "", "time_s": 1, "to_time_s": 2, "why": "", "mood": null}
  ],
  "later": {
    "big": 12345678901234567890,
    "deep": [
      {"x": false}
    ]
  }
}
)";

} // namespace

TEST_CASE("a session in the writer's own layout is written back byte for byte", "[session]") {
  CHECK(session_text(parsed(kCanonical)) == kCanonical);
}

TEST_CASE("the example of the format page is in the writer's own layout", "[session]") {
  const std::string page =
      content_of(fs::path(CHRONODROME_SOURCE_DIR) / "resources" / "formats" / "session.md");
  const auto from = page.find("```json\n") + 8;
  const auto to = page.find("```", from);
  REQUIRE(to != std::string::npos);
  const std::string example = page.substr(from, to - from);
  const auto session = parsed(example);
  CHECK(session.warnings.empty());
  CHECK(session_text(session) == example);
}

TEST_CASE("writing what was read from any layout is stable from the first time on", "[session]") {
  std::string flat;
  for (const char c : kCanonical) {
    if (c != '\n') flat += c;
  }
  CHECK(session_text(parsed(flat)) == kCanonical);
}

TEST_CASE("a session made by the program, with no text behind it, reads back as it was", "[session]") {
  SessionFile session;
  session.preparation.label = "ST-01";
  session.preparation.bath_volume_ml = 25.0;
  session.files.push_back({"raw.csv", std::nullopt});
  session.csv.delimiter = ';';
  session.csv.decimal = ',';
  document::ChannelEntry channel;
  channel.source = "EG (mV)";
  channel.label = "SA";
  channel.role = "sinus";
  session.channels.push_back(channel);
  session.measures = {"rate:SA"};
  session.analysis["response.window_s"] = 0.1 + 0.2; // needs all seventeen digits
  const auto back = parsed(session_text(session));
  CHECK(back.warnings.empty());
  CHECK(back.preparation.label == "ST-01");
  CHECK(back.csv.delimiter == ';');
  CHECK(back.csv.decimal == ',');
  CHECK_FALSE(back.csv.time_column.has_value());
  CHECK(back.channels[0].source == "EG (mV)");
  CHECK(std::get<double>(back.analysis.at("response.window_s")) == 0.1 + 0.2);
  CHECK(session_text(back) == session_text(session));
}

TEST_CASE("unknown keys follow their entry when it is moved, renamed or removed", "[session]") {
  auto session = parsed(kCanonical);
  std::swap(session.channels[0], session.channels[1]);
  std::string text = session_text(session);
  CHECK(text.find("\"label\": \"RA\", \"role\": \"atrial\", \"lead\": \"bipolar\", \"unit\": \"mV\", "
                  "\"invert\": false, "
                  "\"position_mm\": [0, 1.5], \"depth\": {\"mm\": 2}}") != std::string::npos);
  session = parsed(kCanonical);
  session.channels[0].label = "LA"; // renamed in place
  text = session_text(session);
  CHECK(text.find("\"label\": \"LA\"") < text.find("\"depth\": {\"mm\": 2}"));
  CHECK(text.find("\"depth\"") != std::string::npos);
  session = parsed(kCanonical);
  session.channels.erase(session.channels.begin());
  CHECK(session_text(session).find("\"depth\"") == std::string::npos);
  session = parsed(kCanonical);
  session.review.erase(session.review.begin());
  CHECK(session_text(session).find("\"mood\": null") != std::string::npos);
}

TEST_CASE("a value that became the default is written as such, not as it was read", "[session]") {
  auto session = parsed(kCanonical);
  session.channels[0].position_mm.reset();
  session.channels[1].skew = Seconds(0.0);
  session.analysis.clear();
  const std::string text = session_text(session);
  CHECK(text.find("position_mm") == std::string::npos);
  CHECK(text.find("skew_s") == std::string::npos);
  CHECK(text.find("\"analysis\": {},") != std::string::npos);
}

TEST_CASE("saving replaces the file as a whole, through a link to the file itself", "[session]") {
  const fs::path folder = fs::path(CHRONODROME_BUILD_DIR) / "test-session-writer";
  fs::remove_all(folder);
  fs::create_directories(folder / "real");
  const fs::path target = folder / "real" / "a.session.json";
  std::ofstream(target) << "old";
  fs::create_symlink(target, folder / "link.session.json");
  REQUIRE(results::write_session(parsed(kCanonical), (folder / "link.session.json").string()).ok());
  CHECK(content_of(target) == kCanonical);
  CHECK(fs::is_symlink(folder / "link.session.json"));
  std::size_t files = 0;
  for (const auto& entry : fs::directory_iterator(folder / "real"))
    files += entry.is_regular_file() ? 1U : 0U;
  CHECK(files == 1); // nothing temporary is left behind
  CHECK(results::write_session(parsed(kCanonical), (folder / "nowhere" / "a.session.json").string())
            .error()
            .code == ErrorCode::cannot_write);
  fs::remove_all(folder);
}

TEST_CASE("a session of a newer program is never saved", "[session]") {
  auto session = parsed(kCanonical);
  session.version = 2;
  const fs::path path = fs::path(CHRONODROME_BUILD_DIR) / "test-newer.session.json";
  const auto written = results::write_session(session, path.string());
  REQUIRE_FALSE(written.ok());
  CHECK(written.error().code == ErrorCode::unsupported_version);
  CHECK_FALSE(fs::exists(path));
}
