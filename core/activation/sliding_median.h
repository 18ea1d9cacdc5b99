// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <cstddef>
#include <cstdint>
#include <vector>

namespace chronodrome::activation {

/// Median of a window of non-negative values that slides along, at constant cost a step whatever the window's
/// length. Values are counted in cells of 1/128 octave between 2^-36 and 2^36 (smaller ones count as 0).
/// Accuracy: 0.8 % of the value at worst, about 0.1 % by interpolation inside a cell; depends on the values
/// in the window alone, not on where the window came from.
class SlidingMedian {
public:
  SlidingMedian();
  /// Cell of a value, so that a value that enters several windows is looked up once.
  static std::uint16_t cell_of(double value);
  void add(std::uint16_t cell) {
    ++counts_[cell];
    ++size_;
    below_ += cell < cursor_ ? 1U : 0U;
  }
  void remove(std::uint16_t cell) { ///< Requires: the cell was added and not removed since.
    --counts_[cell];
    --size_;
    below_ -= cell < cursor_ ? 1U : 0U;
  }
  [[nodiscard]] std::size_t size() const { return size_; }
  [[nodiscard]] double median(); ///< 0 for an empty window.

private:
  std::vector<std::uint32_t> counts_;
  std::size_t size_ = 0;
  std::size_t cursor_ = 0; ///< cell looked at last
  std::size_t below_ = 0;  ///< values in cells before cursor_
};

} // namespace chronodrome::activation
