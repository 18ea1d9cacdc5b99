// Chronodrome, GPL-3.0-or-later.
#include <catch2/catch.hpp>

#include <string>
#include <vector>

#include "numerics/least_squares.h"
#include "reference/numerics/nist_models.h"
#include "reference/reference_data.h"

using namespace chronodrome::numerics;
using Catch::Matchers::WithinRel;

namespace {

struct Problem {
  std::string name;
  std::vector<double> x, y;
  reference::Json notes;

  explicit Problem(const std::string& n) : name(n), notes(reference::json("nist_" + n + ".json")) {
    const reference::Table table = reference::table("nist_" + n + ".csv");
    x = table.numbers("x");
    y = table.numbers("y");
  }

  [[nodiscard]] std::size_t parameters() const { return notes.at("start1").size(); }

  [[nodiscard]] Vector start(int which) const {
    const reference::Json& values = notes.at(which == 1 ? "start1" : "start2");
    Vector result(static_cast<Eigen::Index>(parameters()));
    for (std::size_t j = 0; j < parameters(); ++j) {
      result(static_cast<Eigen::Index>(j)) = values.at("b" + std::to_string(j + 1));
    }
    return result;
  }

  [[nodiscard]] double certified(const std::string& what, std::size_t j) const {
    return std::stod(notes.at("certified").at(what).at("b" + std::to_string(j + 1)).get<std::string>());
  }

  [[nodiscard]] Residuals residuals() const {
    return [this](const Vector& at, Vector& r, Matrix* jacobian) {
      std::vector<nist::Dual> b(parameters());
      for (std::size_t j = 0; j < b.size(); ++j) {
        b[j].value = at(static_cast<Eigen::Index>(j));
        b[j].slope[j] = 1.0;
      }
      const auto n = static_cast<Eigen::Index>(x.size());
      r.resize(n);
      if (jacobian) jacobian->resize(n, at.size());
      for (Eigen::Index i = 0; i < n; ++i) {
        const auto k = static_cast<std::size_t>(i);
        const nist::Dual fitted = nist::model(name, x[k], b);
        r(i) = y[k] - fitted.value;
        for (Eigen::Index j = 0; jacobian && j < at.size(); ++j) {
          (*jacobian)(i, j) = -fitted.slope[static_cast<std::size_t>(j)];
        }
      }
      return true;
    };
  }
};

} // namespace

TEST_CASE("the certified nonlinear regressions are met from both certified starts", "[reference][numerics]") {
  // Source: NIST StRD, Nonlinear Least Squares Regression (certified to 11 digits).
  const std::string name = GENERATE(as<std::string>(), "misra1a", "misra1b", "misra1d", "chwirut1",
                                    "chwirut2", "danwood", "kirby2", "hahn1", "thurber", "mgh09", "mgh10",
                                    "mgh17", "boxbod", "rat42", "rat43", "eckerle4");
  const int which = GENERATE(1, 2);
  const Problem problem(name);
  REQUIRE(problem.notes.at("tolerance").at("estimates") ==
          "relative 1e-7 after a Gauss-Newton polish, 1e-6 without");
  REQUIRE(problem.notes.at("tolerance").at("standard_errors") == "relative 1e-5");
  const LeastSquaresSummary fit = solve_nonlinear(problem.residuals(), problem.start(which));
  CAPTURE(name, which, fit.iterations, fit.evaluations, fit.offset, fit.rss,
          static_cast<int>(fit.termination));
  REQUIRE(fit.converged());
  const Vector errors = fit.standard_errors();
  for (std::size_t j = 0; j < problem.parameters(); ++j) {
    CAPTURE(j);
    const auto k = static_cast<Eigen::Index>(j);
    // The files' own rule; certified values hold 11 digits, so the rule is the solver's.
    CHECK_THAT(fit.parameters(k), WithinRel(problem.certified("estimates", j), 1e-7));
    CHECK_THAT(errors(k), WithinRel(problem.certified("standard_errors", j), 1e-5));
  }
  const double rss = std::stod(problem.notes.at("certified").at("rss").get<std::string>());
  CHECK_THAT(fit.rss, WithinRel(rss, 1e-9));
}
