// Chronodrome, GPL-3.0-or-later.
#include "session/saved_layout.h"

#include <algorithm>

#include "base/number_text.h"
#include "session/proposal.h"

namespace chronodrome::session {
namespace {

std::string folded(const std::string& source) {
  std::string text;
  for (const char c : lower_case(source)) {
    if (c != ' ' && c != '\t') text += c;
  }
  return text;
}

/// The signal of this source; spelled a little differently, if only one is.
const recording::Signal* signal_for(const recording::Recording& recording, const std::string& source) {
  if (const auto* exact = recording.find(source)) return exact;
  const recording::Signal* found = nullptr;
  for (const auto& signal : recording.signals) {
    if (folded(signal.source_as_written) != folded(source) && folded(signal.source) != folded(source))
      continue;
    if (found != nullptr) return nullptr;
    found = &signal;
  }
  return found;
}

void take_channels(const document::SessionFile& layout, const recording::Recording& recording,
                   LayoutMatch& match) {
  std::vector<const recording::Signal*> used;
  for (auto entry : layout.channels) {
    const auto* signal = signal_for(recording, entry.source);
    if (signal == nullptr) {
      match.unmatched.push_back("the recording holds no \"" + entry.source + "\", which the layout calls " +
                                entry.label);
      continue;
    }
    used.push_back(signal);
    entry.source = signal->source_as_written;
    if (!signal->unit.empty() && !entry.calibration && entry.unit != signal->unit) {
      match.unmatched.push_back(entry.label + ": the layout says " +
                                (entry.unit.empty() ? "no unit" : entry.unit) + ", the recording " +
                                signal->unit + ", which is used");
      entry.unit = signal->unit;
    }
    match.session.channels.push_back(std::move(entry));
    ++match.matched;
  }
  for (const auto& signal : recording.signals) {
    if (std::find(used.begin(), used.end(), &signal) == used.end())
      match.unmatched.push_back("the layout does not list \"" + signal.source_as_written +
                                "\"; it is left out");
  }
}

bool has_channel(const document::SessionFile& session, const std::string& label) {
  return std::any_of(session.channels.begin(), session.channels.end(),
                     [&](const auto& channel) { return channel.label == label; });
}

void take_pathways_and_measures(const document::SessionFile& layout, LayoutMatch& match) {
  for (const auto& pathway : layout.pathways) {
    if (has_channel(match.session, pathway.from) && has_channel(match.session, pathway.to)) {
      match.session.pathways.push_back(pathway);
    } else {
      match.unmatched.push_back("the pathway " + pathway.label + " lost one of its ends");
    }
  }
  const auto possible = possible_measures(match.session);
  for (const auto& measure : layout.measures) {
    if (std::find(possible.begin(), possible.end(), measure) != possible.end()) {
      match.session.measures.push_back(measure);
    } else {
      match.unmatched.push_back("the measure " + measure + " cannot be taken");
    }
  }
}

} // namespace

LayoutMatch apply_layout(const document::SessionFile& layout, const recording::Recording& recording) {
  LayoutMatch match;
  auto& session = match.session;
  take_channels(layout, recording, match);
  take_pathways_and_measures(layout, match);
  session.csv = layout.csv;
  session.analysis = layout.analysis;
  session.preparation.species = layout.preparation.species;
  session.preparation.tissue = layout.preparation.tissue;
  session.preparation.temperature_c = layout.preparation.temperature_c;
  session.preparation.bath_volume_ml = layout.preparation.bath_volume_ml;
  session.preparation.arrival_delay = layout.preparation.arrival_delay;
  for (const auto& file : recording.files)
    session.files.push_back({file.path, file.sha256});
  if (recording.clock_start) session.preparation.date = recording.clock_start->substr(0, 10);
  return match;
}

} // namespace chronodrome::session
