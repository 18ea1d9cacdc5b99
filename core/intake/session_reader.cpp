// Chronodrome, GPL-3.0-or-later.
#include "intake/session_reader.h"

#include <algorithm>
#include <filesystem>

#include "base/number_text.h"
#include "intake/recording_reader.h"
#include "intake/session_parts.h"
#include "intake/text_file.h"

namespace fs = std::filesystem;

namespace chronodrome::intake {
namespace {

using document::SessionFile;

void read_version(JsonObject& root, SessionFile& session, NewerSession newer, JsonNotes& notes) {
  const JsonValue* format = root.find("format");
  if (format == nullptr || format->kind != JsonValue::Kind::text || format->text != "chronodrome-session") {
    notes.fail(format == nullptr ? root.place() : format->place(),
               format == nullptr ? "format is missing: this is no session" : "format is " + shown(*format),
               "a session begins with \"format\": \"chronodrome-session\"", ErrorCode::wrong_format);
    return;
  }
  const JsonValue* version = root.require("version", "1");
  if (version == nullptr) return;
  session.version = root.whole_number("version").value_or(0);
  if (notes.failed()) return;
  if (session.version < 1) root.refuse("version", *version, "use 1");
  if (session.version > document::kSessionVersion) {
    if (newer == NewerSession::refuse) {
      notes.fail(version->place(),
                 "version is " + std::to_string(session.version) + ", and this program knows up to " +
                     std::to_string(document::kSessionVersion),
                 "open it with the program that wrote it, or a newer one", ErrorCode::unsupported_version);
    } else {
      notes.warn(version->place(), "a newer program wrote this session", "it is opened for reading only");
    }
  }
}

void read_preparation(JsonObject& root, SessionFile& session, JsonNotes& notes) {
  const JsonValue* value = root.find("preparation");
  if (value == nullptr) return;
  JsonObject fields(*value, "preparation", notes);
  auto& preparation = session.preparation;
  preparation.label = fields.text("label");
  preparation.species = fields.text("species");
  preparation.tissue = fields.text("tissue");
  preparation.temperature_c = fields.number("temperature_c");
  preparation.bath_volume_ml = fields.number("bath_volume_ml", Range::positive);
  preparation.animal = fields.text("animal");
  preparation.sex = fields.text("sex");
  preparation.mass_g = fields.number("mass_g", Range::positive);
  preparation.date = fields.text("date");
  preparation.operator_name = fields.text("operator");
  preparation.group = fields.text("group");
  preparation.arrival_delay = Seconds(fields.number("arrival_delay_s", Range::not_negative).value_or(0.0));
  preparation.notes = fields.text("notes");
  fields.finish();
}

std::optional<char> read_mark(JsonObject& fields, const std::string& key, const std::string& allowed,
                              const std::string& remedy) {
  const auto text = fields.optional_text(key);
  if (!text) return std::nullopt;
  if (text->size() == 1 && allowed.find(text->front()) != std::string::npos) return text->front();
  fields.refuse(key, *fields.find(key), remedy);
  return std::nullopt;
}

void read_csv_choices(JsonObject& recording, SessionFile& session, JsonNotes& notes) {
  const JsonValue* value = recording.find("csv");
  if (value == nullptr) return;
  JsonObject fields(*value, "recording.csv", notes);
  auto& csv = session.csv;
  csv.rate_hz = fields.number_between("rate_hz", kSlowestRate.value(), kFastestRate.value(), "Hz");
  csv.delimiter = read_mark(fields, "delimiter", ",;\t |",
                            "use one of \",\" \";\" \"\\t\" \" \" \"|\", or null to find out");
  csv.decimal = read_mark(fields, "decimal", ".,", "use \".\" or \",\", or null to find out");
  csv.time_column = fields.optional_text("time_column");
  if (csv.decimal && csv.delimiter == csv.decimal)
    fields.refuse("decimal", *fields.find("decimal"), "use another mark than the delimiter");
  fields.finish();
}

bool is_digest(const std::string& text) {
  return text.size() == 64 && text.find_first_not_of("0123456789abcdef") == std::string::npos;
}

void check_path(JsonObject& fields, const std::string& key, const std::string& path, JsonNotes& notes) {
  if (const auto fault = fault_of_path(path)) {
    notes.fail(fields.find(key)->place(), fields.path_of(key) + " is " + shown(path) + ", " + *fault,
               "use a path below the session's own folder, with / between folders");
  }
}

void read_recording(JsonObject& root, SessionFile& session, JsonNotes& notes) {
  const JsonValue* value = root.require("recording", "the recording's files");
  if (value == nullptr) return;
  JsonObject recording(*value, "recording", notes);
  const JsonValue* files = recording.require("files", "a list of at least one {\"path\": ...}");
  recording.for_each("files", [&](const JsonValue& item, const std::string& path) {
    JsonObject fields(item, path, notes);
    document::RecordingFile file;
    file.path = fields.required_text("path", "the file, relative to the session");
    if (!notes.failed()) check_path(fields, "path", file.path, notes);
    if (auto digest = fields.optional_text("sha256"); digest && !digest->empty()) {
      file.sha256 = lower_case(*digest);
      if (!is_digest(*file.sha256))
        fields.refuse("sha256", *fields.find("sha256"), "use 64 hex digits, or null");
    }
    fields.finish();
    if (notes.failed()) return;
    for (const auto& other : session.files) {
      if (other.path == file.path) fields.refuse("path", *fields.find("path"), "name every file once");
    }
    session.files.push_back(std::move(file));
  });
  if (files != nullptr && files->kind == JsonValue::Kind::list && files->items.empty())
    notes.fail(files->place(), "recording.files is empty", "name at least one file");
  read_csv_choices(recording, session, notes);
  recording.finish();
}

void read_protocol_choice(JsonObject& root, SessionFile& session, JsonNotes& notes) {
  const JsonValue* value = root.find("protocol");
  if (value == nullptr) return;
  JsonObject fields(*value, "protocol", notes);
  session.protocol_file = fields.optional_text("file");
  if (session.protocol_file) check_path(fields, "file", *session.protocol_file, notes);
  fields.finish();
}

void read_analysis(JsonObject& root, SessionFile& session, JsonNotes& notes) {
  const JsonValue* value = root.find("analysis");
  if (value == nullptr) return;
  const JsonObject checked(*value, "analysis", notes); // an object, or an error
  for (const auto& member : value->members) {
    switch (member.value.kind) {
    case JsonValue::Kind::truth:
      session.analysis[member.key] = member.value.truth;
      break;
    case JsonValue::Kind::number:
      session.analysis[member.key] = member.value.number;
      break;
    case JsonValue::Kind::text:
      session.analysis[member.key] = member.value.text;
      break;
    case JsonValue::Kind::null:
    case JsonValue::Kind::list:
    case JsonValue::Kind::object:
      notes.fail(member.value.place(), "analysis." + member.key + " is " + shown(member.value),
                 "use a number, a text, true or false; leave a key out for its default");
    }
  }
}

void place_in_folder(SessionFile& session, const std::string& path) {
  const fs::path file(path);
  session.path = path;
  session.folder = file.has_parent_path() ? file.parent_path().string() : ".";
  session.name = file.filename().string();
  for (const std::string end : {".session.json", ".json"}) {
    const auto& name = session.name;
    if (name.size() > end.size() && name.compare(name.size() - end.size(), end.size(), end) == 0) {
      session.name.resize(name.size() - end.size());
      return;
    }
  }
}

/// True if the path, links followed, lies in the folder.
bool stays_inside(const std::string& folder, const std::string& path) {
  std::error_code fault;
  const fs::path home = fs::canonical(folder, fault);
  if (fault) return false;
  const fs::path target = fs::weakly_canonical(home / path, fault);
  if (fault) return false;
  return std::mismatch(home.begin(), home.end(), target.begin(), target.end()).first == home.end();
}

/// Where the text first says `path`, for a message after the fact.
Place place_of_path(const std::string& text, const std::string& path) {
  const auto root = parse_json(text, "");
  Place place;
  if (!root) return place;
  const auto consider = [&](const JsonMember* member) {
    if (member != nullptr && member->value.text == path) place = member->value.place();
  };
  if (const auto* protocol = root->find("protocol")) consider(protocol->value.find("file"));
  if (const auto* recording = root->find("recording")) {
    if (const auto* files = recording->value.find("files")) {
      for (const auto& item : files->value.items)
        consider(item.find("path"));
    }
  }
  return place;
}

} // namespace

std::optional<std::string> fault_of_path(const std::string& path) {
  if (trimmed(path).empty()) return "which is empty";
  for (const char c : path) {
    if (static_cast<unsigned char>(c) < 0x20) return "which holds a control character";
  }
  if (path.find('\\') != std::string::npos) return "which holds a backslash";
  if (path.front() == '/' || (path.size() > 1 && path[1] == ':')) return "which is not relative";
  for (const auto& part : fs::path(path)) {
    if (part == "..") return "which leads out of the session's folder";
  }
  return std::nullopt;
}

Result<SessionFile> parse_session(const std::string& text, const std::string& path, NewerSession newer) {
  auto tree = parse_json(text, path);
  if (!tree) return tree.error();
  JsonNotes notes;
  notes.file = path;
  SessionFile session;
  place_in_folder(session, path);
  if (tree->kind != JsonValue::Kind::object) {
    notes.fail(tree->place(), "the file is " + shown(*tree), "a session is an object in braces",
               ErrorCode::wrong_format);
    return *notes.error;
  }
  JsonObject root(*tree, "", notes);
  read_version(root, session, newer, notes);
  if (notes.failed()) return *notes.error;
  read_preparation(root, session, notes);
  read_recording(root, session, notes);
  read_channels(root, session, notes);
  if (!notes.failed()) read_pathways(root, session, notes);
  if (!notes.failed()) read_measures(root, session, notes);
  read_protocol_choice(root, session, notes);
  read_analysis(root, session, notes);
  if (!notes.failed()) read_review(root, session, notes);
  if (!notes.failed()) read_windows(root, session, notes);
  root.finish();
  if (notes.failed()) return *notes.error;
  session.as_read = std::string(without_byte_order_mark(text));
  session.warnings = std::move(notes.warnings);
  return session;
}

Result<SessionFile> read_session(const std::string& path, NewerSession newer) {
  auto text = read_text_file(path, kLargestSession);
  if (!text) return text.error();
  auto session = parse_session(*text, path, newer);
  if (!session) return session;
  std::vector<std::string> paths;
  for (const auto& file : session->files)
    paths.push_back(file.path);
  if (session->protocol_file) paths.push_back(*session->protocol_file);
  for (const auto& inner : paths) {
    if (stays_inside(session->folder, inner)) continue;
    return Error{ErrorCode::bad_value, path, place_of_path(*text, inner),
                 "the path " + shown(inner) + " leads out of the session's folder through a symbolic link",
                 "copy the file into the session's folder"};
  }
  return session;
}

} // namespace chronodrome::intake
