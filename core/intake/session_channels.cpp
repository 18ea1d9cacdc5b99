// Chronodrome, GPL-3.0-or-later.
#include <algorithm>

#include "document/measure.h"
#include "intake/session_parts.h"
#include "intake/text_file.h"
#include "recording/recording.h"

namespace chronodrome::intake {
namespace {

using document::ChannelEntry;
using document::PathwayEntry;
using document::SessionFile;

// Channels of one recorder are skewed by a sample or so; a whole second is already a fault.
constexpr double kLargestSkew = 1.0; // seconds

constexpr const char* kRoles =
    "sinus, atrial, his, ventricular, ecg, map, stimulus, tension, pressure, flow, temperature, other";

template <class Entry>
const Entry* with_label(const std::vector<Entry>& entries, const std::string& label) {
  const auto found =
      std::find_if(entries.begin(), entries.end(), [&](const Entry& entry) { return entry.label == label; });
  return found == entries.end() ? nullptr : &*found;
}

template <class Entry>
std::string labels_of(const std::vector<Entry>& entries) {
  std::string labels;
  for (const auto& entry : entries)
    labels += (labels.empty() ? "" : ", ") + entry.label;
  return labels.empty() ? "none" : labels;
}

void read_calibration(JsonObject& fields, ChannelEntry& channel, JsonNotes& notes) {
  const JsonValue* value = fields.find("calibration");
  if (value == nullptr) return;
  JsonObject calibration(*value, fields.path_of("calibration"), notes);
  const bool whole = calibration.require("raw", "two raw readings") != nullptr &&
                     calibration.require("value", "what the two readings stand for") != nullptr;
  const auto raw = calibration.pair("raw");
  const auto meaning = calibration.pair("value");
  std::string unit = calibration.required_text("unit", "the unit of the two values");
  calibration.finish();
  if (!whole || !raw || !meaning) return;
  if ((*raw)[0] == (*raw)[1] || (*meaning)[0] == (*meaning)[1]) {
    notes.fail(value->place(), calibration.path_of("raw") + " and value need two different readings each",
               "take the second reading at another load");
  }
  channel.calibration = document::Calibration{*raw, *meaning, std::move(unit)};
}

void read_channel(const JsonValue& item, const std::string& path, SessionFile& session, JsonNotes& notes) {
  JsonObject fields(item, path, notes);
  ChannelEntry channel;
  channel.source = fields.required_text("source", "the header text or EDF label as it stands in the file");
  channel.label = fields.required_text("label", "a short name for this channel");
  const auto role = fields.one_of<recording::Role>("role", recording::role_named, kRoles);
  if (role) channel.role = recording::name_of(*role);
  const JsonValue* lead = fields.find("lead");
  channel.lead = fields.text("lead");
  if (lead != nullptr && !channel.lead.empty()) {
    if (channel.lead != "unipolar" && channel.lead != "bipolar") {
      fields.refuse("lead", *lead, "use one of unipolar, bipolar");
    } else if (role && !recording::is_electrogram(*role)) {
      fields.refuse("lead", *lead,
                    "leave it out: a lead belongs to electrograms, not to role " + channel.role);
    }
  }
  channel.unit = fields.text("unit");
  channel.invert = fields.truth("invert");
  channel.position_mm = fields.pair("position_mm");
  read_calibration(fields, channel, notes);
  channel.skew = Seconds(fields.number_between("skew_s", -kLargestSkew, kLargestSkew, "s").value_or(0.0));
  fields.finish();
  if (notes.failed()) return;
  if (with_label(session.channels, channel.label) != nullptr)
    fields.refuse("label", *fields.find("label"), "give every channel a label of its own");
  session.channels.push_back(std::move(channel));
}

void read_pathway(const JsonValue& item, const std::string& path, SessionFile& session, JsonNotes& notes) {
  JsonObject fields(item, path, notes);
  PathwayEntry pathway;
  pathway.label = fields.required_text("label", "a short name for this pathway");
  pathway.from = fields.required_text("from", "the label of a channel");
  pathway.to = fields.required_text("to", "the label of a channel");
  pathway.distance_mm = fields.number("distance_mm", Range::positive);
  fields.finish();
  if (notes.failed()) return;
  for (const auto& [key, label] : {std::pair{"from", &pathway.from}, std::pair{"to", &pathway.to}}) {
    if (with_label(session.channels, *label) == nullptr)
      fields.refuse(key, *fields.find(key), "use the label of a channel: " + labels_of(session.channels));
  }
  if (pathway.from == pathway.to)
    fields.refuse("to", *fields.find("to"), "end at another channel than \"from\"");
  if (with_label(session.pathways, pathway.label) != nullptr)
    fields.refuse("label", *fields.find("label"), "give every pathway a label of its own");
  session.pathways.push_back(std::move(pathway));
}

/// What a channel must be to give this measure, or nothing if it is that.
std::optional<std::string> unfit(document::MeasureKind kind, recording::Role role) {
  using document::MeasureKind;
  using recording::Role;
  switch (kind) {
  case MeasureKind::rate:
    if (recording::is_electrogram(role) || recording::is_mechanical(role)) return std::nullopt;
    return "an electrogram, tension or pressure";
  case MeasureKind::force:
    if (role == Role::tension) return std::nullopt;
    return "tension";
  case MeasureKind::pressure:
  case MeasureKind::dpdt_max:
    if (role == Role::pressure) return std::nullopt;
    return "pressure";
  case MeasureKind::flow:
    if (role == Role::flow) return std::nullopt;
    return "flow";
  case MeasureKind::delay:
  case MeasureKind::conducted:
  case MeasureKind::velocity:
    break;
  }
  return std::nullopt;
}

void read_measure(const JsonValue& item, const std::string& path, SessionFile& session, JsonNotes& notes) {
  const auto refuse = [&](const std::string& remedy) {
    notes.fail(item.place(), path + " is " + shown(item), remedy);
  };
  const auto measure = item.kind == JsonValue::Kind::text ? document::measure_named(item.text) : std::nullopt;
  if (!measure) return refuse("use one of " + document::measure_forms());
  if (document::is_of_pathway(measure->kind)) {
    const PathwayEntry* pathway = with_label(session.pathways, measure->label);
    if (pathway == nullptr) return refuse("name a pathway: " + labels_of(session.pathways));
    if (measure->kind == document::MeasureKind::velocity && !pathway->distance_mm)
      return refuse("set distance_mm of the pathway " + pathway->label);
  } else {
    const ChannelEntry* channel = with_label(session.channels, measure->label);
    if (channel == nullptr) return refuse("name a channel: " + labels_of(session.channels));
    const auto needed = unfit(measure->kind, *recording::role_named(channel->role));
    if (needed) {
      return refuse("the channel's role is " + channel->role + "; " + document::name_of(measure->kind) +
                    " is read from " + *needed);
    }
  }
  if (std::find(session.measures.begin(), session.measures.end(), item.text) != session.measures.end()) {
    notes.warn(item.place(), path + " repeats " + shown(item), "take one of them out; it is read once");
    return;
  }
  session.measures.push_back(item.text);
}

} // namespace

void read_channels(JsonObject& root, SessionFile& session, JsonNotes& notes) {
  const JsonValue* channels = root.require("channels", "a list of channels");
  if (channels == nullptr) return;
  if (channels->kind == JsonValue::Kind::list && channels->items.empty())
    notes.fail(channels->place(), "channels is empty", "describe at least one channel");
  root.for_each("channels", [&](const JsonValue& item, const std::string& path) {
    read_channel(item, path, session, notes);
  });
}

void read_pathways(JsonObject& root, SessionFile& session, JsonNotes& notes) {
  root.for_each("pathways", [&](const JsonValue& item, const std::string& path) {
    read_pathway(item, path, session, notes);
  });
}

void read_measures(JsonObject& root, SessionFile& session, JsonNotes& notes) {
  root.for_each("measures", [&](const JsonValue& item, const std::string& path) {
    read_measure(item, path, session, notes);
  });
}

} // namespace chronodrome::intake
