// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <string>

#include "base/result.h"
#include "protocol/protocol.h"

namespace chronodrome::results {

/// A drug log as the text of its file (`resources/formats/protocol.md`): one row an event, in the log's
/// order; the optional columns only where an event uses them. Concentrations keep the unit they were written
/// in where that reads well (M only from 1 mol/L on), or get the one that puts 1 to 1000 before the point:
/// 1e-7 mol/L reads `100,nM`. Every number reads back to the same double; where no number in such a unit
/// does, it stands in M with all its digits. Texts are kept as they are, quoted where they must be: nothing
/// is put before a text that a spreadsheet would take for a formula, for the log is read back. Accuracy:
/// intake::parse_protocol gives back the events, but for their lines, the spelling of a unit, blanks at the
/// ends of texts, and zero bytes, which become blanks.
std::string protocol_text(const protocol::Protocol& protocol);

/// Writes the file as a whole or not at all; a symbolic link is followed, as by write_session().
/// Errors: cannot_write.
Done write_protocol(const protocol::Protocol& protocol, const std::string& path);

} // namespace chronodrome::results
