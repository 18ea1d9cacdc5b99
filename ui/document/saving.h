// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <optional>
#include <string>
#include <vector>

#include <QString>

#include "base/result.h"
#include "recording/recording.h"
#include "ui/document/content.h"

namespace chronodrome::ui {

/// Absolute path of each file of a recording, in its order.
std::vector<std::string> recordingPaths(const document::SessionFile& session,
                                        const recording::Recording& recording);

/// The deepest folder that holds all files. Requires: at least one, absolute.
std::string commonFolder(const std::vector<std::string>& files);

/// The session as it is to stand at `path`: where its files lie from there, their digests, its name.
/// Errors: cannot_write (a file of the recording lies outside the folder of `path`).
Result<document::SessionFile> sessionAt(const QString& path, const document::SessionFile& session,
                                        const recording::Recording& recording);

/// Prepares a session that has no file yet: it lies, for the time being, in the folder that holds its
/// recording. Returns false where its drug log is on no disk: neither in the file that it names nor in the
/// annotations.
bool settleUnsaved(Content& content, const recording::Recording& recording);

/// Where the drug log of `session` is to be written when the session is saved at `path`, relative to it.
/// Its own file, where that belongs to this session alone; else `NAME.protocol.csv` beside the session.
std::string logFileAt(const QString& path, const document::SessionFile& session);

} // namespace chronodrome::ui
