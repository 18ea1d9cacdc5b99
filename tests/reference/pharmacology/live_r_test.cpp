// Chronodrome, GPL-3.0-or-later.
#include <catch2/catch.hpp>

#include <array>
#include <cmath>
#include <cstdio>
#include <fstream>
#include <map>
#include <sstream>
#include <string>

#include "reference/pharmacology/reference_fits.h"

using namespace chronodrome;
using namespace chronodrome::pharmacology;
using Catch::Matchers::WithinAbs;
using Catch::Matchers::WithinRel;

namespace {

// R's own data set and R's own self-starting four-parameter logistic, all runs.
constexpr const char* kScript = R"(
for (i in seq_len(nrow(DNase)))
  cat("data", as.character(DNase$Run[i]), sprintf("%.17g %.17g\n", DNase$conc[i], DNase$density[i]))
for (run in levels(DNase$Run)) {
  one <- DNase[DNase$Run == run, ]
  m <- nls(density ~ SSfpl(log(conc), A, B, xmid, scal), one)
  s <- summary(m)$coefficients
  cat("fit", run, sprintf("%.17g", c(s[, 1], s[, 2], deviance(m))), "\n")
}
)";

struct RFit {
  double a, b, xmid, scal, se_a, se_b, se_xmid, se_scal, rss;
};

struct ROutput {
  std::map<std::string, std::vector<CurvePoint>> data;
  std::map<std::string, RFit> fits;
};

ROutput run_r() {
  const std::string script = std::string(CHRONODROME_BUILD_DIR) + "/dnase_by_r.R";
  std::ofstream(script) << kScript;
  FILE* pipe = popen(("Rscript --vanilla '" + script + "' 2>&1").c_str(), "r");
  REQUIRE(pipe);
  std::string text;
  std::array<char, 4096> block{};
  for (std::size_t got = 0; (got = std::fread(block.data(), 1, block.size(), pipe)) > 0;) {
    text.append(block.data(), got);
  }
  const int status = pclose(pipe);
  INFO("Rscript could not be run or failed; install it (Debian: r-base-core). It said: " << text);
  REQUIRE(status == 0);
  ROutput output;
  std::stringstream lines(text);
  for (std::string line; std::getline(lines, line);) {
    std::stringstream words(line);
    std::string kind, run;
    words >> kind >> run;
    if (kind == "data") {
      double concentration = 0.0, density = 0.0;
      REQUIRE(words >> concentration >> density);
      output.data[run].push_back({Molar(concentration), density, 1.0});
    } else if (kind == "fit") {
      RFit f{};
      REQUIRE(words >> f.a >> f.b >> f.xmid >> f.scal >> f.se_a >> f.se_b >> f.se_xmid >> f.se_scal >> f.rss);
      output.fits[run] = f;
    }
  }
  return output;
}

} // namespace

TEST_CASE("R's own fits of its own data agree with ours", "[reference][pharmacology][R]") {
  const ROutput r = run_r();
  REQUIRE(r.fits.size() == 11);
  REQUIRE(r.data.size() == 11);

  // The copied table holds R's numbers.
  const reference::Table copy = reference::table("dnase_all.csv");
  REQUIRE(copy.rows.size() == 176);
  std::map<std::string, std::size_t> next;
  for (std::size_t row = 0; row < copy.rows.size(); ++row) {
    const std::string& run = copy.text(row, "run");
    const std::vector<CurvePoint>& theirs = r.data.at(run);
    const std::size_t i = next[run]++;
    REQUIRE(i < theirs.size());
    CHECK_THAT(copy.number(row, "conc"), WithinRel(theirs[i].concentration.value(), 1e-14));
    CHECK_THAT(copy.number(row, "density"), WithinRel(theirs[i].response, 1e-14));
  }

  for (const auto& [run, theirs] : r.fits) {
    CAPTURE(run);
    const CurveFit ours = fit_curve(r.data.at(run), Model::hill);
    REQUIRE(ours.converged);
    // R stops where the projected residual is below 1e-5 of the residual (nls.control), which leaves an
    // error of up to 1e-5 sqrt(n - p) = 3.5e-5 standard errors in a parameter; taken here as 4e-5. Near a
    // minimum the RSS errs by the square of that, the SEs in proportion to the parameters (relative 1e-4).
    const double close = 4e-5, ln10 = std::log(10.0);
    CHECK_THAT(ours.find("basal")->estimate.value(), WithinAbs(theirs.a, close * theirs.se_a));
    CHECK_THAT(ours.find("emax")->estimate.value(), WithinAbs(theirs.b, close * theirs.se_b));
    CHECK_THAT(-ln10 * ours.find("pec50")->estimate.value(), WithinAbs(theirs.xmid, close * theirs.se_xmid));
    CHECK_THAT(1.0 / ours.find("nh")->estimate.value(), WithinAbs(theirs.scal, close * theirs.se_scal));
    CHECK_THAT(ours.find("basal")->se.value(), WithinRel(theirs.se_a, 1e-4));
    CHECK_THAT(ours.find("emax")->se.value(), WithinRel(theirs.se_b, 1e-4));
    CHECK_THAT(ln10 * ours.find("pec50")->se.value(), WithinRel(theirs.se_xmid, 1e-4));
    CHECK_THAT(ours.rss.value(), WithinRel(theirs.rss, 1e-8));
    CHECK(ours.rss.value() <= theirs.rss * (1.0 + 1e-12)); // and ours is the lower one
  }
}
