// Chronodrome, GPL-3.0-or-later.
#include "session/places.h"

#include <algorithm>

namespace chronodrome::session {
namespace {

constexpr Seconds kSame{1e-4};

/// Gathers the landmarks of one kind.
class Gathering {
public:
  Gathering(const SessionResult& result, const std::string& channel) : result_(result), wanted_(channel) {}

  std::vector<Landmark> of(LandmarkKind kind) {
    switch (kind) {
    case LandmarkKind::beat:
      beats();
      break;
    case LandmarkKind::flagged_beat:
      flagged_beats();
      break;
    case LandmarkKind::edited_mark:
      edited_marks();
      break;
    case LandmarkKind::addition:
      additions();
      break;
    case LandmarkKind::rhythm:
      for (const auto& episode : result_.rhythm.episodes)
        found_.push_back({episode.start, episode.end, "", episode.kind});
      break;
    case LandmarkKind::gap:
      gaps();
      break;
    }
    std::stable_sort(found_.begin(), found_.end(),
                     [](const Landmark& a, const Landmark& b) { return a.time < b.time; });
    return std::move(found_);
  }

private:
  [[nodiscard]] bool is_wanted(const std::string& channel) const {
    return wanted_.empty() || wanted_ == channel;
  }

  void at(Seconds time, const std::string& channel, const std::string& what) {
    found_.push_back({time, time, channel, what});
  }

  void beats() {
    for (const auto& channel : result_.activations) {
      if (!is_wanted(channel.channel)) continue;
      for (const auto& mark : channel.marks)
        at(mark.time, channel.channel, "");
    }
  }

  void flagged_beats() {
    using rhythm::IntervalFlag;
    for (std::size_t c = 0; c < result_.intervals.size(); ++c) {
      if (!is_wanted(result_.channels[c].label)) continue;
      for (const auto& interval : result_.intervals[c]) {
        if (interval.flag == IntervalFlag::premature || interval.flag == IntervalFlag::after_pause ||
            interval.flag == IntervalFlag::low_confidence)
          at(interval.time, result_.channels[c].label, rhythm::name_of(interval.flag));
      }
    }
  }

  void edited_marks() {
    for (const auto& channel : result_.activations) {
      if (!is_wanted(channel.channel)) continue;
      for (const auto& mark : channel.marks) {
        if (mark.origin != activation::Origin::detected)
          at(mark.time, channel.channel, activation::name_of(mark.origin));
      }
    }
    for (const auto& correction : result_.session.review) {
      if (correction.what == document::CorrectionKind::remove && correction.time &&
          is_wanted(correction.channel))
        at(*correction.time, correction.channel, "deleted");
    }
  }

  void additions() {
    using protocol::EventKind;
    for (const auto& event : result_.protocol.events) {
      if (event.kind == EventKind::addition || event.kind == EventKind::vehicle ||
          event.kind == EventKind::antagonist || event.kind == EventKind::washout)
        at(event.time, "", event.agent.empty() ? protocol::name_of(event.kind) : event.agent);
    }
  }

  void gaps() {
    for (const auto& channel : result_.channels) {
      if (!is_wanted(channel.label)) continue;
      for (const auto& gap : channel.time_base().gaps())
        found_.push_back({gap.start + channel.skew, gap.end + channel.skew, channel.label, "gap"});
    }
  }

  const SessionResult& result_;
  const std::string& wanted_;
  std::vector<Landmark> found_;
};

} // namespace

std::vector<Landmark> landmarks(const SessionResult& result, LandmarkKind kind, const std::string& channel) {
  return Gathering(result, channel).of(kind);
}

std::optional<Landmark> next_landmark(const SessionResult& result, LandmarkKind kind, Seconds time,
                                      const std::string& channel) {
  for (const auto& landmark : landmarks(result, kind, channel)) {
    if (landmark.time > time + kSame) return landmark;
  }
  return std::nullopt;
}

std::optional<Landmark> previous_landmark(const SessionResult& result, LandmarkKind kind, Seconds time,
                                          const std::string& channel) {
  const auto all = landmarks(result, kind, channel);
  for (auto at = all.rbegin(); at != all.rend(); ++at) {
    if (at->time < time - kSame) return *at;
  }
  return std::nullopt;
}

} // namespace chronodrome::session
