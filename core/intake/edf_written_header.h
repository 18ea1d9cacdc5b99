// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <cstddef>
#include <string>
#include <vector>

#include "base/result.h"
#include "intake/recording_writer.h"

namespace chronodrome::intake {

/// The scale of a signal as a reader will understand it: the numbers that the header's eight characters
/// spell.
struct EdfScale {
  double physical_min = 0.0, physical_max = 1.0;
  int digital_min = -32768, digital_max = 32767;
  std::string physical_min_text, physical_max_text;
};

/// What the header of a file to be written says, apart from what the signals say themselves.
struct EdfWrittenHeader {
  std::string duration_text; ///< of a record, at most 8 characters
  std::vector<std::size_t> per_record;
  std::vector<EdfScale> scales;
  double sub_second_start = 0.0; ///< fraction of a second by which the first sample follows the header's time
  std::size_t annotation_samples = 0;
  std::size_t records = 0;
};

/// Checks what is to be written and lays out the header. Errors: bad_usage.
Result<EdfWrittenHeader> edf_header_of(const std::string& path, const WrittenRecording& recording,
                                       EdfKind kind);

/// 256 bytes, and 256 more a signal. Errors: bad_usage (a field that does not fit).
Result<std::string> edf_header_text(const std::string& path, const EdfWrittenHeader& header,
                                    const WrittenRecording& recording, EdfKind kind);

} // namespace chronodrome::intake
