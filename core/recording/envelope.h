// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <cstddef>
#include <memory>
#include <span>
#include <vector>

namespace chronodrome::recording {

class SampleStore;

struct MinMax {
  double min = 0.0;
  double max = 0.0;
};

/// True minimum and maximum of any stretch of a signal at a cost that does not grow with its length, so that
/// a spike of one sample is seen at every zoom. A pyramid of float pairs, built once at intake.
class Envelope {
public:
  static constexpr std::size_t kFinest = 64; ///< samples a cell at the lowest level
  static constexpr std::size_t kFactor = 8;  ///< cells that make one of the next level

  /// Levels from the finest on; each level holds min, max, min, max ... rounded outwards to float.
  explicit Envelope(std::vector<std::vector<float>> levels, std::size_t samples);
  /// Reads the whole store once.
  static std::shared_ptr<const Envelope> of(const SampleStore& store);

  [[nodiscard]] std::size_t samples() const { return samples_; }
  [[nodiscard]] const std::vector<std::vector<float>>& levels() const { return levels_; }
  /// Minimum and maximum of `columns` equal stretches of samples [first, first + count). Exact at any zoom
  /// where a column is shorter than a cell (the store is read), else exact to the rounding of a float.
  /// Requires: columns > 0, the range lies within samples().
  [[nodiscard]] std::vector<MinMax> columns(const SampleStore& store, std::size_t first, std::size_t count,
                                            std::size_t columns) const;

private:
  std::vector<std::vector<float>> levels_;
  std::size_t samples_ = 0;
};

} // namespace chronodrome::recording
