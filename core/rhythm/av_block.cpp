// Chronodrome, GPL-3.0-or-later.
#include "rhythm/av_block.h"

#include <algorithm>
#include <array>

#include "base/number_text.h"
#include "numerics/robust.h"

namespace chronodrome::rhythm {
namespace {

/// One atrial activation: when, and how long it took to the ventricle (nothing: blocked).
struct AtrialBeat {
  Seconds time;
  std::optional<Seconds> delay;
  bool after_break = false; ///< what the beats before it did says nothing of this one
};

/// The beats whose fate is known. Where the answer cannot be seen, or the impulse came from the ventricle,
/// the sequence is broken: no group reaches across.
std::vector<AtrialBeat> atrial_beats(const conduction::PathwayDelays& av) {
  std::vector<AtrialBeat> beats;
  bool broken = true;
  for (const auto& row : av.rows) {
    if (!row.from_time) continue;
    if (row.state == conduction::DelayState::retrograde || row.answer_unseen) {
      broken = true;
      continue;
    }
    const bool conducted = row.state == conduction::DelayState::conducted;
    beats.push_back({*row.from_time, conducted ? row.delay : std::nullopt, broken});
    broken = false;
  }
  return beats;
}

/// The beats from just after one block up to and including the next: conducted ones, then blocked ones.
struct Group {
  std::size_t first = 0; ///< index of its first conducted beat
  std::size_t conducted = 0;
  std::size_t blocked = 0;
  [[nodiscard]] std::size_t size() const { return conducted + blocked; }
};

/// A long 1:1 run before a dropped beat is no part of its group: keep the beats over which the delay rose to
/// the block.
Group trimmed(Group group, const std::vector<AtrialBeat>& beats, std::size_t longest) {
  if (group.blocked == 0 || group.conducted < longest) return group;
  std::size_t kept = 2;
  while (kept + 1 < longest) {
    const std::size_t at = group.first + group.conducted - kept;
    if (*beats[at].delay <= *beats[at - 1].delay) break;
    ++kept;
  }
  return {group.first + group.conducted - kept, kept, group.blocked};
}

std::vector<Group> groups_of(const std::vector<AtrialBeat>& beats, std::size_t longest) {
  std::vector<Group> groups;
  std::size_t i = 0;
  while (i < beats.size()) {
    Group group{i, 0, 0};
    const auto goes_on = [&] { return i < beats.size() && (i == group.first || !beats[i].after_break); };
    while (goes_on() && beats[i].delay)
      ++i, ++group.conducted;
    while (goes_on() && !beats[i].delay)
      ++i, ++group.blocked;
    groups.push_back(trimmed(group, beats, longest));
  }
  return groups;
}

class BlockReader {
public:
  BlockReader(const conduction::PathwayDelays& av, Seconds end, const RhythmSettings& settings)
      : beats_(atrial_beats(av)), groups_(groups_of(beats_, settings.longest_group)), end_(end),
        settings_(settings) {}

  std::vector<Episode> read() {
    std::string last_pattern;
    for (std::size_t g = 0; g < groups_.size(); ++g) {
      const std::string pattern = pattern_of(g);
      if (pattern.empty()) {
        last_pattern.clear();
        continue;
      }
      if (pattern == last_pattern && adjoins(g)) {
        extend(g);
      } else {
        open(g, pattern);
      }
      last_pattern = pattern;
    }
    name_pairs();
    return std::move(found_);
  }

private:
  [[nodiscard]] Seconds start_of(const Group& group) const { return beats_[group.first].time; }
  /// The first conducted beat after the block, if nothing breaks the sequence before it.
  [[nodiscard]] const AtrialBeat* beat_after(std::size_t g) const {
    const std::size_t after = groups_[g].first + groups_[g].size();
    return after < beats_.size() && !beats_[after].after_break ? &beats_[after] : nullptr;
  }

  /// The next atrial beat; one running cycle after the last blocked one where that is not seen or comes late.
  [[nodiscard]] Seconds end_of(std::size_t g) const {
    const std::size_t last = groups_[g].first + groups_[g].size() - 1;
    const Seconds cycle = running_cycle(last);
    const AtrialBeat* next = beat_after(g);
    const bool in_time = next != nullptr && next->time - beats_[last].time <= settings_.pause_ratio * cycle;
    return in_time ? next->time : std::min(end_, beats_[last].time + cycle);
  }

  /// Median of the atrial intervals up to beat `last`, across no break.
  [[nodiscard]] Seconds running_cycle(std::size_t last) const {
    std::vector<double> cycles;
    for (std::size_t i = last; i > 0 && !beats_[i].after_break && cycles.size() < settings_.running_beats;
         --i)
      cycles.push_back((beats_[i].time - beats_[i - 1].time).value());
    return Seconds(cycles.empty() ? 0.0 : numerics::median(cycles));
  }

  /// What the group shows, as the word of the rhythm table and n:m; empty where nothing is blocked.
  [[nodiscard]] std::string pattern_of(std::size_t g) const {
    const Group& group = groups_[g];
    if (group.blocked == 0) return {};
    const Seconds unanswered = end_of(g) - beats_[group.first + group.conducted].time;
    const bool for_long = group.blocked >= 2 && unanswered > settings_.complete_block_time;
    if (group.blocked >= settings_.complete_block_beats || for_long) return "complete_av_block";
    if (group.blocked >= 2) return "high_degree_av_block";
    if (group.conducted == 0) return "undetermined";
    if (group.conducted == 1) return "two_to_one";
    const auto next = next_delay(g);
    const std::string ratio = " " + std::to_string(group.size()) + ":" + std::to_string(group.conducted);
    if (!next) return "undetermined" + ratio;
    const Seconds shortening = *beats_[group.first + group.conducted - 1].delay - *next;
    if (shortening > settings_.timing_tolerance) return "wenckebach" + ratio;
    return (shortening < -settings_.timing_tolerance ? "undetermined" : "second_degree_fixed") + ratio;
  }

  /// Delay of the first conducted beat after the block.
  [[nodiscard]] std::optional<Seconds> next_delay(std::size_t g) const {
    const AtrialBeat* next = beat_after(g);
    return next != nullptr ? next->delay : std::nullopt;
  }

  /// True if the group follows the one before it without a 1:1 run between.
  [[nodiscard]] bool adjoins(std::size_t g) const {
    return g > 0 && groups_[g - 1].first + groups_[g - 1].size() == groups_[g].first &&
           !beats_[groups_[g].first].after_break;
  }

  void open(std::size_t g, const std::string& pattern) {
    const Group& group = groups_[g];
    const auto blank = pattern.find(' ');
    Episode episode{start_of(group), end_of(g), pattern.substr(0, blank), ""};
    // Complete block starts with the first beat that did not conduct.
    if (episode.kind == "complete_av_block") episode.start = beats_[group.first + group.conducted].time;
    if (blank != std::string::npos) episode.detail = "ratio=" + pattern.substr(blank + 1) + ";";
    counts_ = {1, group.size(), group.conducted};
    first_of_episode_ = g;
    found_.push_back(episode);
    write_numbers();
  }

  void extend(std::size_t g) {
    found_.back().end = end_of(g);
    counts_ = {counts_[0] + 1, counts_[1] + groups_[g].size(), counts_[2] + groups_[g].conducted};
    write_numbers();
  }

  void write_numbers() {
    Episode& episode = found_.back();
    episode.detail = episode.detail.substr(0, episode.detail.find("groups="));
    episode.detail += "groups=" + std::to_string(counts_[0]) + ";atrial_beats=" + std::to_string(counts_[1]) +
                      ";conducted=" + std::to_string(counts_[2]);
    const Group& first = groups_[first_of_episode_];
    if (episode.kind == "wenckebach" || episode.kind == "second_degree_fixed") {
      std::vector<double> increments;
      for (std::size_t i = 1; i < first.conducted; ++i) {
        increments.push_back(
            in_milliseconds(*beats_[first.first + i].delay - *beats_[first.first + i - 1].delay));
      }
      episode.detail += ";first_delay_ms=" + fixed_text(in_milliseconds(*beats_[first.first].delay), 2);
      episode.detail += ";last_delay_ms=" +
                        fixed_text(in_milliseconds(*beats_[first.first + first.conducted - 1].delay), 2);
      episode.detail += ";increments_ms=";
      for (std::size_t i = 0; i < increments.size(); ++i)
        episode.detail += (i ? " " : "") + fixed_text(increments[i], 2);
      if (const auto next = next_delay(first_of_episode_)) {
        episode.detail += ";delay_after_block_ms=" + fixed_text(in_milliseconds(*next), 2);
      }
    }
    if (episode.kind == "two_to_one") episode.detail += ";type=cannot be told from 2:1 conduction";
  }

  /// A lone 2:1 group is a dropped beat whose type cannot be told, no 2:1 rhythm.
  void name_pairs() {
    for (auto& episode : found_) {
      if (episode.kind == "two_to_one" && episode.detail.rfind("groups=1;", 0) == 0) {
        episode.kind = "undetermined";
        episode.detail = "rule=one dropped beat among too few conducted ones;" + episode.detail;
      }
    }
  }

  std::vector<AtrialBeat> beats_;
  std::vector<Group> groups_;
  Seconds end_;
  const RhythmSettings& settings_;
  std::vector<Episode> found_;
  std::array<std::size_t, 3> counts_{}; // groups, atrial beats, conducted
  std::size_t first_of_episode_ = 0;
};

/// Stretches of at least three conducted beats in a row whose delay exceeds the reference.
std::vector<Episode> find_prolonged(const std::vector<AtrialBeat>& beats, const RhythmSettings& settings) {
  std::vector<double> reference;
  for (const auto& beat : beats) {
    if (beat.time <= settings.reference_period && beat.delay) reference.push_back(beat.delay->value());
  }
  std::vector<Episode> found;
  if (reference.size() < 3) return found;
  const double usual = numerics::median(reference);
  const Seconds limit(settings.first_degree_ratio * usual);
  std::size_t i = 0;
  while (i < beats.size()) {
    std::size_t j = i;
    std::vector<double> delays;
    while (j < beats.size() && beats[j].delay && *beats[j].delay > limit)
      delays.push_back(beats[j++].delay->value());
    if (j - i >= 3) {
      found.push_back({beats[i].time, beats[j - 1].time + *beats[j - 1].delay, "first_degree_av_block",
                       "beats=" + std::to_string(j - i) +
                           ";median_delay_ms=" + fixed_text(numerics::median(delays) * 1e3, 2) +
                           ";reference_delay_ms=" + fixed_text(usual * 1e3, 2) +
                           ";limit_ms=" + fixed_text(in_milliseconds(limit), 2)});
    }
    i = std::max(j, i + 1);
  }
  return found;
}

} // namespace

std::vector<Episode> find_av_block(const conduction::PathwayDelays& av, Seconds end,
                                   const RhythmSettings& settings) {
  std::vector<Episode> found = BlockReader(av, end, settings).read();
  const std::vector<Episode> prolonged = find_prolonged(atrial_beats(av), settings);
  found.insert(found.end(), prolonged.begin(), prolonged.end());
  return found;
}

} // namespace chronodrome::rhythm
