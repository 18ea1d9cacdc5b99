// Chronodrome, GPL-3.0-or-later.
#include <array>

#include "base/json_text.h"
#include "base/number_text.h"
#include "results/tables.h"

namespace chronodrome::results {
namespace {

using session::SessionResult;

void write_recording(JsonText& json, const recording::Recording& recording) {
  json.open_object("recording").number("duration_s", recording.duration.value());
  if (recording.clock_start) {
    json.text("clock_time_of_zero", *recording.clock_start);
  } else {
    json.null("clock_time_of_zero");
  }
  json.number("file_time_of_zero_s", recording.file_time_of_zero.value());
  json.open_list("files");
  for (const auto& file : recording.files) {
    json.open_object().text("path", file.path).text("kind", file.kind).text("sha256", file.sha256);
    json.count("bytes", file.bytes).number("start_s", file.start.value()).close_object();
  }
  json.close_list().open_list("notes");
  for (const auto& note : recording.file_notes)
    json.item(note);
  json.close_list().close_object();
}

void write_settings(JsonText& json, const SessionResult& result) {
  json.open_object("settings");
  for (const auto& setting : result.settings) {
    if (const auto* number = std::get_if<double>(&setting.second)) {
      json.number(setting.first, *number);
    } else if (const auto* truth = std::get_if<bool>(&setting.second)) {
      json.truth(setting.first, *truth);
    } else {
      json.text(setting.first, std::get<std::string>(setting.second));
    }
  }
  json.close_object().open_list("settings_changed");
  for (const auto& key : result.settings_changed)
    json.item(key);
  json.close_list();
}

std::optional<double> unless_zero(double value) {
  return value == 0.0 ? std::nullopt : std::optional(value);
}

void write_channels(JsonText& json, const SessionResult& result) {
  const double low_confidence = std::get<double>(result.settings.at("intervals.low_confidence"));
  json.open_list("channels");
  for (std::size_t i = 0; i < result.channels.size(); ++i) {
    const auto& channel = result.channels[i];
    const auto& found = result.activations[i];
    double unreadable = 0.0;
    for (const auto& bad : found.unreadable)
      unreadable += (bad.span.end - bad.span.start).value();
    std::size_t low = 0;
    for (const auto& mark : found.marks) {
      if (mark.confidence < low_confidence) ++low;
    }
    json.open_object().text("label", channel.label).text("source", channel.raw().source_as_written);
    json.text("role", recording::name_of(channel.role)).text("unit", channel.unit);
    json.number("rate_hz", channel.time_base().rate().value()).count("samples", channel.time_base().size());
    json.count("gaps", channel.time_base().gaps().size()).text("activation", found.method);
    json.count("activations", found.marks.size()).count("low_confidence", low);
    json.count("added", result.corrections[i].added).count("removed", result.corrections[i].removed);
    json.count("moved", result.corrections[i].moved).number("unreadable_s", unreadable);
    json.number("timing_sd_ms",
                found.marks.empty() ? std::nullopt : std::optional(in_milliseconds(found.timing_sd)))
        .number("mains_hz", unless_zero(found.mains_hz))
        .close_object();
  }
  json.close_list();
}

void write_pathways(JsonText& json, const SessionResult& result) {
  json.open_list("pathways");
  for (const auto& pathway : result.pathways) {
    std::array<std::size_t, 4> states{};
    std::size_t ambiguous = 0;
    std::size_t unseen = 0;
    for (const auto& row : pathway.rows) {
      ++states[static_cast<std::size_t>(row.state)];
      if (row.ambiguous) ++ambiguous;
      if (row.answer_unseen) ++unseen;
    }
    json.open_object().text("label", pathway.pathway).text("from", pathway.from).text("to", pathway.to);
    const bool conducted = states[static_cast<std::size_t>(conduction::DelayState::conducted)] > 0;
    json.number("control_delay_ms",
                conducted ? std::optional(in_milliseconds(pathway.control_delay)) : std::nullopt);
    for (const auto state : {conduction::DelayState::conducted, conduction::DelayState::blocked,
                             conduction::DelayState::retrograde, conduction::DelayState::unpaired}) {
      json.count(conduction::name_of(state), states[static_cast<std::size_t>(state)]);
    }
    json.count("ambiguous", ambiguous).count("blocked_unseen", unseen).close_object();
  }
  json.close_list();
}

/// Every flag with what it belongs to: responses in words, fits by name.
void write_flags(JsonText& json, const SessionResult& result) {
  json.open_list("flags");
  for (const auto& row : result.responses.rows) {
    for (const auto& flag : row.flags) {
      json.open_object().text("where", "response").number("curve", row.curve).text("measure", row.measure);
      json.number("concentration_mol_per_l", row.concentration.value()).text("flag", flag).close_object();
    }
  }
  for (const auto& curve : result.curves) {
    for (const auto& flag : curve.fit.flags) {
      json.open_object().text("where", "fit").number("curve", curve.curve).text("measure", curve.measure);
      json.text("likelihood", curve.fit.likelihood).text("flag", flag).close_object();
    }
  }
  json.close_list();
}

/// As the session lists them: which of them are in use, the flags of the responses say.
void write_windows(JsonText& json, const std::vector<document::WindowChoice>& windows) {
  json.open_list("windows");
  for (const auto& window : windows) {
    json.open_object().number("curve", window.curve);
    json.number("concentration_mol_per_l", window.concentration.value());
    if (window.measure.empty()) {
      json.null("measure");
    } else {
      json.text("measure", window.measure);
    }
    json.number("start_s", window.start.value()).number("end_s", window.end.value());
    json.text("when", window.when).text("who", window.who).text("why", window.why).close_object();
  }
  json.close_list();
}

void write_preparation(JsonText& json, const document::Preparation& preparation) {
  json.open_object("preparation").text("label", preparation.label).text("species", preparation.species);
  json.text("tissue", preparation.tissue).number("temperature_c", preparation.temperature_c).close_object();
}

} // namespace

std::string summary_json(const SessionResult& result, const std::string& program_version) {
  JsonText json;
  json.open_object().text("format", "chronodrome-summary").count("version", 1);
  json.open_object("program").text("name", "Chronodrome").text("version", program_version).close_object();
  json.open_object("session")
      .text("path", result.session.path)
      .text("sha256", result.session_sha256)
      .close_object();
  write_preparation(json, result.session.preparation);
  write_recording(json, *result.recording);
  write_settings(json, result);
  json.open_object("counts")
      .count("responses", result.responses.rows.size())
      .count("curves", result.curves.size());
  json.count("rhythm_episodes", result.rhythm.episodes.size())
      .count("corrections", result.session.review.size())
      .count("windows", result.session.windows.size());
  json.count("warnings", result.warnings.size()).close_object();
  write_channels(json, result);
  write_pathways(json, result);
  write_windows(json, result.session.windows);
  json.open_list("warnings");
  for (const auto& warning : result.warnings)
    json.item(describe(warning));
  json.close_list();
  write_flags(json, result);
  json.text("use", "research use only; not for diagnosis");
  json.close_object();
  return json.take();
}

} // namespace chronodrome::results
