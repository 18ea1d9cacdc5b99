// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <optional>
#include <string>
#include <vector>

#include "base/quantity.h"
#include "base/result.h"
#include "recording/time_base.h"

namespace chronodrome::intake {

/// A signal to be written, sampled from time zero on without a gap.
struct WrittenSignal {
  std::string label; ///< at most 16 ASCII characters in an EDF file
  std::string unit;
  Hertz rate;
  std::vector<double> samples; ///< in `unit`
  double physical_min = 0.0;   ///< EDF scale; both 0: the range of the samples, rounded outwards
  double physical_max = 0.0;
  std::string prefilter;
};

struct WrittenAnnotation {
  Seconds onset;
  std::optional<Seconds> duration;
  std::string text;
};

struct WrittenRecording {
  std::string clock_start;    ///< ISO 8601 without zone, "2026-03-04T09:30:00"; empty: unknown
  std::string recording_text; ///< free text for the EDF recording field (no blanks inside a subfield)
  std::vector<WrittenSignal> signals;
  std::vector<WrittenAnnotation> annotations;
  Seconds record_duration{1.0};          ///< rate x duration must be whole for every signal
  std::vector<recording::Span> left_out; ///< EDF+D: records that lie inside are not written
};

enum class EdfKind { plain, continuous, discontinuous };

/// Writes EDF, EDF+C or EDF+D (Kemp & Olivan 2003). The last record is padded with the signal's last value.
/// Errors: bad_usage (a label too long, a rate that does not fill whole records), cannot_write.
Done write_edf(const std::string& path, const WrittenRecording& recording, EdfKind kind);

struct CsvLayout {
  char delimiter = ',';
  char decimal = '.';
  std::vector<std::string> header_lines;  ///< written before the column names, as they are
  std::optional<std::string> time_column; ///< its name, for example "time"; nothing: no time column
  bool units_row = false; ///< a second row with the units; otherwise "name (unit)" in the first
  int time_decimals = 4;
  int value_decimals = 4;
};

/// Writes a table, one row a sample. Requires: all signals have the same rate and length.
/// Errors: bad_usage (different rates), cannot_write.
Done write_csv(const std::string& path, const WrittenRecording& recording, const CsvLayout& layout);

} // namespace chronodrome::intake
