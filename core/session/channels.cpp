// Chronodrome, GPL-3.0-or-later.
#include "session/channels.h"

#include "document/text_place.h"

namespace chronodrome::session {
namespace {

using document::ChannelEntry;
using recording::Channel;

std::string sources_in(const recording::Recording& recording) {
  std::string list;
  for (const auto& signal : recording.signals) {
    list += (list.empty() ? "\"" : ", \"") + signal.source_as_written + "\"";
  }
  return list.empty() ? "no signal at all" : list;
}

/// Applies a two-point calibration: raw readings a, b stand for values c, d.
std::optional<Error> calibrate(Channel& channel, const ChannelEntry& entry, const std::string& file) {
  if (!entry.calibration) return std::nullopt;
  const auto& [raw, value, unit] = *entry.calibration;
  if (raw[0] == raw[1]) {
    return Error{ErrorCode::bad_value,
                 file,
                 {},
                 "the calibration of channel \"" + entry.label + "\" has two equal raw readings",
                 "give two different readings and what they stand for"};
  }
  channel.gain = (value[1] - value[0]) / (raw[1] - raw[0]);
  channel.offset = value[0] - channel.gain * raw[0];
  if (!unit.empty()) channel.unit = unit;
  return std::nullopt;
}

/// The unit in force before calibration, and a warning where file and session disagree.
std::string unit_of(const ChannelEntry& entry, const recording::Signal& signal, const std::string& file,
                    std::vector<Warning>& warnings) {
  if (signal.unit.empty()) return entry.unit;
  if (signal.unit == "counts" && !entry.calibration && !entry.unit.empty() && entry.unit != "counts") {
    warnings.push_back(
        {file,
         {},
         "channel \"" + entry.label + "\" holds converter counts, and the session calls them " + entry.unit,
         "give a calibration; until then values stay in counts"});
    return signal.unit;
  }
  if (!entry.unit.empty() && entry.unit != signal.unit && !entry.calibration) {
    warnings.push_back({file,
                        {},
                        "channel \"" + entry.label + "\": the session says " + entry.unit +
                            ", the recording says " + signal.unit,
                        "the recording's unit is used; correct the session"});
  }
  return signal.unit;
}

} // namespace

Result<ChannelSet> channels_of(const document::SessionFile& session,
                               const std::shared_ptr<const recording::Recording>& recording) {
  ChannelSet set;
  for (const ChannelEntry& entry : session.channels) {
    const recording::Signal* signal = recording->find(entry.source);
    if (signal == nullptr) {
      return Error{ErrorCode::bad_value, session.path, document::place_of(session.as_read, entry.source),
                   "channel \"" + entry.label + "\" wants the source \"" + entry.source +
                       "\", and the recording holds " + sources_in(*recording),
                   "correct the source in the session"};
    }
    Channel channel;
    channel.label = entry.label;
    channel.role = recording::role_named(entry.role).value_or(recording::Role::other);
    channel.lead = recording::lead_named(entry.lead).value_or(recording::Lead::none);
    channel.recording = recording;
    channel.signal = static_cast<std::size_t>(signal - recording->signals.data());
    channel.unit = unit_of(entry, *signal, session.path, set.warnings);
    channel.skew = entry.skew;
    channel.position_mm = entry.position_mm;
    if (auto error = calibrate(channel, entry, session.path)) return *error;
    if (entry.invert) {
      channel.gain = -channel.gain;
      channel.offset = -channel.offset;
    }
    set.channels.push_back(channel);
  }
  return set;
}

} // namespace chronodrome::session
