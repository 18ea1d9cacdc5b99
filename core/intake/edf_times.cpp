// Chronodrome, GPL-3.0-or-later.
#include "intake/edf_times.h"

#include <algorithm>
#include <cmath>

namespace chronodrome::intake {
namespace {

constexpr double kOnsetNoise = 1e-6; // seconds: onsets such as +8192.202311999999

/// Half a sample of the fastest signal: less is no gap.
double tolerance_of(const EdfHeader& header) {
  std::size_t most = 0;
  for (const EdfSignal& signal : header.signals)
    most = std::max(most, signal.annotations ? 0 : signal.per_record);
  return most == 0 ? kOnsetNoise : std::max(kOnsetNoise, 0.5 * header.duration / static_cast<double>(most));
}

} // namespace

EdfTimes::EdfTimes(const EdfHeader& header)
    : discontinuous_(header.kind == EdfKindRead::discontinuous), duration_(header.duration),
      tolerance_(tolerance_of(header)) {}

/// A record that said it was late or early, and a follower that stands where it would without that record.
void EdfTimes::outvote_if_isolated(double onset) {
  if (std::abs(onset - doubtful_.expected - duration_) > tolerance_) return;
  if (doubt_ == Doubt::late) {
    const std::uint64_t count = runs_.back().count;
    runs_.pop_back();
    runs_.back().count += count;
  } else {
    --overlapping_;
  }
  if (isolated_++ == 0) first_isolated_ = doubtful_;
}

bool EdfTimes::add(std::optional<double> onset) {
  const std::uint64_t record = records_++;
  if (!onset) ++without_onset_;
  if (onset && !first_onset_) first_onset_ = *onset - static_cast<double>(record) * duration_;
  if (runs_.empty()) {
    runs_.push_back({0, 1, 0.0});
    return true;
  }
  if (onset && doubt_ != Doubt::none) outvote_if_isolated(*onset);
  doubt_ = Doubt::none;
  RecordRun& run = runs_.back();
  const double expected = run.start + static_cast<double>(record - run.record) * duration_;
  const double late = onset ? *onset - *first_onset_ - expected : 0.0;
  // A discontinuous file means its gaps.
  if (std::abs(late) > tolerance_ && !discontinuous_) {
    doubt_ = late > 0.0 ? Doubt::late : Doubt::early;
    doubtful_ = {record, *onset, *first_onset_ + expected};
  }
  if (late > tolerance_) {
    runs_.push_back({record, 1, expected + late});
    return true;
  }
  if (late < -tolerance_) {
    if (discontinuous_) return false;
    ++overlapping_;
  }
  ++run.count;
  return true;
}

} // namespace chronodrome::intake
