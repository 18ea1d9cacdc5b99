// Chronodrome, GPL-3.0-or-later.
#include "session/proposal.h"

#include <algorithm>

#include "base/number_text.h"
#include "document/measure.h"

namespace chronodrome::session {
namespace {

using document::ChannelEntry;
using document::MeasureKind;
using document::PathwayEntry;
using recording::Role;

std::string quoted(const std::string& text) {
  return "\"" + text + "\"";
}

/// Label and unit weighed against each other.
Guess guess_role(const LabelReading& label, const std::string& unit, Role& role) {
  const Role by_unit = role_of_unit(unit);
  role = label.role;
  if (by_unit != Role::other) {
    role = by_unit;
    if (label.role == by_unit)
      return {Confidence::sure, "the label says " + quoted(label.word) + " and the unit is " + unit};
    return {Confidence::sure, "the unit is " + unit + ", one of " + recording::name_of(by_unit)};
  }
  if (label.two_chambers)
    return {Confidence::unknown, "the label names two chambers; a signal that shows both can be taken twice"};
  if (label.role == Role::other) return {Confidence::unknown, "neither label nor unit says what this is"};
  const std::string says = "the label says " + quoted(label.word);
  if (!is_electrical_unit(unit)) {
    role = Role::other;
    return {Confidence::unknown, says + ", but the unit is " + unit};
  }
  if (!recording::is_electrogram(label.role) && label.role != Role::stimulus)
    return {Confidence::guessed,
            says + (unit.empty() ? ", no unit is stated" : ", the unit is still " + unit)};
  if (label.confidence == Confidence::sure) return {Confidence::sure, says};
  return {Confidence::guessed, says + ", an abbreviation"};
}

Guess guess_lead(const std::string& label, Role role, std::string& lead) {
  lead.clear();
  if (!recording::is_electrogram(role) || role == Role::ecg || role == Role::map) return {};
  const LeadReading read = read_lead(label);
  if (!read.word.empty()) {
    lead = recording::name_of(read.lead);
    return {Confidence::sure, "the label says " + quoted(read.word)};
  }
  lead = recording::name_of(recording::Lead::unipolar);
  return {Confidence::guessed, "the label names one electrode"};
}

Guess guess_unit(const std::string& unit) {
  if (unit.empty()) return {Confidence::unknown, "the file states no unit"};
  if (unit == "counts") return {Confidence::unknown, "converter counts: a calibration gives them a unit"};
  return {Confidence::sure, "stated by the file"};
}

/// What papers would call a channel of this role.
std::string usual_label(const LabelReading& label, Role role) {
  const std::string side = label.side == '\0' ? "" : std::string(1, label.side);
  switch (role) {
  case Role::sinus:
    return "SN";
  case Role::atrial:
    return side + "A";
  case Role::his:
    return "His";
  case Role::ventricular:
    return side + "V";
  case Role::ecg:
    return "ECG";
  case Role::map:
    return "MAP";
  case Role::stimulus:
    return "Stim";
  case Role::tension:
    return "T";
  case Role::pressure:
    return "P";
  case Role::flow:
    return "Flow";
  case Role::temperature:
    return "Temp";
  case Role::other:
    break;
  }
  return "";
}

/// The file's own name where it is short enough to stand in a table, else what papers would call it.
std::string label_for(const recording::Signal& signal, const LabelReading& reading, Role role) {
  constexpr std::size_t kShort = 8; // characters that a row of the evidence has room for
  const std::string name(trimmed(signal.source));
  if (!name.empty() && name.size() <= kShort) return name;
  const std::string usual = usual_label(reading, role);
  if (!usual.empty()) return usual;
  return name.empty() ? "channel" : name;
}

ChannelProposal channel_for(const recording::Signal& signal, const std::vector<ChannelEntry>& before) {
  ChannelProposal proposal;
  const LabelReading reading = read_label(signal.source);
  Role role = Role::other;
  proposal.role = guess_role(reading, signal.unit, role);
  proposal.entry.source = signal.source_as_written;
  proposal.entry.role = recording::name_of(role);
  proposal.lead = guess_lead(signal.source, role, proposal.entry.lead);
  proposal.entry.unit = signal.unit;
  proposal.unit = guess_unit(signal.unit);
  proposal.entry.label = unique_label(label_for(signal, reading, role), before);
  return proposal;
}

bool has_role(const ChannelEntry& channel, Role role) {
  return channel.role == recording::name_of(role);
}

bool has_pathway_label(const std::vector<PathwayEntry>& pathways, const std::string& label) {
  return std::any_of(pathways.begin(), pathways.end(), [&](const auto& p) { return p.label == label; });
}

} // namespace

std::string unique_label(const std::string& label, const std::vector<ChannelEntry>& channels) {
  const auto taken = [&](const std::string& text) {
    return std::any_of(channels.begin(), channels.end(), [&](const auto& c) { return c.label == text; });
  };
  std::string text = label;
  for (int number = 2; taken(text); ++number)
    text = label + " " + std::to_string(number);
  return text;
}

std::vector<PathwayEntry> propose_pathways(const std::vector<ChannelEntry>& channels) {
  struct Way {
    Role from, to;
    const char* label;
  };
  constexpr Way kWays[] = {{Role::sinus, Role::atrial, "SA"},
                           {Role::atrial, Role::his, "AH"},
                           {Role::his, Role::ventricular, "HV"},
                           {Role::atrial, Role::ventricular, "AV"}};
  std::vector<PathwayEntry> pathways;
  for (const Way& way : kWays) {
    const auto from = std::find_if(channels.begin(), channels.end(),
                                   [&](const auto& channel) { return has_role(channel, way.from); });
    if (from == channels.end()) continue;
    for (const auto& to : channels) {
      if (!has_role(to, way.to)) continue;
      std::string label = way.label;
      if (has_pathway_label(pathways, label)) label += " " + to.label;
      pathways.push_back({label, from->label, to.label, std::nullopt});
    }
  }
  return pathways;
}

std::vector<std::string> possible_measures(const document::SessionFile& session) {
  std::vector<std::string> measures;
  const auto add = [&](MeasureKind kind, const std::string& label) {
    measures.push_back(document::name_of(kind) + ":" + label);
  };
  const auto for_channels = [&](MeasureKind kind, auto&& fits) {
    for (const auto& channel : session.channels) {
      if (fits(recording::role_named(channel.role).value_or(Role::other))) add(kind, channel.label);
    }
  };
  for_channels(MeasureKind::rate, [](Role role) { return recording::is_electrogram(role); });
  for_channels(MeasureKind::rate, [](Role role) { return recording::is_mechanical(role); });
  for (const auto& pathway : session.pathways)
    add(MeasureKind::delay, pathway.label);
  for (const auto& pathway : session.pathways)
    add(MeasureKind::conducted, pathway.label);
  for (const auto& pathway : session.pathways) {
    if (pathway.distance_mm) add(MeasureKind::velocity, pathway.label);
  }
  for_channels(MeasureKind::force, [](Role role) { return role == Role::tension; });
  for_channels(MeasureKind::pressure, [](Role role) { return role == Role::pressure; });
  for_channels(MeasureKind::dpdt_max, [](Role role) { return role == Role::pressure; });
  for_channels(MeasureKind::flow, [](Role role) { return role == Role::flow; });
  return measures;
}

std::vector<std::string> propose_measures(const document::SessionFile& session) {
  const auto role_of = [&](const std::string& label) {
    for (const auto& channel : session.channels) {
      if (channel.label == label) return recording::role_named(channel.role).value_or(Role::other);
    }
    return Role::other;
  };
  const bool has_chamber = std::any_of(session.channels.begin(), session.channels.end(), [](const auto& c) {
    return recording::is_electrogram(recording::role_named(c.role).value_or(Role::other));
  });
  std::vector<std::string> measures;
  for (const auto& text : possible_measures(session)) {
    const auto measure = document::measure_named(text);
    if (!measure || measure->kind == MeasureKind::velocity) continue;
    const bool of_force =
        measure->kind == MeasureKind::rate && recording::is_mechanical(role_of(measure->label));
    if (!(of_force && has_chamber)) measures.push_back(text);
  }
  return measures;
}

Proposal propose(const recording::Recording& recording) {
  Proposal proposal;
  auto& session = proposal.session;
  for (const auto& signal : recording.signals) {
    proposal.channels.push_back(channel_for(signal, session.channels));
    session.channels.push_back(proposal.channels.back().entry);
  }
  for (const auto& file : recording.files)
    session.files.push_back({file.path, file.sha256});
  session.pathways = propose_pathways(session.channels);
  session.measures = propose_measures(session);
  if (recording.clock_start) session.preparation.date = recording.clock_start->substr(0, 10);
  return proposal;
}

} // namespace chronodrome::session
