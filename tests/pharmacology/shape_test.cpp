// Chronodrome, GPL-3.0-or-later.
#include <catch2/catch.hpp>

#include <cmath>
#include <limits>
#include <memory>
#include <vector>

#include "pharmacology/curves.h"
#include "pharmacology/separable.h"
#include "pharmacology/shape.h"

using namespace chronodrome::pharmacology;
using Catch::Matchers::WithinAbs;
using Catch::Matchers::WithinRel;

namespace {

constexpr double kControl = -std::numeric_limits<double>::infinity();

struct Evaluated {
  std::vector<double> value, slope;
};

Evaluated evaluate(const Shape& shape, const std::vector<double>& theta, const std::vector<double>& x) {
  Evaluated out;
  out.value.resize(2 * shape.functions() * x.size());
  out.slope.resize(shape.functions() * shape.parameters() * x.size());
  shape.evaluate(theta, x, out.value.data(), out.slope.data());
  return out;
}

} // namespace

TEST_CASE("analytic derivatives are those of the function", "[pharmacology][shape]") {
  const std::vector<double> x{kControl, -9.0, -7.3, -7.0, -6.2, -4.0};
  struct Case {
    std::shared_ptr<Shape> shape;
    std::vector<double> theta;
  };
  const std::vector<Case> cases{{std::make_shared<HillShape>(), {-7.0, 0.2}},
                                {std::make_shared<RichardsShape>(), {-7.0, 0.2, -0.6}},
                                {std::make_shared<RichardsShape>(), {-6.5, -0.3, 1.1}},
                                {std::make_shared<TwoHillShape>(), {-8.0, 0.1, -6.0, 0.4}}};
  for (const Case& one : cases) {
    const Shape& shape = *one.shape;
    const Evaluated here = evaluate(shape, one.theta, x);
    for (std::size_t j = 0; j < shape.parameters(); ++j) {
      // Central difference with h = 1e-5: error of order h^2 = 1e-10 and 1e-16 / h of rounding.
      std::vector<double> up = one.theta, down = one.theta;
      up[j] += 1e-5;
      down[j] -= 1e-5;
      const Evaluated above = evaluate(shape, up, x), below = evaluate(shape, down, x);
      for (std::size_t m = 0; m < shape.functions(); ++m) {
        for (std::size_t i = 0; i < x.size(); ++i) {
          CAPTURE(j, m, i);
          const double difference = (above.value[m * x.size() + i] - below.value[m * x.size() + i]) / 2e-5;
          CHECK_THAT(here.slope[(m * shape.parameters() + j) * x.size() + i], WithinAbs(difference, 1e-9));
        }
      }
    }
  }
}

TEST_CASE("the control is 0 with slopes 0, and never a number that is none", "[pharmacology][shape]") {
  const HillShape hill;
  const Evaluated at = evaluate(hill, {-7.0, 0.0}, {kControl});
  CHECK(at.value == std::vector<double>{0.0, 1.0});
  CHECK(at.slope == std::vector<double>{0.0, 0.0});
  const RichardsShape richards;
  const Evaluated bent = evaluate(richards, {-7.0, 0.0, -1.0}, {kControl});
  CHECK(bent.value == std::vector<double>{0.0, 1.0});
  CHECK(bent.slope == std::vector<double>{0.0, 0.0, 0.0});
}

TEST_CASE("the complement keeps its digits where the function is 1", "[pharmacology][shape]") {
  // At x - L = 20 decades and slope 1: 1 - g = 1 / (1 + 1e20).
  const Evaluated far = evaluate(HillShape(), {-27.0, 0.0}, {-7.0});
  CHECK(far.value[0] == 1.0);
  CHECK_THAT(far.value[1], WithinRel(1e-20, 1e-12));
  const Evaluated bent = evaluate(RichardsShape(), {-27.0, 0.0, 0.0}, {-7.0});
  CHECK_THAT(bent.value[1], WithinRel(1e-20, 1e-12));
}

TEST_CASE("the asymmetric curve is half at its EC50 and a Hill curve at s = 1", "[pharmacology][shape]") {
  for (const double log_s : {-2.0, -0.5, 0.0, 1.5}) {
    const Evaluated half = evaluate(RichardsShape(), {-7.0, 0.3, log_s}, {-7.0});
    CHECK_THAT(half.value[0], WithinRel(0.5, 1e-14));
  }
  const std::vector<double> x{-9.0, -7.5, -6.0};
  const Evaluated bent = evaluate(RichardsShape(), {-7.0, 0.3, 0.0}, x),
                  plain = evaluate(HillShape(), {-7.0, 0.3}, x);
  for (std::size_t i = 0; i < x.size(); ++i)
    CHECK_THAT(bent.value[i], WithinRel(plain.value[i], 1e-13));
}

TEST_CASE("extreme parameters give numbers", "[pharmacology][shape]") {
  for (const double location : {-400.0, 400.0}) {
    for (const double log_slope : {-20.0, 6.0}) {
      const Evaluated at = evaluate(HillShape(), {location, log_slope}, {kControl, -9.0, -4.0});
      for (const double v : at.value)
        CHECK(std::isfinite(v));
      for (const double v : at.slope)
        CHECK(std::isfinite(v));
    }
  }
}

TEST_CASE("points are gathered by concentration, weighted", "[pharmacology][levels]") {
  const std::vector<CurvePoint> points{{chronodrome::Molar(1e-7), 4.0, 1.0},
                                       {chronodrome::Molar(0.0), 1.0, 2.0},
                                       {chronodrome::Molar(1e-7), 10.0, 2.0}};
  const Levels levels = gather(points);
  REQUIRE(levels.size() == 2);
  CHECK(levels.has_control());
  CHECK(levels.concentration == std::vector<double>{0.0, 1e-7});
  CHECK(levels.mean == std::vector<double>{1.0, 8.0});
  CHECK(levels.weight == std::vector<double>{2.0, 3.0});
  CHECK(levels.pure_error == 24.0); // 1 x 4^2 + 2 x 2^2
  CHECK(levels.pure_error_df == 1);
  CHECK(levels.n_points == 3);
  CHECK(levels.sum_squares == 16.0 + 2.0 + 200.0);
  CHECK_THAT(levels.mean_of(0, 2), WithinRel(26.0 / 5.0, 1e-15));
}

TEST_CASE("projected and full derivatives give the same covariance of the shape",
          "[pharmacology][separable]") {
  // The inverse of the projected J'J is the shape's block of the full inverse (block matrix inversion).
  const Levels levels = gather(curves::noisy_hill(curves::kHalfLog, 280, 100, 7.0, 1.1));
  const HillShape shape;
  SeparableProblem problem(levels, shape, {{0.0, {0.0, 0.0}, {1.0, 0.0}}, {0.0, {1.0, 0.0}, {0.0, 0.0}}});
  chronodrome::numerics::LeastSquaresSummary summary;
  const std::vector<std::size_t> free{0, 1};
  const SeparableMinimum minimum = problem.refine({-7.2, 0.3}, free, summary);
  REQUIRE(summary.converged());
  const chronodrome::numerics::LinearFit full = chronodrome::numerics::solve_linear(
      problem.jacobian(minimum, free), chronodrome::numerics::Vector::Zero(10));
  REQUIRE(full.full_rank());
  for (Eigen::Index i = 0; i < 2; ++i) {
    for (Eigen::Index j = 0; j < 2; ++j) {
      CHECK_THAT(full.inverse_normal(2 + i, 2 + j), WithinRel(summary.inverse_normal(i, j), 1e-9));
    }
  }
  CHECK_THAT(problem.descend({-7.2, 0.3}, free).rss, WithinRel(minimum.rss, 1e-12));
}
