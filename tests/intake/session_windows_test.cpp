// Chronodrome, GPL-3.0-or-later.
#include <catch2/catch.hpp>

#include "intake/session_reader.h"

using namespace chronodrome;
using intake::parse_session;

namespace {

/// A session whose windows stand in line 4.
std::string with_windows(const std::string& windows) {
  return "{\"format\": \"chronodrome-session\", \"version\": 1,\n"
         "\"recording\": {\"files\": [{\"path\": \"r.edf\"}]},\n"
         "\"channels\": [{\"source\": \"EG1\", \"label\": \"RA\", \"role\": \"atrial\"}],\n"
         "\"windows\": " +
         windows + "}";
}

const std::string kWhole =
    R"({"curve": 2, "concentration_mol_per_l": 1e-7, "measure": "rate:RA", "start_s": 100.5, "end_s": 130,)"
    R"( "when": "2026-03-04T09:30:00Z", "who": "AB", "why": "spill"})";

/// One window with a member replaced by another text.
std::string fault_with(const std::string& from, const std::string& to) {
  std::string window = kWhole;
  const auto at = window.find(from);
  REQUIRE(at != std::string::npos);
  window.replace(at, from.size(), to);
  const auto session = parse_session(with_windows("[" + window + "]"), "a.session.json");
  return session.ok() ? "accepted" : describe(session.error());
}

} // namespace

TEST_CASE("windows placed by hand read in the order of the file", "[session]") {
  const auto session = parse_session(
      with_windows(
          "[" + kWhole +
          R"(, {"curve": 1, "concentration_mol_per_l": 0, "measure": null, "start_s": 0, "end_s": 30}])"),
      "a.session.json");
  if (!session) FAIL(describe(session.error()));
  CHECK(session->warnings.empty());
  REQUIRE(session->windows.size() == 2);
  const auto& first = session->windows[0];
  CHECK(first.curve == 2);
  CHECK(first.concentration == Molar(1e-7));
  CHECK(first.measure == "rate:RA");
  CHECK(first.start == Seconds(100.5));
  CHECK(first.end == Seconds(130.0));
  CHECK(first.when == "2026-03-04T09:30:00Z");
  CHECK(first.who == "AB");
  CHECK(first.why == "spill");
  const auto& second = session->windows[1];
  CHECK(second.concentration == Molar(0.0));
  CHECK(second.measure.empty());
  CHECK(second.when.empty());
}

TEST_CASE("no key, null and an empty list are no windows", "[session]") {
  for (const std::string windows : {"null", "[]"})
    CHECK(parse_session(with_windows(windows), "a.session.json")->windows.empty());
  std::string without = with_windows("[]");
  without.replace(without.find(",\n\"windows\": []"), 15, "");
  const auto session = parse_session(without, "a.session.json");
  REQUIRE(session.ok());
  CHECK(session->windows.empty());
}

TEST_CASE("a window that cannot be is one line with its place", "[session]") {
  CHECK(fault_with("130", "100.5") ==
        "a.session.json:4:108: error: windows[0].end_s is 100.5; end it after start_s");
  CHECK(fault_with("130", "90").find("end it after start_s") != std::string::npos);
  CHECK(fault_with("100.5", "-1").find("windows[0].start_s is -1") != std::string::npos);
  CHECK(fault_with("130", "1e30").find("windows[0].end_s is 1e+30") != std::string::npos);
  CHECK(fault_with("\"curve\": 2", "\"curve\": 0").find("windows[0].curve is 0") != std::string::npos);
  CHECK(fault_with("\"curve\": 2", "\"curve\": 1.5").find("use a whole number") != std::string::npos);
  CHECK(fault_with("\"curve\": 2, ", "").find("windows[0].curve is missing") != std::string::npos);
  CHECK(fault_with("1e-7", "-1e-7").find("windows[0].concentration_mol_per_l is -1e-07") !=
        std::string::npos);
  CHECK(fault_with("\"start_s\": 100.5, ", "").find("windows[0].start_s is missing") != std::string::npos);
  CHECK(fault_with("\"end_s\": 130,", "").find("windows[0].end_s is missing") != std::string::npos);
  CHECK(fault_with("\"concentration_mol_per_l\": 1e-7, ", "").find("concentration_mol_per_l is missing") !=
        std::string::npos);
  CHECK(fault_with("rate:RA", "speed:RA").find("windows[0].measure is \"speed:RA\"") != std::string::npos);
  CHECK(fault_with("\"rate:RA\"", "7").find("windows[0].measure is 7") != std::string::npos);
  CHECK(fault_with("2026-03-04T09:30:00Z", "yesterday").find("ISO 8601") != std::string::npos);
  CHECK(fault_with("\"AB\"", "[]").find("windows[0].who") != std::string::npos);
  const auto no_list = parse_session(with_windows("{}"), "a.session.json");
  REQUIRE_FALSE(no_list.ok());
  CHECK(describe(no_list.error()).find("a.session.json:4:12: error: windows is") != std::string::npos);
}

TEST_CASE("a measure that no label of the session meets may stand, an unknown key is a warning",
          "[session]") {
  // Labels change, measures leave the list: the window waits, and the analysis says that it has no effect.
  CHECK(fault_with("rate:RA", "delay:AV") == "accepted");
  const auto session = parse_session(
      with_windows("[" + kWhole.substr(0, kWhole.size() - 1) + ", \"mood\": 1}]"), "a.session.json");
  REQUIRE(session.ok());
  REQUIRE(session->warnings.size() == 1);
  CHECK(session->warnings[0].what.find("windows[0].mood") != std::string::npos);
}
