// Chronodrome, GPL-3.0-or-later.
#include "results/quiet_errors.h"

#include <cstdio>
#include <fcntl.h>
#include <mutex>
#include <unistd.h>

namespace chronodrome::results {
namespace {

std::mutex guard;
int living = 0;  // of all threads
int before = -1; // where standard error leads to otherwise

} // namespace

QuietErrors::QuietErrors() {
  const std::lock_guard lock(guard);
  if (living++ > 0) return;
  const int nowhere = ::open("/dev/null", O_WRONLY | O_CLOEXEC);
  if (nowhere < 0) return;
  std::fflush(stderr);
  before = ::fcntl(STDERR_FILENO, F_DUPFD_CLOEXEC, 3);
  if (before >= 0) ::dup2(nowhere, STDERR_FILENO);
  ::close(nowhere);
}

QuietErrors::~QuietErrors() {
  const std::lock_guard lock(guard);
  if (--living > 0 || before < 0) return;
  std::fflush(stderr);
  ::dup2(before, STDERR_FILENO);
  ::close(before);
  before = -1;
}

} // namespace chronodrome::results
