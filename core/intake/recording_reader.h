// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <cstddef>
#include <cstdint>
#include <optional>
#include <span>
#include <string>

#include "base/quantity.h"
#include "base/result.h"
#include "intake/source_file.h"
#include "recording/recording.h"

namespace chronodrome::intake {

/// Beyond these a file is refused, before memory is asked for.
struct ReadLimits {
  std::size_t signals = 1024;                         ///< columns of a table, signals of an EDF file
  std::size_t record_bytes = std::size_t{256} << 20U; ///< one EDF data record
  std::size_t line_bytes = std::size_t{1} << 20U;     ///< one line of a table
  std::size_t annotations = 1'000'000;                ///< and comments
  std::size_t uneven_rows = 1000;                     ///< rows with too few or too many cells
  std::size_t runs = 1'000'000;                       ///< stretches between gaps, in one signal
};

/// Rates that a recording may be said to have.
inline constexpr Hertz kSlowestRate{0.01};
inline constexpr Hertz kFastestRate{1e7};

/// How a recording is to be read. What is left open is found out, and refused where it cannot be found out
/// surely.
struct ReadSettings {
  std::optional<Hertz> rate;              ///< of a table, or of an EDF file whose records have no duration
  std::optional<char> delimiter;          ///< of a table; ' ' stands for any number of blanks
  std::optional<char> decimal;            ///< of a table: '.' or ','
  std::optional<std::string> time_column; ///< its header text; an empty text: there is none
  std::string cache_folder;               ///< for the sample stores; empty: the user's
  bool use_cache = true;                  ///< false: samples are held in memory
  unsigned threads = 0;                   ///< 0: as many as the machine has; does not change the result
  ReadLimits limits;

  /// Errors: bad_usage (a rate outside kSlowestRate to kFastestRate, a delimiter or decimal mark that cannot
  /// be one).
  [[nodiscard]] std::optional<Error> check() const;
};

/// What a CSV, EDF or EDF+ file holds; the kind is told by its first bytes. Every doubt stands in the
/// recording's warnings, and how a table was read in its file_notes. Read again from the cache, the result is
/// the same bit for bit. Errors: file_missing, read_failed, wrong_format, damaged, over_limit, ambiguous,
/// bad_value, not_enough_data.
Result<recording::Recording> read_recording(const std::string& path, const ReadSettings& settings);
/// The same from any source of bytes.
Result<recording::Recording> read_recording(const ByteSource& source, const ReadSettings& settings);

/// Several files of one session, in order of time, as one recording: placed by their clock times, or by their
/// own time columns where these run on. Signals are matched by their source; one that is missing in a file
/// has a gap there. A gap between files is a warning, an overlap an error. Errors: as above, and bad_value
/// (overlap, wrong order, a signal whose rate or unit changes), not_enough_data (a file that does not say
/// when it starts).
Result<recording::Recording> read_recordings(std::span<const std::string> paths,
                                             const ReadSettings& settings);

} // namespace chronodrome::intake
