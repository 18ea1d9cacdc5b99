// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <vector>

#include "activation/channel_scan.h"
#include "conditioning/conditioning.h"

namespace chronodrome::activation {

/// Collects noise and faults window by window while the blocks of a channel pass.
class NoiseMeter {
public:
  explicit NoiseMeter(const recording::Channel& channel);
  /// The block's own samples. `between_beats(i)`: true where array index i lies between the beats.
  template <class BetweenBeats>
  void look_at(const conditioning::ConditionedBlock& block, BetweenBeats between_beats) {
    const std::size_t low = block.core_first - block.first;
    const std::size_t high = block.core_end - block.first;
    for (std::size_t i = low; i < high;) {
      const std::size_t end = begin_window(block, i, high);
      for (std::size_t k = i; k < end; ++k) {
        if ((block.flags[k] & conditioning::kClipped) != 0) current_.clipped += 1.0;
        if (k % stride_ == 0 && (block.flags[k] & conditioning::kUnreadable) == 0 && between_beats(k))
          values_.push_back(block.detection[k]);
      }
      current_.samples += static_cast<double>(end - i);
      add_hum(block, i, end);
      i = end;
    }
  }
  std::vector<WindowNoise> finish();

private:
  std::size_t begin_window(const conditioning::ConditionedBlock& block, std::size_t i, std::size_t high);
  void add_hum(const conditioning::ConditionedBlock& block, std::size_t i, std::size_t end);
  void close();

  const recording::Channel& channel_;
  std::size_t stride_;
  WindowNoise current_;
  bool open_ = false;
  std::vector<double> values_;
  std::vector<WindowNoise> windows_;
};

} // namespace chronodrome::activation
