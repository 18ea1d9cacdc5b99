// Chronodrome, GPL-3.0-or-later.
#include "activation/shape.h"

#include <algorithm>
#include <array>
#include <cmath>

#include "numerics/robust.h"

namespace chronodrome::activation {
namespace {

constexpr std::size_t kShapeNeighbours = 8;
constexpr double kWeak = 0.5;
constexpr double kUnlike = 0.75;

} // namespace

double shape_match(const std::vector<Candidate>& beats, std::size_t i) {
  std::array<double, std::tuple_size_v<Shape>> mean{};
  const std::size_t first = i > kShapeNeighbours ? i - kShapeNeighbours : 0;
  const std::size_t end = std::min(beats.size(), i + kShapeNeighbours + 1);
  if (end - first < 5) return 1.0;
  for (std::size_t k = first; k < end; ++k) {
    for (std::size_t p = 0; k != i && p < mean.size(); ++p)
      mean[p] += static_cast<double>(beats[k].shape[p]);
  }
  double ab = 0.0, aa = 0.0, bb = 0.0;
  for (std::size_t p = 0; p < mean.size(); ++p) {
    const double own = static_cast<double>(beats[i].shape[p]);
    ab += own * mean[p];
    aa += own * own;
    bb += mean[p] * mean[p];
  }
  return aa > 0.0 && bb > 0.0 ? ab / std::sqrt(aa * bb) : 0.0;
}

double usual_match(std::span<const double> matches, std::size_t i) {
  const std::size_t first = i > kShapeNeighbours ? i - kShapeNeighbours : 0;
  const std::size_t end = std::min(matches.size(), i + kShapeNeighbours + 1);
  if (end - first < 5) return 1.0;
  std::vector<double> others;
  for (std::size_t k = first; k < end; ++k) {
    if (k != i) others.push_back(matches[k]);
  }
  return numerics::median(others);
}

void take_out_wiggles(std::vector<Candidate>& beats) {
  std::vector<char> is_wiggle(beats.size(), 0);
  std::vector<double> amplitudes;
  for (std::size_t i = 0; i < beats.size(); ++i) {
    if (static_cast<double>(beats[i].height) >= kWeak * static_cast<double>(beats[i].level)) continue;
    amplitudes.clear();
    const std::size_t first = i > kShapeNeighbours ? i - kShapeNeighbours : 0;
    for (std::size_t k = first; k < std::min(beats.size(), i + kShapeNeighbours + 1); ++k)
      amplitudes.push_back(static_cast<double>(beats[k].amplitude));
    if (static_cast<double>(beats[i].amplitude) >= kWeak * numerics::median(amplitudes)) continue;
    if (shape_match(beats, i) < kUnlike) is_wiggle[i] = 1;
  }
  std::size_t next = 0;
  std::erase_if(beats, [&](const Candidate&) { return is_wiggle[next++] != 0; });
}

} // namespace chronodrome::activation
