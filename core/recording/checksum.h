// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <array>
#include <cstddef>
#include <cstdint>
#include <span>

namespace chronodrome::recording {

/// Tells a store that was cut short or overwritten from a whole one, at the speed of memory. No protection
/// against intent: that is the digest's. Four lanes of FNV-1a over 8-byte words.
class Checksum {
public:
  void add(std::span<const std::byte> bytes);
  [[nodiscard]] std::uint64_t value() const;

private:
  std::array<std::uint64_t, 4> lanes_{0xcbf29ce484222325U, 0x9e3779b97f4a7c15U, 0xc2b2ae3d27d4eb4fU,
                                      0x165667b19e3779f9U};
  std::array<std::byte, 32> rest_{};
  std::size_t in_rest_ = 0;
  std::uint64_t bytes_ = 0;
};

} // namespace chronodrome::recording
