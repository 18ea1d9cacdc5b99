// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <cstddef>
#include <memory>
#include <span>
#include <vector>

#include "recording/envelope.h"

namespace chronodrome::recording {

/// Makes an envelope from samples that come in pieces of any length. Equal to Envelope::of over the same
/// samples, bit for bit, however they are cut.
class EnvelopeBuilder {
public:
  /// `samples`: finite values, following those of the last call.
  void add(std::span<const double> samples);
  /// Builds the upper levels. Call once, last.
  [[nodiscard]] std::shared_ptr<const Envelope> finish();

private:
  void close_cell();

  std::vector<float> finest_;
  MinMax cell_;
  std::size_t in_cell_ = 0;
  std::size_t samples_ = 0;
};

} // namespace chronodrome::recording
