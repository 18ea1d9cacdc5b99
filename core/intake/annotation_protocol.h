// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <string>
#include <vector>

#include "protocol/protocol.h"
#include "recording/recording.h"

namespace chronodrome::intake {

/// The drug log that EDF+ annotations carry: `EVENT [AGENT] [VALUE UNIT] [NOTE]`, for example
/// `addition acetylcholine 3e-7 M`. The agent runs up to the first number that a unit follows (apart or
/// attached: `100 nM`, `100nM`). Without such a number the rest is the agent of a washout or vehicle, and the
/// note of any other event. Capital letters in EVENT do not matter.
///
/// Other annotations are passed over. Where an annotation lies in its file is not known: warnings about a
/// file that ends in .edf stand at byte 0. Warnings (with the recording's `file`): a text that begins like an
/// event but cannot be read as one, and those of a log in a file.
protocol::Protocol protocol_from_annotations(const std::vector<recording::Annotation>& annotations,
                                             const std::string& file);

} // namespace chronodrome::intake
