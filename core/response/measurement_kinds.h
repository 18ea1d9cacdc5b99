// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <memory>

#include "document/measure.h"
#include "response/measurement.h"

namespace chronodrome::response {

/// Stretches of `channel` that are excluded, and that cannot be read, merged.
std::vector<recording::Span> exclusions_of(const Inputs& inputs, const std::string& channel);
std::vector<recording::Span> unreadable_of(const activation::ChannelActivations& channel);

/// Makers, one a kind. Requires: the channel or pathway belongs to `inputs`.
std::unique_ptr<Measurement> rate_measurement(const Inputs& inputs, const ChannelInput& channel);
std::unique_ptr<Measurement> beat_measurement(const Inputs& inputs, const ChannelInput& channel,
                                              document::MeasureKind kind);
std::unique_ptr<Measurement> flow_measurement(const Inputs& inputs, const FlowSeries& flow);
std::unique_ptr<Measurement> pathway_measurement(const Inputs& inputs, const PathwayInput& pathway,
                                                 const ChannelInput& from, const ChannelInput& to,
                                                 document::MeasureKind kind, const Settings& settings);

} // namespace chronodrome::response
