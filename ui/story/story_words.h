// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <QString>
#include <QStringList>

#include "response/response.h"
#include "session/rhythm_blocks.h"
#include "session/trend.h"
#include "ui/story/pattern.h"
#include "ui/story/story_content.h"

namespace chronodrome::ui::story {

enum class Tone { quiet, caution, fault };

/// How a kind of rhythm is drawn: never by colour alone.
struct RhythmLook {
  Pattern pattern = Pattern::none;
  Tone tone = Tone::quiet;
  bool isInverse = false; ///< text on a filled block
  double spacing = 5.0;   ///< of the pattern
};
RhythmLook lookOf(const std::string& kind);

/// Words for a block, the longest first, for whichever fits: `Wenckebach, mostly 3:2`, `Wenckebach`.
QStringList blockWords(const session::RhythmBlock& block);
/// An episode in full: kind, times and the rule's numbers.
QString episodeText(const rhythm::Episode& episode);

/// A band that bears no value: `complete block`, `arrest`, `unreadable`, `left out`.
QString bandWord(response::Status status);
/// A plateau in full: measure, concentration, value, times, beats, and whether it was placed by hand.
QString plateauText(const response::Response& response);
/// While it is dragged: its times and its value, two lines.
QStringList draggedText(const response::Response& response);
QString spanText(Seconds start, Seconds end);
/// What the evidence shows: `evidence 12:30.0 to 12:40.0, 10.0 s`.
QString frameText(Seconds start, Seconds end);

/// Second line of a row's label: the unit, or what a share is counted over.
QString rowUnitText(const session::Trend& trend);
/// What the bath holds at a time, `acetylcholine 300 nM`; empty: nothing.
QString bathText(const session::BathCourse& bath, Seconds time);
/// A point of a trend: `rate of RA 182.3 beats/min`.
QString pointText(const session::Trend& trend, const session::TrendPoint& point);
QString lostText(const session::LostStretch& stretch);

} // namespace chronodrome::ui::story
