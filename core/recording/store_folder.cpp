// Chronodrome, GPL-3.0-or-later.
#include "recording/store_folder.h"

#include <array>
#include <atomic>
#include <cstdlib>
#include <cstring>
#include <fcntl.h>
#include <filesystem>
#include <sys/mman.h>
#include <sys/stat.h>
#include <unistd.h>
#include <utility>
#include <vector>

#include "recording/checksum.h"

namespace chronodrome::recording {
namespace {

namespace fs = std::filesystem;

constexpr std::uint64_t kVersion = 1;
constexpr std::size_t kBuffer = std::size_t{1} << 18U;

struct Header {
  std::array<char, 8> word{'C', 'H', 'R', 'N', 'S', 'T', 'O', 'R'};
  std::uint64_t version = kVersion;
  std::uint64_t length = 0;
  std::uint64_t checksum = 0;
  std::array<char, 64> key{};
  std::array<char, 32> spare{};
};
static_assert(sizeof(Header) == 128);

class MemoryBlock : public Block {
public:
  explicit MemoryBlock(std::vector<std::byte> bytes) : bytes_(std::move(bytes)) {}
  [[nodiscard]] std::span<const std::byte> bytes() const override { return bytes_; }

private:
  std::vector<std::byte> bytes_;
};

class MappedBlock : public Block {
public:
  MappedBlock(void* address, std::size_t size) : address_(address), size_(size) {}
  ~MappedBlock() override { ::munmap(address_, size_); }
  MappedBlock(const MappedBlock&) = delete;
  MappedBlock& operator=(const MappedBlock&) = delete;
  [[nodiscard]] std::span<const std::byte> bytes() const override {
    return std::span(static_cast<const std::byte*>(address_), size_).subspan(sizeof(Header));
  }
  [[nodiscard]] const Header& header() const { return *static_cast<const Header*>(address_); }

private:
  void* address_;
  std::size_t size_;
};

std::shared_ptr<const MappedBlock> map_whole(int file) {
  struct stat about {};
  if (::fstat(file, &about) != 0 || about.st_size < static_cast<off_t>(sizeof(Header))) return nullptr;
  const auto size = static_cast<std::size_t>(about.st_size);
  void* address = ::mmap(nullptr, size, PROT_READ, MAP_SHARED, file, 0);
  if (address == MAP_FAILED) return nullptr;
  return std::make_shared<MappedBlock>(address, size);
}

bool write_all(int file, std::span<const std::byte> bytes) {
  while (!bytes.empty()) {
    const ssize_t written = ::write(file, bytes.data(), bytes.size());
    if (written < 0 && errno == EINTR) continue;
    if (written <= 0) return false;
    bytes = bytes.subspan(static_cast<std::size_t>(written));
  }
  return true;
}

class MemoryWriter : public BlockWriter {
public:
  void add(std::span<const std::byte> bytes) override {
    bytes_.insert(bytes_.end(), bytes.begin(), bytes.end());
  }
  std::shared_ptr<const Block> finish() override { return std::make_shared<MemoryBlock>(std::move(bytes_)); }

private:
  std::vector<std::byte> bytes_;
};

} // namespace

struct StoreFolder::State {
  std::string cache_folder, key, part;
  std::atomic<bool> failed{false};
  bool committed = false;
};

namespace {

class FileWriter : public BlockWriter {
public:
  FileWriter(std::shared_ptr<StoreFolder::State> state, const std::string& name) : state_(std::move(state)) {
    file_ = ::open((state_->part + "/" + name).c_str(), O_RDWR | O_CREAT | O_EXCL | O_CLOEXEC, 0600);
    buffer_.reserve(kBuffer);
    buffer_.resize(sizeof(Header)); // filled in last
    if (file_ < 0) state_->failed = true;
  }
  ~FileWriter() override {
    if (file_ >= 0) ::close(file_);
  }
  FileWriter(const FileWriter&) = delete;
  FileWriter& operator=(const FileWriter&) = delete;

  void add(std::span<const std::byte> bytes) override {
    if (state_->failed) return;
    checksum_.add(bytes);
    length_ += bytes.size();
    if (buffer_.size() + bytes.size() > kBuffer) flush();
    if (bytes.size() > kBuffer) {
      if (!write_all(file_, bytes)) state_->failed = true;
    } else {
      buffer_.insert(buffer_.end(), bytes.begin(), bytes.end());
    }
  }

  std::shared_ptr<const Block> finish() override {
    flush();
    Header header;
    header.length = length_;
    header.checksum = checksum_.value();
    std::memcpy(header.key.data(), state_->key.data(), std::min(state_->key.size(), header.key.size()));
    std::shared_ptr<const Block> block;
    if (!state_->failed &&
        ::pwrite(file_, &header, sizeof(Header), 0) == static_cast<ssize_t>(sizeof(Header)))
      block = map_whole(file_);
    if (block) return block;
    state_->failed = true;
    return std::make_shared<MemoryBlock>(std::vector<std::byte>{});
  }

private:
  void flush() {
    if (!state_->failed && !write_all(file_, buffer_)) state_->failed = true;
    buffer_.clear();
  }

  std::shared_ptr<StoreFolder::State> state_;
  std::vector<std::byte> buffer_;
  Checksum checksum_;
  std::uint64_t length_ = 0;
  int file_ = -1;
};

/// A new folder beside the one it will become, private to this process; empty if it cannot be made.
std::string part_folder(const std::string& cache_folder, const std::string& key) {
  static std::atomic<unsigned> counter{0};
  std::error_code error;
  fs::create_directories(cache_folder, error);
  for (int attempt = 0; attempt < 100; ++attempt) {
    const std::string part =
        cache_folder + "/" + key + ".part-" + std::to_string(::getpid()) + "-" + std::to_string(counter++);
    if (::mkdir(part.c_str(), 0700) == 0) return part;
    if (errno != EEXIST) return "";
  }
  return "";
}

} // namespace

StoreFolder::StoreFolder() : state_(std::make_shared<State>()) {}

StoreFolder::StoreFolder(std::string cache_folder, std::string key) : state_(std::make_shared<State>()) {
  if (cache_folder.empty()) return;
  state_->part = part_folder(cache_folder, key);
  state_->cache_folder = std::move(cache_folder);
  state_->key = std::move(key);
}

StoreFolder::~StoreFolder() {
  if (!on_disk() || state_->committed) return;
  std::error_code ignored;
  fs::remove_all(state_->part, ignored); // mapped blocks keep their bytes
}

bool StoreFolder::on_disk() const {
  return !state_->part.empty();
}

bool StoreFolder::failed() const {
  return state_->failed;
}

std::unique_ptr<BlockWriter> StoreFolder::writer(const std::string& name) {
  if (!on_disk()) return std::make_unique<MemoryWriter>();
  return std::make_unique<FileWriter>(state_, name);
}

void StoreFolder::drop(const std::string& name) {
  if (on_disk()) ::unlink((state_->part + "/" + name).c_str());
}

void StoreFolder::commit() {
  if (!on_disk() || failed() || state_->committed) return;
  const std::string target = state_->cache_folder + "/" + state_->key;
  if (::rename(state_->part.c_str(), target.c_str()) != 0) {
    // Something stands there that was no whole folder when we looked: replace it.
    std::error_code ignored;
    fs::remove_all(target, ignored);
    if (::rename(state_->part.c_str(), target.c_str()) != 0) return;
  }
  state_->committed = true;
}

std::shared_ptr<const Block> stored_block(const std::string& cache_folder, const std::string& key,
                                          const std::string& name) {
  const int file = ::open((cache_folder + "/" + key + "/" + name).c_str(), O_RDONLY | O_CLOEXEC);
  if (file < 0) return nullptr;
  const auto block = map_whole(file);
  ::close(file);
  if (!block) return nullptr;
  const Header& header = block->header();
  const Header expected;
  Checksum checksum;
  checksum.add(block->bytes());
  const bool whole = header.word == expected.word && header.version == kVersion &&
                     header.length == block->bytes().size() && header.checksum == checksum.value() &&
                     std::string_view(header.key.data(), header.key.size()) == key;
  return whole ? block : nullptr;
}

std::string user_cache_folder() {
  const char* cache = std::getenv("XDG_CACHE_HOME");
  if (cache != nullptr && *cache == '/') return std::string(cache) + "/chronodrome";
  const char* home = std::getenv("HOME");
  return home != nullptr && *home == '/' ? std::string(home) + "/.cache/chronodrome" : "";
}

} // namespace chronodrome::recording
