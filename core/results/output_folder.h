// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <span>
#include <string>
#include <vector>

#include "base/result.h"

namespace chronodrome::results {

/// A file of a results folder: its name and its whole content.
struct OutputFile {
  std::string name;
  std::string content;
};

/// Names of all files that a results folder may hold.
std::span<const std::string> result_file_names();

/// Refuses an output folder that would mix our files with others': `folder` may hold folders only, and each
/// of `folder`/`name` only result files. Folders that do not exist are fine. Errors: cannot_write, naming the
/// first file that is not ours.
Done check_output_folder(const std::string& folder, std::span<const std::string> names);

/// Writes each file under a temporary name and renames it, so that a reader never sees half a file, and
/// removes result files of an earlier run that this one does not make. Errors: cannot_write with the system's
/// reason.
Done write_output_folder(const std::string& folder, std::span<const OutputFile> files);

/// Writes one file through a temporary name beside it.
Done write_whole_file(const std::string& path, const std::string& content);

/// The same, but where `path` is a symbolic link, the file that it leads to is replaced, not the link.
Done write_behind_links(const std::string& path, const std::string& content);

} // namespace chronodrome::results
