// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <string>
#include <vector>

#include "recording/recording.h"

namespace chronodrome::session {

/// How far a guess can be trusted.
enum class Confidence {
  sure,    ///< stated in so many words, or by a unit that leaves nothing else
  guessed, ///< an abbreviation, a default: to be confirmed
  unknown  ///< nothing speaks for anything
};
/// `sure`, `guessed`, `unknown`.
std::string name_of(Confidence confidence);

/// What a label says by its words. Words of physiology in English, German, French, Spanish, Italian,
/// Portuguese, Dutch, Swedish and Polish, and the abbreviations that papers use (RA, HRA, LV, HB, LVP).
struct LabelReading {
  recording::Role role = recording::Role::other;
  Confidence confidence = Confidence::unknown; ///< sure: a word written out; guessed: an abbreviation
  std::string word;                            ///< as it stands in the label, the one that tells
  bool two_chambers = false;                   ///< it names an atrium and a ventricle
  char side = '\0';                            ///< 'R' or 'L' where a word says so
};
LabelReading read_label(const std::string& label);

struct LeadReading {
  recording::Lead lead = recording::Lead::none;
  std::string word; ///< what tells, as it stands in the label; empty: nothing does
};
/// `RA1-RA2`, `RA 3-4`, `bip`: bipolar; `uni`: unipolar.
LeadReading read_lead(const std::string& label);

/// The role that a unit alone leaves: force, pressure, flow and temperature. Other for all else.
recording::Role role_of_unit(const std::string& unit);
/// V, mV, uV and what has no unit or counts.
bool is_electrical_unit(const std::string& unit);

} // namespace chronodrome::session
