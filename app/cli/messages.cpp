// Chronodrome, GPL-3.0-or-later.
#include <iostream>

#include "commands.h"

namespace chronodrome::cli {

void report(const Error& error) {
  std::cerr << describe(error) << '\n';
}

void report(const Warning& warning) {
  std::cerr << describe(warning) << '\n';
}

int refuse(const Error& error) {
  report(error);
  return error.code == ErrorCode::bad_usage ? kWrongUsage : kNothingDone;
}

} // namespace chronodrome::cli
