// Chronodrome, GPL-3.0-or-later.
#include "activation/candidate_search.h"

#include <algorithm>
#include <cmath>
#include <numeric>

#include "activation/sliding_median.h"

namespace chronodrome::activation {
namespace {

constexpr double kFast_s = 2.0;
constexpr double kSlow_s = 5.0;

/// Window of +-half samples about a centre that moves on sample by sample.
class CentredMedian {
public:
  CentredMedian(const std::vector<std::uint16_t>& cells, std::size_t half, std::size_t centre)
      : cells_(cells), half_(half), next_(centre > half ? centre - half : 0) {
    last_ = next_;
    advance_to(centre);
  }
  void advance_to(std::size_t centre) {
    const std::size_t end = std::min(cells_.size(), centre + half_ + 1);
    while (next_ < end)
      window_.add(cells_[next_++]);
    while (last_ + half_ < centre)
      window_.remove(cells_[last_++]);
  }
  double median() { return window_.median(); }

private:
  const std::vector<std::uint16_t>& cells_;
  std::size_t half_, next_, last_ = 0;
  SlidingMedian window_;
};

/// The highest first, each taking out lower ones nearer than `spacing`; of equal ones the earlier.
std::vector<Peak> spaced(const std::vector<Peak>& peaks, std::size_t spacing) {
  std::vector<std::size_t> order(peaks.size());
  std::iota(order.begin(), order.end(), std::size_t{0});
  std::stable_sort(order.begin(), order.end(),
                   [&](std::size_t a, std::size_t b) { return peaks[a].height > peaks[b].height; });
  std::vector<char> gone(peaks.size(), 0);
  for (const std::size_t i : order) {
    if (gone[i] != 0) continue;
    for (std::size_t k = i; k-- > 0 && peaks[i].index - peaks[k].index < spacing;)
      gone[k] = 1;
    for (std::size_t k = i + 1; k < peaks.size() && peaks[k].index - peaks[i].index < spacing; ++k)
      gone[k] = 1;
  }
  std::vector<Peak> kept;
  for (std::size_t i = 0; i < peaks.size(); ++i) {
    if (gone[i] == 0) kept.push_back(peaks[i]);
  }
  return kept;
}

} // namespace

std::vector<Peak> find_peaks(std::span<const double> strength, std::size_t first, std::size_t end,
                             const PeakSearch& search) {
  const double fs = search.rate.value();
  const auto samples_in = [&](double seconds) {
    return static_cast<std::size_t>(std::llround(seconds * fs));
  };
  std::vector<std::uint16_t> cells(strength.size());
  for (std::size_t i = 0; i < strength.size(); ++i)
    cells[i] = SlidingMedian::cell_of(strength[i]);
  // Peaks beyond the edges can suppress peaks inside, and be suppressed in turn.
  const std::size_t spacing = std::max<std::size_t>(1, samples_in(search.refractory.value()));
  const std::size_t margin = 8 * spacing;
  const std::size_t low = std::max<std::size_t>(1, first > margin ? first - margin : 0);
  const std::size_t high = std::min(strength.size() > 0 ? strength.size() - 1 : 0, end + margin);
  std::vector<Peak> peaks;
  if (low >= high) return peaks;
  CentredMedian fast(cells, samples_in(kFast_s), low);
  CentredMedian slow(cells, samples_in(kSlow_s), low);
  for (std::size_t i = low; i < high; ++i) {
    fast.advance_to(i);
    slow.advance_to(i);
    const double height = strength[i];
    if (height < strength[i - 1] || height <= strength[i + 1] || height <= 0.0) continue;
    const double noise = std::max(fast.median(), search.least_noise);
    const double slow_noise = std::max(slow.median(), search.least_noise);
    if (height > search.floor_ratio * std::min(noise, slow_noise))
      peaks.push_back({i, height, noise, slow_noise});
  }
  std::vector<Peak> kept = spaced(peaks, spacing);
  std::erase_if(kept, [&](const Peak& p) { return p.index < first || p.index >= end; });
  return kept;
}

} // namespace chronodrome::activation
