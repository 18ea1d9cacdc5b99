// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <cstddef>
#include <mutex>
#include <string>
#include <vector>

#include "recording/recording.h"
#include "session/analysis.h"

namespace chronodrome::session {

/// Tells the caller of an analysis how far it is, and asks whether to go on. May be used from any thread.
class Progress {
public:
  /// Requires: `watch` outlives this.
  explicit Progress(const Watch& watch) : watch_(watch) {}

  /// True once the caller wants the analysis to end.
  [[nodiscard]] bool is_stopped() const;
  /// What detection is going to read. Call once, before read_on().
  void expect(const std::vector<recording::Channel>& channels);
  /// `samples` more of the channel have passed. False: the caller wants the analysis to end.
  bool read_on(const recording::Channel& channel, std::size_t samples);
  /// The share of the work that is done; one below what was told before is not told.
  void tell(double share, const std::string& doing);

private:
  const Watch& watch_;
  std::mutex mutex_; ///< held while the caller is told
  double told_ = -1.0;
  std::size_t samples_ = 0;
  std::size_t passed_ = 0;
};

/// Shares of the work that are done when a stage begins. Before the first of them signals are read, which
/// took 96 % of the time of recordings of 20 min.
namespace stages {
inline constexpr double kPairing = 0.90;
inline constexpr double kRhythm = 0.93;
inline constexpr double kResponses = 0.94;
inline constexpr double kFits = 0.95;
} // namespace stages

} // namespace chronodrome::session
