// Chronodrome, GPL-3.0-or-later.
#include "base/result.h"

namespace chronodrome {
namespace {

std::string line_of(const std::string& file, const Place& place, const char* kind, const std::string& what,
                    const std::string& remedy) {
  std::string text = file.empty() ? "chronodrome" : file;
  if (place.byte) {
    text += ":" + std::to_string(*place.byte);
  } else {
    text += ":" + std::to_string(place.line.value_or(1));
    if (place.column) text += ":" + std::to_string(*place.column);
  }
  text += std::string(": ") + kind + ": " + what;
  if (!remedy.empty()) text += "; " + remedy;
  for (char& c : text) {
    if (c == '\n' || c == '\r') c = ' '; // one message, one line
  }
  return text;
}

} // namespace

std::string describe(const Error& error) {
  return line_of(error.file, error.place, "error", error.what, error.remedy);
}

std::string describe(const Warning& warning) {
  return line_of(warning.file, warning.place, "warning", warning.what, warning.remedy);
}

} // namespace chronodrome
