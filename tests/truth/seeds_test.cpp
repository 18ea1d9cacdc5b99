// Chronodrome, GPL-3.0-or-later.
// The sample sessions and further preparations of the same three kinds, from file to fit, against the
// simulator's truth.
#include <algorithm>
#include <catch2/catch.hpp>
#include <cmath>
#include <cstdio>
#include <map>

#include "base/parallel.h"
#include "numerics/robust.h"
#include "simulation/vary.h"
#include "truth/study.h"

using namespace chronodrome;

namespace {

const std::vector<std::string> kKinds = {"atrial-strip", "guinea-pig-heart", "rabbit-heart"};

simulation::Scenario scenario_of(const std::string& kind) {
  auto scenario = simulation::read_scenario(std::string(CHRONODROME_SOURCE_DIR) + "/sample-sessions/" + kind +
                                            "/scenario.json");
  if (!scenario) FAIL(describe(scenario.error()));
  return *scenario;
}

/// Scores of `count` preparations, in turn of the three kinds, with seeds from `first_seed` on.
std::vector<truth::SessionScore> study(std::size_t count, std::uint64_t first_seed) {
  std::vector<simulation::Scenario> bases;
  for (const auto& kind : kKinds)
    bases.push_back(scenario_of(kind));
  std::vector<truth::SessionScore> scores(count);
  const std::string folder = std::string(CHRONODROME_BUILD_DIR) + "/test-truth-" + std::to_string(first_seed);
  parallel_for(count, 0, [&](std::size_t i) {
    const auto scenario = simulation::varied(bases[i % bases.size()], first_seed + i);
    scores[i] = truth::score_scenario(scenario, folder + "-" + std::to_string(i));
  });
  return scores;
}

/// All that the scores of many sessions say together.
struct Totals {
  std::map<std::string, truth::BeatScore> beats;
  std::map<std::string, truth::DelayScore> delays;
  std::map<std::string, std::vector<truth::CurveScore>> curves;
};

Totals add_up(const std::vector<truth::SessionScore>& scores) {
  Totals totals;
  for (std::size_t i = 0; i < scores.size(); ++i) {
    const std::string kind = kKinds[i % kKinds.size()] + " ";
    for (const auto& beat : scores[i].beats) {
      auto& sum = totals.beats[kind + beat.channel];
      sum.hits += beat.hits, sum.missed += beat.missed, sum.invented += beat.invented;
      sum.errors_ms.insert(sum.errors_ms.end(), beat.errors_ms.begin(), beat.errors_ms.end());
    }
    for (const auto& delay : scores[i].delays) {
      auto& sum = totals.delays[kind + delay.pathway];
      sum.conducted += delay.conducted, sum.paired += delay.paired, sum.wrong += delay.wrong;
      sum.errors_ms.insert(sum.errors_ms.end(), delay.errors_ms.begin(), delay.errors_ms.end());
    }
    for (const auto& curve : scores[i].curves)
      totals.curves[kind + curve.measure].push_back(curve);
  }
  return totals;
}

double median_size(std::vector<double> values) {
  for (double& value : values)
    value = std::abs(value);
  return values.empty() ? 0.0 : numerics::median(values);
}

void print(const Totals& totals) {
  std::printf("\n%-32s %8s %9s %9s %9s %9s %9s\n", "channel", "beats", "Se, %", "+P, %", "bias, ms", "SD, ms",
              "max, ms");
  for (const auto& entry : totals.beats) {
    const auto& s = entry.second;
    double largest = 0.0;
    for (const double error : s.errors_ms)
      largest = std::max(largest, std::abs(error));
    std::printf("%-32s %8zu %9.3f %9.3f %9.4f %9.4f %9.3f\n", entry.first.c_str(), s.hits + s.missed,
                100 * s.sensitivity(), 100 * s.positive_predictivity(), numerics::mean(s.errors_ms),
                numerics::sd(s.errors_ms), largest);
  }
  std::printf("\n%-32s %9s %9s %7s %18s\n", "pathway", "conducted", "paired, %", "wrong",
              "median |error|, ms");
  for (const auto& entry : totals.delays) {
    const auto& s = entry.second;
    std::printf("%-32s %9zu %9.3f %7zu %18.4f\n", entry.first.c_str(), s.conducted,
                100.0 * static_cast<double>(s.paired) /
                    static_cast<double>(std::max<std::size_t>(1, s.conducted)),
                s.wrong, median_size(s.errors_ms));
  }
  std::printf("\n%-40s %6s %10s %14s %12s %10s\n", "curve", "fits", "bias", "|error|<=0.10", "covered, %",
              "bounded");
  for (const auto& entry : totals.curves) {
    std::vector<double> errors;
    std::size_t close = 0, covered = 0, bounded = 0;
    for (const auto& curve : entry.second) {
      if (!curve.estimated) continue;
      errors.push_back(curve.error);
      if (std::abs(curve.error) <= 0.10) ++close;
      if (curve.covered) ++covered;
      if (curve.bounded) ++bounded;
    }
    const auto n = static_cast<double>(std::max<std::size_t>(1, errors.size()));
    std::printf("%-40s %6zu %10.4f %13.1f%% %12.1f %10zu\n", entry.first.c_str(), errors.size(),
                errors.empty() ? 0.0 : numerics::mean(errors), 100.0 * static_cast<double>(close) / n,
                100.0 * static_cast<double>(covered) / n, bounded);
  }
  std::fflush(stdout);
}

void check_beats_and_delays(const Totals& totals) {
  REQUIRE(totals.beats.size() >= 7);
  for (const auto& entry : totals.beats) {
    CAPTURE(entry.first);
    CHECK(entry.second.hits > 1000);
    CHECK(entry.second.sensitivity() >= 0.995);
    CHECK(entry.second.positive_predictivity() >= 0.995);
  }
  REQUIRE(totals.delays.size() >= 2);
  for (const auto& entry : totals.delays) {
    CAPTURE(entry.first);
    CHECK(entry.second.conducted > 1000);
    CHECK(median_size(entry.second.errors_ms) <= 0.3);
    CHECK(static_cast<double>(entry.second.paired) >= 0.995 * static_cast<double>(entry.second.conducted));
    CHECK(static_cast<double>(entry.second.wrong) <= 0.005 * static_cast<double>(entry.second.conducted));
  }
}

/// The simulated heart fluctuates about its long-run response, so a window differs from it. Largest
/// differences measured on the three sessions: rate:RA 3.0 %, delay 1.4 %; force 7.1 % where it is
/// smallest; 8.3 % in Wenckebach (rate:RV and conducted), where a window holds few groups.
double largest_difference(const std::string& measure) {
  if (measure == "rate:RA") return 0.04;
  return measure == "delay:AV" ? 0.02 : 0.10;
}

void check_responses_and_rhythm(const std::string& kind, const truth::SessionScore& score) {
  REQUIRE(score.responses.size() >= 18);
  for (const auto& response : score.responses) {
    CAPTURE(kind, response.measure, response.concentration, response.status, response.relative_error);
    const bool read = response.status == "ok" || response.status == "not_steady";
    CHECK(read == (response.true_status == "ok"));
    CHECK(std::abs(response.relative_error) <= largest_difference(response.measure));
  }
  for (const auto& entry : score.rhythm) {
    CAPTURE(kind, entry.first, entry.second.true_seconds, entry.second.seconds);
    CHECK(std::abs(entry.second.seconds - entry.second.true_seconds) <=
          0.01 * entry.second.true_seconds + 0.5);
  }
}

} // namespace

TEST_CASE("the sample sessions: beats within 1 ms, delays within 0.3 ms, pEC50 within 0.10", "[truth]") {
  std::vector<truth::SessionScore> scores;
  for (const auto& kind : kKinds) {
    scores.push_back(
        truth::score_scenario(scenario_of(kind), std::string(CHRONODROME_BUILD_DIR) + "/test-truth-" + kind));
  }
  const Totals totals = add_up(scores);
  print(totals);
  check_beats_and_delays(totals);
  for (std::size_t i = 0; i < scores.size(); ++i)
    check_responses_and_rhythm(kKinds[i], scores[i]);
  for (const auto& entry : totals.curves) {
    CAPTURE(entry.first);
    REQUIRE(entry.second.front().estimated);
    CHECK(std::abs(entry.second.front().error) <= 0.10);
  }
}

TEST_CASE("twelve further preparations: beats and delays", "[truth]") {
  check_beats_and_delays(add_up(study(12, 40'000)));
}

TEST_CASE("two hundred further preparations: beats, delays, pEC50 and its interval", "[.long]") {
  const Totals totals = add_up(study(200, 50'000));
  print(totals);
  check_beats_and_delays(totals);
  std::size_t rates = 0, close = 0, covered = 0;
  for (const auto& entry : totals.curves) {
    for (const auto& curve : entry.second) {
      if (curve.measure != "rate:RA") continue; // one independent curve a preparation
      ++rates;
      REQUIRE(curve.estimated);
      if (std::abs(curve.error) <= 0.10) ++close;
      if (curve.covered) ++covered;
    }
  }
  REQUIRE(rates >= 200);
  CHECK(static_cast<double>(close) >= 0.95 * static_cast<double>(rates));
  CHECK(static_cast<double>(covered) >= 0.92 * static_cast<double>(rates));
  CHECK(static_cast<double>(covered) <= 0.98 * static_cast<double>(rates));
}
