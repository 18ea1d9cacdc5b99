// Chronodrome, GPL-3.0-or-later.
#include "document/measure.h"
#include "intake/session_parts.h"

namespace chronodrome::intake {
namespace {

constexpr double kLatest_s = 1e9;   // thirty years: no recording is longer
constexpr int kMostCurves = 10'000; // as in a drug log

void read_window(const JsonValue& item, const std::string& path, document::SessionFile& session,
                 JsonNotes& notes) {
  JsonObject fields(item, path, notes);
  document::WindowChoice window;
  if (const JsonValue* curve = fields.require("curve", "the number of the curve, from 1")) {
    window.curve = fields.whole_number("curve").value_or(0);
    if (!notes.failed() && (window.curve < 1 || window.curve > kMostCurves))
      fields.refuse("curve", *curve, "use a whole number from 1 to " + std::to_string(kMostCurves));
  }
  if (fields.require("concentration_mol_per_l", "that of the step, 0 for the control") != nullptr) {
    const auto concentration = fields.number("concentration_mol_per_l", Range::not_negative);
    window.concentration = Molar(concentration.value_or(0.0));
  }
  window.measure = fields.text("measure");
  if (const JsonValue* measure = fields.find("measure");
      !window.measure.empty() && !document::measure_named(window.measure))
    fields.refuse("measure", *measure, "use one of " + document::measure_forms() + ", or null for all");
  const auto time = [&](const std::string& key, const std::string& meaning) {
    if (fields.require(key, meaning) == nullptr) return Seconds(0.0);
    return Seconds(fields.number_between(key, 0.0, kLatest_s, "s").value_or(0.0));
  };
  window.start = time("start_s", "where the window begins, in seconds");
  window.end = time("end_s", "where the window ends, in seconds");
  window.when = read_moment(fields);
  window.who = fields.text("who");
  window.why = fields.text("why");
  fields.finish();
  if (notes.failed()) return;
  if (window.end <= window.start)
    return fields.refuse("end_s", *fields.find("end_s"), "end it after start_s");
  session.windows.push_back(std::move(window));
}

} // namespace

void read_windows(JsonObject& root, document::SessionFile& session, JsonNotes& notes) {
  root.for_each("windows", [&](const JsonValue& item, const std::string& path) {
    read_window(item, path, session, notes);
  });
}

} // namespace chronodrome::intake
