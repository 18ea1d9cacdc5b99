// Chronodrome, GPL-3.0-or-later.
#include "reading_words.h"

#include <utility>

namespace chronodrome::cli {
namespace {

/// One character, or the word tab; nothing for anything else.
std::optional<char> character(const std::string& word) {
  if (word == "tab" || word == "\\t") return '\t';
  return word.size() == 1 ? std::optional(word.front()) : std::nullopt;
}

Error not_one_character(const std::string& recording, const std::string& option, const std::string& word,
                        const std::string& remedy) {
  return {ErrorCode::bad_usage, recording, {}, option + " \"" + word + "\" is not one character", remedy};
}

} // namespace

Result<document::CsvChoices> choices_of(const ReadingWords& words, const std::string& recording,
                                        document::CsvChoices csv) {
  if (words.rate_hz) csv.rate_hz = words.rate_hz;
  if (words.time_column) csv.time_column = words.time_column;
  if (words.delimiter) {
    csv.delimiter = character(*words.delimiter);
    if (!csv.delimiter)
      return not_one_character(recording, "--delimiter", *words.delimiter, "give one, or the word tab");
  }
  if (words.decimal) {
    csv.decimal = character(*words.decimal);
    if (!csv.decimal) return not_one_character(recording, "--decimal", *words.decimal, "give . or ,");
  }
  return csv;
}

intake::ReadSettings settings_of(const document::CsvChoices& csv) {
  intake::ReadSettings settings;
  if (csv.rate_hz) settings.rate = Hertz(*csv.rate_hz);
  settings.delimiter = csv.delimiter;
  settings.decimal = csv.decimal;
  settings.time_column = csv.time_column;
  return settings;
}

Error with_options(Error error) {
  const std::pair<const char*, const char*> words[] = {{"recording.csv.rate_hz", "--rate-hz"},
                                                       {"recording.csv.delimiter", "--delimiter"},
                                                       {"recording.csv.decimal", "--decimal"},
                                                       {"recording.csv.time_column", "--time-column"}};
  for (const auto& [key, option] : words) {
    const auto at = error.remedy.find(key);
    if (at != std::string::npos)
      error.remedy.replace(at, std::string(key).size(), option + std::string(" (in a session: ") + key + ")");
  }
  return error;
}

} // namespace chronodrome::cli
