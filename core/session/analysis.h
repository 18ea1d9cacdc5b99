// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <atomic>
#include <functional>
#include <memory>
#include <string>
#include <vector>

#include "activation/activation.h"
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

/// Lets a caller follow an analysis and stop it. Both may be left empty.
struct Watch {
  /// Share done, 0 to 1 and never falling, and what is being done, in words. Called from any thread, one call
  /// at a time.
  std::function<void(double share, const std::string& doing)> progress;
  /// When it becomes true the analysis ends soon (within a block of samples) with ErrorCode::cancelled.
  const std::atomic<bool>* cancelled = nullptr;
};

/// What the signals alone say, before any correction: the part of an analysis that takes time. It is kept
/// between runs and used again while recording, channels and settings of conditioning and activation are the
/// same; an analysis with it and one without give the same result, bit for bit.
struct Detection {
  std::string key; ///< digest of all that it depends on; empty: none yet
  std::vector<activation::ChannelActivations> found;
};

/// Runs every stage on the inputs. Pure: the same result for any number of threads.
/// Errors: those of the stages; bad_value where the session names what the recording does not hold.
Result<SessionResult> analyse(const SessionInputs& inputs, unsigned threads);

/// As above, watched, and with `detection` used where its key fits and renewed where not.
/// Errors: as above; cancelled.
Result<SessionResult> analyse(const SessionInputs& inputs, unsigned threads, Detection& detection,
                              const Watch& watch);

/// Responses and fits of one measure again, with the windows that `inputs.session.windows` now holds;
/// everything else as in `before`. For a plateau that is being dragged: a few milliseconds, and the same
/// numbers as a whole analysis would give. Errors: bad_usage (a measure that the session does not list).
Result<SessionResult> with_windows_of(const SessionInputs& inputs, const SessionResult& before,
                                      const std::string& measure);

/// Reads the session again after an edit in the window: as load_session(), but with the session, drug log and
/// recording that are given, which are not compared with its digests. `session_sha256` is the digest of
/// `session.as_read`: that of the file only once the edits are saved and read. Errors: those of
/// settings_of().
Result<SessionInputs> inputs_of(const document::SessionFile& session, const protocol::Protocol& protocol,
                                const std::shared_ptr<const recording::Recording>& recording);

} // namespace chronodrome::session
