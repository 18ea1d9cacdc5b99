// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <QString>

#include "protocol/protocol.h"
#include "recording/recording.h"
#include "session/stretches.h"
#include "session/trend_stretches.h"

// Text of the evidence: what stands at a stretch, a line or an axis.
namespace chronodrome::ui::evidence {

/// Why a stretch says nothing: `gap`, `flat line`, `excluded: loose contact`.
QString lostText(const session::LostStretch& lost);

/// `acetylcholine 1 µM`, `washout`, `vehicle`; a note's own words.
QString eventText(const protocol::Event& event);
/// The same where room is short: the concentration alone, or one word.
QString shortEventText(const protocol::Event& event);

/// `plateau 1 µM`, `plateau of the control`.
QString plateauText(const session::PlateauWindow& window);

/// What stands under a channel's label: `atrial, mV`.
QString channelText(const recording::Channel& channel);

/// `200 ms across`, `30 s across`, `20 min 30 s across`.
QString acrossText(Seconds width);

/// A time that a cursor reads, to 0.1 ms.
QString cursorTimeText(Seconds time);

/// A difference in ms to 0.1 ms, with the unit.
QString millisecondsText(Seconds difference);

} // namespace chronodrome::ui::evidence
