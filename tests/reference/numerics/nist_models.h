// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <array>
#include <cmath>
#include <string>
#include <vector>

/// The regression functions of the NIST StRD problems, written once for a number that carries its
/// derivatives, so that the Jacobian is exact.
namespace nist {

constexpr std::size_t kMost = 7;

/// A value and its derivatives by up to seven parameters.
struct Dual {
  double value = 0.0;
  std::array<double, kMost> slope{};

  Dual() = default;
  Dual(double constant) : value(constant) {} // NOLINT(google-explicit-constructor)

  [[nodiscard]] Dual chained(double new_value, double derivative) const {
    Dual result(new_value);
    for (std::size_t i = 0; i < kMost; ++i)
      result.slope[i] = derivative * slope[i];
    return result;
  }
};

inline Dual combined(double value, const Dual& a, double by_a, const Dual& b, double by_b) {
  Dual result(value);
  for (std::size_t i = 0; i < kMost; ++i)
    result.slope[i] = by_a * a.slope[i] + by_b * b.slope[i];
  return result;
}

inline Dual operator+(const Dual& a, const Dual& b) {
  return combined(a.value + b.value, a, 1.0, b, 1.0);
}
inline Dual operator-(const Dual& a, const Dual& b) {
  return combined(a.value - b.value, a, 1.0, b, -1.0);
}
inline Dual operator*(const Dual& a, const Dual& b) {
  return combined(a.value * b.value, a, b.value, b, a.value);
}
inline Dual operator/(const Dual& a, const Dual& b) {
  const double q = a.value / b.value;
  return combined(q, a, 1.0 / b.value, b, -q / b.value);
}
inline Dual exp(const Dual& a) {
  return a.chained(std::exp(a.value), std::exp(a.value));
}
inline Dual log(const Dual& a) {
  return a.chained(std::log(a.value), 1.0 / a.value);
}
inline Dual power(const Dual& a, const Dual& b) {
  return exp(b * log(a));
}

/// The model of problem `name` at predictor `x`; `b` holds b1, b2, ... from index 0.
inline Dual model(const std::string& name, double x, const std::vector<Dual>& b) {
  if (name == "misra1a" || name == "boxbod") return b[0] * (1.0 - exp(-1.0 * b[1] * x));
  if (name == "misra1b") return b[0] * (1.0 - 1.0 / ((1.0 + b[1] * x / 2.0) * (1.0 + b[1] * x / 2.0)));
  if (name == "misra1d") return b[0] * b[1] * x / (1.0 + b[1] * x);
  if (name == "chwirut1" || name == "chwirut2") return exp(-1.0 * b[0] * x) / (b[1] + b[2] * x);
  if (name == "danwood") return b[0] * power(x, b[1]);
  if (name == "kirby2") return (b[0] + x * (b[1] + x * b[2])) / (1.0 + x * (b[3] + x * b[4]));
  if (name == "hahn1" || name == "thurber") {
    return (b[0] + x * (b[1] + x * (b[2] + x * b[3]))) / (1.0 + x * (b[4] + x * (b[5] + x * b[6])));
  }
  if (name == "mgh09") return b[0] * (x * x + x * b[1]) / (x * x + x * b[2] + b[3]);
  if (name == "mgh10") return b[0] * exp(b[1] / (x + b[2]));
  if (name == "mgh17") return b[0] + b[1] * exp(-1.0 * b[3] * x) + b[2] * exp(-1.0 * b[4] * x);
  if (name == "rat42") return b[0] / (1.0 + exp(b[1] - b[2] * x));
  if (name == "rat43") return b[0] / power(1.0 + exp(b[1] - b[2] * x), 1.0 / b[3]);
  if (name == "eckerle4") {
    const Dual z = (x - b[2]) / b[1];
    return b[0] / b[1] * exp(-0.5 * z * z);
  }
  return Dual(std::nan(""));
}

} // namespace nist
