// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <array>
#include <cmath>
#include <vector>

#include "pharmacology/fit.h"

/// Small computed curves for the tests of the fitting room.
namespace curves {

using chronodrome::Molar;
using chronodrome::pharmacology::CurvePoint;

inline const std::vector<double> kHalfLog{0, 1e-9, 3e-9, 1e-8, 3e-8, 1e-7, 3e-7, 1e-6, 3e-6, 1e-5};

/// Scatter that is the same in every run: ten numbers between -1.2 and 1.2 with mean 0.01.
inline constexpr std::array<double, 10> kScatter{1.0, -1.0, 0.5, -0.7, 1.2, -0.4, 0.3, -1.1, 0.8, -0.5};

inline double hill(double c, double basal, double emax, double pec50, double nh) {
  return c == 0.0 ? basal : basal + (emax - basal) / (1.0 + std::pow(10.0, nh * (-pec50 - std::log10(c))));
}

inline std::vector<CurvePoint> points(const std::vector<double>& concentrations,
                                      const std::vector<double>& responses) {
  std::vector<CurvePoint> result;
  for (std::size_t i = 0; i < concentrations.size(); ++i) {
    result.push_back({Molar(concentrations[i]), responses[i], 1.0});
  }
  return result;
}

inline std::vector<CurvePoint> noisy_hill(const std::vector<double>& concentrations, double basal,
                                          double emax, double pec50, double nh, double scatter = 1.0) {
  std::vector<double> responses;
  for (std::size_t i = 0; i < concentrations.size(); ++i) {
    responses.push_back(hill(concentrations[i], basal, emax, pec50, nh) + scatter * kScatter.at(i % 10));
  }
  return points(concentrations, responses);
}

} // namespace curves
