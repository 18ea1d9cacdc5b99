// Chronodrome, GPL-3.0-or-later.
// K: tan(pi cutoff / rate). Q: quality factor of a pole pair. D: 1 + K/Q + K^2.
#include "numerics/butterworth.h"

#include <algorithm>
#include <cmath>
#include <complex>
#include <numbers>

#include "base/number_text.h"

namespace chronodrome::numerics {
namespace {

constexpr int kHighestOrder = 16;

double warped(Hertz cutoff, Hertz rate) {
  return std::tan(std::numbers::pi * (cutoff / rate));
}

Section first_order(Pass pass, double k) {
  const double a1 = (k - 1.0) / (k + 1.0);
  if (pass == Pass::low) return {k / (1.0 + k), k / (1.0 + k), 0.0, a1, 0.0};
  return {1.0 / (1.0 + k), -1.0 / (1.0 + k), 0.0, a1, 0.0};
}

Section second_order(Pass pass, double k, double q) {
  const double d = 1.0 + k / q + k * k;
  const double a1 = 2.0 * (k * k - 1.0) / d;
  const double a2 = (1.0 - k / q + k * k) / d;
  if (pass == Pass::low) return {k * k / d, 2.0 * k * k / d, k * k / d, a1, a2};
  return {1.0 / d, -2.0 / d, 1.0 / d, a1, a2};
}

double gain_at_rest(const Section& s) {
  return (s.b0 + s.b1 + s.b2) / (1.0 + s.a1 + s.a2);
}

/// Largest pole radius of a section.
double pole_radius(const Section& s) {
  const double discriminant = s.a1 * s.a1 / 4.0 - s.a2;
  if (discriminant < 0.0) return std::sqrt(s.a2);
  const double root = std::sqrt(discriminant);
  return std::max(std::abs(-s.a1 / 2.0 + root), std::abs(-s.a1 / 2.0 - root));
}

bool is_first_order(const Section& s) {
  return s.b2 == 0.0 && s.a2 == 0.0;
}

/// A decayed state becomes zero before it turns into denormal numbers, which are slow.
double without_dust(double z) {
  return std::abs(z) < 1e-250 ? 0.0 : z;
}

/// Samples [first, last) in the iterator's direction; the state is carried on.
template <class Iterator>
void run_section(const Section& s, std::array<double, 2>& state, Iterator first, Iterator last) {
  constexpr std::ptrdiff_t kStretch = 512;
  double z1 = state[0];
  double z2 = state[1];
  while (first != last) {
    const Iterator end = first + std::min(kStretch, last - first);
    for (; first != end; ++first) {
      const double x = *first;
      const double y = s.b0 * x + z1;
      z1 = (s.b1 * x + z2) - s.a1 * y;
      z2 = s.b2 * x - s.a2 * y;
      *first = y;
    }
    z1 = without_dust(z1);
    z2 = without_dust(z2);
  }
  state = {z1, z2};
}

/// One pass over three stretches that follow each other in the iterator's direction, started in the settled
/// state of the first sample.
template <class Iterator>
void run_pass(std::span<const Section> sections, std::array<std::array<Iterator, 2>, 3> stretches) {
  const auto start =
      std::find_if(stretches.begin(), stretches.end(), [](const auto& s) { return s[0] != s[1]; });
  if (start == stretches.end()) return;
  double level = *(*start)[0]; // of a constant input that went on for ever before
  for (const Section& s : sections) {
    auto state = settled_state(s);
    state = {state[0] * level, state[1] * level};
    for (const auto& stretch : stretches)
      run_section(s, state, stretch[0], stretch[1]);
    level *= gain_at_rest(s);
  }
}

} // namespace

Result<std::vector<Section>> butterworth(Pass pass, int order, Hertz cutoff, Hertz rate) {
  if (order < 1 || order > kHighestOrder) {
    return Error{ErrorCode::bad_usage,
                 "",
                 {},
                 "a filter of order " + std::to_string(order) + " was asked for; 1 to 16 can be made",
                 "choose an order from 1 to 16"};
  }
  if (!(cutoff > Hertz(0.0)) || !(cutoff < rate * 0.5)) {
    return Error{ErrorCode::bad_usage,
                 "",
                 {},
                 "a cut-off of " + number_text(cutoff.value(), 6) +
                     " Hz does not lie between 0 and half of " + number_text(rate.value(), 6) + " Hz",
                 "choose a cut-off below half the sampling rate"};
  }
  const double k = warped(cutoff, rate);
  std::vector<Section> sections;
  if (order % 2 == 1) sections.push_back(first_order(pass, k));
  for (int i = 1; i <= order / 2; ++i) {
    const double angle =
        order % 2 == 0 ? std::numbers::pi * (2 * i - 1) / (2 * order) : std::numbers::pi * i / order;
    sections.push_back(second_order(pass, k, 1.0 / (2.0 * std::cos(angle))));
  }
  return sections;
}

Hertz cutoff_for_two_passes(Pass pass, int order, Hertz cutoff, Hertz rate) {
  const double c = std::pow(std::numbers::sqrt2 - 1.0, 1.0 / (2.0 * order));
  const double k = warped(cutoff, rate);
  const double designed = pass == Pass::low ? k / c : k * c;
  return Hertz(rate.value() * std::atan(designed) / std::numbers::pi);
}

double gain_at(std::span<const Section> sections, Hertz frequency, Hertz rate) {
  const double w = 2.0 * std::numbers::pi * (frequency / rate);
  const std::complex<double> z1 = std::polar(1.0, -w);
  const std::complex<double> z2 = std::polar(1.0, -2.0 * w);
  double gain = 1.0;
  for (const Section& s : sections)
    gain *= std::abs((s.b0 + s.b1 * z1 + s.b2 * z2) / (1.0 + s.a1 * z1 + s.a2 * z2));
  return gain;
}

std::array<double, 2> settled_state(const Section& s) {
  const double y = gain_at_rest(s);
  const double z2 = s.b2 - s.a2 * y;
  return {s.b1 - s.a1 * y + z2, z2};
}

std::size_t customary_padding(std::span<const Section> sections) {
  const auto odd = static_cast<std::size_t>(std::count_if(sections.begin(), sections.end(), is_first_order));
  return 3 * (2 * sections.size() + 1 - odd);
}

std::size_t settling_samples(std::span<const Section> sections) {
  double radius = 0.0;
  for (const Section& s : sections)
    radius = std::max(radius, pole_radius(s));
  const double slowest = radius > 0.0 ? std::ceil(-3.0 / std::log(radius)) : 0.0;
  return std::max(customary_padding(sections), static_cast<std::size_t>(slowest));
}

void filter_forward(std::span<const Section> sections, std::span<double> samples) {
  const auto end = samples.end();
  run_pass<std::span<double>::iterator>(sections, {{{samples.begin(), end}, {end, end}, {end, end}}});
}

void filter_zero_phase(std::span<const Section> sections, std::span<double> samples) {
  if (samples.size() < 2 || sections.empty()) return;
  const std::size_t n = samples.size();
  const std::size_t padding = std::min(settling_samples(sections), n - 1);
  std::vector<double> before(padding);
  std::vector<double> after(padding);
  for (std::size_t k = 0; k < padding; ++k) {
    before[k] = 2.0 * samples[0] - samples[padding - k];
    after[k] = 2.0 * samples[n - 1] - samples[n - 2 - k];
  }
  const std::span<double> left(before);
  const std::span<double> right(after);
  run_pass<std::span<double>::iterator>(
      sections,
      {{{left.begin(), left.end()}, {samples.begin(), samples.end()}, {right.begin(), right.end()}}});
  run_pass<std::span<double>::reverse_iterator>(
      sections,
      {{{right.rbegin(), right.rend()}, {samples.rbegin(), samples.rend()}, {left.rbegin(), left.rend()}}});
}

} // namespace chronodrome::numerics
