// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <cstddef>
#include <string>
#include <vector>

#include "base/quantity.h"
#include "rhythm/rhythm.h"

namespace chronodrome::session {

/// Word that a block bears which holds several short episodes of different kinds.
inline constexpr const char* kMixedRhythm = "mixed";

/// What a strip of pixel columns shows of the rhythm: neighbours of one kind as one block.
struct RhythmBlock {
  std::size_t first = 0; ///< column
  std::size_t end = 0;   ///< column behind the last
  std::string kind;      ///< of rhythm::Episode, or kMixedRhythm
  std::string ratio;     ///< `4:3`: that of most of its time, where its episodes state one
  bool is_one_ratio = true;
  std::vector<std::size_t> episodes; ///< indices into Rhythm::episodes, of its kind (mixed: of all), in order
};

/// Which of two kinds that hold at the same time a strip shows: the higher. 0: `regular`.
int weight_of(const std::string& kind);

/// The rhythm from `start` to `end` in `columns` columns. A column shows the weightiest episode that it
/// touches, so that no pause is lost; two or more neighbouring blocks that are narrower than `narrow` columns
/// and of different kinds become one mixed block. Columns that no episode touches are in no block. Requires:
/// start < end, columns > 0.
std::vector<RhythmBlock> rhythm_blocks(const rhythm::Rhythm& rhythm, Seconds start, Seconds end,
                                       std::size_t columns, std::size_t narrow);

/// The weightiest episode at a time, as an index; size() if there is none.
std::size_t episode_at(const rhythm::Rhythm& rhythm, Seconds time);

} // namespace chronodrome::session
