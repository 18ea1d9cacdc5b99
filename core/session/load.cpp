// Chronodrome, GPL-3.0-or-later.
#include <filesystem>

#include "base/digest.h"
#include "base/number_text.h"
#include "intake/annotation_protocol.h"
#include "intake/protocol_reader.h"
#include "intake/recording_reader.h"
#include "intake/session_reader.h"
#include "session/analysis.h"

namespace fs = std::filesystem;

namespace chronodrome::session {
namespace {

Result<recording::Recording> read_files(const document::SessionFile& session, const LoadOptions& options) {
  std::vector<std::string> paths;
  for (const auto& file : session.files)
    paths.push_back((fs::path(session.folder) / file.path).string());
  intake::ReadSettings settings;
  if (session.csv.rate_hz) settings.rate = Hertz(*session.csv.rate_hz);
  settings.delimiter = session.csv.delimiter;
  settings.decimal = session.csv.decimal;
  settings.time_column = session.csv.time_column;
  settings.cache_folder = options.cache_folder;
  settings.use_cache = options.use_cache;
  settings.threads = options.threads;
  return intake::read_recordings(paths, settings);
}

/// A raw file that changed since the session was made is not analysed under its name.
std::optional<Error> check_digests(const document::SessionFile& session,
                                   const recording::Recording& recording) {
  for (std::size_t i = 0; i < session.files.size() && i < recording.files.size(); ++i) {
    const auto& expected = session.files[i].sha256;
    if (!expected || lower_case(*expected) == recording.files[i].sha256) continue;
    return Error{ErrorCode::digest_mismatch, recording.files[i].path, Place::at_byte(0),
                 "the file is not the one the session was made from: SHA-256 is " +
                     recording.files[i].sha256 + ", the session says " + *expected,
                 "bring back the original file, or remove sha256 from the session if the change is intended"};
  }
  return std::nullopt;
}

Result<protocol::Protocol> read_log(const document::SessionFile& session,
                                    const recording::Recording& recording) {
  if (session.protocol_file)
    return intake::read_protocol((fs::path(session.folder) / *session.protocol_file).string());
  const std::string file = recording.files.empty() ? session.path : recording.files.front().path;
  return intake::protocol_from_annotations(recording.annotations, file);
}

void append(std::vector<Warning>& all, const std::vector<Warning>& more) {
  all.insert(all.end(), more.begin(), more.end());
}

} // namespace

Result<SessionInputs> load_session(const std::string& path, const LoadOptions& options) {
  auto session = intake::read_session(path);
  if (!session) return session.error();
  // Settings are looked at before a long recording is read in vain.
  if (const auto settings = settings_of(*session); !settings) return settings.error();
  auto recording = read_files(*session, options);
  if (!recording) return recording.error();
  if (auto error = check_digests(*session, *recording)) return *error;
  auto log = read_log(*session, *recording);
  if (!log) return log.error();
  return inputs_of(*session, *log, std::make_shared<const recording::Recording>(std::move(*recording)));
}

Result<SessionInputs> inputs_of(const document::SessionFile& session, const protocol::Protocol& protocol,
                                const std::shared_ptr<const recording::Recording>& recording) {
  auto chosen = settings_of(session);
  if (!chosen) return chosen.error();
  SessionInputs inputs;
  inputs.session = session;
  inputs.session_sha256 = sha256_of(session.as_read);
  inputs.recording = recording;
  inputs.protocol = protocol;
  inputs.settings = chosen->settings;
  inputs.settings_changed = chosen->changed;
  append(inputs.warnings, session.warnings);
  append(inputs.warnings, chosen->warnings);
  append(inputs.warnings, recording->warnings);
  append(inputs.warnings, protocol.warnings);
  return inputs;
}

} // namespace chronodrome::session
