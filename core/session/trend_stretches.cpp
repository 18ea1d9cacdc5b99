// Chronodrome, GPL-3.0-or-later.
#include "session/trend_stretches.h"

#include <algorithm>

#include "session/exclusions.h"

namespace chronodrome::session {
namespace {

bool is_among(const std::vector<std::string>& channels, const std::string& label) {
  return std::find(channels.begin(), channels.end(), label) != channels.end();
}

/// The user's words for a stretch that corrections leave out.
std::string reason_of(const std::vector<document::Correction>& review, const response::Exclusion& exclusion) {
  for (auto it = review.rbegin(); it != review.rend(); ++it) {
    if (it->what != document::CorrectionKind::exclude || !it->time || !it->to_time) continue;
    if (it->channel == exclusion.channel && *it->time <= exclusion.span.start &&
        exclusion.span.start < *it->to_time)
      return it->why;
  }
  return {};
}

} // namespace

std::vector<LostStretch> lost_stretches(const SessionResult& result,
                                        const std::vector<std::string>& channels) {
  std::vector<LostStretch> lost;
  for (const auto& stretch : result.plan.excluded)
    lost.push_back({{stretch.start, stretch.end}, true, "drug log"});
  for (const auto& exclusion : exclusions_of(result.session.review)) {
    if (exclusion.channel.empty() || is_among(channels, exclusion.channel))
      lost.push_back({exclusion.span, true, reason_of(result.session.review, exclusion)});
  }
  for (const auto& channel : result.activations) {
    if (!is_among(channels, channel.channel)) continue;
    for (const auto& stretch : channel.unreadable)
      lost.push_back({stretch.span, false, stretch.reason});
  }
  std::stable_sort(lost.begin(), lost.end(),
                   [](const LostStretch& a, const LostStretch& b) { return a.span.start < b.span.start; });
  return lost;
}

std::vector<Seconds> edited_times(const SessionResult& result, const std::vector<std::string>& channels) {
  std::vector<Seconds> times;
  for (const auto& channel : result.activations) {
    if (!is_among(channels, channel.channel)) continue;
    for (const auto& mark : channel.marks) {
      if (mark.origin != activation::Origin::detected) times.push_back(mark.time);
    }
  }
  for (const auto& correction : result.session.review) {
    if (correction.what == document::CorrectionKind::remove && correction.time &&
        is_among(channels, correction.channel))
      times.push_back(*correction.time);
  }
  std::sort(times.begin(), times.end());
  return times;
}

} // namespace chronodrome::session
