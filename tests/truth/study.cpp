// Chronodrome, GPL-3.0-or-later.
#include "truth/study.h"

#include <catch2/catch.hpp>
#include <cmath>
#include <filesystem>

namespace truth {
namespace {

using namespace chronodrome;

constexpr Seconds kMatch{1e-3};

BeatScore score_beats(const activation::ChannelActivations& found, const simulation::TrueActivations& truth) {
  BeatScore score;
  score.channel = truth.channel;
  std::size_t i = 0;
  std::size_t j = 0;
  while (i < found.marks.size() || j < truth.times.size()) {
    const bool none_left = j == truth.times.size();
    const Seconds late =
        none_left || i == found.marks.size() ? Seconds(0.0) : found.marks[i].time - truth.times[j];
    if (i == found.marks.size() || (!none_left && late > kMatch)) {
      ++score.missed, ++j;
    } else if (none_left || late < -kMatch) {
      ++score.invented, ++i;
    } else {
      ++score.hits;
      score.errors_ms.push_back(in_milliseconds(late));
      ++i, ++j;
    }
  }
  return score;
}

/// Times in order of the first one; both vectors are.
DelayScore score_delays(const conduction::PathwayDelays& found, const simulation::TruePathway& truth) {
  DelayScore score;
  score.pathway = truth.label;
  std::vector<const conduction::DelayRow*> conducted;
  for (const auto& row : found.rows) {
    if (row.state == conduction::DelayState::conducted) conducted.push_back(&row);
  }
  std::size_t i = 0;
  for (const auto& row : truth.rows) {
    if (row.kind != simulation::DelayKind::conducted || !row.from || !row.to) continue;
    ++score.conducted;
    while (i < conducted.size() && *conducted[i]->from_time < *row.from - kMatch)
      ++i, ++score.wrong;
    if (i == conducted.size() || *conducted[i]->from_time > *row.from + kMatch) continue;
    const Seconds error = *conducted[i]->to_time - *row.to;
    if (error > kMatch || error < -kMatch) {
      ++score.wrong;
    } else {
      ++score.paired;
      score.errors_ms.push_back(in_milliseconds(*conducted[i]->delay - *row.delay()));
    }
    ++i;
  }
  score.wrong += conducted.size() - i;
  return score;
}

CurveScore score_curve(const simulation::TrueCurve& truth, const std::vector<session::FittedCurve>& fits) {
  CurveScore score;
  score.measure = truth.measure;
  score.truth = truth.pec50;
  for (const auto& fit : fits) {
    if (fit.curve != truth.curve || fit.measure != truth.measure || fit.fit.likelihood != "gaussian")
      continue;
    const auto* pec50 = fit.fit.find("pec50");
    if (pec50 == nullptr || !pec50->estimate) return score;
    score.estimated = true;
    score.error = *pec50->estimate - truth.pec50;
    score.bounded = pec50->ci_low && pec50->ci_high;
    score.covered = (!pec50->ci_low || *pec50->ci_low <= truth.pec50) &&
                    (!pec50->ci_high || *pec50->ci_high >= truth.pec50);
    return score;
  }
  return score;
}

std::vector<ResponseScore> score_responses(const session::SessionResult& result,
                                           const simulation::Truth& truth) {
  std::vector<ResponseScore> scores;
  for (const auto& expected : truth.responses) {
    for (const auto& row : result.responses.rows) {
      const bool same =
          row.curve == expected.curve && row.measure == expected.measure &&
          std::abs(row.concentration.value() - expected.concentration) <= 1e-9 * expected.concentration;
      if (!same) continue;
      ResponseScore score{expected.measure, expected.concentration, expected.status,
                          response::name_of(row.status), 0.0};
      if (expected.value && row.value) score.relative_error = *row.value / *expected.value - 1.0;
      scores.push_back(score);
    }
  }
  return scores;
}

} // namespace

double BeatScore::sensitivity() const {
  return hits + missed == 0 ? 1.0 : static_cast<double>(hits) / static_cast<double>(hits + missed);
}

double BeatScore::positive_predictivity() const {
  return hits + invented == 0 ? 1.0 : static_cast<double>(hits) / static_cast<double>(hits + invented);
}

SessionScore score(const session::SessionResult& result, const simulation::Truth& truth) {
  SessionScore scores;
  for (const auto& channel : truth.activations) {
    for (const auto& found : result.activations) {
      if (found.channel == channel.channel) scores.beats.push_back(score_beats(found, channel));
    }
  }
  for (const auto& pathway : truth.pathways) {
    for (const auto& found : result.pathways) {
      if (found.pathway == pathway.label) scores.delays.push_back(score_delays(found, pathway));
    }
  }
  for (const auto& curve : truth.curves) {
    if (curve.holds) scores.curves.push_back(score_curve(curve, result.curves));
  }
  scores.responses = score_responses(result, truth);
  for (const auto& episode : truth.rhythm)
    scores.rhythm[episode.kind].true_seconds += (episode.end - episode.start).value();
  for (const auto& episode : result.rhythm.episodes)
    scores.rhythm[episode.kind].seconds += (episode.end - episode.start).value();
  return scores;
}

SessionScore score_scenario(const simulation::Scenario& scenario, const std::string& folder) {
  std::filesystem::remove_all(folder);
  const auto simulated = simulation::simulate(scenario);
  if (!simulated) FAIL(describe(simulated.error()));
  const auto written = simulation::write_simulated(*simulated, folder);
  if (!written) FAIL(describe(written.error()));
  session::LoadOptions options;
  options.use_cache = false;
  options.threads = 1;
  const auto inputs = session::load_session(folder + "/" + scenario.name + ".session.json", options);
  if (!inputs) FAIL(describe(inputs.error()));
  const auto result = session::analyse(*inputs, 1);
  if (!result) FAIL(describe(result.error()));
  std::filesystem::remove_all(folder);
  return score(*result, simulated->truth);
}

} // namespace truth
