// Chronodrome, GPL-3.0-or-later.
#include "results/output_folder.h"

#include <algorithm>
#include <array>
#include <cerrno>
#include <cstring>
#include <fcntl.h>
#include <filesystem>
#include <unistd.h>

namespace fs = std::filesystem;

namespace chronodrome::results {
namespace {

constexpr std::string_view kTemporary = ".part";

Error not_ours(const fs::path& path) {
  return {ErrorCode::cannot_write,
          path.string(),
          {},
          "the output folder holds a file that is not ours",
          "choose an empty folder for --out, or move this file away"};
}

Error system_error(const std::string& path, const std::string& what) {
  return {ErrorCode::cannot_write,
          path,
          {},
          what + ": " + std::strerror(errno),
          "choose another folder for the output"};
}

bool is_result_file(const std::string& name) {
  const auto names = result_file_names();
  return std::find(names.begin(), names.end(), name) != names.end();
}

/// True for what a run of ours that was killed may have left.
bool is_left_over(const std::string& name) {
  return name.size() > kTemporary.size() && name.ends_with(kTemporary) &&
         is_result_file(name.substr(0, name.size() - kTemporary.size()));
}

/// What a folder holds, by name.
Result<std::vector<fs::path>> entries_of(const fs::path& folder) {
  std::vector<fs::path> entries;
  std::error_code failed;
  for (fs::directory_iterator at(folder, failed), end; !failed && at != end; at.increment(failed))
    entries.push_back(at->path());
  if (failed) {
    return Error{ErrorCode::cannot_write,
                 folder.string(),
                 {},
                 "the output folder cannot be read: " + failed.message(),
                 "choose another folder for --out"};
  }
  std::sort(entries.begin(), entries.end());
  return entries;
}

} // namespace

std::span<const std::string> result_file_names() {
  static const std::array<std::string, 17> names = {
      "activations.csv", "intervals.csv", "delays.csv",    "rhythm.csv",     "responses.csv",  "curves.json",
      "mechanics.csv",   "quality.csv",   "impulses.csv",  "pacing.csv",     "conduction.csv", "summary.json",
      "report.pdf",      "report.html",   "workbook.xlsx", "dictionary.csv", "verify.txt"};
  return names;
}

Done check_output_folder(const std::string& folder, std::span<const std::string> names) {
  std::error_code failed;
  if (!fs::exists(folder, failed)) return done();
  if (!fs::is_directory(folder, failed)) {
    return Error{ErrorCode::cannot_write,
                 folder,
                 {},
                 "the output is to go into a folder, and this is a file",
                 "choose another name for --out"};
  }
  auto entries = entries_of(folder);
  if (!entries) return entries.error();
  for (const auto& entry : *entries) {
    if (!fs::is_directory(entry, failed)) return not_ours(entry);
  }
  for (const auto& name : names) {
    const fs::path inner = fs::path(folder) / name;
    if (!fs::exists(inner, failed)) continue;
    entries = entries_of(inner);
    if (!entries) return entries.error();
    for (const auto& entry : *entries) {
      const std::string file = entry.filename().string();
      if (fs::is_directory(entry, failed) || !(is_result_file(file) || is_left_over(file)))
        return not_ours(entry);
    }
  }
  return done();
}

namespace {

std::string part_of(const std::string& path) {
  return path + std::string(kTemporary);
}

/// Writes the content under the temporary name, down to the disk.
Done write_part(const std::string& path, const std::string& content) {
  const std::string temporary = part_of(path);
  const int file = ::open(temporary.c_str(), O_WRONLY | O_CREAT | O_TRUNC | O_CLOEXEC, 0644);
  if (file < 0) return system_error(path, "the file cannot be written");
  std::size_t written = 0;
  while (written < content.size()) {
    const auto step = ::write(file, content.data() + written, content.size() - written);
    if (step < 0 && errno == EINTR) continue;
    if (step < 0) {
      const Error error = system_error(path, "the file cannot be written");
      ::close(file);
      ::unlink(temporary.c_str());
      return error;
    }
    written += static_cast<std::size_t>(step);
  }
  // After a power cut the old file or the new one is there, never an empty one.
  const bool kept = ::fsync(file) == 0;
  if (::close(file) == 0 && kept) return done();
  const Error error = system_error(path, "the file cannot be written");
  ::unlink(temporary.c_str());
  return error;
}

Done put_in_place(const std::string& path) {
  if (::rename(part_of(path).c_str(), path.c_str()) == 0) return done();
  const Error error = system_error(path, "the file cannot be put in its place");
  ::unlink(part_of(path).c_str());
  return error;
}

} // namespace

Done write_whole_file(const std::string& path, const std::string& content) {
  if (Done written = write_part(path, content); !written) return written;
  return put_in_place(path);
}

Done write_behind_links(const std::string& path, const std::string& content) {
  std::error_code fault;
  const auto target = fs::weakly_canonical(path, fault);
  return write_whole_file(fault ? path : target.string(), content);
}

Done write_output_folder(const std::string& folder, std::span<const OutputFile> files) {
  std::error_code failed;
  fs::create_directories(folder, failed);
  if (failed) {
    return Error{ErrorCode::cannot_write,
                 folder,
                 {},
                 "the output folder cannot be made: " + failed.message(),
                 "choose another folder for --out"};
  }
  const auto path_of = [&](const std::string& name) { return (fs::path(folder) / name).string(); };
  // All new files are on the disk before the first old one goes: a full disk leaves the old results whole.
  for (std::size_t i = 0; i < files.size(); ++i) {
    if (Done written = write_part(path_of(files[i].name), files[i].content); !written) {
      for (std::size_t k = 0; k < i; ++k)
        fs::remove(part_of(path_of(files[k].name)), failed);
      return written;
    }
  }
  for (const auto& file : files) {
    if (Done placed = put_in_place(path_of(file.name)); !placed) return placed;
  }
  for (const auto& name : result_file_names()) {
    const bool made =
        std::any_of(files.begin(), files.end(), [&](const auto& file) { return file.name == name; });
    if (!made) fs::remove(path_of(name), failed);
    fs::remove(part_of(path_of(name)), failed); // of a run that was killed
  }
  return done();
}

} // namespace chronodrome::results
