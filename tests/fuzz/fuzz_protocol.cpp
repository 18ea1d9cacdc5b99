// Chronodrome, GPL-3.0-or-later.
// Any bytes are a value or an error with a message; nothing throws, nothing is read out of bounds.
#include <cstddef>
#include <cstdint>
#include <cstdlib>
#include <string>

#include "intake/protocol_reader.h"

extern "C" int LLVMFuzzerTestOneInput(const std::uint8_t* data, std::size_t size) {
  using namespace chronodrome;
  const std::string text(reinterpret_cast<const char*>(data), size);
  const auto read = intake::parse_protocol(text, "protocol.csv");
  if (!read.ok() && read.error().what.empty()) std::abort();
  const auto pasted = intake::protocol_from_text(text, "pasted text");
  if (!pasted.ok() && pasted.error().what.empty()) std::abort();
  return 0;
}
