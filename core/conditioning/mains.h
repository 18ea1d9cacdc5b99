// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <cstddef>
#include <cstdint>
#include <optional>
#include <span>
#include <vector>

#include "base/quantity.h"
#include "base/result.h"

namespace chronodrome::conditioning {

enum class MainsChoice { automatic, fifty, sixty, off };

struct MainsSettings {
  MainsChoice nominal = MainsChoice::automatic; ///< automatic: whichever of 50 and 60 Hz stands out, locally
  std::vector<int> harmonics = {1, 2, 3, 5};    ///< multiples taken out, as far as they lie below 0.45 rate
  double presence_ratio = 4.0;                  ///< power at the mains over that of its neighbours
  double mask_quantile = 0.88;                  ///< of |dV/dt|: steeper samples are activations ...
  double mask_medians = 4.0;                    ///< ... if they also exceed that many medians of |dV/dt|
  Seconds mask_margin{4e-3};                    ///< left out on either side of a steep sample

  /// Errors: bad_usage (empty or non-positive harmonics, ratio not above 1, quantile outside 0 to 1).
  [[nodiscard]] std::optional<Error> check() const;
};

/// What was taken out of samples first ... end - 1.
struct HumStretch {
  std::size_t first = 0;
  std::size_t end = 0;
  double frequency_hz = 0.0; ///< 0: no hum, samples untouched
  double rms = 0.0;          ///< of what was removed
};

/// Takes mains hum out of `samples`, in place, without touching what the beats look like: least squares on
/// the samples between the beats, in stretches of about a second that overlap, at a frequency that is
/// followed over +-4 s. A stretch is left untouched where the power at the mains does not exceed
/// `presence_ratio` times that of its neighbours 3.5 and 6.5 Hz away (pooled over about +-4 s), and where its
/// slope is below a thousandth of the beats'. `unusable`: same size, non-zero samples never enter a fit.
/// `offset`: position of samples[0] in its run. Every number depends only on the signal within 15 s. Returns
/// the stretches in order, covering all samples. Accuracy: the residual of a stationary hum 0.02 Hz off
/// nominal is below 1 % of it; activation times of clean deflections move by less than 0.1 ms under hum of
/// 0.3 of their amplitude. Source: least-squares removal of sinusoids; principle of leaving the beats out as
/// in Levkov C et al., Biomed Eng Online 2005;4:50.
std::vector<HumStretch> remove_hum(std::span<double> samples, std::span<const std::uint8_t> unusable,
                                   Hertz rate, std::size_t offset, const MainsSettings& settings);

} // namespace chronodrome::conditioning
