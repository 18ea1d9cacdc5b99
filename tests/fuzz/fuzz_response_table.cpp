// Chronodrome, GPL-3.0-or-later.
// Any bytes are a value or an error with a message; nothing throws, nothing is read out of bounds.
#include <cstddef>
#include <cstdint>
#include <cstdlib>
#include <string>

#include "intake/response_table.h"

extern "C" int LLVMFuzzerTestOneInput(const std::uint8_t* data, std::size_t size) {
  using namespace chronodrome;
  const std::string text(reinterpret_cast<const char*>(data), size);
  const auto read = intake::parse_response_table(text, "table.csv");
  if (!read.ok() && read.error().what.empty()) std::abort();
  return 0;
}
