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
  for (const auto& entry : fs::directory_iterator(folder, failed)) {
    if (!entry.is_directory(failed)) return not_ours(entry.path());
  }
  for (const auto& name : names) {
    const fs::path inner = fs::path(folder) / name;
    if (!fs::exists(inner, failed)) continue;
    for (const auto& entry : fs::directory_iterator(inner, failed)) {
      const std::string file = entry.path().filename().string();
      if (entry.is_directory(failed) || !(is_result_file(file) || is_left_over(file)))
        return not_ours(entry.path());
    }
  }
  if (failed)
    return Error{ErrorCode::cannot_write,
                 folder,
                 {},
                 "the output folder cannot be read: " + failed.message(),
                 "choose another folder for --out"};
  return done();
}

Done write_whole_file(const std::string& path, const std::string& content) {
  const std::string temporary = path + std::string(kTemporary);
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
  if (::close(file) != 0 || !kept || ::rename(temporary.c_str(), path.c_str()) != 0) {
    const Error error = system_error(path, "the file cannot be put in its place");
    ::unlink(temporary.c_str());
    return error;
  }
  return done();
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
  for (const auto& file : files) {
    if (const Done written = write_whole_file((fs::path(folder) / file.name).string(), file.content);
        !written) {
      return written.error();
    }
  }
  for (const auto& name : result_file_names()) {
    const bool made =
        std::any_of(files.begin(), files.end(), [&](const auto& file) { return file.name == name; });
    if (!made) fs::remove(fs::path(folder) / name, failed);
  }
  return done();
}

} // namespace chronodrome::results
