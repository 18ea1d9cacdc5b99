// Chronodrome, GPL-3.0-or-later.
#include "activation/stimuli.h"

#include <algorithm>
#include <cmath>

#include "numerics/robust.h"

namespace chronodrome::activation {
namespace {

constexpr double kCell_s = 5.0;
constexpr double kNoiseSds = 20.0;
constexpr Seconds kLongest{0.2};
constexpr Seconds kApart{2e-3};
constexpr std::size_t kSampled = 2000; // values of a cell that its median is taken from

struct Cell {
  std::size_t first = 0, end = 0;
  double level = 0.0, noise = 0.0, low = 0.0, high = 0.0;
};

std::vector<Cell> cells_of(const recording::Channel& channel, const recording::Run& run,
                           const conditioning::Proceed& proceed) {
  const auto length =
      std::max<std::size_t>(16, static_cast<std::size_t>(kCell_s * channel.time_base().rate().value()));
  std::vector<Cell> cells;
  std::vector<double> samples;
  std::vector<double> some;
  for (std::size_t at = 0; at < run.count; at += length) {
    if (proceed && !proceed(0)) return cells;
    samples.resize(std::min(length, run.count - at));
    channel.read(run.first + at, samples);
    const std::size_t stride = std::max<std::size_t>(1, samples.size() / kSampled);
    some.clear();
    for (std::size_t i = 0; i < samples.size(); i += stride)
      some.push_back(samples[i]);
    const auto [low, high] = std::minmax_element(samples.begin(), samples.end());
    cells.push_back({run.first + at, run.first + at + samples.size(), numerics::median(some),
                     numerics::mad_sd(some), *low, *high});
  }
  return cells;
}

/// Half of the largest excursion in a cell and its neighbours; 0 where nothing stands out.
double threshold_of(const std::vector<Cell>& cells, std::size_t at) {
  double largest = 0.0;
  double noise = 0.0;
  for (std::size_t k = at > 0 ? at - 1 : 0; k < std::min(cells.size(), at + 2); ++k) {
    largest = std::max({largest, cells[k].high - cells[at].level, cells[at].level - cells[k].low});
    noise = std::max(noise, cells[k].noise);
  }
  return largest > kNoiseSds * noise ? 0.5 * largest : 0.0;
}

} // namespace

std::vector<Stimulus> find_stimuli(const recording::Channel& channel, const conditioning::Proceed& proceed) {
  std::vector<Stimulus> found;
  const Seconds period = period_of(channel.time_base().rate());
  std::vector<double> samples;
  for (const recording::Run& run : channel.time_base().runs()) {
    const std::vector<Cell> cells = cells_of(channel, run, proceed);
    bool inside = false;
    Stimulus stimulus;
    const auto close = [&](std::size_t end) {
      inside = false;
      stimulus.width = channel.time_at(static_cast<double>(end - 1)) + period - stimulus.time;
      if (stimulus.width > kLongest) return;
      if (!found.empty() && stimulus.time - (found.back().time + found.back().width) < kApart) {
        found.back().width = stimulus.time + stimulus.width - found.back().time;
      } else {
        found.push_back(stimulus);
      }
    };
    for (std::size_t c = 0; c < cells.size(); ++c) {
      if (proceed && !proceed(0)) return found;
      const double threshold = threshold_of(cells, c);
      samples.resize(cells[c].end - cells[c].first);
      channel.read(cells[c].first, samples);
      for (std::size_t i = 0; i < samples.size(); ++i) {
        const bool beyond = threshold > 0.0 && std::abs(samples[i] - cells[c].level) > threshold;
        const std::size_t at = cells[c].first + i;
        if (beyond && !inside) stimulus.time = channel.time_at(static_cast<double>(at));
        if (!beyond && inside) close(at);
        inside = beyond;
      }
    }
    if (inside) close(run.first + run.count);
  }
  return found;
}

std::vector<recording::Span> blanked_by(const std::vector<Stimulus>& stimuli) {
  std::vector<recording::Span> spans;
  for (const Stimulus& stimulus : stimuli) {
    const Seconds length = std::min(stimulus.width + milliseconds(2.0), milliseconds(8.0));
    spans.push_back({stimulus.time - milliseconds(1.0), stimulus.time + length});
  }
  return spans;
}

} // namespace chronodrome::activation
