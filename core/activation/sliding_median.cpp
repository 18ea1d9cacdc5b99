// Chronodrome, GPL-3.0-or-later.
// A double's top bits are its exponent and the leading part of its mantissa: cut off behind the seventh
// mantissa bit they number cells of 1/128 octave in order of size.
#include "activation/sliding_median.h"

#include <bit>
#include <cmath>

namespace chronodrome::activation {
namespace {

constexpr int kMantissaBits = 7;
constexpr int kShift = 52 - kMantissaBits;
constexpr std::uint64_t kLowest = static_cast<std::uint64_t>(1023 - 36) << kMantissaBits; // 2^-36
constexpr std::size_t kCells = (std::size_t{72} << kMantissaBits) + 1;

double lower_edge(std::size_t cell) {
  if (cell == 0) return 0.0;
  return std::bit_cast<double>((kLowest + (cell - 1)) << kShift);
}

} // namespace

SlidingMedian::SlidingMedian() : counts_(kCells, 0) {}

std::uint16_t SlidingMedian::cell_of(double value) {
  const std::uint64_t top = std::bit_cast<std::uint64_t>(value) >> kShift;
  if (top < kLowest || value <= 0.0) return 0;
  const std::uint64_t cell = top - kLowest + 1;
  return static_cast<std::uint16_t>(cell < kCells ? cell : kCells - 1);
}

double SlidingMedian::median() {
  if (size_ == 0) return 0.0;
  const std::size_t rank = size_ / 2;
  while (below_ > rank)
    below_ -= counts_[--cursor_];
  while (below_ + counts_[cursor_] <= rank)
    below_ += counts_[cursor_++];
  const double share = (static_cast<double>(rank - below_) + 0.5) / static_cast<double>(counts_[cursor_]);
  const double low = lower_edge(cursor_);
  return low + share * (lower_edge(cursor_ + 1) - low);
}

} // namespace chronodrome::activation
