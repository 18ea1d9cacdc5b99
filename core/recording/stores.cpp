// Chronodrome, GPL-3.0-or-later.
#include "recording/stores.h"

#include <algorithm>
#include <cassert>
#include <utility>

namespace chronodrome::recording {
namespace {

template <class Sample>
class VectorBlock : public Block {
public:
  explicit VectorBlock(std::vector<Sample> samples) : samples_(std::move(samples)) {}
  [[nodiscard]] std::span<const std::byte> bytes() const override {
    return std::as_bytes(std::span(samples_));
  }

private:
  std::vector<Sample> samples_;
};

class DoubleStore : public SampleStore {
public:
  explicit DoubleStore(std::shared_ptr<const Block> block)
      : block_(std::move(block)), samples_(block_->doubles()) {}
  [[nodiscard]] std::size_t size() const override { return samples_.size(); }
  void read(std::size_t first, std::span<double> out) const override {
    assert(first + out.size() <= samples_.size());
    std::copy_n(samples_.begin() + static_cast<std::ptrdiff_t>(first), out.size(), out.begin());
  }

private:
  std::shared_ptr<const Block> block_;
  std::span<const double> samples_;
};

class DigitalStore : public SampleStore {
public:
  DigitalStore(std::shared_ptr<const Block> block, const DigitalScale& scale)
      : block_(std::move(block)), samples_(block_->integers()), scale_(scale) {}
  [[nodiscard]] std::size_t size() const override { return samples_.size(); }
  void read(std::size_t first, std::span<double> out) const override {
    assert(first + out.size() <= samples_.size());
    const DigitalScale scale = scale_;
    for (std::size_t i = 0; i < out.size(); ++i)
      out[i] = scale.value_of(samples_[first + i]);
  }

private:
  std::shared_ptr<const Block> block_;
  std::span<const std::int16_t> samples_;
  DigitalScale scale_;
};

class JoinedStore : public SampleStore {
public:
  explicit JoinedStore(std::vector<std::shared_ptr<const SampleStore>> parts) : parts_(std::move(parts)) {
    for (const auto& part : parts_)
      ends_.push_back((ends_.empty() ? 0 : ends_.back()) + part->size());
  }
  [[nodiscard]] std::size_t size() const override { return ends_.empty() ? 0 : ends_.back(); }
  void read(std::size_t first, std::span<double> out) const override {
    assert(first + out.size() <= size());
    while (!out.empty()) {
      const auto end = std::upper_bound(ends_.begin(), ends_.end(), first);
      const auto part = static_cast<std::size_t>(end - ends_.begin());
      const std::size_t count = std::min(out.size(), *end - first);
      parts_[part]->read(first - (part == 0 ? 0 : ends_[part - 1]), out.first(count));
      out = out.subspan(count);
      first += count;
    }
  }

private:
  std::vector<std::shared_ptr<const SampleStore>> parts_;
  std::vector<std::size_t> ends_;
};

} // namespace

std::span<const double> Block::doubles() const {
  const auto all = bytes();
  return {reinterpret_cast<const double*>(all.data()), all.size() / sizeof(double)};
}

std::span<const std::int16_t> Block::integers() const {
  const auto all = bytes();
  return {reinterpret_cast<const std::int16_t*>(all.data()), all.size() / sizeof(std::int16_t)};
}

std::shared_ptr<const SampleStore> store_of(std::vector<double> samples) {
  return double_store(std::make_shared<VectorBlock<double>>(std::move(samples)));
}

std::shared_ptr<const SampleStore> store_of(std::vector<std::int16_t> samples, const DigitalScale& scale) {
  return digital_store(std::make_shared<VectorBlock<std::int16_t>>(std::move(samples)), scale);
}

std::shared_ptr<const SampleStore> double_store(std::shared_ptr<const Block> block) {
  return std::make_shared<DoubleStore>(std::move(block));
}

std::shared_ptr<const SampleStore> digital_store(std::shared_ptr<const Block> block,
                                                 const DigitalScale& scale) {
  return std::make_shared<DigitalStore>(std::move(block), scale);
}

std::shared_ptr<const SampleStore> joined_store(std::vector<std::shared_ptr<const SampleStore>> parts) {
  if (parts.size() == 1) return parts.front();
  return std::make_shared<JoinedStore>(std::move(parts));
}

} // namespace chronodrome::recording
