// Chronodrome, GPL-3.0-or-later.
#include "session/exclusions.h"

#include <algorithm>

namespace chronodrome::session {
namespace {

/// `span` without `cut`: nothing, one or two stretches.
std::vector<recording::Span> without(recording::Span span, recording::Span cut) {
  if (cut.end <= span.start || span.end <= cut.start) return {span};
  std::vector<recording::Span> rest;
  if (span.start < cut.start) rest.push_back({span.start, cut.start});
  if (cut.end < span.end) rest.push_back({cut.end, span.end});
  return rest;
}

} // namespace

std::vector<response::Exclusion> exclusions_of(std::span<const document::Correction> review) {
  std::vector<response::Exclusion> kept;
  for (const auto& correction : review) {
    if (!correction.time || !correction.to_time) continue;
    const recording::Span span{*correction.time, *correction.to_time};
    if (correction.what == document::CorrectionKind::exclude) kept.push_back({correction.channel, span});
    if (correction.what != document::CorrectionKind::include) continue;
    std::vector<response::Exclusion> rest;
    for (const auto& exclusion : kept) {
      const bool meant = correction.channel.empty() || correction.channel == exclusion.channel;
      for (const auto& part : meant ? without(exclusion.span, span) : std::vector{exclusion.span}) {
        rest.push_back({exclusion.channel, part});
      }
    }
    kept = rest;
  }
  return kept;
}

std::vector<recording::Span> excluded_spans(std::span<const response::Exclusion> exclusions,
                                            const std::string& channel) {
  std::vector<recording::Span> spans;
  for (const auto& exclusion : exclusions) {
    if (exclusion.channel.empty() || exclusion.channel == channel) spans.push_back(exclusion.span);
  }
  std::sort(spans.begin(), spans.end(), [](const auto& a, const auto& b) { return a.start < b.start; });
  return spans;
}

} // namespace chronodrome::session
