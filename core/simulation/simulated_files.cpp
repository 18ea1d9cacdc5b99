// Chronodrome, GPL-3.0-or-later.
#include <cmath>
#include <filesystem>
#include <system_error>

#include "base/json_text.h"
#include "base/number_text.h"
#include "intake/written_file.h"
#include "simulation/simulate.h"

namespace chronodrome::simulation {
namespace {

/// Seconds with nine decimals, as the truth is kept.
double nanosecond_value(Seconds time) {
  return std::round(time.value() * 1e9) / 1e9;
}

std::optional<double> nanosecond_value(const std::optional<Seconds>& time) {
  return time ? std::optional(nanosecond_value(*time)) : std::nullopt;
}

const char* recording_name(const Scenario& scenario) {
  return scenario.file.kind == FileKind::csv ? "recording.csv" : "recording.edf";
}

Done write_text(const std::filesystem::path& path, const std::string& text) {
  intake::WrittenFile file(path.string());
  file.add(text);
  return file.finish();
}

void add_preparation(JsonText& json, const PreparationPlan& plan) {
  json.open_object("preparation");
  json.text("label", plan.label).text("species", plan.species).text("tissue", plan.tissue);
  json.number("temperature_c", plan.temperature_c).number("bath_volume_ml", plan.bath_volume_ml);
  json.text("animal", plan.animal).text("sex", plan.sex).number("mass_g", plan.mass_g);
  json.text("date", plan.date).text("operator", "").text("group", plan.group);
  json.number("arrival_delay_s", plan.arrival_delay.value()).text("notes", plan.notes);
  json.close_object();
}

/// How the session says a CSV file is to be read: nothing is left to be found out.
void add_csv(JsonText& json, const Scenario& scenario) {
  json.open_object("csv");
  if (scenario.file.kind == FileKind::csv) {
    const intake::CsvLayout& layout = scenario.file.csv;
    json.number("rate_hz", scenario.channels.front().rate.value());
    json.text("delimiter", std::string(1, layout.delimiter)).text("decimal", std::string(1, layout.decimal));
    json.text("time_column", layout.time_column.value_or(""));
  } else {
    json.null("rate_hz").null("delimiter").null("decimal").null("time_column");
  }
  json.close_object();
}

void add_channel(JsonText& json, const ChannelPlan& channel, const Scenario& scenario) {
  std::string source = channel.source.empty() ? channel.label : channel.source;
  // A table's header states the unit in brackets, and a source is the header text as it stands.
  if (scenario.file.kind == FileKind::csv && !scenario.file.csv.units_row && !channel.unit.empty())
    source += " (" + channel.unit + ")";
  json.open_object().text("source", source).text("label", channel.label);
  json.text("role", recording::name_of(channel.role));
  if (channel.lead != recording::Lead::none) json.text("lead", recording::name_of(channel.lead));
  json.text("unit", channel.unit).truth("invert", false);
  if (channel.position_mm) {
    json.open_list("position_mm").item((*channel.position_mm)[0]).item((*channel.position_mm)[1]);
    json.close_list();
  }
  json.close_object();
}

void add_activations(JsonText& json, const Truth& truth) {
  json.open_object("activations");
  for (const TrueActivations& channel : truth.activations) {
    json.open_list(channel.channel);
    for (const Seconds time : channel.times)
      json.item(nanosecond_value(time));
    json.close_list();
  }
  json.close_object();
}

void add_pathways(JsonText& json, const Truth& truth) {
  json.open_list("pathways");
  for (const TruePathway& pathway : truth.pathways) {
    json.open_object().text("label", pathway.label).text("from", pathway.from).text("to", pathway.to);
    json.open_list("rows");
    for (const TrueDelay& row : pathway.rows) {
      json.open_list().number({}, nanosecond_value(row.from)).number({}, nanosecond_value(row.to));
      json.item(name_of(row.kind)).close_list();
    }
    json.close_list().close_object();
  }
  json.close_list();
}

void add_responses(JsonText& json, const Truth& truth) {
  json.open_list("responses");
  for (const TrueResponse& row : truth.responses) {
    json.open_object().number("curve", row.curve).text("agent", row.agent).text("background", row.background);
    json.number("concentration_mol_per_l", row.concentration).text("measure", row.measure);
    json.text("unit", row.unit).number("value", row.value).text("status", row.status);
    json.number("step_start_s", row.step_start.value())
        .number("step_end_s", row.step_end.value())
        .close_object();
  }
  json.close_list();
  json.open_list("curves");
  for (const TrueCurve& curve : truth.curves) {
    json.open_object()
        .number("curve", curve.curve)
        .text("agent", curve.agent)
        .text("background", curve.background);
    json.text("measure", curve.measure).text("unit", curve.unit).number("basal", curve.basal);
    json.number("emax", curve.emax).number("pec50", curve.pec50).number("nh", curve.nh);
    json.truth("holds", curve.holds).close_object();
  }
  json.close_list();
}

} // namespace

std::string session_text(const Scenario& scenario) {
  JsonText json(JsonDigits::exact, 2);
  json.open_object().text("format", "chronodrome-session").number("version", 1);
  add_preparation(json, scenario.preparation);
  json.open_object("recording").open_list("files").open_object().text("path", recording_name(scenario));
  json.close_object().close_list();
  add_csv(json, scenario);
  json.close_object();
  json.open_list("channels");
  for (const ChannelPlan& channel : scenario.channels)
    add_channel(json, channel, scenario);
  json.close_list().open_list("pathways");
  for (const PathwayPlan& pathway : scenario.pathways) {
    json.open_object().text("label", pathway.label).text("from", pathway.from).text("to", pathway.to);
    json.number("distance_mm", pathway.distance_mm).close_object();
  }
  json.close_list().open_object("protocol");
  if (scenario.file.protocol_in_annotations)
    json.null("file");
  else
    json.text("file", "protocol.csv");
  json.close_object().open_list("measures");
  for (const std::string& measure : measures_of(scenario))
    json.item(measure);
  json.close_list().open_object("analysis").close_object().open_list("review").close_list().close_object();
  return json.take();
}

std::string protocol_text(const Scenario& scenario) {
  const auto cell = [](const std::string& text) {
    if (text.find_first_of(",\"\n\r") == std::string::npos) return text;
    std::string quoted = "\"";
    for (const char c : text)
      quoted += c == '"' ? "\"\"" : std::string(1, c);
    return quoted + "\"";
  };
  std::string text = "time_s,event,agent,concentration,unit,note\n";
  for (const LoggedEvent& event : protocol_of(scenario)) {
    const bool dosed = event.concentration.has_value();
    text +=
        exact_text(event.time.value()) + "," + protocol::name_of(event.kind) + "," + cell(event.agent) + ",";
    text +=
        (dosed ? exact_text(*event.concentration) + "," + event.unit : ",") + "," + cell(event.note) + "\n";
  }
  return text;
}

std::string truth_text(const Simulated& simulated) {
  const Scenario& scenario = simulated.scenario;
  JsonText json(JsonDigits::exact, 2);
  json.open_object().text("format", "chronodrome-truth").number("version", 1);
  json.text("scenario", scenario.name).text("seed", std::to_string(scenario.seed));
  json.number("duration_s", scenario.duration.value());
  add_activations(json, simulated.truth);
  add_pathways(json, simulated.truth);
  json.open_list("stimuli_s");
  for (const Seconds time : simulated.truth.stimuli)
    json.item(nanosecond_value(time));
  json.close_list().open_list("rhythm");
  for (const TrueEpisode& episode : simulated.truth.rhythm) {
    json.open_object().number("start_s", nanosecond_value(episode.start));
    json.number("end_s", nanosecond_value(episode.end)).text("kind", episode.kind);
    json.text("detail", episode.detail).close_object();
  }
  json.close_list();
  add_responses(json, simulated.truth);
  json.close_object();
  return json.take();
}

Done write_simulated(const Simulated& simulated, const std::string& folder) {
  const std::filesystem::path base(folder);
  std::error_code failure;
  std::filesystem::create_directories(base, failure);
  if (failure)
    return Error{ErrorCode::cannot_write,
                 folder,
                 {},
                 "the folder cannot be made (" + failure.message() + ")",
                 "choose a folder that you may write to"};
  const Scenario& scenario = simulated.scenario;
  const std::string path = (base / recording_name(scenario)).string();
  const auto edf_kind = scenario.file.kind == FileKind::edf ? intake::EdfKind::plain
                        : scenario.file.gaps.empty()        ? intake::EdfKind::continuous
                                                            : intake::EdfKind::discontinuous;
  const Done recorded = scenario.file.kind == FileKind::csv
                            ? intake::write_csv(path, simulated.recording, scenario.file.csv)
                            : intake::write_edf(path, simulated.recording, edf_kind);
  if (!recorded) return recorded;
  if (!scenario.file.protocol_in_annotations) {
    if (const Done log = write_text(base / "protocol.csv", protocol_text(scenario)); !log) return log;
  }
  if (const Done session = write_text(base / (scenario.name + ".session.json"), session_text(scenario));
      !session)
    return session;
  return write_text(base / "truth.json", truth_text(simulated));
}

} // namespace chronodrome::simulation
