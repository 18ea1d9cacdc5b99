// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <cstdint>
#include <limits>
#include <memory>
#include <span>
#include <string>
#include <vector>

#include "recording/envelope_builder.h"
#include "recording/store_folder.h"

namespace chronodrome::recording {

/// What is known of all samples of a signal once they have gone by.
struct SampleSummary {
  std::size_t count = 0;
  double min = std::numeric_limits<double>::infinity();
  double max = -std::numeric_limits<double>::infinity();
  double smallest_step = 0.0; ///< smallest difference between neighbours that differ; 0 if none do
  bool all_whole = true;      ///< every value is a whole number
};

/// Takes the samples of one signal in pieces; store, envelope and summary come out in one pass.
class SignalWriter {
public:
  /// Doubles. `index`: number of the signal in its recording.
  SignalWriter(StoreFolder& folder, std::size_t index);
  /// 16-bit integers with a scale.
  SignalWriter(StoreFolder& folder, std::size_t index, const DigitalScale& scale);

  /// Requires: finite values; a writer of doubles.
  void add(std::span<const double> samples);
  /// Requires: a writer of integers.
  void add(std::span<const std::int16_t> samples);
  [[nodiscard]] const SampleSummary& summary() const { return summary_; }

  struct Finished {
    std::shared_ptr<const SampleStore> samples;
    std::shared_ptr<const Envelope> envelope;
  };
  Finished finish();

private:
  void look_at(std::span<const double> samples);

  StoreFolder* folder_;
  std::size_t index_;
  bool digital_ = false;
  DigitalScale scale_;
  std::unique_ptr<BlockWriter> writer_;
  EnvelopeBuilder envelope_;
  SampleSummary summary_;
  double last_ = 0.0;
  std::vector<double> scaled_;
};

/// Names of a signal's files in its folder.
std::string samples_file(std::size_t index);
std::string envelope_file(std::size_t index);

} // namespace chronodrome::recording
