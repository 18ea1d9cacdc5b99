// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <string>
#include <vector>

#include "base/result.h"
#include "intake/recording_reader.h"
#include "intake/source_file.h"
#include "recording/recording.h"
#include "recording/store_folder.h"
#include "recording/stored_recording.h"

namespace chronodrome::intake {

/// A recording and how its samples lie in their stores. `files` is left to the caller.
struct ReadContent {
  recording::Recording recording;
  std::vector<recording::StoreKind> kinds;
  std::string kind = "csv"; ///< of the file, as SourceFile names it
};

/// A table of numbers, read in blocks, whatever its size: no more than a few megabytes a thread are held
/// beside the stores. Errors: as read_recording.
Result<ReadContent> read_csv(const ByteSource& source, const ReadSettings& settings,
                             recording::StoreFolder& folder);

} // namespace chronodrome::intake
