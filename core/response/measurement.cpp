// Chronodrome, GPL-3.0-or-later.
#include "response/measurement.h"

#include <algorithm>
#include <cmath>
#include <numbers>

#include "numerics/robust.h"
#include "response/measurement_kinds.h"
#include "response/window.h"

namespace chronodrome::response {
namespace {

using document::MeasureKind;

Error not_there(const std::string& measure, const std::string& what) {
  return {ErrorCode::bad_usage,
          "",
          {},
          "the measure " + measure + " names no " + what,
          "use a label that the session defines"};
}

const ChannelInput* channel_named(const Inputs& inputs, const std::string& label) {
  const auto found = std::find_if(inputs.channels.begin(), inputs.channels.end(),
                                  [&](const ChannelInput& one) { return one.activations->channel == label; });
  return found == inputs.channels.end() ? nullptr : &*found;
}

} // namespace

std::vector<recording::Span> exclusions_of(const Inputs& inputs, const std::string& channel) {
  std::vector<recording::Span> spans;
  for (const auto& stretch : inputs.plan->excluded)
    spans.push_back({stretch.start, stretch.end});
  for (const auto& exclusion : inputs.excluded) {
    if (exclusion.channel.empty() || exclusion.channel == channel) spans.push_back(exclusion.span);
  }
  return merged(std::move(spans));
}

std::vector<recording::Span> unreadable_of(const activation::ChannelActivations& channel) {
  std::vector<recording::Span> spans;
  for (const auto& stretch : channel.unreadable)
    spans.push_back(stretch.span);
  return merged(std::move(spans));
}

void set_median(Reading& reading, const std::vector<double>& values) {
  reading.n_values = values.size();
  if (values.empty()) return;
  reading.value = numerics::median(values);
  // The median of normal values scatters sqrt(pi / 2) times as much as their mean.
  if (values.size() > 1)
    reading.sem = std::sqrt(std::numbers::pi / 2.0) * numerics::sem_of_correlated(values);
}

std::string of_all(std::size_t part, std::size_t all) {
  return std::to_string(part) + " of " + std::to_string(all);
}

Result<std::unique_ptr<Measurement>> measurement_of(const std::string& measure, const Inputs& inputs,
                                                    const Settings& settings) {
  const auto named = document::measure_named(measure);
  if (!named) {
    return Error{ErrorCode::bad_usage,
                 "",
                 {},
                 "\"" + measure + "\" is no measure",
                 "use one of " + document::measure_forms()};
  }
  if (named->kind == MeasureKind::flow) {
    for (const auto& flow : inputs.flows) {
      if (flow.channel == named->label) return flow_measurement(inputs, flow);
    }
    return not_there(measure, "flow channel");
  }
  if (!document::is_of_pathway(named->kind)) {
    const ChannelInput* channel = channel_named(inputs, named->label);
    if (channel == nullptr) return not_there(measure, "channel");
    if (named->kind == MeasureKind::rate) return rate_measurement(inputs, *channel);
    return beat_measurement(inputs, *channel, named->kind);
  }
  for (const auto& pathway : inputs.pathways) {
    if (pathway.delays->pathway != named->label) continue;
    const ChannelInput* from = channel_named(inputs, pathway.delays->from);
    const ChannelInput* to = channel_named(inputs, pathway.delays->to);
    if (from == nullptr || to == nullptr) return not_there(measure, "pathway between two known channels");
    if (named->kind == MeasureKind::velocity && !(pathway.distance && pathway.distance->value() > 0.0)) {
      return Error{ErrorCode::bad_usage,
                   "",
                   {},
                   "the measure " + measure + " needs the electrodes' distance",
                   "set distance_mm of the pathway"};
    }
    return pathway_measurement(inputs, pathway, *from, *to, named->kind, settings);
  }
  return not_there(measure, "pathway");
}

} // namespace chronodrome::response
