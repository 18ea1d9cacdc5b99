// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <cstddef>
#include <filesystem>
#include <fstream>
#include <iterator>
#include <string>
#include <vector>

#include "intake/recording_reader.h"
#include "intake/recording_writer.h"

/// What the tests of the readers share.
namespace chronodrome::intake::fixtures {

/// Samples in memory, one thread.
inline ReadSettings in_memory() {
  ReadSettings settings;
  settings.use_cache = false;
  settings.threads = 1;
  return settings;
}

inline Result<recording::Recording> read_bytes(const std::string& bytes, const std::string& path,
                                               const ReadSettings& settings = in_memory()) {
  return read_recording(MemorySource(path, bytes), settings);
}

inline Result<recording::Recording> read_table(const std::string& text,
                                               const ReadSettings& settings = in_memory()) {
  return read_bytes(text, "table.csv", settings);
}

inline std::vector<double> samples_of(const recording::Signal& signal) {
  std::vector<double> samples(signal.samples->size());
  signal.samples->read(0, samples);
  return samples;
}

inline std::vector<double> samples_of(const recording::Recording& recording, const std::string& source) {
  const recording::Signal* signal = recording.find(source);
  return signal == nullptr ? std::vector<double>{} : samples_of(*signal);
}

inline std::string scratch_file(const std::string& name) {
  const auto folder = std::filesystem::path(CHRONODROME_BUILD_DIR) / "test-files";
  std::filesystem::create_directories(folder);
  return (folder / name).string();
}

inline std::string bytes_of_file(const std::string& path) {
  std::ifstream file(path, std::ios::binary);
  return {std::istreambuf_iterator<char>(file), std::istreambuf_iterator<char>()};
}

/// The bytes that write_edf makes; empty if it refuses.
inline std::string edf_bytes(const WrittenRecording& recording, EdfKind kind, const std::string& name) {
  const std::string path = scratch_file(name);
  if (!write_edf(path, recording, kind)) return "";
  return bytes_of_file(path);
}

/// `bytes` with `field` at `at`, padded with blanks to `width`.
inline std::string patched(std::string bytes, std::size_t at, std::string field, std::size_t width) {
  field.resize(width, ' ');
  return bytes.replace(at, width, field);
}

inline bool has_warning(const recording::Recording& recording, const std::string& part) {
  for (const Warning& warning : recording.warnings) {
    if (describe(warning).find(part) != std::string::npos) return true;
  }
  return false;
}

inline std::string all_warnings(const recording::Recording& recording) {
  std::string text;
  for (const Warning& warning : recording.warnings)
    text += describe(warning) + "\n";
  return text;
}

/// Fails at the n-th read (from 1) and at every one after it.
class FailingSource : public ByteSource {
public:
  FailingSource(const std::string& path, const std::string& bytes, int fail_at)
      : good_(path, bytes), fail_at_(fail_at) {}
  [[nodiscard]] const std::string& path() const override { return good_.path(); }
  [[nodiscard]] std::uint64_t size() const override { return good_.size(); }
  [[nodiscard]] Result<std::size_t> read_at(std::uint64_t offset, std::span<std::byte> out) const override {
    if (++reads_ >= fail_at_)
      return Error{ErrorCode::read_failed, path(), Place::at_byte(static_cast<std::size_t>(offset)),
                   "no bytes", ""};
    return good_.read_at(offset, out);
  }
  [[nodiscard]] int reads() const { return reads_; }

private:
  MemorySource good_;
  int fail_at_;
  mutable int reads_ = 0;
};

} // namespace chronodrome::intake::fixtures
