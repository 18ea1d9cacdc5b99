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
  int digital_min = -32768; ///< EDF: the converter's range
  int digital_max = 32767;
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

/// Writes EDF, EDF+C or EDF+D. Values go to the nearest digital one and clip at the ends of the range. The
/// last record is padded with the signal's last value; the annotation signal is as wide as the fullest record
/// needs, so that none is lost. Without signals, an EDF+ file of annotations only. Errors: bad_usage (a label
/// longer than 16 ASCII characters, a rate that does not fill whole records, a record duration that 8
/// characters cannot hold, a value that is not a number, annotations in a plain EDF file), cannot_write.
/// Source: Kemp et al. 1992, doi:10.1016/0013-4694(92)90009-7; Kemp & Olivan 2003,
/// doi:10.1016/S1388-2457(03)00123-8.
Done write_edf(const std::string& path, const WrittenRecording& recording, EdfKind kind);

struct CsvLayout {
  char delimiter = ',';
  char decimal = '.';
  std::vector<std::string> header_lines;  ///< written before the column names, as they are
  std::optional<std::string> time_column; ///< its name, for example "time"; nothing: no time column
  bool units_row = false; ///< a second row with the units; otherwise "name (unit)" in the first
  int time_decimals = 4;
  int value_decimals = 4;
  std::optional<std::string>
      comment_column; ///< a last column with the annotations, each in the row at its onset
};

/// Writes a table, one row a sample; rows inside `left_out` are not written. Requires: all signals have the
/// same rate and length. Annotations are written only into a comment column. Errors: bad_usage (different
/// rates or lengths, a delimiter that is the decimal mark), cannot_write.
Done write_csv(const std::string& path, const WrittenRecording& recording, const CsvLayout& layout);

} // namespace chronodrome::intake
