// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <cstddef>
#include <optional>
#include <string>
#include <vector>

#include "base/result.h"
#include "intake/recording_reader.h"
#include "intake/source_file.h"

namespace chronodrome::intake {

/// The beginning of a recording as text, and how it would be read: for a preview, before anything is read.
struct TableHead {
  bool is_table = false;          ///< false: an EDF file, or no text at all; the rest is empty
  std::string encoding;           ///< "UTF-8" ...
  std::vector<std::string> lines; ///< the first ones, as UTF-8, cut to 200 bytes
  std::optional<char> delimiter;  ///< found or set; nothing: not sure
  std::optional<char> decimal;
  std::vector<std::string> columns; ///< header texts, with bracketed units, that may hold times or signals
  std::optional<std::string> time_column; ///< header text; nothing: none found
  std::optional<double> stated_rate;      ///< Hz, from a header line
  std::size_t data_line = 0;              ///< first line of numbers, from 1; 0: not found
};

/// Looks at the first megabyte only. What cannot be told under `settings` is left open, without an error:
/// read_recording says what is wrong. Errors: file_missing, read_failed.
Result<TableHead> head_of(const ByteSource& source, const ReadSettings& settings, std::size_t lines);

/// The keys of `recording.csv` that an error asks to be set, in the order in which its remedy names them:
/// "rate_hz", "delimiter", "decimal", "time_column". Empty if no choice would help.
std::vector<std::string> choices_asked(const Error& error);

} // namespace chronodrome::intake
