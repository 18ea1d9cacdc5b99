// Chronodrome, GPL-3.0-or-later.
#include "document/text_place.h"

#include <algorithm>

namespace chronodrome::document {

Place place_of(const std::string& text, const std::string& word) {
  const auto at = text.find('"' + word + '"');
  if (at == std::string::npos) return {};
  const auto line = 1 + std::count(text.begin(), text.begin() + static_cast<std::ptrdiff_t>(at), '\n');
  const auto line_start = text.rfind('\n', at);
  const std::size_t column = line_start == std::string::npos ? at + 1 : at - line_start;
  return Place::at(static_cast<std::size_t>(line), column);
}

} // namespace chronodrome::document
