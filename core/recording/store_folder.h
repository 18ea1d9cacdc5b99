// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <cstddef>
#include <cstdint>
#include <memory>
#include <optional>
#include <span>
#include <string>

#include "recording/recording.h"
#include "recording/stores.h"

namespace chronodrome::recording {

/// Takes bytes in pieces and gives them back as one block.
class BlockWriter {
public:
  virtual ~BlockWriter() = default;
  virtual void add(std::span<const std::byte> bytes) = 0;
  /// Call once, last. A block that could not be stored is empty, and the folder says so.
  virtual std::shared_ptr<const Block> finish() = 0;
};

/// Where the samples of a recording go while it is read: into files of a folder under the user's cache, or
/// into memory. A folder is written under a temporary name and renamed when whole; it may be deleted at any
/// time, by anyone, also while it is in use.
///
/// A file of the folder is a header of 128 bytes (the word CHRNSTOR, version, length and checksum of what
/// follows, the 64 characters of the key), then the numbers as this machine holds them.
class StoreFolder {
public:
  /// In memory.
  StoreFolder();
  /// In `cache_folder`/`key`; in memory if that cannot be written. `key`: 64 hex digits.
  StoreFolder(std::string cache_folder, std::string key);
  ~StoreFolder();
  StoreFolder(const StoreFolder&) = delete;
  StoreFolder& operator=(const StoreFolder&) = delete;

  /// False: in memory.
  [[nodiscard]] bool on_disk() const;
  /// A write failed (the disk is full): nothing that was written is of use.
  [[nodiscard]] bool failed() const;
  /// `name`: of the file, unique in the folder.
  std::unique_ptr<BlockWriter> writer(const std::string& name);
  /// A block that is only needed while reading: its file goes at once, its bytes stay as long as it is held.
  void drop(const std::string& name);
  /// Makes the folder stand under its key. Its blocks stay valid whatever happens here.
  void commit();

  struct State; ///< of the folder; its writers share it

private:
  std::shared_ptr<State> state_;
};

/// The block in file `name` of `cache_folder`/`key`, if it is whole and of this version and key.
std::shared_ptr<const Block> stored_block(const std::string& cache_folder, const std::string& key,
                                          const std::string& name);

/// `$XDG_CACHE_HOME/chronodrome`, or `~/.cache/chronodrome`; empty if neither is known.
std::string user_cache_folder();

} // namespace chronodrome::recording
