// Chronodrome, GPL-3.0-or-later.
#include "activation/far_field.h"

#include <algorithm>
#include <cmath>
#include <optional>

#include "activation/standstill.h"

namespace chronodrome::activation {
namespace {

using recording::Role;

constexpr Seconds kReference{25.0};
constexpr Seconds kLocal{10.0};
constexpr Seconds kBeside{3.0};
constexpr Seconds kMargin{10e-3};
/// Noise moves the centre of a broad wave; in a standstill the distance of the others tells that it is one.
constexpr Seconds kScatter{5e-3};
constexpr double kSameDistance_s = 5e-3;
constexpr double kNotLocalShare = 0.25;
constexpr std::size_t kCompanions = 2;
constexpr double kLargeShare = 0.7;

enum class Chamber { none, atrium, ventricle, his };

Chamber chamber_of(Role role) {
  switch (role) {
  case Role::sinus:
  case Role::atrial:
    return Chamber::atrium;
  case Role::ventricular:
    return Chamber::ventricle;
  case Role::his:
    return Chamber::his;
  default:
    return Chamber::none;
  }
}

bool is_other(Chamber own, Chamber foreign) {
  if (own == Chamber::none || foreign == Chamber::none || foreign == Chamber::his) return false;
  return own != foreign;
}

/// Numbers in order of size, to which neighbours in time come and from which they go.
class SortedWindow {
public:
  void add(double value) { values_.insert(std::upper_bound(values_.begin(), values_.end(), value), value); }
  void remove(double value) { values_.erase(std::lower_bound(values_.begin(), values_.end(), value)); }
  /// Median of those that reach half of the upper decile.
  [[nodiscard]] double local_level() const {
    const double upper = values_[(values_.size() - 1) * 9 / 10];
    const auto strong = std::lower_bound(values_.begin(), values_.end(), 0.5 * upper);
    return *(strong + (values_.end() - strong) / 2);
  }

private:
  std::vector<double> values_;
};

/// A measure of each candidate over that of the local beats around it.
template <class Measure>
std::vector<double> relative_to_local(const std::vector<Candidate>& all, Measure measure) {
  std::vector<double> relative(all.size());
  SortedWindow window;
  std::size_t first = 0;
  std::size_t end = 0;
  for (std::size_t i = 0; i < all.size(); ++i) {
    while (end < all.size() && all[end].time - all[i].time <= kReference)
      window.add(measure(all[end++]));
    while (all[i].time - all[first].time > kReference)
      window.remove(measure(all[first++]));
    const double level = window.local_level();
    relative[i] = level > 0.0 ? measure(all[i]) / level : 1.0;
  }
  return relative;
}

std::vector<double> relative_slopes(const CandidateTrain& train) {
  return relative_to_local(train.candidates,
                           [&](const Candidate& c) { return near_field_slope(c, train.role, train.lead); });
}

std::vector<double> relative_sizes(const CandidateTrain& train) {
  return relative_to_local(train.candidates, [](const Candidate& c) { return double{c.amplitude}; });
}

/// A beat that its own electrode shows as local.
struct LocalBeat {
  Seconds time;
  double sharpness = 0.0; ///< slope over peak to peak, 1/s
};

/// The nearest beat of the other chamber that a deflection can be the far field of.
std::optional<Lock> lock(const std::vector<LocalBeat>& beats, Seconds time, Seconds lead, Seconds width) {
  auto beat = std::partition_point(beats.begin(), beats.end(),
                                   [&](const LocalBeat& b) { return b.time < time - width; });
  std::optional<Lock> nearest;
  for (; beat != beats.end() && beat->time <= time + lead; ++beat) {
    const double distance = (time - beat->time).value();
    if (!nearest || std::abs(distance) < std::abs(nearest->distance_s)) nearest = {distance, beat->sharpness};
  }
  return nearest;
}

class TrainJudge {
public:
  TrainJudge(const CandidateTrain& train, std::vector<double> relative, const std::vector<LocalBeat>& foreign,
             Seconds width, const ActivationSettings& settings)
      : train_(train), relative_(std::move(relative)), settings_(settings), chamber_(chamber_of(train.role)) {
    for (const Candidate& candidate : train.candidates)
      locks_.push_back(lock(foreign, candidate.time, settings.longest_far_field_lead, width + kMargin));
    if (chamber_ == Chamber::ventricle) sizes_ = relative_sizes(train);
    std::vector<std::optional<Lock>> loose;
    for (const Candidate& candidate : train.candidates)
      loose.push_back(
          lock(foreign, candidate.time, settings.longest_far_field_lead + kScatter, width + kMargin));
    standstill_ = judge_standstill(train, loose, relative_, settings.near_field_share);
  }

  [[nodiscard]] bool is_far(std::size_t i) const {
    if (chamber_ == Chamber::his && locks_[i]) return true;
    const double r = relative_[i];
    if (standstill_[i] == StandstillVerdict::far) return true;
    if (r >= settings_.near_field_share) return false;
    if (chamber_ == Chamber::ventricle && sizes_[i] >= kLargeShare) return false;
    if (locks_[i]) return r < settings_.far_field_share || has_companions(i);
    return r < kNotLocalShare && stands_between_local_beats(i);
  }
  [[nodiscard]] bool is_undecided(std::size_t i) const {
    return chamber_ != Chamber::his && standstill_[i] == StandstillVerdict::undecided;
  }

private:
  /// Other weak deflections at the same distance behind the other chamber's beats.
  [[nodiscard]] bool has_companions(std::size_t i) const {
    std::size_t found = 0;
    const auto counts = [&](std::size_t k) {
      return locks_[k] && relative_[k] < settings_.near_field_share &&
             std::abs(locks_[k]->distance_s - locks_[i]->distance_s) <= kSameDistance_s;
    };
    const auto& all = train_.candidates;
    for (std::size_t k = i; k-- > 0 && all[i].time - all[k].time <= kLocal;)
      found += counts(k) ? 1U : 0U;
    for (std::size_t k = i + 1; k < all.size() && all[k].time - all[i].time <= kLocal; ++k)
      found += counts(k) ? 1U : 0U;
    return found >= kCompanions;
  }

  [[nodiscard]] bool stands_between_local_beats(std::size_t i) const {
    const auto& all = train_.candidates;
    bool before = false;
    bool after = false;
    for (std::size_t k = i; !before && k-- > 0 && all[i].time - all[k].time <= kBeside;)
      before = relative_[k] >= settings_.near_field_share;
    for (std::size_t k = i + 1; !after && k < all.size() && all[k].time - all[i].time <= kBeside; ++k)
      after = relative_[k] >= settings_.near_field_share;
    return before && after;
  }

  const CandidateTrain& train_;
  std::vector<double> relative_;
  const ActivationSettings& settings_;
  Chamber chamber_;
  std::vector<double> sizes_; ///< peak to peak over that of the local beats, ventricle only
  std::vector<std::optional<Lock>> locks_;
  std::vector<StandstillVerdict> standstill_;
};

} // namespace

double near_field_slope(const Candidate& candidate, Role role, recording::Lead lead) {
  const bool falls_alone = lead == recording::Lead::unipolar && role != Role::ventricular;
  return static_cast<double>(falls_alone ? candidate.fall : std::max(candidate.fall, candidate.rise));
}

void reject_far_field(std::span<CandidateTrain> trains, Seconds deflection_width,
                      const ActivationSettings& settings) {
  // All judgements are made on the trains as they came, so that their order does not matter.
  std::vector<std::vector<double>> relative;
  std::vector<std::vector<LocalBeat>> local;
  for (const CandidateTrain& train : trains) {
    relative.push_back(relative_slopes(train));
    local.emplace_back();
    for (std::size_t i = 0; i < train.candidates.size(); ++i) {
      const Candidate& candidate = train.candidates[i];
      if (relative.back()[i] >= settings.near_field_share)
        local.back().push_back({candidate.time, sharpness_of(candidate, train)});
    }
  }
  std::vector<std::vector<char>> far(trains.size());
  for (std::size_t t = 0; t < trains.size(); ++t) {
    const Chamber own = chamber_of(trains[t].role);
    if (own == Chamber::none) continue;
    std::vector<LocalBeat> foreign;
    for (std::size_t other = 0; other < trains.size(); ++other) {
      if (is_other(own, chamber_of(trains[other].role)))
        foreign.insert(foreign.end(), local[other].begin(), local[other].end());
    }
    std::sort(foreign.begin(), foreign.end(), [](const LocalBeat& a, const LocalBeat& b) {
      return a.time == b.time ? a.sharpness < b.sharpness : a.time < b.time;
    });
    const Seconds width = own == Chamber::his ? deflection_width * 0.5 : deflection_width;
    const TrainJudge judge(trains[t], relative[t], foreign, width, settings);
    for (std::size_t i = 0; i < trains[t].candidates.size(); ++i) {
      far[t].push_back(judge.is_far(i) ? 1 : 0);
      if (far[t].back() == 0 && judge.is_undecided(i)) ++trains[t].undecided;
    }
  }
  for (std::size_t t = 0; t < trains.size(); ++t) {
    if (far[t].empty()) continue;
    for (std::size_t i = 0; i < far[t].size(); ++i) {
      if (far[t][i] != 0) trains[t].rejected.push_back(trains[t].candidates[i].time);
    }
    std::size_t next = 0;
    std::erase_if(trains[t].candidates, [&](const Candidate&) { return far[t][next++] != 0; });
  }
}

} // namespace chronodrome::activation
