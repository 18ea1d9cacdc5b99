// Chronodrome, GPL-3.0-or-later.
//
// Keys of a scenario that describe the recording file and its channels.
#include "simulation/scenario_parts.h"

namespace chronodrome::simulation {

using intake::JsonNotes;
using intake::JsonObject;
using intake::JsonValue;

namespace {

void read_texts(JsonObject& object, const std::string& key, std::vector<std::string>& list,
                JsonNotes& notes) {
  object.for_each(key, [&](const JsonValue& item, const std::string& path) {
    if (item.kind == JsonValue::Kind::text)
      list.push_back(item.text);
    else
      notes.fail(item.place(), path + " is " + intake::shown(item), "put the text into quotes");
  });
}

void read_numbers(JsonObject& object, const std::string& key, std::vector<double>& list, JsonNotes& notes) {
  object.for_each(key, [&](const JsonValue& item, const std::string& path) {
    if (item.kind == JsonValue::Kind::number)
      list.push_back(item.number);
    else
      notes.fail(item.place(), path + " is " + intake::shown(item), "write a number without quotes");
  });
}

void read_span(JsonObject& object, recording::Span& span) {
  set(object, "start_s", span.start);
  set(object, "end_s", span.end);
}

void read_companion(JsonObject& object, Companion& companion) {
  set(object, "ratio", companion.ratio);
  set(object, "width_s", companion.width);
  set(object, "offset_s", companion.offset);
}

void read_step(JsonObject& object, Disturbance::Step& step) {
  set(object, "time_s", step.time);
  set(object, "value", step.value);
}

std::optional<FileKind> file_kind_named(const std::string& name) {
  if (name == "csv") return FileKind::csv;
  if (name == "edf") return FileKind::edf;
  if (name == "edf+") return FileKind::edf_plus;
  return std::nullopt;
}

std::optional<bool> annotations_named(const std::string& name) {
  if (name == "file") return false;
  if (name == "annotations") return true;
  return std::nullopt;
}

void read_disturbance(JsonObject& object, Disturbance& plan, JsonNotes& notes) {
  set(object, "white_sd", plan.white_sd);
  set(object, "pink_sd", plan.pink_sd);
  set(object, "mains_amplitude", plan.mains_amplitude);
  set(object, "mains_hz", plan.mains);
  set(object, "mains_offset_hz", plan.mains_offset);
  set(object, "mains_phase_rad", plan.mains_phase_rad);
  read_numbers(object, "mains_harmonics", plan.mains_harmonics, notes);
  append_each(object, "mains_steps", plan.mains_steps, notes, read_step);
  set(object, "wander_amplitude", plan.wander_amplitude);
  set(object, "wander_hz", plan.wander);
  set(object, "wander_phase_rad", plan.wander_phase_rad);
  append_each(object, "baseline_steps", plan.baseline_steps, notes, read_step);
  append_each(object, "dropouts", plan.dropouts, notes, read_span);
  set(object, "artefact_amplitude", plan.artefact_amplitude);
  set(object, "artefact_tau_s", plan.artefact_tau);
}

void read_identity(JsonObject& object, ChannelPlan& channel) {
  set(object, "label", channel.label);
  set(object, "source", channel.source);
  const auto role = object.one_of<recording::Role>(
      "role", recording::role_named,
      "sinus, atrial, his, ventricular, ecg, stimulus, tension, pressure, flow, temperature, other");
  if (role) channel.role = *role;
  if (object.find("lead") != nullptr) {
    const auto lead = object.one_of<recording::Lead>("lead", recording::lead_named, "unipolar, bipolar");
    if (lead) channel.lead = *lead;
  }
  set(object, "unit", channel.unit);
  set(object, "rate_hz", channel.rate);
  if (object.find("chamber") != nullptr)
    channel.chamber = object.one_of<Chamber>("chamber", chamber_named, "atrial, his, ventricular");
  if (const auto position = object.pair("position_mm")) channel.position_mm = position;
}

void read_channel(JsonObject& object, ChannelPlan& channel, JsonNotes& notes) {
  read_identity(object, channel);
  set(object, "amplitude", channel.amplitude);
  set(object, "amplitude_sd_ratio", channel.amplitude_sd_ratio);
  set(object, "inverted", channel.inverted);
  set(object, "width_s", channel.width);
  set(object, "offset_s", channel.offset);
  append_each(object, "far_fields", channel.far_fields, notes,
              [](JsonObject& item, ChannelPlan::FarField& far) {
                set(item, "from", far.from);
                read_companion(item, far.wave);
              });
  for (const auto& [key, companion] :
       {std::pair("repolarisation", &channel.repolarisation), std::pair("motion", &channel.motion)}) {
    with_object(object, key, notes, [wave = companion](JsonObject& item) {
      *wave = Companion{};
      read_companion(item, **wave);
    });
  }
  set(object, "baseline", channel.baseline);
  set(object, "latency_s", channel.latency);
  set(object, "rise_s", channel.rise);
  set(object, "plateau_s", channel.plateau);
  set(object, "fall_s", channel.fall);
  with_object(object, "noise", notes,
              [&](JsonObject& item) { read_disturbance(item, channel.disturbance, notes); });
  if (const auto range = object.pair("range")) channel.range = range;
  set(object, "bits", channel.bits);
}

} // namespace

void read_file_plan(JsonObject& top, FilePlan& plan, JsonNotes& notes) {
  with_object(top, "recording", notes, [&](JsonObject& object) {
    if (object.find("kind") != nullptr) {
      if (const auto kind = object.one_of<FileKind>("kind", file_kind_named, "csv, edf, edf+"))
        plan.kind = *kind;
    }
    if (object.find("protocol") != nullptr) {
      if (const auto place = object.one_of<bool>("protocol", annotations_named, "file, annotations"))
        plan.protocol_in_annotations = *place;
    }
    set(object, "clock_start", plan.clock_start);
    set(object, "recording_text", plan.recording_text);
    set(object, "record_duration_s", plan.record_duration);
    append_each(object, "gaps", plan.gaps, notes, read_span);
    with_object(object, "csv", notes, [&](JsonObject& csv) {
      set(csv, "delimiter", plan.csv.delimiter);
      set(csv, "decimal", plan.csv.decimal);
      read_texts(csv, "header_lines", plan.csv.header_lines, notes);
      if (auto name = csv.optional_text("time_column")) plan.csv.time_column = name;
      set(csv, "units_row", plan.csv.units_row);
      set(csv, "time_decimals", plan.csv.time_decimals);
      set(csv, "value_decimals", plan.csv.value_decimals);
    });
  });
}

void read_channels(JsonObject& top, Scenario& scenario, JsonNotes& notes) {
  append_each(top, "channels", scenario.channels, notes,
              [&](JsonObject& object, ChannelPlan& channel) { read_channel(object, channel, notes); });
  append_each(top, "pathways", scenario.pathways, notes, [](JsonObject& object, PathwayPlan& pathway) {
    set(object, "label", pathway.label);
    set(object, "from", pathway.from);
    set(object, "to", pathway.to);
    set(object, "distance_mm", pathway.distance_mm);
  });
  read_texts(top, "measures", scenario.measures, notes);
}

} // namespace chronodrome::simulation
