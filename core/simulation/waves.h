// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <span>

#include "base/quantity.h"

namespace chronodrome::simulation {

// Waves of one beat, all of height 1. u = (t - t0) / w, where t0 is the activation time under the definition
// of the lead, and w the width.

/// Unipolar deflection -u exp((1 - u^2) / 2): +1 at u = -1, -1 at u = +1; steepest negative slope exactly at
/// u = 0, exp(0.5) / w in size.
double unipolar_wave(double u);

/// Bipolar deflection (1 - u^2) exp(-u^2 / 2): the derivative of the unipolar one, which is the difference of
/// two copies that pass close poles; largest |V| exactly at u = 0, where it is 1; side lobes of -2 exp(-1.5)
/// at u = +-sqrt(3).
double bipolar_wave(double u);

/// Repolarisation, motion: exp(-u^2 / 2).
double bump_wave(double u);

/// Adds height * wave((t - t0) / width) to samples taken at `rate` from time 0, over t0 +- reach * width.
void add_wave(std::span<double> samples, Hertz rate, double (*wave)(double), Seconds t0, Seconds width,
              double height, double reach);

/// Shape of one contraction, value 0 to 1: half a cosine up over `rise`, a plateau, half a cosine down.
struct Contraction {
  Seconds rise, plateau, fall;
  [[nodiscard]] Seconds length() const { return rise + plateau + fall; }
  /// `since`: time since its foot. The steepest rise, pi / (2 rise), lies exactly at rise / 2.
  [[nodiscard]] double at(Seconds since) const;
};

/// Adds height * contraction, foot at `foot`.
void add_contraction(std::span<double> samples, Hertz rate, const Contraction& contraction, Seconds foot,
                     double height);

} // namespace chronodrome::simulation
