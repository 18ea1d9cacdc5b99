// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <cstddef>
#include <span>

namespace chronodrome::recording {

/// Samples of one signal, read in blocks; safe to read from several threads at once. Implementations: doubles
/// or 16-bit integers with a scale, in memory or in a file of the cache folder.
class SampleStore {
public:
  virtual ~SampleStore() = default;
  [[nodiscard]] virtual std::size_t size() const = 0;
  /// Samples first ... first + out.size() - 1, in the signal's unit. Requires: the range lies within size().
  virtual void read(std::size_t first, std::span<double> out) const = 0;
};

} // namespace chronodrome::recording
