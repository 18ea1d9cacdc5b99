// Chronodrome, GPL-3.0-or-later.
#include "session/proposal.h"

#include <catch2/catch.hpp>

#include "session/label_words.h"
#include "support/channel_of_samples.h"

using namespace chronodrome;
using recording::Role;
using session::Confidence;

namespace {

recording::Recording recording_with(const std::vector<std::pair<std::string, std::string>>& signals) {
  recording::Recording made;
  for (const auto& [source, unit] : signals) {
    recording::Signal signal;
    signal.source = source;
    signal.source_as_written = unit.empty() ? source : source + " (" + unit + ")";
    signal.unit = unit;
    signal.time_base = recording::TimeBase(Hertz(1000.0), {{0, 4, Seconds(0.0)}});
    signal.samples = std::make_shared<test_support::SamplesInMemory>(std::vector<double>(4, 0.0));
    made.signals.push_back(std::move(signal));
  }
  made.files.push_back({"a.csv", "csv", std::string(64, 'a'), 10, Seconds(0.0)});
  made.duration = Seconds(0.004);
  return made;
}

const session::ChannelProposal only(const std::string& source, const std::string& unit) {
  return session::propose(recording_with({{source, unit}})).channels.front();
}

} // namespace

TEST_CASE("words written out in the languages of the trade tell the role surely", "[session]") {
  const auto [label, role] = GENERATE(table<std::string, Role>({{"right atrium", Role::atrial},
                                                                {"EG left atrial", Role::atrial},
                                                                {"Vorhof rechts", Role::atrial},
                                                                {"oreillette droite", Role::atrial},
                                                                {"aur\xC3\xAD"
                                                                 "cula",
                                                                 Role::atrial},
                                                                {"boezem", Role::atrial},
                                                                {"voorkamer", Role::atrial},
                                                                {"Ventrikel", Role::ventricular},
                                                                {"left ventricle", Role::ventricular},
                                                                {"linke Herzkammer", Role::ventricular},
                                                                {"ventr\xC3\xAD"
                                                                 "culo",
                                                                 Role::ventricular},
                                                                {"His bundle", Role::his},
                                                                {"HIS", Role::his},
                                                                {"sinus node", Role::sinus},
                                                                {"Sinusknoten", Role::sinus}}));
  CAPTURE(label);
  const auto channel = only(label, "mV");
  CHECK(channel.entry.role == recording::name_of(role));
  CHECK(channel.role.confidence == Confidence::sure);
  CHECK_FALSE(channel.role.reason.empty());
}

TEST_CASE("abbreviations are guesses", "[session]") {
  const auto [label, role] = GENERATE(table<std::string, Role>({{"RA", Role::atrial},
                                                                {"HRA", Role::atrial},
                                                                {"A", Role::atrial},
                                                                {"H", Role::his},
                                                                {"HBE 1-2", Role::his},
                                                                {"V", Role::ventricular},
                                                                {"LV", Role::ventricular},
                                                                {"RVOT", Role::ventricular},
                                                                {"SN", Role::sinus},
                                                                {"EKG II", Role::ecg},
                                                                {"MAP", Role::map},
                                                                {"EG left ventr", Role::ventricular}}));
  CAPTURE(label);
  const auto channel = only(label, "mV");
  CHECK(channel.entry.role == recording::name_of(role));
  CHECK(channel.role.confidence == Confidence::guessed);
}

TEST_CASE("a unit that leaves one role wins over the label", "[session]") {
  const auto [label, unit, role] =
      GENERATE(table<std::string, std::string, Role>({{"RA", "mN", Role::tension},
                                                      {"LV", "mmHg", Role::pressure},
                                                      {"CH3", "mL/min", Role::flow},
                                                      {"CH4", "degC", Role::temperature},
                                                      {"Kraft", "g", Role::tension},
                                                      {"bath",
                                                       "\xC2\xB0"
                                                       "C",
                                                       Role::temperature}}));
  CAPTURE(label, unit);
  const auto channel = only(label, unit);
  CHECK(channel.entry.role == recording::name_of(role));
  CHECK(channel.role.confidence == Confidence::sure);
  CHECK(channel.role.reason.find(unit) != std::string::npos);
}

TEST_CASE("nothing is invented: what neither label nor unit tells is other", "[session]") {
  const std::string label =
      GENERATE("EG1", "CH 2", "Channel A", "Input V", "ADC3", "T", "P", "SA", "CS 1-2", "coronary sinus",
               "history", "history of A", "atrium-ventricle", "space", "temps", "");
  CAPTURE(label);
  const auto channel = only(label, "mV");
  CHECK(channel.entry.role == "other");
  CHECK(channel.role.confidence == Confidence::unknown);
  CHECK_FALSE(channel.role.reason.empty());
  CHECK(channel.entry.lead.empty());
}

TEST_CASE("a chamber in a unit that is neither volts nor of a known kind is not believed", "[session]") {
  CHECK(only("RA", "%").entry.role == "other");
  CHECK(only("RA", "bpm").entry.role == "other");
}

TEST_CASE("a transducer that is still in volts is a guess", "[session]") {
  const auto channel = only("LVP", "V");
  CHECK(channel.entry.role == "pressure");
  CHECK(channel.role.confidence == Confidence::guessed);
  CHECK(only("atrial stimulus", "V").entry.role == "stimulus");
}

TEST_CASE("two numbered ends make a lead bipolar, one name leaves it unipolar and guessed", "[session]") {
  for (const char* label : {"RA1-RA2", "RA 3-4", "HRA 1/2", "A bip", "bipolar atrium"}) {
    CAPTURE(label);
    const auto channel = only(label, "mV");
    CHECK(channel.entry.lead == "bipolar");
    CHECK(channel.lead.confidence == Confidence::sure);
  }
  CHECK(only("RV unipolar", "mV").lead.confidence == Confidence::sure);
  const auto one = only("RA", "mV");
  CHECK(one.entry.lead == "unipolar");
  CHECK(one.lead.confidence == Confidence::guessed);
  CHECK(only("RA1-RA1", "mV").lead.confidence == Confidence::guessed);
  CHECK(only("tension", "mN").entry.lead.empty());
  CHECK(only("ECG", "mV").entry.lead.empty());
}

TEST_CASE("labels are short and unique, and the file's own where it is short", "[session]") {
  const auto proposal = session::propose(recording_with({{"EG right atrium", "mV"},
                                                         {"EG right atrium 2", "mV"},
                                                         {"LVP", "mmHg"},
                                                         {"LVP", "mmHg"},
                                                         {"", "mV"}}));
  std::vector<std::string> labels;
  for (const auto& channel : proposal.session.channels)
    labels.push_back(channel.label);
  CHECK(labels == std::vector<std::string>{"RA", "RA 2", "LVP", "LVP 2", "channel"});
}

TEST_CASE("a unit that the file does not state stays open", "[session]") {
  CHECK(only("RA", "").unit.confidence == Confidence::unknown);
  CHECK(only("RA", "").entry.unit.empty());
  CHECK(only("RA", "counts").unit.confidence == Confidence::unknown);
  CHECK(only("RA", "mV").unit.confidence == Confidence::sure);
}

TEST_CASE("pathways run between the roles that are there", "[session]") {
  const auto proposal = session::propose(
      recording_with({{"SN", "mV"}, {"RA", "mV"}, {"His", "mV"}, {"RV", "mV"}, {"LV", "mV"}}));
  std::vector<std::string> found;
  for (const auto& pathway : proposal.session.pathways)
    found.push_back(pathway.label + " " + pathway.from + ">" + pathway.to);
  CHECK(found == std::vector<std::string>{"SA SN>RA", "AH RA>His", "HV His>RV", "HV LV His>LV", "AV RA>RV",
                                          "AV LV RA>LV"});
  CHECK(session::propose(recording_with({{"RA", "mV"}, {"T", "mN"}})).session.pathways.empty());
}

TEST_CASE("all measures that fit are proposed, the rate of force only where no chamber is recorded",
          "[session]") {
  using Words = std::vector<std::string>;
  const auto heart =
      session::propose(recording_with({{"RA", "mV"}, {"RV", "mV"}, {"LVP", "mmHg"}, {"flow", "mL/min"}}));
  CHECK(heart.session.measures ==
        Words{"rate:RA", "rate:RV", "delay:AV", "conducted:AV", "pressure:LVP", "dpdt_max:LVP", "flow:flow"});
  const auto strip = session::propose(recording_with({{"tension", "mN"}}));
  CHECK(strip.session.measures == Words{"rate:tension", "force:tension"});
  auto with_distance = heart.session;
  with_distance.pathways.front().distance_mm = 8.0;
  const auto possible = session::possible_measures(with_distance);
  CHECK(std::count(possible.begin(), possible.end(), "velocity:AV") == 1);
}

TEST_CASE("files are named with their digests, the date is that of the recording", "[session]") {
  auto made = recording_with({{"RA", "mV"}});
  made.clock_start = "2026-03-04T09:30:00";
  const auto proposal = session::propose(made);
  REQUIRE(proposal.session.files.size() == 1);
  CHECK(proposal.session.files.front().sha256 == std::string(64, 'a'));
  CHECK(proposal.session.preparation.date == "2026-03-04");
}
