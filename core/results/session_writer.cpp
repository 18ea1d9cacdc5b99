// Chronodrome, GPL-3.0-or-later.
#include "results/session_writer.h"

#include <map>
#include <nlohmann/json.hpp>
#include <set>

#include "base/json_text.h"
#include "base/number_text.h"
#include "results/output_folder.h"

namespace chronodrome::results {
namespace {

using document::SessionFile;
using Json = nlohmann::ordered_json;
using Keys = std::set<std::string>;

template <class T>
Json number_or_null(const std::optional<T>& value) {
  return value ? Json(*value) : Json(nullptr);
}

Json mark_or_null(const std::optional<char>& mark) {
  return mark ? Json(std::string(1, *mark)) : Json(nullptr);
}

/// Members of `before` under keys that the program does not know, put last.
void keep_unknown(Json& object, const Json& before, const Keys& known) {
  if (!before.is_object()) return;
  for (const auto& [key, value] : before.items()) {
    if (known.count(key) == 0) object[key] = value;
  }
}

Json member(const Json& object, const std::string& key) {
  return object.is_object() && object.contains(key) ? object.at(key) : Json();
}

/// The members that tell an entry of a list from the others. A number is the same with and without a point.
std::string identity_of(const Json& entry, const std::vector<std::string>& keys) {
  std::string identity;
  for (const auto& key : keys) {
    const Json value = member(entry, key);
    identity += (value.is_number() ? exact_text(value.get<double>()) : value.dump()) + ' ';
  }
  return identity;
}

/// Adds to every object of a list the unknown keys of the entry that it was read from: the one with the same
/// identity (the first of several, unless one of them is in its place), or else the one in its place, unless
/// another entry now has that one's identity.
void keep_unknown_of_entries(Json& list, const Json& before, const std::vector<std::string>& identity,
                             const Keys& known) {
  if (!before.is_array()) return;
  std::map<std::string, const Json*> entries;
  std::set<std::string> now;
  const auto name_of = [&](const Json& entry) { return identity_of(entry, identity); };
  for (const auto& entry : before)
    entries.emplace(name_of(entry), &entry);
  for (const auto& entry : list)
    now.insert(name_of(entry));
  for (std::size_t i = 0; i < list.size(); ++i) {
    const auto same = entries.find(name_of(list[i]));
    if (i < before.size() && name_of(before[i]) == name_of(list[i])) {
      keep_unknown(list[i], before[i], known);
    } else if (same != entries.end()) {
      keep_unknown(list[i], *same->second, known);
    } else if (i < before.size() && now.count(name_of(before[i])) == 0) {
      keep_unknown(list[i], before[i], known);
    }
  }
}

Keys keys_of(const Json& object) {
  Keys keys;
  for (const auto& [key, value] : object.items())
    keys.insert(key);
  return keys;
}

Json preparation_of(const SessionFile& session, const Json& before) {
  const auto& preparation = session.preparation;
  Json json = {{"label", preparation.label},
               {"species", preparation.species},
               {"tissue", preparation.tissue},
               {"temperature_c", number_or_null(preparation.temperature_c)},
               {"bath_volume_ml", number_or_null(preparation.bath_volume_ml)},
               {"animal", preparation.animal},
               {"sex", preparation.sex},
               {"mass_g", number_or_null(preparation.mass_g)},
               {"date", preparation.date},
               {"operator", preparation.operator_name},
               {"group", preparation.group},
               {"arrival_delay_s", preparation.arrival_delay.value()},
               {"notes", preparation.notes}};
  keep_unknown(json, before, keys_of(json));
  return json;
}

Json recording_of(const SessionFile& session, const Json& before) {
  Json files = Json::array();
  for (const auto& file : session.files) {
    Json entry = {{"path", file.path}};
    if (file.sha256) entry["sha256"] = *file.sha256;
    files.push_back(std::move(entry));
  }
  keep_unknown_of_entries(files, member(before, "files"), {"path"}, {"path", "sha256"});
  Json csv = {{"rate_hz", number_or_null(session.csv.rate_hz)},
              {"delimiter", mark_or_null(session.csv.delimiter)},
              {"decimal", mark_or_null(session.csv.decimal)},
              {"time_column", session.csv.time_column ? Json(*session.csv.time_column) : Json(nullptr)}};
  keep_unknown(csv, member(before, "csv"), keys_of(csv));
  Json json = {{"files", std::move(files)}, {"csv", std::move(csv)}};
  keep_unknown(json, before, keys_of(json));
  return json;
}

Json calibration_of(const document::Calibration& calibration) {
  return {{"raw", calibration.raw}, {"value", calibration.value}, {"unit", calibration.unit}};
}

Json channels_of(const SessionFile& session, const Json& before) {
  Json list = Json::array();
  for (const auto& channel : session.channels) {
    Json entry = {{"source", channel.source}, {"label", channel.label}, {"role", channel.role}};
    if (!channel.lead.empty()) entry["lead"] = channel.lead;
    entry["unit"] = channel.unit;
    entry["invert"] = channel.invert;
    if (channel.position_mm) entry["position_mm"] = *channel.position_mm;
    if (channel.calibration) entry["calibration"] = calibration_of(*channel.calibration);
    if (channel.skew != Seconds(0.0)) entry["skew_s"] = channel.skew.value();
    list.push_back(std::move(entry));
  }
  keep_unknown_of_entries(
      list, before, {"label"},
      {"source", "label", "role", "lead", "unit", "invert", "position_mm", "calibration", "skew_s"});
  return list;
}

Json pathways_of(const SessionFile& session, const Json& before) {
  Json list = Json::array();
  for (const auto& pathway : session.pathways) {
    list.push_back({{"label", pathway.label},
                    {"from", pathway.from},
                    {"to", pathway.to},
                    {"distance_mm", number_or_null(pathway.distance_mm)}});
  }
  keep_unknown_of_entries(list, before, {"label"}, {"label", "from", "to", "distance_mm"});
  return list;
}

Json analysis_of(const SessionFile& session) {
  Json json = Json::object();
  for (const auto& [key, value] : session.analysis)
    json[key] = std::visit([](const auto& plain) { return Json(plain); }, value);
  return json;
}

Json review_of(const SessionFile& session, const Json& before) {
  Json list = Json::array();
  for (const auto& correction : session.review) {
    Json entry = {{"seq", correction.seq},
                  {"when", correction.when},
                  {"who", correction.who},
                  {"what", document::name_of(correction.what)},
                  {"channel", correction.channel}};
    if (correction.time) entry["time_s"] = correction.time->value();
    if (correction.to_time) entry["to_time_s"] = correction.to_time->value();
    entry["why"] = correction.why;
    list.push_back(std::move(entry));
  }
  keep_unknown_of_entries(list, before, {"seq"},
                          {"seq", "when", "who", "what", "channel", "time_s", "to_time_s", "why"});
  return list;
}

Json windows_of(const SessionFile& session, const Json& before) {
  Json list = Json::array();
  for (const auto& window : session.windows) {
    list.push_back({{"curve", window.curve},
                    {"concentration_mol_per_l", window.concentration.value()},
                    {"measure", window.measure.empty() ? Json(nullptr) : Json(window.measure)},
                    {"start_s", window.start.value()},
                    {"end_s", window.end.value()},
                    {"when", window.when},
                    {"who", window.who},
                    {"why", window.why}});
  }
  keep_unknown_of_entries(
      list, before, {"curve", "concentration_mol_per_l", "measure"},
      {"curve", "concentration_mol_per_l", "measure", "start_s", "end_s", "when", "who", "why"});
  return list;
}

Json json_of(const SessionFile& session) {
  const Json before = Json::parse(session.as_read, nullptr, false); // discarded, no object, if there is none
  Json protocol = {{"file", session.protocol_file ? Json(*session.protocol_file) : Json(nullptr)}};
  keep_unknown(protocol, member(before, "protocol"), {"file"});
  Json json = {{"format", "chronodrome-session"},
               {"version", session.version},
               {"preparation", preparation_of(session, member(before, "preparation"))},
               {"recording", recording_of(session, member(before, "recording"))},
               {"channels", channels_of(session, member(before, "channels"))},
               {"pathways", pathways_of(session, member(before, "pathways"))},
               {"protocol", std::move(protocol)},
               {"measures", Json(session.measures)},
               {"analysis", analysis_of(session)},
               {"review", review_of(session, member(before, "review"))}};
  if (!session.windows.empty()) json["windows"] = windows_of(session, member(before, "windows"));
  Keys known = keys_of(json);
  known.insert("windows"); // the last one may have gone
  keep_unknown(json, before, known);
  return json;
}

void write_inline(const Json& value, std::string& text) {
  if (value.is_object() || value.is_array()) {
    const bool object = value.is_object();
    text += object ? '{' : '[';
    bool first = true;
    for (const auto& [key, inner] : value.items()) {
      if (!first) text += ", ";
      first = false;
      if (object) text += json_quoted(key) + ": ";
      write_inline(inner, text);
    }
    text += object ? '}' : ']';
  } else if (value.is_string()) {
    text += json_quoted(value.get_ref<const std::string&>());
  } else if (value.is_number_float()) {
    text += exact_text(value.get<double>());
  } else {
    text += value.dump(); // whole numbers, true, false, null
  }
}

/// Members or entries one a line. `levels` deep; what is deeper stands in one line.
void write_lines(const Json& value, int levels, std::size_t indent, std::string& text) {
  const bool opens = (value.is_object() || value.is_array()) && !value.empty() && levels > 0;
  if (!opens) return write_inline(value, text);
  const bool object = value.is_object();
  text += object ? '{' : '[';
  bool first = true;
  for (const auto& [key, inner] : value.items()) {
    text += first ? "\n" : ",\n";
    first = false;
    text.append(indent + 2, ' ');
    if (object) text += json_quoted(key) + ": ";
    // Entries of lists and the choices for CSV files read best in one line each.
    const bool deeper = object && key != "csv" && key != "measures" && key != "protocol";
    write_lines(inner, deeper ? levels - 1 : 0, indent + 2, text);
  }
  text += '\n';
  text.append(indent, ' ');
  text += object ? '}' : ']';
}

} // namespace

std::string session_text(const SessionFile& session) {
  std::string text;
  write_lines(json_of(session), 3, 0, text);
  return text + '\n';
}

Done write_session(const SessionFile& session, const std::string& path) {
  if (session.version > document::kSessionVersion) {
    return Error{ErrorCode::unsupported_version,
                 path,
                 {},
                 "a newer program wrote this session (version " + std::to_string(session.version) + ")",
                 "save it with that program: this one could lose what it does not know"};
  }
  return write_behind_links(path, session_text(session));
}

} // namespace chronodrome::results
