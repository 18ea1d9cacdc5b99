// Chronodrome, GPL-3.0-or-later.
#include "session/rhythm_blocks.h"

#include <algorithm>
#include <array>
#include <cmath>
#include <map>
#include <string_view>

namespace chronodrome::session {
namespace {

using rhythm::Episode;

/// From quiet to grave.
constexpr std::array<std::string_view, 20> kByWeight = {"regular",
                                                        "paced",
                                                        "first_degree_av_block",
                                                        "premature_atrial",
                                                        "premature_ventricular",
                                                        "retrograde",
                                                        "preexcitation",
                                                        "unreadable",
                                                        "undetermined",
                                                        "wenckebach",
                                                        "second_degree_fixed",
                                                        "two_to_one",
                                                        "junctional_escape",
                                                        "ventricular_escape",
                                                        "sinus_pause",
                                                        "high_degree_av_block",
                                                        "complete_av_block",
                                                        "ventricular_tachycardia",
                                                        "ventricular_fibrillation",
                                                        "arrest"};

constexpr std::size_t kNone = static_cast<std::size_t>(-1);

std::string ratio_of(const Episode& episode) {
  if (episode.kind == "two_to_one") return "2:1";
  const std::string key = "ratio=";
  const auto at = episode.detail.find(key);
  if (at == std::string::npos || (at > 0 && episode.detail[at - 1] != ';')) return {};
  const auto from = at + key.size();
  return episode.detail.substr(from, episode.detail.find(';', from) - from);
}

/// For each column the weightiest episode it touches.
std::vector<std::size_t> shown(const std::vector<Episode>& episodes, Seconds start, Seconds end,
                               std::size_t columns) {
  std::vector<std::size_t> raster(columns, kNone);
  const double scale = static_cast<double>(columns) / (end - start).value();
  for (std::size_t i = 0; i < episodes.size(); ++i) {
    const Episode& episode = episodes[i];
    if (episode.end <= start || episode.start >= end) continue;
    const double from = std::max(0.0, (episode.start - start).value() * scale);
    const double to = (episode.end - start).value() * scale;
    const auto first = std::min(columns - 1, static_cast<std::size_t>(from));
    const auto last = std::min(columns, std::max(first + 1, static_cast<std::size_t>(std::ceil(to))));
    const int weight = weight_of(episode.kind);
    for (std::size_t c = first; c < last; ++c) {
      if (raster[c] == kNone || weight_of(episodes[raster[c]].kind) < weight) raster[c] = i;
    }
  }
  return raster;
}

std::vector<RhythmBlock> joined(const std::vector<std::size_t>& raster,
                                const std::vector<Episode>& episodes) {
  std::vector<RhythmBlock> blocks;
  for (std::size_t c = 0; c < raster.size(); ++c) {
    if (raster[c] == kNone) continue;
    const std::string& kind = episodes[raster[c]].kind;
    if (blocks.empty() || blocks.back().end != c || blocks.back().kind != kind) {
      blocks.push_back({});
      blocks.back().first = c;
      blocks.back().kind = kind;
    }
    blocks.back().end = c + 1;
  }
  return blocks;
}

bool may_mix(const RhythmBlock& block, std::size_t narrow) {
  return weight_of(block.kind) > 0 && block.end - block.first < narrow;
}

std::vector<RhythmBlock> with_narrow_ones_mixed(const std::vector<RhythmBlock>& blocks, std::size_t narrow) {
  std::vector<RhythmBlock> out;
  for (std::size_t i = 0; i < blocks.size();) {
    std::size_t j = i + 1;
    if (may_mix(blocks[i], narrow)) {
      while (j < blocks.size() && blocks[j].first == blocks[j - 1].end && may_mix(blocks[j], narrow))
        ++j;
    }
    out.push_back(blocks[i]);
    if (j - i > 1) {
      out.back().end = blocks[j - 1].end;
      out.back().kind = kMixedRhythm;
    }
    i = j;
  }
  return out;
}

void describe(RhythmBlock& block, const std::vector<Episode>& episodes, Seconds start, Seconds column) {
  const Seconds from = start + static_cast<double>(block.first) * column;
  const Seconds to = start + static_cast<double>(block.end) * column;
  std::map<std::string, Seconds> time_at;
  for (std::size_t i = 0; i < episodes.size(); ++i) {
    const Episode& episode = episodes[i];
    if (episode.start >= to) break;
    if (episode.end < from) continue;
    const bool belongs =
        block.kind == kMixedRhythm ? weight_of(episode.kind) > 0 : episode.kind == block.kind;
    if (!belongs) continue;
    block.episodes.push_back(i);
    const std::string ratio = ratio_of(episode);
    if (!ratio.empty()) time_at[ratio] += std::min(episode.end, to) - std::max(episode.start, from);
  }
  if (block.kind == kMixedRhythm || time_at.empty()) return;
  block.is_one_ratio = time_at.size() == 1;
  block.ratio = std::max_element(time_at.begin(), time_at.end(), [](const auto& a, const auto& b) {
                  return a.second < b.second;
                })->first;
}

} // namespace

int weight_of(const std::string& kind) {
  const auto* const at = std::find(kByWeight.begin(), kByWeight.end(), kind);
  // A kind that is not known here is shown rather than hidden.
  return at == kByWeight.end() ? 1 : static_cast<int>(at - kByWeight.begin());
}

std::vector<RhythmBlock> rhythm_blocks(const rhythm::Rhythm& rhythm, Seconds start, Seconds end,
                                       std::size_t columns, std::size_t narrow) {
  if (columns == 0 || !(end > start)) return {};
  const auto raster = shown(rhythm.episodes, start, end, columns);
  auto blocks = with_narrow_ones_mixed(joined(raster, rhythm.episodes), narrow);
  const Seconds column = (end - start) / static_cast<double>(columns);
  for (auto& block : blocks)
    describe(block, rhythm.episodes, start, column);
  return blocks;
}

std::size_t episode_at(const rhythm::Rhythm& rhythm, Seconds time) {
  std::size_t best = rhythm.episodes.size();
  for (std::size_t i = 0; i < rhythm.episodes.size(); ++i) {
    const Episode& episode = rhythm.episodes[i];
    if (time < episode.start || time >= episode.end) continue;
    if (best == rhythm.episodes.size() || weight_of(rhythm.episodes[best].kind) < weight_of(episode.kind))
      best = i;
  }
  return best;
}

} // namespace chronodrome::session
