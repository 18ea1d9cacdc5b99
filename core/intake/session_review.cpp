// Chronodrome, GPL-3.0-or-later.
#include <algorithm>
#include <set>
#include <string_view>

#include "intake/clock_time.h"
#include "intake/session_parts.h"

namespace chronodrome::intake {
namespace {

using document::Correction;
using document::CorrectionKind;
using document::SessionFile;

bool is_digit(char c) {
  return c >= '0' && c <= '9';
}

/// Date and time of day, with or without `Z` or `+01:00`.
bool is_moment(std::string_view text) {
  if (!text.empty() && text.back() == 'Z') {
    text.remove_suffix(1);
  } else if (text.size() > 6) {
    const std::string_view zone = text.substr(text.size() - 6);
    const bool is_zone = (zone[0] == '+' || zone[0] == '-') && is_digit(zone[1]) && is_digit(zone[2]) &&
                         zone[3] == ':' && is_digit(zone[4]) && is_digit(zone[5]);
    if (is_zone) text.remove_suffix(6);
  }
  return parse_clock_time(text).has_value();
}

/// What each kind of correction cannot do without.
struct Needs {
  bool channel, time, to_time;
};

Needs needs_of(CorrectionKind kind) {
  switch (kind) {
  case CorrectionKind::add:
  case CorrectionKind::remove:
  case CorrectionKind::retype:
    return {true, true, false};
  case CorrectionKind::move:
    return {true, true, true};
  case CorrectionKind::exclude:
  case CorrectionKind::include:
    return {false, true, true}; // without a channel: of all
  case CorrectionKind::redetect:
    return {true, false, false};
  }
  return {true, true, true};
}

void check_needs(JsonObject& fields, const Correction& correction, const JsonValue& item, JsonNotes& notes) {
  const Needs needs = needs_of(correction.what);
  const auto missing = [&](const std::string& key) {
    notes.fail(item.place(), fields.path_of(key) + " is missing",
               "add it: a correction of kind " + document::name_of(correction.what) + " needs it");
  };
  if (needs.channel && correction.channel.empty()) return missing("channel");
  if (needs.time && !correction.time) return missing("time_s");
  if (needs.to_time && !correction.to_time) return missing("to_time_s");
  const bool is_stretch = correction.what != CorrectionKind::move && correction.time && correction.to_time;
  if (is_stretch && *correction.to_time <= *correction.time)
    fields.refuse("to_time_s", *fields.find("to_time_s"), "end the stretch after time_s");
}

void read_correction(const JsonValue& item, const std::string& path, SessionFile& session,
                     std::set<int>& numbers, JsonNotes& notes) {
  JsonObject fields(item, path, notes);
  Correction correction;
  if (fields.require("seq", "a whole number that counts the corrections") != nullptr) {
    correction.seq = fields.whole_number("seq").value_or(0);
    if (!notes.failed() && !numbers.insert(correction.seq).second)
      fields.refuse("seq", *fields.find("seq"), "give every correction a number of its own");
  }
  correction.when = read_moment(fields);
  correction.who = fields.text("who");
  correction.why = fields.text("why");
  const auto kind =
      fields.one_of<CorrectionKind>("what", document::correction_named, document::correction_names());
  if (kind) correction.what = *kind;
  correction.channel = fields.text("channel");
  if (const auto time = fields.number("time_s")) correction.time = Seconds(*time);
  if (const auto time = fields.number("to_time_s")) correction.to_time = Seconds(*time);
  fields.finish();
  if (notes.failed()) return;
  check_needs(fields, correction, item, notes);
  const bool known = std::any_of(session.channels.begin(), session.channels.end(),
                                 [&](const auto& channel) { return channel.label == correction.channel; });
  if (!correction.channel.empty() && !known)
    fields.refuse("channel", *fields.find("channel"), "use the label of a channel");
  session.review.push_back(std::move(correction));
}

} // namespace

std::string read_moment(JsonObject& fields) {
  const std::string when = fields.text("when");
  if (!when.empty() && !is_moment(when))
    fields.refuse("when", *fields.find("when"), "write it as 2026-03-04T09:30:00Z (ISO 8601)");
  return when;
}

void read_review(JsonObject& root, SessionFile& session, JsonNotes& notes) {
  std::set<int> numbers;
  root.for_each("review", [&](const JsonValue& item, const std::string& path) {
    read_correction(item, path, session, numbers, notes);
  });
  const auto earlier = [](const Correction& a, const Correction& b) { return a.seq < b.seq; };
  if (std::is_sorted(session.review.begin(), session.review.end(), earlier)) return;
  if (const JsonValue* list = root.find("review"))
    notes.warn(list->place(), "the corrections do not stand in order of seq",
               "they are applied in that order");
  std::stable_sort(session.review.begin(), session.review.end(), earlier);
}

} // namespace chronodrome::intake
