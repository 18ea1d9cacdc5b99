// Chronodrome, GPL-3.0-or-later.
#include "recording/time_base.h"

#include <algorithm>
#include <cassert>
#include <cmath>

namespace chronodrome::recording {
namespace {

// A time that comes from text with 12 digits may fall short of a run's first sample by rounding: so much of a
// sample is forgiven.
constexpr double kForgiven = 1e-6;

double seconds_of(const Run& run, double position, Hertz rate) {
  return run.start.value() + (position - static_cast<double>(run.first)) / rate.value();
}

double end_of(const Run& run, Hertz rate) {
  return run.start.value() + static_cast<double>(run.count) / rate.value();
}

} // namespace

TimeBase::TimeBase(Hertz rate, std::vector<Run> runs) : rate_(rate), runs_(std::move(runs)) {
  assert(rate_.value() > 0.0);
  for ([[maybe_unused]] const Run& run : runs_)
    assert(run.count > 0);
  for (std::size_t i = 1; i < runs_.size(); ++i) {
    assert(runs_[i].first == runs_[i - 1].first + runs_[i - 1].count);
    assert(runs_[i].start > runs_[i - 1].start);
  }
}

std::size_t TimeBase::size() const {
  return runs_.empty() ? 0 : runs_.back().first + runs_.back().count;
}

Seconds TimeBase::start() const {
  return runs_.empty() ? Seconds(0.0) : runs_.front().start;
}

Seconds TimeBase::end() const {
  return runs_.empty() ? Seconds(0.0) : Seconds(end_of(runs_.back(), rate_));
}

std::size_t TimeBase::run_of(std::size_t index) const {
  assert(!runs_.empty());
  const auto after = std::upper_bound(runs_.begin(), runs_.end(), index,
                                      [](std::size_t i, const Run& run) { return i < run.first; });
  return after == runs_.begin() ? 0 : static_cast<std::size_t>(after - runs_.begin()) - 1;
}

Seconds TimeBase::time_at(double position) const {
  if (runs_.empty()) return Seconds(0.0);
  std::size_t index = 0;
  if (position >= static_cast<double>(size())) {
    index = size() - 1;
  } else if (position > 0.0) {
    index = static_cast<std::size_t>(position);
  }
  return Seconds(seconds_of(runs_[run_of(index)], position, rate_));
}

std::optional<double> TimeBase::position_at(Seconds time) const {
  const double forgiven = kForgiven / rate_.value();
  const auto after = std::upper_bound(runs_.begin(), runs_.end(), time.value() + forgiven,
                                      [](double t, const Run& run) { return t < run.start.value(); });
  if (after == runs_.begin()) return std::nullopt;
  const Run& run = *(after - 1);
  if (!(time.value() < end_of(run, rate_))) return std::nullopt;
  const double inside = std::max(0.0, (time - run.start).value() * rate_.value());
  const double last = std::nextafter(static_cast<double>(run.first + run.count), 0.0);
  return std::min(static_cast<double>(run.first) + inside, last);
}

std::size_t TimeBase::first_at_or_after(Seconds time) const {
  // The first run whose last sample is not before `time`.
  const auto run = std::partition_point(runs_.begin(), runs_.end(), [&](const Run& r) {
    return seconds_of(r, static_cast<double>(r.first + r.count - 1), rate_) < time.value();
  });
  if (run == runs_.end()) return size();
  const double ahead = (time - run->start).value() * rate_.value();
  if (!(ahead > 0.0)) return run->first;
  const std::size_t last = run->first + run->count - 1;
  std::size_t index = run->first + std::min(run->count - 1, static_cast<std::size_t>(std::ceil(ahead)));
  // The product above may be one rounding off: settle it by the times themselves.
  while (index > run->first && seconds_of(*run, static_cast<double>(index - 1), rate_) >= time.value())
    --index;
  while (index < last && seconds_of(*run, static_cast<double>(index), rate_) < time.value())
    ++index;
  return index;
}

std::vector<Span> TimeBase::gaps() const {
  std::vector<Span> found;
  for (std::size_t i = 1; i < runs_.size(); ++i)
    found.push_back({Seconds(end_of(runs_[i - 1], rate_)), runs_[i].start});
  return found;
}

bool TimeBase::contiguous(Seconds from, Seconds to) const {
  const double forgiven = kForgiven / rate_.value();
  const auto after = std::upper_bound(runs_.begin(), runs_.end(), from.value() + forgiven,
                                      [](double t, const Run& run) { return t < run.start.value(); });
  if (after == runs_.begin() || to < from) return false;
  const Run& run = *(after - 1);
  return from.value() < end_of(run, rate_) && to.value() <= end_of(run, rate_) + forgiven;
}

} // namespace chronodrome::recording
