// Chronodrome, GPL-3.0-or-later.
#include "recording/envelope.h"

#include <algorithm>
#include <array>
#include <cassert>
#include <cmath>
#include <limits>

#include "recording/envelope_builder.h"
#include "recording/sample_store.h"

namespace chronodrome::recording {
namespace {

constexpr std::size_t kBlock = 8192; // samples read at a time

float rounded_down(double value) {
  const auto nearest = static_cast<float>(value);
  return static_cast<double>(nearest) > value
             ? std::nextafter(nearest, -std::numeric_limits<float>::infinity())
             : nearest;
}

float rounded_up(double value) {
  const auto nearest = static_cast<float>(value);
  return static_cast<double>(nearest) < value
             ? std::nextafter(nearest, std::numeric_limits<float>::infinity())
             : nearest;
}

void widen(MinMax& range, double low, double high) {
  range.min = std::min(range.min, low);
  range.max = std::max(range.max, high);
}

MinMax range_of(std::span<const double> samples) {
  // Four running pairs: the compiler keeps them in registers side by side. Minimum and maximum do not depend
  // on the order.
  std::array<double, 4> low{}, high{};
  low.fill(samples[0]);
  high.fill(samples[0]);
  std::size_t i = 0;
  for (; i + 4 <= samples.size(); i += 4) {
    for (std::size_t k = 0; k < 4; ++k) {
      low[k] = samples[i + k] < low[k] ? samples[i + k] : low[k];
      high[k] = samples[i + k] > high[k] ? samples[i + k] : high[k];
    }
  }
  MinMax range{*std::min_element(low.begin(), low.end()), *std::max_element(high.begin(), high.end())};
  for (; i < samples.size(); ++i)
    widen(range, samples[i], samples[i]);
  return range;
}

constexpr MinMax kNothing{std::numeric_limits<double>::infinity(), -std::numeric_limits<double>::infinity()};

/// One query: the levels and the store behind them.
class Query {
public:
  Query(const SampleStore& store, const std::vector<std::vector<float>>& levels)
      : store_(store), levels_(levels) {}

  MinMax over(std::size_t from, std::size_t to) {
    MinMax range = kNothing;
    const std::size_t first_cell = (from + Envelope::kFinest - 1) / Envelope::kFinest;
    const std::size_t end_cell = to / Envelope::kFinest;
    if (first_cell >= end_cell) {
      read(from, to, range);
      return range;
    }
    read(from, first_cell * Envelope::kFinest, range);
    read(end_cell * Envelope::kFinest, to, range);
    cells(0, first_cell, end_cell, range);
    return range;
  }

private:
  void cells(std::size_t level, std::size_t from, std::size_t to, MinMax& range) const {
    const std::vector<float>& pairs = levels_[level];
    const auto take = [&](std::size_t a, std::size_t b) {
      for (std::size_t i = a; i < b; ++i)
        widen(range, static_cast<double>(pairs[2 * i]), static_cast<double>(pairs[2 * i + 1]));
    };
    const std::size_t first_above = (from + Envelope::kFactor - 1) / Envelope::kFactor;
    const std::size_t end_above = to / Envelope::kFactor;
    if (level + 1 >= levels_.size() || first_above >= end_above) {
      take(from, to);
      return;
    }
    take(from, first_above * Envelope::kFactor);
    take(end_above * Envelope::kFactor, to);
    cells(level + 1, first_above, end_above, range);
  }

  void read(std::size_t from, std::size_t to, MinMax& range) {
    while (from < to) {
      const std::size_t count = std::min(to - from, buffer_.size());
      const std::span<double> part(buffer_.data(), count);
      store_.read(from, part);
      const MinMax found = range_of(part);
      widen(range, found.min, found.max);
      from += count;
    }
  }

  const SampleStore& store_;
  const std::vector<std::vector<float>>& levels_;
  std::array<double, 2 * Envelope::kFinest> buffer_{};
};

/// floor(count * part / parts) without overflow.
std::size_t share(std::size_t count, std::size_t part, std::size_t parts) {
  return count / parts * part + count % parts * part / parts;
}

} // namespace

Envelope::Envelope(std::vector<std::vector<float>> levels, std::size_t samples)
    : levels_(std::move(levels)), samples_(samples) {}

std::shared_ptr<const Envelope> Envelope::of(const SampleStore& store) {
  EnvelopeBuilder builder;
  std::vector<double> block(kBlock);
  for (std::size_t first = 0; first < store.size(); first += kBlock) {
    const std::span<double> part(block.data(), std::min(kBlock, store.size() - first));
    store.read(first, part);
    builder.add(part);
  }
  return builder.finish();
}

std::vector<MinMax> Envelope::columns(const SampleStore& store, std::size_t first, std::size_t count,
                                      std::size_t columns) const {
  assert(columns > 0 && first + count <= samples_);
  std::vector<MinMax> out;
  if (count == 0) return out;
  out.reserve(columns);
  Query query(store, levels_);
  for (std::size_t c = 0; c < columns; ++c) {
    const std::size_t from = first + share(count, c, columns);
    const std::size_t to = first + share(count, c + 1, columns);
    out.push_back(query.over(from, std::max(to, from + 1))); // more columns than samples: the one under it
  }
  return out;
}

void EnvelopeBuilder::close_cell() {
  finest_.push_back(rounded_down(cell_.min));
  finest_.push_back(rounded_up(cell_.max));
  in_cell_ = 0;
}

void EnvelopeBuilder::add(std::span<const double> samples) {
  samples_ += samples.size();
  while (!samples.empty()) {
    const std::size_t count = std::min(samples.size(), Envelope::kFinest - in_cell_);
    const MinMax range = range_of(samples.first(count));
    if (in_cell_ == 0) {
      cell_ = range;
    } else {
      widen(cell_, range.min, range.max);
    }
    in_cell_ += count;
    if (in_cell_ == Envelope::kFinest) close_cell();
    samples = samples.subspan(count);
  }
}

std::shared_ptr<const Envelope> EnvelopeBuilder::finish() {
  if (in_cell_ > 0) close_cell();
  std::vector<std::vector<float>> levels;
  levels.push_back(std::move(finest_));
  while (levels.back().size() > 2 * Envelope::kFactor) {
    const std::vector<float>& below = levels.back();
    const std::size_t cells = below.size() / 2;
    std::vector<float> above;
    above.reserve(2 * (cells / Envelope::kFactor + 1));
    for (std::size_t i = 0; i < cells; i += Envelope::kFactor) {
      float low = below[2 * i], high = below[2 * i + 1];
      for (std::size_t k = i + 1; k < std::min(i + Envelope::kFactor, cells); ++k) {
        low = std::min(low, below[2 * k]);
        high = std::max(high, below[2 * k + 1]);
      }
      above.push_back(low);
      above.push_back(high);
    }
    levels.push_back(std::move(above));
  }
  return std::make_shared<const Envelope>(std::move(levels), samples_);
}

} // namespace chronodrome::recording
