// Chronodrome, GPL-3.0-or-later.
#pragma once

#include "base/result.h"
#include "intake/csv_reader.h"
#include "intake/edf_header.h"

namespace chronodrome::intake {

/// An EDF or EDF+ file. Every signal keeps its own rate, samples a record / duration of a record; records
/// stand where their time-keeping annotations put them; onsets count from that of the first record. Samples
/// stay 16 bit. Errors: as read_recording; damaged also where a discontinuous file's records overlap in time.
Result<ReadContent> read_edf(const ByteSource& source, const ReadSettings& settings,
                             recording::StoreFolder& folder);

} // namespace chronodrome::intake
