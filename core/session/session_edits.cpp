// Chronodrome, GPL-3.0-or-later.
#include "session/session_edits.h"

#include <algorithm>

#include "base/number_text.h"
#include "document/measure.h"
#include "session/proposal.h"

namespace chronodrome::session {
namespace {

using document::ChannelEntry;
using document::PathwayEntry;
using document::SessionFile;
using recording::Role;

Error bad_value(const SessionFile& session, std::string what, std::string remedy) {
  return {ErrorCode::bad_value, session.path, {}, std::move(what), std::move(remedy)};
}

template <class Entries>
auto with_label(Entries& entries, const std::string& label) {
  return std::find_if(entries.begin(), entries.end(), [&](const auto& e) { return e.label == label; });
}

/// `rate:RA` becomes `rate:A`; measures of pathways or of channels only.
void rename_in_measures(SessionFile& session, const std::string& from, const std::string& to, bool pathways) {
  const auto renamed = [&](std::string& text) {
    const auto measure = document::measure_named(text);
    if (measure && document::is_of_pathway(measure->kind) == pathways && measure->label == from)
      text = document::name_of(measure->kind) + ":" + to;
  };
  for (auto& measure : session.measures)
    renamed(measure);
  for (auto& window : session.windows)
    renamed(window.measure);
}

void rename_channel(SessionFile& session, const std::string& from, const std::string& to) {
  for (auto& pathway : session.pathways) {
    if (pathway.from == from) pathway.from = to;
    if (pathway.to == from) pathway.to = to;
  }
  for (auto& correction : session.review) {
    if (correction.channel == from) correction.channel = to;
  }
  rename_in_measures(session, from, to, false);
}

/// Measures that nothing gives any more go.
void drop_impossible_measures(SessionFile& session) {
  const auto possible = possible_measures(session);
  std::erase_if(session.measures, [&](const std::string& measure) {
    return std::find(possible.begin(), possible.end(), measure) == possible.end();
  });
}

std::optional<Error> fault_of(const SessionFile& session, std::size_t index, const PathwayEntry& entry) {
  if (trimmed(entry.label).empty())
    return bad_value(session, "the pathway has no label", "give it a short name");
  for (std::size_t i = 0; i < session.pathways.size(); ++i) {
    if (i != index && session.pathways[i].label == entry.label)
      return bad_value(session, "there is another pathway " + entry.label, "give each a label of its own");
  }
  for (const auto& end : {entry.from, entry.to}) {
    if (with_label(session.channels, end) == session.channels.end())
      return bad_value(session, "there is no channel \"" + end + "\"", "choose one of the channels");
  }
  if (entry.from == entry.to)
    return bad_value(session, "the pathway begins and ends at " + entry.from, "choose two channels");
  if (entry.distance_mm && !(*entry.distance_mm > 0.0))
    return bad_value(session, "the distance is not above 0 mm", "give it in mm, or leave it empty");
  return std::nullopt;
}

} // namespace

Result<SessionFile> with_channel_changed(SessionFile session, const std::string& label,
                                         const ChannelEntry& entry) {
  const auto found = with_label(session.channels, label);
  if (found == session.channels.end())
    return bad_value(session, "there is no channel \"" + label + "\"", "choose one of the channels");
  if (trimmed(entry.label).empty())
    return bad_value(session, "a channel needs a label", "give it a short name");
  if (entry.label != label && with_label(session.channels, entry.label) != session.channels.end())
    return bad_value(session, "there is another channel " + entry.label, "give each a label of its own");
  *found = entry;
  const Role role = recording::role_named(entry.role).value_or(Role::other);
  if (!recording::is_electrogram(role)) found->lead.clear();
  if (entry.label != label) rename_channel(session, label, entry.label);
  drop_impossible_measures(session);
  return session;
}

SessionFile with_channel_added(SessionFile session, ChannelEntry entry,
                               const recording::Recording& recording) {
  const auto order_of = [&](const std::string& source) {
    return recording.find(source) == nullptr
               ? recording.signals.size()
               : static_cast<std::size_t>(recording.find(source) - recording.signals.data());
  };
  entry.label = unique_label(entry.label, session.channels);
  const auto place = std::find_if(session.channels.begin(), session.channels.end(), [&](const auto& other) {
    return order_of(other.source) > order_of(entry.source);
  });
  session.channels.insert(place, std::move(entry));
  return session;
}

Result<SessionFile> with_channel_removed(SessionFile session, const std::string& label) {
  const auto found = with_label(session.channels, label);
  if (found == session.channels.end())
    return bad_value(session, "there is no channel \"" + label + "\"", "choose one of the channels");
  if (session.channels.size() == 1)
    return bad_value(session, label + " is the last channel", "a session needs one at least");
  const bool reviewed = std::any_of(session.review.begin(), session.review.end(),
                                    [&](const auto& c) { return c.channel == label; });
  if (reviewed)
    return bad_value(session, label + " has corrections, which would be lost",
                     "undo them first, or leave its measures out instead");
  session.channels.erase(found);
  std::erase_if(session.pathways, [&](const auto& p) { return p.from == label || p.to == label; });
  drop_impossible_measures(session);
  return session;
}

Result<SessionFile> with_pathway_set(SessionFile session, std::size_t index, const PathwayEntry& entry) {
  if (auto fault = fault_of(session, index, entry)) return *fault;
  if (index >= session.pathways.size()) {
    session.pathways.push_back(entry);
    return session;
  }
  const std::string before = session.pathways[index].label;
  session.pathways[index] = entry;
  if (before != entry.label) rename_in_measures(session, before, entry.label, true);
  drop_impossible_measures(session);
  return session;
}

SessionFile with_pathway_removed(SessionFile session, std::size_t index) {
  session.pathways.erase(session.pathways.begin() + static_cast<std::ptrdiff_t>(index));
  drop_impossible_measures(session);
  return session;
}

SessionFile with_measure(SessionFile session, const std::string& measure, bool wanted) {
  std::vector<std::string> kept;
  for (const auto& possible : possible_measures(session)) {
    const bool now =
        std::find(session.measures.begin(), session.measures.end(), possible) != session.measures.end();
    if (possible == measure ? wanted : now) kept.push_back(possible);
  }
  session.measures = std::move(kept);
  return session;
}

} // namespace chronodrome::session
