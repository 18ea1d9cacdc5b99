// Chronodrome, GPL-3.0-or-later.
#include "session/response_inputs.h"

#include <algorithm>

#include "document/measure.h"
#include "session/exclusions.h"
#include "session/flow_series.h"

namespace chronodrome::session {
namespace {

/// The means of a flow channel are read from the samples, so only where they are asked for.
bool is_asked_for(const std::string& channel, const std::vector<std::string>& measures) {
  return std::any_of(measures.begin(), measures.end(), [&](const std::string& measure) {
    const auto named = document::measure_named(measure);
    return named && named->kind == document::MeasureKind::flow && named->label == channel;
  });
}

} // namespace

response::Inputs response_inputs(const SessionResult& result, const std::vector<std::string>& measures) {
  response::Inputs inputs;
  inputs.plan = &result.plan;
  for (std::size_t i = 0; i < result.channels.size(); ++i) {
    const auto& channel = result.channels[i];
    inputs.channels.push_back({&result.activations[i], channel.role, channel.unit});
    const bool is_flow = channel.role == recording::Role::flow && is_asked_for(channel.label, measures);
    if (is_flow) inputs.flows.push_back(second_means(channel));
  }
  for (std::size_t i = 0; i < result.pathways.size(); ++i) {
    const auto& mm = result.session.pathways[i].distance_mm;
    inputs.pathways.push_back({&result.pathways[i], mm ? std::optional(millimetres(*mm)) : std::nullopt});
  }
  inputs.excluded = exclusions_of(result.session.review);
  inputs.measures = measures;
  inputs.placed = result.session.windows;
  inputs.end = result.recording->duration;
  return inputs;
}

} // namespace chronodrome::session
