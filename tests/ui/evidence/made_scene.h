// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <memory>
#include <utility>
#include <vector>

#include "recording/stores.h"
#include "ui/evidence/scene.h"

namespace chronodrome::test_support {

/// A result with signals in memory, one channel each; labels C0, C1 ...
inline std::shared_ptr<session::SessionResult> result_of(std::vector<std::vector<double>> signals,
                                                         double rate,
                                                         const std::vector<recording::Run>& runs = {}) {
  auto result = std::make_shared<session::SessionResult>();
  auto recording = std::make_shared<recording::Recording>();
  for (auto& samples : signals) {
    recording::Signal signal;
    signal.unit = "mV";
    signal.source = "S" + std::to_string(recording->signals.size());
    signal.time_base = recording::TimeBase(
        Hertz(rate), runs.empty() ? std::vector<recording::Run>{{0, samples.size(), Seconds(0.0)}} : runs);
    signal.samples = recording::store_of(std::move(samples));
    signal.envelope = recording::Envelope::of(*signal.samples);
    recording->duration = signal.time_base.end();
    recording->signals.push_back(std::move(signal));
  }
  for (std::size_t c = 0; c < recording->signals.size(); ++c) {
    recording::Channel channel;
    channel.label = "C" + std::to_string(c);
    channel.role = c % 2 == 0 ? recording::Role::atrial : recording::Role::ventricular;
    channel.unit = "mV";
    channel.recording = recording;
    channel.signal = c;
    result->channels.push_back(channel);
    activation::ChannelActivations found;
    found.channel = channel.label;
    for (const auto& gap : channel.time_base().gaps())
      found.unreadable.push_back({gap, "gap"});
    result->activations.push_back(std::move(found));
  }
  result->recording = std::move(recording);
  return result;
}

} // namespace chronodrome::test_support
