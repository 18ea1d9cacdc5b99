// Chronodrome, GPL-3.0-or-later.
// Windows placed by hand: in the session file, in the summary, and read again while one is dragged.
#include <algorithm>
#include <catch2/catch.hpp>
#include <nlohmann/json.hpp>

#include "intake/session_reader.h"
#include "results/session_writer.h"
#include "results/tables.h"
#include "session/analysis.h"

using namespace chronodrome;
using document::WindowChoice;
using results::session_text;

namespace {

document::SessionFile parsed(const std::string& text) {
  auto session = intake::parse_session(text, "a.session.json");
  if (!session) FAIL(describe(session.error()));
  return *session;
}

const std::string kSmall =
    R"({"format": "chronodrome-session", "version": 1, "recording": {"files": [{"path": "r.edf"}]},
  "channels": [{"source": "EG1", "label": "RA", "role": "atrial"}], "windows": [
  {"curve": 1, "concentration_mol_per_l": 0, "start_s": 1, "end_s": 31, "mood": "calm"},
  {"curve": 1, "concentration_mol_per_l": 3e-7, "measure": "rate:RA", "start_s": 100.1, "end_s": 130, "why": "said \"no\""},
  {"curve": 1, "concentration_mol_per_l": 3e-7, "measure": "rate:RA", "start_s": 102, "end_s": 130, "mood": "cross"}]})";

session::SessionInputs sample(const std::string& name) {
  session::LoadOptions options;
  options.use_cache = false;
  const std::string path =
      std::string(CHRONODROME_SOURCE_DIR) + "/sample-sessions/" + name + "/" + name + ".session.json";
  auto inputs = session::load_session(path, options);
  if (!inputs) FAIL(describe(inputs.error()));
  return *inputs;
}

session::SessionResult analysed(const session::SessionInputs& inputs) {
  auto result = session::analyse(inputs, 2);
  if (!result) FAIL(describe(result.error()));
  return *result;
}

WindowChoice choice_for(const response::Response& row, double back, double length,
                        const std::string& measure) {
  WindowChoice window;
  window.curve = row.curve;
  window.concentration = row.concentration;
  window.measure = measure;
  window.end = row.window_end - Seconds(back);
  window.start = window.end - Seconds(length);
  window.who = "A. Bench";
  return window;
}

/// One window for every third row of the measure, each longer ago than the one before.
std::vector<WindowChoice> dragged(const session::SessionResult& result, const std::string& measure) {
  std::vector<WindowChoice> windows;
  double back = 3.0;
  std::size_t i = 0;
  for (const auto& row : result.responses.rows) {
    if (row.measure == measure && i++ % 3 == 0)
      windows.push_back(choice_for(row, back += 4.0, 25.0, measure));
  }
  return windows;
}

void check_equal(const session::SessionResult& some, const session::SessionResult& other) {
  const auto first = results::result_files(some, "x");
  const auto second = results::result_files(other, "x");
  REQUIRE(first.size() == second.size());
  for (std::size_t i = 0; i < first.size(); ++i) {
    CAPTURE(first[i].name);
    CHECK((first[i].content == second[i].content)); // not shown: these are megabytes
  }
}

} // namespace

TEST_CASE("windows are written one a line, in the order of the file, and read back", "[session]") {
  const auto session = parsed(kSmall);
  const std::string text = session_text(session);
  const std::string lines =
      "  \"review\": [],\n"
      "  \"windows\": [\n"
      "    {\"curve\": 1, \"concentration_mol_per_l\": 0, \"measure\": null, \"start_s\": 1, \"end_s\": 31, "
      "\"when\": \"\", \"who\": \"\", \"why\": \"\", \"mood\": \"calm\"},\n"
      "    {\"curve\": 1, \"concentration_mol_per_l\": 3e-07, \"measure\": \"rate:RA\", \"start_s\": 100.1, "
      "\"end_s\": 130, \"when\": \"\", \"who\": \"\", \"why\": \"said \\\"no\\\"\"},\n"
      "    {\"curve\": 1, \"concentration_mol_per_l\": 3e-07, \"measure\": \"rate:RA\", \"start_s\": 102, "
      "\"end_s\": 130, \"when\": \"\", \"who\": \"\", \"why\": \"\", \"mood\": \"cross\"}\n"
      "  ]\n}\n";
  CHECK(text.substr(text.find("  \"review\"")) == lines);
  const auto back = parsed(text);
  REQUIRE(back.windows.size() == 3);
  CHECK(back.windows[1].start == Seconds(100.1));
  CHECK(back.windows[1].concentration == Molar(3e-7));
  CHECK(back.windows[1].why == "said \"no\"");
  CHECK(session_text(back) == text);
}

TEST_CASE("no window is no key, also where the last one went", "[session]") {
  auto session = parsed(kSmall);
  session.windows.clear();
  const std::string text = session_text(session);
  CHECK(text.find("windows") == std::string::npos);
  CHECK(parsed(text).windows.empty());
  // A removed one takes its unknown keys with it, the others keep theirs.
  session = parsed(kSmall);
  session.windows.erase(session.windows.begin());
  CHECK(session_text(session).find("calm") == std::string::npos);
}

TEST_CASE("a session that was never read is written whole", "[session]") {
  document::SessionFile session;
  session.preparation.label = "SR-07";
  session.preparation.arrival_delay = Seconds(4.5);
  session.files.push_back({"raw/day 1.edf", std::string(64, 'a')});
  document::ChannelEntry atrial{"EG1", "RA",         "atrial", "bipolar",    "mV",
                                true,  {{0.5, 1.0}}, {},       Seconds(2e-4)};
  document::ChannelEntry force{
      "F", "F", "tension", "", "mN", false, {}, document::Calibration{{0, 5}, {0, 49.05}, "mN"}, {}};
  document::ChannelEntry ventricular{"EG2", "RV", "ventricular", "", "mV", false, {}, {}, {}};
  session.channels = {atrial, ventricular, force};
  session.pathways.push_back({"AV", "RA", "RV", 12.5});
  session.protocol_file = "protocol.csv";
  session.measures = {"rate:RA", "delay:AV", "force:F"};
  session.analysis["response.window_s"] = 0.1 + 0.2;
  document::Correction correction;
  correction.seq = 1;
  correction.what = document::CorrectionKind::move;
  correction.channel = "RA";
  correction.time = Seconds(1.0 / 3.0);
  correction.to_time = Seconds(0.35);
  session.review.push_back(correction);
  WindowChoice window;
  window.curve = 1;
  window.concentration = Molar(1e-7 / 3.0);
  window.start = Seconds(100.0 / 3.0);
  window.end = Seconds(66.0);
  window.when = "2026-03-04T09:30:00+01:00";
  session.windows = {window, window};
  session.windows[1].measure = "delay:AV";

  const auto back = parsed(session_text(session));
  CHECK(back.warnings.empty());
  CHECK(back.version == document::kSessionVersion);
  CHECK(back.preparation.label == "SR-07");
  CHECK(back.preparation.arrival_delay == Seconds(4.5));
  CHECK(back.files[0].path == "raw/day 1.edf");
  CHECK(back.files[0].sha256 == session.files[0].sha256);
  REQUIRE(back.channels.size() == 3);
  CHECK(back.channels[0].lead == "bipolar");
  CHECK(back.channels[0].invert);
  CHECK(back.channels[0].position_mm == atrial.position_mm);
  CHECK(back.channels[0].skew == Seconds(2e-4));
  CHECK(back.channels[2].calibration->value[1] == 49.05);
  CHECK(back.pathways[0].distance_mm == 12.5);
  CHECK(back.protocol_file == "protocol.csv");
  CHECK(back.measures == session.measures);
  CHECK(back.review[0].time == correction.time);
  CHECK(back.review[0].what == document::CorrectionKind::move);
  REQUIRE(back.windows.size() == 2);
  CHECK(back.windows[0].concentration == window.concentration);
  CHECK(back.windows[0].start == window.start);
  CHECK(back.windows[0].when == window.when);
  CHECK(back.windows[1].measure == "delay:AV");
  CHECK(session_text(back) == session_text(session));
}

TEST_CASE("one measure read again while its windows move is what a whole analysis gives", "[session]") {
  for (const std::string name : {"guinea-pig-heart", "rabbit-heart", "atrial-strip"}) {
    auto inputs = sample(name);
    const auto before = analysed(inputs);
    for (const auto& measure : inputs.session.measures) {
      CAPTURE(name, measure);
      inputs.session.windows = dragged(before, measure);
      const auto partial = session::with_windows_of(inputs, before, measure);
      REQUIRE(partial.ok());
      const auto whole = analysed(inputs);
      check_equal(*partial, whole);
      CHECK(std::count_if(whole.responses.rows.begin(), whole.responses.rows.end(), [](const auto& row) {
              return row.is_placed;
            }) == static_cast<std::ptrdiff_t>(inputs.session.windows.size()));
      CHECK(results::responses_csv(whole) != results::responses_csv(before));
      // And back: the windows go, the rule's stand again.
      inputs.session.windows.clear();
      const auto undone = session::with_windows_of(inputs, *partial, measure);
      REQUIRE(undone.ok());
      check_equal(*undone, before);
    }
  }
}

TEST_CASE("warnings of windows follow each window that moves, those of other measures stay", "[session]") {
  auto inputs = sample("guinea-pig-heart");
  const auto first = analysed(inputs);
  const auto& row = first.responses.rows[2];
  auto beside = choice_for(row, 0.0, 20.0, "rate:RV");
  beside.curve = 9;
  inputs.session.windows = {beside, choice_for(row, 1e6, 20.0, "rate:RA")};
  inputs.session.windows[1].start = Seconds(1.0); // before its step
  inputs.session.windows[1].end = Seconds(20.0);
  const auto before = analysed(inputs);
  CHECK(before.warnings.size() == first.warnings.size() + 2);
  CHECK(before.warnings.back().file == inputs.session.path);
  inputs.session.windows[1] = choice_for(row, 5.0, 20.0, "rate:RA");
  const auto partial = session::with_windows_of(inputs, before, "rate:RA");
  REQUIRE(partial.ok());
  CHECK(partial->warnings.size() == first.warnings.size() + 1);
  check_equal(*partial, analysed(inputs));
}

TEST_CASE("a measure that the session does not list is bad usage", "[session]") {
  const auto inputs = sample("atrial-strip");
  const auto before = analysed(inputs);
  const auto partial = session::with_windows_of(inputs, before, "rate:LV");
  REQUIRE_FALSE(partial.ok());
  CHECK(partial.error().code == ErrorCode::bad_usage);
  CHECK(partial.error().what.find("rate:LV") != std::string::npos);
}

TEST_CASE("the summary lists the windows and says which rows were read from one", "[session]") {
  auto inputs = sample("atrial-strip");
  const auto before = analysed(inputs);
  CHECK(nlohmann::json::parse(results::summary_json(before, "x")).at("windows").empty());
  inputs.session.windows = {choice_for(before.responses.rows[1], 5.0, 20.0, ""),
                            choice_for(before.responses.rows[2], 5.0, 20.0, "force:T")};
  const auto summary = nlohmann::json::parse(results::summary_json(analysed(inputs), "x"));
  const auto& windows = summary.at("windows");
  REQUIRE(windows.size() == 2);
  CHECK(windows[0].at("measure").is_null());
  CHECK(windows[1].at("measure") == "force:T");
  CHECK(windows[1].at("curve") == 1);
  CHECK(windows[1].at("concentration_mol_per_l") == before.responses.rows[2].concentration.value());
  CHECK(windows[1].at("who") == "A. Bench");
  CHECK(summary.at("counts").at("windows") == 2);
  std::size_t flags = 0;
  for (const auto& flag : summary.at("flags")) {
    if (flag.at("flag") == "window placed by hand") ++flags;
  }
  CHECK(flags == 3); // two measures of one step, one of another
}
