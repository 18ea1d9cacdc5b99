// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <optional>
#include <string>
#include <vector>

#include "recording/recording.h"
#include "recording/store_folder.h"

namespace chronodrome::recording {

/// How the samples of a signal lie in its store file: doubles, or integers with this scale.
using StoreKind = std::optional<DigitalScale>;

/// Writes all of `recording` but its samples and envelopes into the folder, then makes the folder stand.
/// `kinds`: one a signal. The path of the (only) source file is left out: the same bytes may lie elsewhere
/// next time.
void store_recording(const Recording& recording, const std::vector<StoreKind>& kinds, StoreFolder& folder);

/// The recording as it was stored, bit for bit, with `path` as the place of its source file; nothing if it is
/// not there, not whole, or of another version.
std::optional<Recording> stored_recording(const std::string& cache_folder, const std::string& key,
                                          const std::string& path);

} // namespace chronodrome::recording
