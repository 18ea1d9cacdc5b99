// Chronodrome, GPL-3.0-or-later.
#include "intake/written_file.h"

#include <cerrno>
#include <system_error>

namespace chronodrome::intake {

WrittenFile::WrittenFile(std::string path) : path_(std::move(path)), part_(path_ + ".part") {
  file_ = std::fopen(part_.c_str(), "wb");
  failed_ = file_ == nullptr;
}

WrittenFile::~WrittenFile() {
  if (file_ == nullptr) return;
  std::fclose(file_);
  std::remove(part_.c_str());
}

void WrittenFile::add(std::string_view bytes) {
  if (!failed_ && std::fwrite(bytes.data(), 1, bytes.size(), file_) != bytes.size()) failed_ = true;
}

Error WrittenFile::failure() const {
  const std::string reason = errno == 0 ? "" : " (" + std::generic_category().message(errno) + ")";
  return {ErrorCode::cannot_write,
          path_,
          {},
          "the file could not be written" + reason,
          "check that the folder exists, that you may write there and that the disk has room"};
}

Done WrittenFile::finish() {
  if (failed_) return failure();
  const bool closed = std::fclose(file_) == 0;
  file_ = nullptr;
  if (!closed || std::rename(part_.c_str(), path_.c_str()) != 0) {
    Error error = failure();
    std::remove(part_.c_str());
    return error;
  }
  return done();
}

} // namespace chronodrome::intake
