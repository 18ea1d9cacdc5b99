// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <span>
#include <vector>

namespace chronodrome::pharmacology {

/// The part of a model that is not linear in its parameters: one or two functions of concentration that rise
/// from 0 to 1. A control (log10 concentration -infinity) is exactly 0 with derivatives 0, by a branch:
/// without it the derivatives would be infinity times 0.
class Shape {
public:
  virtual ~Shape() = default;
  [[nodiscard]] virtual std::size_t parameters() const = 0;
  [[nodiscard]] virtual std::size_t functions() const = 0;
  /// `x`: log10 concentration of n levels. Fills `value` with functions() rows of n, then as many
  /// rows of 1 - function (computed directly, so that its digits survive near 1), and, if not null, `slope`
  /// with functions() x parameters() rows of n: derivatives of function m by parameter j in row
  /// m * parameters() + j.
  virtual void evaluate(std::span<const double> theta, std::span<const double> x, double* value,
                        double* slope) const = 0;
};

/// 1 / (1 + 10^(nh (L - x))); theta: L = log10 EC50, ln nh.
class HillShape final : public Shape {
public:
  [[nodiscard]] std::size_t parameters() const override { return 2; }
  [[nodiscard]] std::size_t functions() const override { return 1; }
  void evaluate(std::span<const double> theta, std::span<const double> x, double* value,
                double* slope) const override;
};

/// (1 + (2^(1/s) - 1) 10^(nh (L - x)))^-s, which is 1/2 at x = L whatever s; theta: L, ln nh, ln s.
class RichardsShape final : public Shape {
public:
  [[nodiscard]] std::size_t parameters() const override { return 3; }
  [[nodiscard]] std::size_t functions() const override { return 1; }
  void evaluate(std::span<const double> theta, std::span<const double> x, double* value,
                double* slope) const override;
};

/// Two Hill curves; theta: L1, ln nh1, L2, ln nh2.
class TwoHillShape final : public Shape {
public:
  [[nodiscard]] std::size_t parameters() const override { return 4; }
  [[nodiscard]] std::size_t functions() const override { return 2; }
  void evaluate(std::span<const double> theta, std::span<const double> x, double* value,
                double* slope) const override;
};

/// 1 / (1 + e^-z) without overflow.
double logistic(double z);

} // namespace chronodrome::pharmacology
