// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <cstddef>
#include <cstdint>
#include <memory>
#include <span>
#include <vector>

#include "recording/sample_store.h"

namespace chronodrome::recording {

/// Bytes that do not change any more: in memory, or a file of ours mapped read-only. Aligned to 8.
class Block {
public:
  virtual ~Block() = default;
  [[nodiscard]] virtual std::span<const std::byte> bytes() const = 0;

  [[nodiscard]] std::span<const double> doubles() const;
  [[nodiscard]] std::span<const std::int16_t> integers() const;
};

/// value = physical_min + (digital - digital_min) * gain, in this order of rounding.
struct DigitalScale {
  double gain = 1.0;
  double digital_min = 0.0;
  double physical_min = 0.0;

  [[nodiscard]] double value_of(std::int16_t digital) const {
    return physical_min + (static_cast<double>(digital) - digital_min) * gain;
  }
};

/// Samples in memory.
std::shared_ptr<const SampleStore> store_of(std::vector<double> samples);
std::shared_ptr<const SampleStore> store_of(std::vector<std::int16_t> samples, const DigitalScale& scale);
/// Samples that a block holds.
std::shared_ptr<const SampleStore> double_store(std::shared_ptr<const Block> block);
std::shared_ptr<const SampleStore> digital_store(std::shared_ptr<const Block> block,
                                                 const DigitalScale& scale);
/// Stores one behind the other.
std::shared_ptr<const SampleStore> joined_store(std::vector<std::shared_ptr<const SampleStore>> parts);

} // namespace chronodrome::recording
