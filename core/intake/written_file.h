// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <cstdio>
#include <memory>
#include <string>
#include <string_view>

#include "base/result.h"

namespace chronodrome::intake {

/// A file that appears under its name only when it is whole: written beside it first, then renamed.
class WrittenFile {
public:
  explicit WrittenFile(std::string path);
  ~WrittenFile();
  WrittenFile(const WrittenFile&) = delete;
  WrittenFile& operator=(const WrittenFile&) = delete;

  void add(std::string_view bytes);
  /// Errors: cannot_write (also for anything that failed before).
  Done finish();

private:
  [[nodiscard]] Error failure() const;

  std::string path_, part_;
  std::FILE* file_ = nullptr;
  bool failed_ = false;
};

} // namespace chronodrome::intake
