// Chronodrome, GPL-3.0-or-later.
#include "intake/recording_reader.h"

#include <algorithm>
#include <cmath>

#include "base/digest.h"
#include "base/number_text.h"
#include "intake/csv_reader.h"
#include "intake/csv_text.h"
#include "intake/edf_reader.h"

namespace chronodrome::intake {
namespace {

// Raised whenever the same bytes would be read into something else.
constexpr const char* kReaderVersion = "2";
constexpr std::size_t kHeadBytes = 512;

enum class FileKind { table, edf };

bool has_ending(const std::string& path, std::string_view ending) {
  const std::string lower = lower_case(path);
  return lower.size() >= ending.size() &&
         lower.compare(lower.size() - ending.size(), ending.size(), ending) == 0;
}

/// "0" and padding, and no line end: a table may begin with "0       " too.
bool is_edf(std::string_view head) {
  if (head.size() < 8 || head[0] != '0') return false;
  const bool padded =
      head.substr(1, 7).find_first_not_of(std::string_view(" \0", 2)) == std::string_view::npos;
  return padded && head.substr(0, 256).find_first_of("\r\n") == std::string_view::npos;
}

std::string printable(std::string_view bytes) {
  std::string text;
  for (const char c : bytes)
    text += c >= ' ' && c <= '~' ? c : '.';
  return text;
}

Result<FileKind> kind_of(const ByteSource& source) {
  std::string bytes(std::min<std::uint64_t>(kHeadBytes, source.size()), '\0');
  const auto got = source.read_at(0, std::as_writable_bytes(std::span(bytes)));
  if (!got) return got.error();
  const std::string_view head = std::string_view(bytes).substr(0, *got);
  const auto wrong = [&](const std::string& what, const std::string& remedy) {
    return Error{ErrorCode::wrong_format, source.path(), Place::at_byte(0), what, remedy};
  };
  if (head.empty()) return wrong("the file is empty", "check that the export was finished");
  if (head.substr(0, 8) == "\xFF"
                           "BIOSEMI")
    return wrong("this is a BDF file (24 bit); EDF, EDF+ and CSV can be read", "convert it to EDF+ or CSV");
  const bool called_edf = has_ending(source.path(), ".edf") || has_ending(source.path(), ".rec");
  if (is_edf(head)) {
    if (head.size() < 256)
      return wrong("the file ends inside its header, after " + std::to_string(head.size()) + " bytes of 256",
                   "copy the file again");
    return FileKind::edf;
  }
  if (!called_edf) return FileKind::table;
  const std::string other = not_text(head);
  if (head[0] == '{')
    return wrong("this is a picture in another format whose files end in .edf, not the European Data Format",
                 "choose the recording");
  return wrong("this is not the European Data Format: it begins with '" + printable(head.substr(0, 8)) +
                   "', expected '0' and seven blanks" + (other.empty() ? "" : "; it is " + other),
               "choose the recording, or give a table the ending .csv");
}

/// The folder's name: what the samples depend on, and nothing else.
std::string key_of(const std::string& digest, FileKind kind, const ReadSettings& settings) {
  std::string text = std::string("chronodrome stores ") + kReaderVersion + "\n" + digest + "\n";
  text += kind == FileKind::edf ? "edf" : "table";
  text += "\nrate " + (settings.rate ? exact_text(settings.rate->value()) : "");
  text += std::string("\ndelimiter ") + settings.delimiter.value_or('\n');
  text += std::string("\ndecimal ") + settings.decimal.value_or('\n');
  text += "\ntime " + (settings.time_column ? "'" + *settings.time_column + "'" : "");
  const ReadLimits& limits = settings.limits;
  for (const std::size_t limit : {limits.signals, limits.record_bytes, limits.line_bytes, limits.annotations,
                                  limits.uneven_rows, limits.runs})
    text += "\n" + std::to_string(limit);
  return sha256_of(text);
}

Result<ReadContent> read_content(const ByteSource& source, FileKind kind, const ReadSettings& settings,
                                 recording::StoreFolder& folder) {
  return kind == FileKind::edf ? read_edf(source, settings, folder) : read_csv(source, settings, folder);
}

} // namespace

std::optional<Error> ReadSettings::check() const {
  const auto bad = [](const std::string& what, const std::string& remedy) {
    return Error{ErrorCode::bad_usage, "", {}, what, remedy};
  };
  if (rate && !(rate->value() >= kSlowestRate.value() && rate->value() <= kFastestRate.value()))
    return bad("recording.csv.rate_hz is " + number_text(rate->value()), "give a rate from 0.01 to 1e7 Hz");
  if (decimal && *decimal != '.' && *decimal != ',')
    return bad("recording.csv.decimal is neither \".\" nor \",\"", "set it to one of them, or to null");
  if (delimiter) {
    const char c = *delimiter;
    const bool part_of_number = (c >= '0' && c <= '9') || c == '.' || c == '-' || c == '+' || c == '"' ||
                                c == '\n' || c == '\r' || c == '\0' || (c >= 'a' && c <= 'z') ||
                                (c >= 'A' && c <= 'Z');
    if (part_of_number)
      return bad("recording.csv.delimiter cannot stand between numbers", "set it to \",\", \";\" or \"\\t\"");
  }
  if (delimiter && decimal && *delimiter == *decimal)
    return bad("recording.csv.delimiter and recording.csv.decimal are the same",
               "export again with a semicolon or a tab");
  return std::nullopt;
}

Result<recording::Recording> read_recording(const ByteSource& source, const ReadSettings& settings) {
  if (auto fault = settings.check()) {
    fault->file = source.path();
    return *std::move(fault);
  }
  const auto kind = kind_of(source);
  if (!kind) return kind.error();
  const auto digest = digest_of(source);
  if (!digest) return digest.error();
  const std::string cache =
      settings.cache_folder.empty() ? recording::user_cache_folder() : settings.cache_folder;
  const std::string key = key_of(*digest, *kind, settings);
  if (settings.use_cache && !cache.empty()) {
    if (auto stored = recording::stored_recording(cache, key, source.path())) return *std::move(stored);
  }
  auto folder = settings.use_cache ? std::make_unique<recording::StoreFolder>(cache, key)
                                   : std::make_unique<recording::StoreFolder>();
  auto content = read_content(source, *kind, settings, *folder);
  if (folder->failed()) { // no room in the cache: read again, into memory
    folder = std::make_unique<recording::StoreFolder>();
    content = read_content(source, *kind, settings, *folder);
  }
  if (!content) return content.error();
  recording::Recording& recording = content->recording;
  recording.files.push_back({source.path(), content->kind, *digest, source.size(), Seconds(0.0)});
  if (source.changed()) {
    recording.warnings.push_back({source.path(),
                                  {},
                                  "the file changed while it was read",
                                  "read it again when the recorder has closed it"});
  } else {
    recording::store_recording(recording, content->kinds, *folder);
  }
  return std::move(recording);
}

Result<recording::Recording> read_recording(const std::string& path, const ReadSettings& settings) {
  const auto source = open_source_file(path);
  if (!source) return source.error();
  return read_recording(**source, settings);
}

} // namespace chronodrome::intake
