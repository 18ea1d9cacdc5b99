// Chronodrome, GPL-3.0-or-later.
#include "recording/signal_writer.h"

#include <algorithm>
#include <cmath>

namespace chronodrome::recording {

SignalWriter::SignalWriter(StoreFolder& folder, std::size_t index)
    : folder_(&folder), index_(index), writer_(folder.writer(samples_file(index))) {}

SignalWriter::SignalWriter(StoreFolder& folder, std::size_t index, const DigitalScale& scale)
    : folder_(&folder), index_(index), digital_(true), scale_(scale),
      writer_(folder.writer(samples_file(index))) {}

void SignalWriter::look_at(std::span<const double> samples) {
  if (samples.empty()) return;
  double low = summary_.min, high = summary_.max, before = summary_.count == 0 ? samples[0] : last_;
  double step =
      summary_.smallest_step > 0.0 ? summary_.smallest_step : std::numeric_limits<double>::infinity();
  bool whole = summary_.all_whole;
  for (const double value : samples) {
    low = value < low ? value : low;
    high = value > high ? value : high;
    const double change = std::abs(value - before);
    step = change > 0.0 && change < step ? change : step;
    before = value;
  }
  for (std::size_t i = 0; whole && i < samples.size(); ++i)
    whole = samples[i] == std::floor(samples[i]);
  summary_.count += samples.size();
  summary_.min = low;
  summary_.max = high;
  summary_.smallest_step = std::isfinite(step) ? step : 0.0;
  summary_.all_whole = whole;
  last_ = before;
}

void SignalWriter::add(std::span<const double> samples) {
  writer_->add(std::as_bytes(samples));
  look_at(samples);
  envelope_.add(samples);
}

void SignalWriter::add(std::span<const std::int16_t> samples) {
  writer_->add(std::as_bytes(samples));
  scaled_.resize(samples.size());
  std::transform(samples.begin(), samples.end(), scaled_.begin(),
                 [scale = scale_](std::int16_t digital) { return scale.value_of(digital); });
  look_at(scaled_);
  envelope_.add(scaled_);
}

SignalWriter::Finished SignalWriter::finish() {
  Finished finished;
  const auto block = writer_->finish();
  finished.samples = digital_ ? digital_store(block, scale_) : double_store(block);
  finished.envelope = envelope_.finish();
  if (!folder_->on_disk()) return finished;
  const auto writer = folder_->writer(envelope_file(index_));
  for (const auto& level : finished.envelope->levels())
    writer->add(std::as_bytes(std::span(level)));
  writer->finish();
  return finished;
}

std::string samples_file(std::size_t index) {
  return "signal-" + std::to_string(index) + ".samples";
}

std::string envelope_file(std::size_t index) {
  return "signal-" + std::to_string(index) + ".envelope";
}

} // namespace chronodrome::recording
