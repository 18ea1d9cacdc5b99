// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <optional>
#include <string>

namespace chronodrome::document {

/// What a response can be read from.
enum class MeasureKind { rate, delay, conducted, velocity, force, pressure, dpdt_max, flow };
std::string name_of(MeasureKind kind);

/// `KIND:LABEL`, for example `rate:RA`.
struct Measure {
  MeasureKind kind = MeasureKind::rate;
  std::string label; ///< of a channel, or of a pathway for delay, conducted and velocity
};

/// Nothing if the kind is unknown or the label is empty. The label is all that follows the first colon.
std::optional<Measure> measure_named(const std::string& text);
/// True for kinds whose label is a pathway's.
bool is_of_pathway(MeasureKind kind);
/// All kinds, as a message lists them.
std::string measure_forms();

} // namespace chronodrome::document
