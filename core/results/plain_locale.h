// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <clocale>

namespace chronodrome::results {

/// While it lives, C functions of this thread print numbers with a point. Requires: destroyed by the thread
/// that made it.
class PlainLocale {
public:
  PlainLocale() : plain_(newlocale(LC_ALL_MASK, "C", nullptr)), before_(uselocale(plain_)) {}
  ~PlainLocale() {
    uselocale(before_);
    freelocale(plain_);
  }
  PlainLocale(const PlainLocale&) = delete;
  PlainLocale& operator=(const PlainLocale&) = delete;

private:
  locale_t plain_, before_;
};

} // namespace chronodrome::results
