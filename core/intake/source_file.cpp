// Chronodrome, GPL-3.0-or-later.
#include "intake/source_file.h"

#include <algorithm>
#include <cerrno>
#include <cstring>
#include <fcntl.h>
#include <sys/stat.h>
#include <system_error>
#include <unistd.h>

#include "base/digest.h"

namespace chronodrome::intake {
namespace {

constexpr std::size_t kDigestBlock = std::size_t{1} << 20U;

class DiskFile : public ByteSource {
public:
  DiskFile(std::string path, int file, const struct stat& about)
      : path_(std::move(path)), file_(file), about_(about) {}
  ~DiskFile() override { ::close(file_); }
  DiskFile(const DiskFile&) = delete;
  DiskFile& operator=(const DiskFile&) = delete;

  [[nodiscard]] const std::string& path() const override { return path_; }
  [[nodiscard]] std::uint64_t size() const override { return static_cast<std::uint64_t>(about_.st_size); }

  [[nodiscard]] Result<std::size_t> read_at(std::uint64_t offset, std::span<std::byte> out) const override {
    std::size_t got = 0;
    if (offset >= size()) return got;
    out = out.first(std::min<std::uint64_t>(out.size(), size() - offset));
    while (got < out.size()) {
      const ssize_t count =
          ::pread(file_, out.data() + got, out.size() - got, static_cast<off_t>(offset + got));
      if (count < 0 && errno == EINTR) continue;
      if (count < 0)
        return Error{ErrorCode::read_failed, path_, Place::at_byte(offset + got),
                     "the system could not read the file (" + std::generic_category().message(errno) + ")",
                     "copy the file to a local disk and try again"};
      if (count == 0) break;
      got += static_cast<std::size_t>(count);
    }
    return got;
  }

  [[nodiscard]] bool changed() const override {
    struct stat now {};
    return ::fstat(file_, &now) != 0 || now.st_size != about_.st_size ||
           now.st_mtim.tv_sec != about_.st_mtim.tv_sec || now.st_mtim.tv_nsec != about_.st_mtim.tv_nsec;
  }

private:
  std::string path_;
  int file_;
  struct stat about_;
};

} // namespace

Result<std::unique_ptr<ByteSource>> open_source_file(const std::string& path) {
  const auto missing = [&](const std::string& what) {
    return Error{ErrorCode::file_missing, path, {}, what, "check the name and that you may read the file"};
  };
  const int file = ::open(path.c_str(), O_RDONLY | O_CLOEXEC | O_NONBLOCK);
  if (file < 0) return missing("the file cannot be opened (" + std::generic_category().message(errno) + ")");
  struct stat about {};
  if (::fstat(file, &about) != 0 || !S_ISREG(about.st_mode)) {
    ::close(file);
    return missing(S_ISDIR(about.st_mode) ? "this is a folder, not a recording"
                                          : "this is not a regular file");
  }
  return std::unique_ptr<ByteSource>(std::make_unique<DiskFile>(path, file, about));
}

MemorySource::MemorySource(std::string path, std::vector<std::byte> bytes)
    : path_(std::move(path)), bytes_(std::move(bytes)) {}

MemorySource::MemorySource(std::string path, const std::string& text) : path_(std::move(path)) {
  const auto bytes = std::as_bytes(std::span(text));
  bytes_.assign(bytes.begin(), bytes.end());
}

Result<std::size_t> MemorySource::read_at(std::uint64_t offset, std::span<std::byte> out) const {
  if (offset >= bytes_.size()) return std::size_t{0};
  const std::size_t count = std::min<std::uint64_t>(out.size(), bytes_.size() - offset);
  std::copy_n(bytes_.begin() + static_cast<std::ptrdiff_t>(offset), count, out.begin());
  return count;
}

Result<std::string> digest_of(const ByteSource& source) {
  Sha256 digest;
  std::vector<std::byte> block(std::min<std::uint64_t>(kDigestBlock, source.size()));
  for (std::uint64_t at = 0; at < source.size();) {
    const auto got = source.read_at(at, block);
    if (!got) return got.error();
    if (*got == 0)
      return Error{ErrorCode::read_failed, source.path(), Place::at_byte(at),
                   "the file ends here, but held " + std::to_string(source.size()) +
                       " bytes when it was opened",
                   "wait until the recorder has closed the file"};
    digest.add(std::span(block).first(*got));
    at += *got;
  }
  return digest.hex();
}

} // namespace chronodrome::intake
