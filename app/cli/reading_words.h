// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <optional>
#include <string>

#include "base/result.h"
#include "document/session_file.h"
#include "intake/recording_reader.h"

namespace chronodrome::cli {

/// How a table is to be read, as options say it; nothing: find out.
struct ReadingWords {
  std::optional<double> rate_hz;
  std::optional<std::string> delimiter, decimal, time_column;
};

/// What the options say, over `csv` where they say nothing. Errors: bad_usage (a mark that is not one
/// character).
Result<document::CsvChoices> choices_of(const ReadingWords& words, const std::string& recording,
                                        document::CsvChoices csv = {});

intake::ReadSettings settings_of(const document::CsvChoices& csv);

/// The readers speak of the session's keys; on the command line the same is said with options.
Error with_options(Error error);

} // namespace chronodrome::cli
