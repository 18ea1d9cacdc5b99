// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <memory>
#include <string>

#include "base/result.h"
#include "document/session_file.h"
#include "protocol/protocol.h"
#include "recording/recording.h"
#include "session/analysis_settings.h"
#include "session/session_result.h"

namespace chronodrome::session {

/// What a session file leads to, read and checked: all that an analysis works on.
struct SessionInputs {
  document::SessionFile session;
  std::string session_sha256;
  std::shared_ptr<const recording::Recording> recording;
  protocol::Protocol protocol;
  AnalysisSettings settings;
  std::vector<std::string> settings_changed; ///< keys that differ from the defaults
  std::vector<Warning> warnings;             ///< of reading, in order of reading
};

struct LoadOptions {
  std::string cache_folder; ///< for sample stores; empty: the user's
  bool use_cache = true;
  unsigned threads = 0; ///< 0: all cores; changes no result
};

/// Reads a session file and what it names: recording, protocol, settings.
/// Errors: those of the readers; digest_mismatch where a raw file is not the one the session was made from.
Result<SessionInputs> load_session(const std::string& path, const LoadOptions& options);

/// Runs every stage on the inputs. Pure: the same result for any number of threads.
/// Errors: those of the stages; bad_value where the session names what the recording does not hold.
Result<SessionResult> analyse(const SessionInputs& inputs, unsigned threads);

} // namespace chronodrome::session
