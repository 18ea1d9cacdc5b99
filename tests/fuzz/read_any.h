// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <cmath>
#include <cstdint>
#include <cstdlib>
#include <span>
#include <vector>

#include "intake/recording_reader.h"

/// What must hold for any bytes whatever: an error with a remedy, or a recording that is sound.
namespace chronodrome::fuzz {

inline void require(bool holds) {
  if (!holds) std::abort();
}

inline void check(const Result<recording::Recording>& read) {
  if (!read) {
    require(read.error().code != ErrorCode::internal_fault);
    require(!read.error().what.empty() && !describe(read.error()).empty());
    return;
  }
  for (const recording::Signal& signal : read->signals) {
    require(signal.samples->size() == signal.time_base.size());
    require(signal.envelope->samples() == signal.samples->size());
    require(signal.time_base.rate().value() > 0.0 && std::isfinite(signal.time_base.rate().value()));
    std::vector<double> samples(signal.samples->size());
    signal.samples->read(0, samples);
    for (const double sample : samples)
      require(std::isfinite(sample));
    double end = 0.0;
    for (const recording::Run& run : signal.time_base.runs()) {
      require(std::isfinite(run.start.value()) && run.start.value() >= end - 1e-6 * (1.0 + end));
      end = run.start.value() + static_cast<double>(run.count) / signal.time_base.rate().value();
    }
    if (!samples.empty()) {
      const auto drawn = signal.envelope->columns(*signal.samples, 0, samples.size(), 3);
      require(drawn.size() == 3 && drawn[0].min <= drawn[0].max);
    }
  }
  for (const recording::Annotation& annotation : read->annotations)
    require(std::isfinite(annotation.onset.value()));
}

/// Reads `bytes` as a file of that name, as they are and with a rate that is set.
inline void read_any(std::span<const std::uint8_t> bytes, const char* path) {
  const auto given = std::as_bytes(bytes);
  const intake::MemorySource source(path, std::vector<std::byte>(given.begin(), given.end()));
  intake::ReadSettings settings;
  settings.use_cache = false;
  settings.threads = 1;
  settings.limits.line_bytes = 4096;
  settings.limits.annotations = 1000;
  settings.limits.record_bytes = 1U << 20U;
  check(intake::read_recording(source, settings));
  settings.rate = Hertz(1000.0);
  check(intake::read_recording(source, settings));
}

} // namespace chronodrome::fuzz
