// Chronodrome, GPL-3.0-or-later.
#include "fuzz/read_any.h"

extern "C" int LLVMFuzzerTestOneInput(const std::uint8_t* data, std::size_t size) {
  chronodrome::fuzz::read_any({data, size}, "fuzz.csv");
  return 0;
}
