// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <array>
#include <cstddef>
#include <cstdint>
#include <optional>
#include <string>
#include <vector>

#include "base/result.h"
#include "intake/clock_time.h"
#include "intake/recording_reader.h"
#include "intake/source_file.h"
#include "recording/stores.h"

namespace chronodrome::intake {

/// One signal as the header describes it.
struct EdfSignal {
  std::string label, unit, prefilter;
  std::size_t per_record = 0; ///< samples
  std::size_t byte_in_record = 0;
  bool annotations = false; ///< "EDF Annotations": text, not samples
  recording::DigitalScale scale;
  std::optional<std::array<double, 2>> rails; ///< physical values at the ends of the digital range, low first
  std::optional<std::array<int, 2>> digital;  ///< the digital range, where it is sound
  double resolution = 0.0;
};

enum class EdfKindRead { plain, continuous, discontinuous };

struct EdfHeader {
  EdfKindRead kind = EdfKindRead::plain;
  std::optional<ClockTime> start; ///< whole seconds; nothing: unknown or impossible
  double duration = 1.0;          ///< of a record, seconds; 0 only without samples
  std::uint64_t header_bytes = 0;
  std::uint64_t record_bytes = 0;
  std::uint64_t records = 0; ///< whole ones that are to be read
  std::vector<EdfSignal> signals;
  std::vector<std::string> notes;
  std::vector<Warning> warnings;

  [[nodiscard]] bool has_samples() const;
  [[nodiscard]] bool has_annotations() const;
};

/// Reads and judges the header; nothing is allocated for samples. Errors: read_failed, damaged (shorter than
/// its header, no whole record), bad_value (a field that is no number, no duration), over_limit. The place is
/// the field's byte. Source: Kemp et al. 1992, doi:10.1016/0013-4694(92)90009-7; Kemp & Olivan 2003,
/// doi:10.1016/S1388-2457(03)00123-8.
Result<EdfHeader> read_edf_header(const ByteSource& source, const ReadSettings& settings);

} // namespace chronodrome::intake
