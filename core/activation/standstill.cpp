// Chronodrome, GPL-3.0-or-later.
#include "activation/standstill.h"

#include <cmath>

#include "numerics/robust.h"

namespace chronodrome::activation {
namespace {

constexpr Seconds kLocal{10.0};
constexpr std::size_t kFewest = 3;
constexpr std::size_t kOwnBeats = 9;
constexpr double kFixed_s = 2e-3;
constexpr double kSameDistance_s = 8e-3;
constexpr double kRetrograde_s = 15e-3;
constexpr double kBluntShare = 0.65;

/// The deflections at one distance behind the other chamber's beats.
struct Ensemble {
  double distance_s = 0.0;
  double slope = 0.0;
  double sharpness = 0.0;
  double beside_other = 0.0; ///< sharpness over that of the beats they are locked to
  bool is_fixed = false;     ///< at one distance within 2 ms
};

struct OwnBeats {
  double slope = 0.0;
  double sharpness = 0.0;
};

class Standstill {
public:
  Standstill(const CandidateTrain& train, std::span<const std::optional<Lock>> locks,
             std::span<const double> relative, double near_share)
      : train_(train), locks_(locks), relative_(relative), near_share_(near_share) {
    const auto& all = train.candidates;
    for (std::size_t i = 0; i < all.size(); ++i)
      ensembles_.push_back(ensemble_about(i));
    is_doubtful_.assign(all.size(), 0);
    const auto doubt = [&](std::size_t k, std::size_t i) {
      if (slope(k) * near_share_ < ensembles_[i]->slope) is_doubtful_[k] = 1;
    };
    for (std::size_t i = 0; i < all.size(); ++i) {
      if (!ensembles_[i]) continue;
      for (std::size_t k = i; k-- > 0 && all[i].time - all[k].time <= kLocal;)
        doubt(k, i);
      for (std::size_t k = i; k < all.size() && all[k].time - all[i].time <= kLocal; ++k)
        doubt(k, i);
    }
  }

  [[nodiscard]] StandstillVerdict verdict(std::size_t i) const {
    const std::optional<Ensemble>& waves = ensembles_[i];
    if (!waves) return StandstillVerdict::none;
    if (waves->is_fixed && waves->beside_other < kBluntShare) return StandstillVerdict::far;
    if (waves->beside_other >= 1.0) return StandstillVerdict::none;
    const bool may_be_retrograde = waves->distance_s >= kRetrograde_s;
    const std::optional<OwnBeats> own = own_beats(i);
    if (!own) return may_be_retrograde ? StandstillVerdict::none : StandstillVerdict::undecided;
    const bool is_weak = waves->slope < near_share_ * own->slope;
    const bool is_blunt = waves->sharpness < kBluntShare * own->sharpness;
    const bool is_far = may_be_retrograde ? is_weak && is_blunt : is_weak || is_blunt;
    return is_far ? StandstillVerdict::far : StandstillVerdict::none;
  }

private:
  [[nodiscard]] double slope(std::size_t k) const {
    return near_field_slope(train_.candidates[k], train_.role, train_.lead);
  }
  [[nodiscard]] bool lies_at(std::size_t k, double distance, double tolerance) const {
    return locks_[k] && std::abs(locks_[k]->distance_s - distance) <= tolerance;
  }

  [[nodiscard]] std::optional<Ensemble> ensemble_about(std::size_t i) const {
    if (!locks_[i]) return std::nullopt;
    const auto& all = train_.candidates;
    std::size_t first = i;
    std::size_t end = i + 1;
    while (first > 0 && all[i].time - all[first - 1].time <= kLocal)
      --first;
    while (end < all.size() && all[end].time - all[i].time <= kLocal)
      ++end;
    std::vector<double> distances;
    for (std::size_t k = first; k < end; ++k) {
      if (locks_[k]) distances.push_back(locks_[k]->distance_s);
    }
    Ensemble waves;
    waves.distance_s = numerics::median(distances);
    if (!lies_at(i, waves.distance_s, kSameDistance_s)) return std::nullopt;
    std::vector<double> slopes, sharpness, ratios;
    std::size_t fixed = 0;
    for (std::size_t k = first; k < end; ++k) {
      if (!lies_at(k, waves.distance_s, kSameDistance_s)) continue;
      slopes.push_back(slope(k));
      sharpness.push_back(sharpness_of(all[k], train_));
      ratios.push_back(locks_[k]->sharpness > 0.0 ? sharpness.back() / locks_[k]->sharpness : 1.0);
      fixed += lies_at(k, waves.distance_s, kFixed_s) ? 1U : 0U;
    }
    waves.slope = numerics::median(slopes);
    // An own beat may fall together with the other chamber's.
    if (slope(i) * near_share_ >= waves.slope) return std::nullopt;
    std::size_t comparable = 0;
    for (std::size_t k = first; k < end; ++k)
      comparable +=
          lies_at(k, waves.distance_s, kSameDistance_s) || slope(k) * near_share_ < waves.slope ? 1U : 0U;
    if (slopes.size() < kFewest || 3 * slopes.size() < 2 * comparable) return std::nullopt;
    waves.sharpness = numerics::median(sharpness);
    waves.beside_other = numerics::median(ratios);
    waves.is_fixed = fixed >= kFewest && 10 * fixed >= 9 * comparable;
    return waves;
  }

  /// The chamber's own beats nearest before the i-th, or after it.
  [[nodiscard]] std::optional<OwnBeats> own_beats(std::size_t i) const {
    std::vector<double> slopes, sharpness;
    const auto take = [&](std::size_t k) {
      if (relative_[k] < near_share_ || is_doubtful_[k] != 0) return;
      slopes.push_back(slope(k));
      sharpness.push_back(sharpness_of(train_.candidates[k], train_));
    };
    for (std::size_t k = i; k-- > 0 && slopes.size() < kOwnBeats;)
      take(k);
    if (slopes.empty()) {
      for (std::size_t k = i + 1; k < relative_.size() && slopes.size() < kOwnBeats; ++k)
        take(k);
    }
    if (slopes.size() < kFewest) return std::nullopt;
    return OwnBeats{numerics::median(slopes), numerics::median(sharpness)};
  }

  const CandidateTrain& train_;
  std::span<const std::optional<Lock>> locks_;
  std::span<const double> relative_;
  double near_share_;
  std::vector<std::optional<Ensemble>> ensembles_; ///< about each candidate that is one of them
  std::vector<char> is_doubtful_; ///< no steeper than such waves nearby: no own beat to compare with
};

} // namespace

double sharpness_of(const Candidate& candidate, const CandidateTrain& train) {
  const double amplitude = static_cast<double>(candidate.amplitude);
  return amplitude > 0.0 ? near_field_slope(candidate, train.role, train.lead) / amplitude : 0.0;
}

std::vector<StandstillVerdict> judge_standstill(const CandidateTrain& train,
                                                std::span<const std::optional<Lock>> locks,
                                                std::span<const double> relative, double near_field_share) {
  const Standstill standstill(train, locks, relative, near_field_share);
  std::vector<StandstillVerdict> verdicts;
  for (std::size_t i = 0; i < train.candidates.size(); ++i)
    verdicts.push_back(standstill.verdict(i));
  return verdicts;
}

} // namespace chronodrome::activation
