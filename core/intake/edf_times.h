// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <cstdint>
#include <optional>
#include <vector>

#include "intake/edf_header.h"

namespace chronodrome::intake {

/// Records that follow each other without a gap.
struct RecordRun {
  std::uint64_t record = 0;
  std::uint64_t count = 0;
  double start = 0.0; ///< seconds since the first record
};

/// A record whose onset fits neither neighbour.
struct IsolatedOnset {
  std::uint64_t record = 0;
  double onset = 0.0;    ///< as stated, seconds since the start time of the header
  double expected = 0.0; ///< as the neighbours put it
};

/// Where the records of a file stand in time, from the onsets that they state.
class EdfTimes {
public:
  explicit EdfTimes(const EdfHeader& header);

  /// The next record. False: it begins before the one before it ends, in a file that says it is
  /// discontinuous.
  bool add(std::optional<double> onset);
  [[nodiscard]] const std::vector<RecordRun>& runs() const { return runs_; }
  [[nodiscard]] double first_onset() const { return first_onset_.value_or(0.0); }
  [[nodiscard]] std::uint64_t without_onset() const { return without_onset_; }
  /// The first record of a continuous file whose onset the record before it and the one behind it outvote:
  /// it stands between them.
  [[nodiscard]] const std::optional<IsolatedOnset>& first_isolated() const { return first_isolated_; }
  [[nodiscard]] std::uint64_t isolated() const { return isolated_; }
  /// Records of a continuous file that say they begin before the one before them ends.
  [[nodiscard]] std::uint64_t overlapping() const { return overlapping_; }

private:
  /// What was odd about the record before, until its follower confirms it or not.
  enum class Doubt { none, late, early };
  void outvote_if_isolated(double onset);

  bool discontinuous_;
  double duration_;
  double tolerance_;
  std::optional<double> first_onset_;
  std::vector<RecordRun> runs_;
  std::uint64_t records_ = 0, without_onset_ = 0, overlapping_ = 0, isolated_ = 0;
  Doubt doubt_ = Doubt::none;
  IsolatedOnset doubtful_;
  std::optional<IsolatedOnset> first_isolated_;
};

} // namespace chronodrome::intake
