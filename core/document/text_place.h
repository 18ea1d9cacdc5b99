// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <string>

#include "base/result.h"

namespace chronodrome::document {

/// Line and column of the first place where `text` (a JSON file) holds the string `word` in quotes; no place
/// if it does not. For messages about values that only a later stage can judge.
Place place_of(const std::string& text, const std::string& word);

} // namespace chronodrome::document
