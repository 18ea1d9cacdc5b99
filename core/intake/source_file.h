// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <cstddef>
#include <cstdint>
#include <memory>
#include <span>
#include <string>
#include <vector>

#include "base/result.h"

namespace chronodrome::intake {

/// Bytes of a raw file: a file on disk, bytes in memory, or a source that fails, for tests. Never written to.
class ByteSource {
public:
  virtual ~ByteSource() = default;
  /// For messages and for SourceFile::path.
  [[nodiscard]] virtual const std::string& path() const = 0;
  /// As it was when the source was opened.
  [[nodiscard]] virtual std::uint64_t size() const = 0;
  /// Fills `out` from `offset` on, as far as the bytes go; returns how many. Errors: read_failed.
  [[nodiscard]] virtual Result<std::size_t> read_at(std::uint64_t offset, std::span<std::byte> out) const = 0;
  /// True if the file is not what it was when it was opened.
  [[nodiscard]] virtual bool changed() const { return false; }
};

/// A regular file, read by pread and never mapped. Errors: file_missing (no such file, a folder, no
/// permission).
Result<std::unique_ptr<ByteSource>> open_source_file(const std::string& path);

/// Bytes in memory under a name.
class MemorySource : public ByteSource {
public:
  MemorySource(std::string path, std::vector<std::byte> bytes);
  MemorySource(std::string path, const std::string& text);
  [[nodiscard]] const std::string& path() const override { return path_; }
  [[nodiscard]] std::uint64_t size() const override { return bytes_.size(); }
  [[nodiscard]] Result<std::size_t> read_at(std::uint64_t offset, std::span<std::byte> out) const override;

private:
  std::string path_;
  std::vector<std::byte> bytes_;
};

/// SHA-256 over the whole source, 64 hex digits. Errors: read_failed (also where bytes are missing).
Result<std::string> digest_of(const ByteSource& source);

} // namespace chronodrome::intake
