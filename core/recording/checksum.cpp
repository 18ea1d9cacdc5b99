// Chronodrome, GPL-3.0-or-later.
#include "recording/checksum.h"

#include <algorithm>
#include <cstring>

namespace chronodrome::recording {
namespace {

constexpr std::uint64_t kPrime = 0x100000001b3U;

void mix(std::array<std::uint64_t, 4>& lanes, const std::byte* from) {
  for (std::size_t k = 0; k < lanes.size(); ++k) {
    std::uint64_t word = 0;
    std::memcpy(&word, from + 8 * k, 8);
    lanes[k] = (lanes[k] ^ word) * kPrime;
    lanes[k] ^= lanes[k] >> 29U;
  }
}

} // namespace

void Checksum::add(std::span<const std::byte> bytes) {
  bytes_ += bytes.size();
  while (!bytes.empty()) {
    if (in_rest_ == 0 && bytes.size() >= rest_.size()) {
      std::array<std::uint64_t, 4> lanes = lanes_;
      while (bytes.size() >= rest_.size()) {
        mix(lanes, bytes.data());
        bytes = bytes.subspan(rest_.size());
      }
      lanes_ = lanes;
      continue;
    }
    const std::size_t count = std::min(bytes.size(), rest_.size() - in_rest_);
    std::memcpy(rest_.data() + in_rest_, bytes.data(), count);
    in_rest_ += count;
    bytes = bytes.subspan(count);
    if (in_rest_ == rest_.size()) {
      mix(lanes_, rest_.data());
      in_rest_ = 0;
    }
  }
}

std::uint64_t Checksum::value() const {
  std::array<std::uint64_t, 4> lanes = lanes_;
  std::array<std::byte, 32> rest{};
  std::memcpy(rest.data(), rest_.data(), in_rest_);
  mix(lanes, rest.data());
  std::uint64_t sum = bytes_;
  for (const std::uint64_t lane : lanes) {
    sum = (sum ^ lane) * kPrime;
    sum ^= sum >> 31U;
  }
  return sum;
}

} // namespace chronodrome::recording
