// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <string>

namespace chronodrome::pharmacology {

/// The page resources/formats/models.md (Markdown), made from model_meanings() and flag_meanings(): each
/// model's equation, parameters, derived numbers and intervals, then the closed list of flags.
std::string models_page();

} // namespace chronodrome::pharmacology
