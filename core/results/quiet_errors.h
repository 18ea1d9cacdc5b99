// Chronodrome, GPL-3.0-or-later.
#pragma once

namespace chronodrome::results {

/// While one lives, in any thread, what libraries print to standard error is lost: they report there in their
/// own words what comes back as an error code all the same. Our own messages are never written meanwhile.
class QuietErrors {
public:
  QuietErrors();
  ~QuietErrors();
  QuietErrors(const QuietErrors&) = delete;
  QuietErrors& operator=(const QuietErrors&) = delete;
};

} // namespace chronodrome::results
