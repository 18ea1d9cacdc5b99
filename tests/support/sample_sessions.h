// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <cstdlib>
#include <filesystem>
#include <fstream>
#include <iterator>
#include <stdexcept>
#include <string>

#include "session/analysis.h"

namespace chronodrome::test_support {

/// The sample session of that name, read and analysed. Throws with the reason if it cannot be.
inline session::SessionResult sample_session(const std::string& name) {
  session::LoadOptions options;
  options.threads = 1;
  const std::string path =
      std::string(CHRONODROME_SOURCE_DIR) + "/sample-sessions/" + name + "/" + name + ".session.json";
  const auto inputs = session::load_session(path, options);
  if (!inputs) throw std::runtime_error(describe(inputs.error()));
  auto result = session::analyse(*inputs, 1);
  if (!result) throw std::runtime_error(describe(result.error()));
  return *std::move(result);
}

/// A folder of the build tree that is there for the life of this object.
struct ScratchFolder {
  std::filesystem::path path;
  explicit ScratchFolder(const std::string& name)
      : path(std::filesystem::path(CHRONODROME_BUILD_DIR) / name) {
    std::filesystem::remove_all(path);
    std::filesystem::create_directories(path);
  }
  ~ScratchFolder() { std::filesystem::remove_all(path); }
  ScratchFolder(const ScratchFolder&) = delete;
  ScratchFolder& operator=(const ScratchFolder&) = delete;

  std::string write(const std::string& name, const std::string& content) const {
    const auto file = path / name;
    std::ofstream(file, std::ios::binary) << content;
    return file.string();
  }
};

/// What a command prints, both streams; throws if it fails.
inline std::string output_of(const std::string& command, const ScratchFolder& folder) {
  const auto file = folder.path / "command-output.txt";
  const int status = std::system((command + " >" + file.string() + " 2>&1").c_str());
  std::ifstream in(file);
  std::string text{std::istreambuf_iterator<char>(in), {}};
  if (status != 0) throw std::runtime_error(command + ": " + text);
  return text;
}

} // namespace chronodrome::test_support
