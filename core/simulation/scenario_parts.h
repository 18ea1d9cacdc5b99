// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <optional>
#include <string>

#include "base/quantity.h"
#include "intake/json_fields.h"
#include "simulation/scenario.h"

namespace chronodrome::simulation {

// Each reads one key of a scenario; a key that is missing leaves the default.

void set(intake::JsonObject& object, const std::string& key, std::string& value);
void set(intake::JsonObject& object, const std::string& key, double& value);
void set(intake::JsonObject& object, const std::string& key, int& value);
void set(intake::JsonObject& object, const std::string& key, bool& value);
void set(intake::JsonObject& object, const std::string& key, char& value);
void set(intake::JsonObject& object, const std::string& key, std::optional<double>& value);
template <class Unit>
void set(intake::JsonObject& object, const std::string& key, Quantity<Unit>& value) {
  double number = value.value();
  set(object, key, number);
  value = Quantity<Unit>(number);
}
/// Chamber by name.
void set(intake::JsonObject& object, const std::string& key, Chamber& value);

/// Calls `read(object)` for the object under `key`, if it is there.
template <class Read>
void with_object(intake::JsonObject& parent, const std::string& key, intake::JsonNotes& notes,
                 const Read& read) {
  const intake::JsonValue* value = parent.find(key);
  if (value == nullptr) return;
  intake::JsonObject object(*value, parent.path_of(key), notes);
  read(object);
  object.finish();
}

/// Appends an element for each object of the list under `key`, filled in by `read(object, element)`.
template <class Element, class Read>
void append_each(intake::JsonObject& parent, const std::string& key, std::vector<Element>& list,
                 intake::JsonNotes& notes, const Read& read) {
  parent.for_each(key, [&](const intake::JsonValue& item, const std::string& path) {
    intake::JsonObject object(item, path, notes);
    Element element{};
    read(object, element);
    object.finish();
    list.push_back(std::move(element));
  });
}

void read_preparation(intake::JsonObject& top, PreparationPlan& plan, intake::JsonNotes& notes);
void read_file_plan(intake::JsonObject& top, FilePlan& plan, intake::JsonNotes& notes);
void read_heart(intake::JsonObject& top, Scenario& scenario, intake::JsonNotes& notes);
/// Agents and the drug log.
void read_drugs(intake::JsonObject& top, Scenario& scenario, intake::JsonNotes& notes);
/// Channels, pathways and measures.
void read_channels(intake::JsonObject& top, Scenario& scenario, intake::JsonNotes& notes);

} // namespace chronodrome::simulation
