// Chronodrome, GPL-3.0-or-later.
#include "intake/text_file.h"

#include <algorithm>
#include <cerrno>
#include <cstring>
#include <fcntl.h>
#include <sys/stat.h>
#include <unistd.h>

namespace chronodrome::intake {
namespace {

class OpenFile {
public:
  explicit OpenFile(const std::string& path)
      : handle_(::open(path.c_str(), O_RDONLY | O_CLOEXEC | O_NONBLOCK)) {}
  ~OpenFile() {
    if (handle_ >= 0) ::close(handle_);
  }
  OpenFile(const OpenFile&) = delete;
  OpenFile& operator=(const OpenFile&) = delete;
  [[nodiscard]] int handle() const { return handle_; }

private:
  int handle_;
};

Error fault(ErrorCode code, const std::string& path, std::string what, std::string remedy) {
  return {code, path, {}, std::move(what), std::move(remedy)};
}

std::size_t continuation_bytes(unsigned char lead) {
  if (lead < 0x80) return 0;
  if (lead >= 0xc2 && lead < 0xe0) return 1;
  if (lead >= 0xe0 && lead < 0xf0) return 2;
  return lead >= 0xf0 && lead < 0xf5 ? 3 : std::string_view::npos;
}

} // namespace

Result<std::string> read_text_file(const std::string& path, std::size_t limit) {
  const OpenFile file(path);
  if (file.handle() < 0) {
    return fault(ErrorCode::file_missing, path,
                 std::string("the file cannot be opened: ") + std::strerror(errno),
                 "check the path and the permissions");
  }
  struct stat status {};
  if (::fstat(file.handle(), &status) != 0) {
    return fault(ErrorCode::read_failed, path,
                 std::string("the file cannot be examined: ") + std::strerror(errno),
                 "copy the file to a local disk and try again");
  }
  if (!S_ISREG(status.st_mode))
    return fault(ErrorCode::wrong_format, path, "this is a folder or a device, not a file",
                 "name the file itself");
  std::string text;
  std::string block(1U << 16U, '\0');
  while (true) {
    const ssize_t got = ::pread(file.handle(), block.data(), block.size(), static_cast<off_t>(text.size()));
    if (got < 0 && errno == EINTR) continue;
    if (got < 0) {
      return Error{ErrorCode::read_failed, path, Place::at_byte(text.size()),
                   std::string("the file cannot be read on: ") + std::strerror(errno),
                   "copy the file to a sound disk"};
    }
    if (got == 0) return text;
    text.append(block, 0, static_cast<std::size_t>(got));
    if (text.size() > limit) {
      return fault(ErrorCode::over_limit, path,
                   "the file holds more than " + std::to_string(limit >> 20U) +
                       " MiB, the limit for this kind of file",
                   "check that this is the file that was meant");
    }
  }
}

std::string_view without_byte_order_mark(std::string_view text) {
  if (text.substr(0, 3) == "\xef\xbb\xbf") text.remove_prefix(3);
  return text;
}

std::size_t first_not_utf8(std::string_view text) {
  const auto byte = [&](std::size_t i) { return static_cast<unsigned char>(text[i]); };
  for (std::size_t i = 0; i < text.size();) {
    const std::size_t more = continuation_bytes(byte(i));
    if (more == std::string_view::npos || i + more >= text.size()) return i;
    for (std::size_t k = 1; k <= more; ++k) {
      if ((byte(i + k) & 0xc0U) != 0x80) return i;
    }
    const bool overlong = (byte(i) == 0xe0 && byte(i + 1) < 0xa0) || (byte(i) == 0xf0 && byte(i + 1) < 0x90);
    const bool surrogate = byte(i) == 0xed && byte(i + 1) >= 0xa0;
    const bool beyond = byte(i) == 0xf4 && byte(i + 1) >= 0x90;
    if (overlong || surrogate || beyond) return i;
    i += more + 1;
  }
  return std::string_view::npos;
}

std::string shown(std::string_view text) {
  constexpr std::size_t kLongest = 40;
  std::size_t cut = std::min(text.size(), kLongest);
  // Never through the middle of a character.
  while (cut < text.size() && cut > 0 && (static_cast<unsigned char>(text[cut]) & 0xc0U) == 0x80)
    --cut;
  std::string quoted = "\"";
  for (const char c : text.substr(0, cut))
    quoted += static_cast<unsigned char>(c) < 0x20 || c == 0x7f ? ' ' : c;
  return quoted + (cut < text.size() ? "...\"" : "\"");
}

} // namespace chronodrome::intake
