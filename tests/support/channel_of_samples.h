// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <algorithm>
#include <memory>
#include <span>
#include <string>
#include <utility>
#include <vector>

#include "recording/recording.h"

namespace chronodrome::test_support {

/// Doubles in memory.
class SamplesInMemory final : public recording::SampleStore {
public:
  explicit SamplesInMemory(std::vector<double> samples) : samples_(std::move(samples)) {}
  [[nodiscard]] std::size_t size() const override { return samples_.size(); }
  void read(std::size_t first, std::span<double> out) const override {
    std::copy_n(samples_.begin() + static_cast<std::ptrdiff_t>(first), out.size(), out.begin());
  }

private:
  std::vector<double> samples_;
};

/// A channel over a recording that holds nothing else. `runs`: empty for one run from time 0.
inline recording::Channel channel_of_samples(std::vector<double> samples, double rate_hz,
                                             recording::Role role,
                                             recording::Lead lead = recording::Lead::none,
                                             std::vector<recording::Run> runs = {},
                                             const std::string& label = "X") {
  auto recording = std::make_shared<recording::Recording>();
  recording::Signal signal;
  signal.source = label;
  signal.source_as_written = label;
  signal.unit = "mV";
  if (runs.empty() && !samples.empty()) runs = {{0, samples.size(), Seconds(0.0)}};
  signal.time_base = recording::TimeBase(Hertz(rate_hz), std::move(runs));
  signal.samples = std::make_shared<SamplesInMemory>(std::move(samples));
  recording->duration = signal.time_base.end();
  recording->signals.push_back(std::move(signal));
  recording::Channel channel;
  channel.label = label;
  channel.role = role;
  channel.lead = lead;
  channel.unit = "mV";
  channel.recording = std::move(recording);
  return channel;
}

} // namespace chronodrome::test_support
