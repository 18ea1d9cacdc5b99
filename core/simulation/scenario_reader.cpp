// Chronodrome, GPL-3.0-or-later.
#include <array>
#include <cmath>

#include "intake/json_fields.h"
#include "intake/json_tree.h"
#include "intake/text_file.h"
#include "simulation/scenario.h"
#include "simulation/scenario_fault.h"
#include "simulation/scenario_parts.h"

namespace chronodrome::simulation {
namespace {

using intake::JsonObject;
using intake::JsonValue;

constexpr std::size_t kMostBytes = std::size_t{16} << 20U;
constexpr double kLargestSeed = 9007199254740991.0; // whole numbers up to here are exact

std::optional<Error> fault_of_kind(const JsonValue& document, const std::string& file) {
  const auto* format = document.find("format");
  if (format == nullptr || format->value.text != "chronodrome-scenario")
    return Error{ErrorCode::wrong_format, file, document.place(),
                 "the file is no scenario: its \"format\" is not \"chronodrome-scenario\"",
                 "give a scenario file"};
  const auto* version = document.find("version");
  const double number = version == nullptr ? 0.0 : version->value.number;
  if (number > kScenarioVersion)
    return Error{ErrorCode::unsupported_version, file, version->value.place(),
                 "the scenario has a newer version than " + std::to_string(kScenarioVersion),
                 "use a newer program"};
  if (number != kScenarioVersion)
    return Error{ErrorCode::bad_value, file, version == nullptr ? document.place() : version->value.place(),
                 "the scenario's \"version\" is missing or wrong", "write \"version\": 1"};
  return std::nullopt;
}

/// Where the value at a path of keys and indices stands; of the longest part of the path that is there.
Place place_of(const JsonValue& document, const std::vector<std::string>& path) {
  const JsonValue* at = &document;
  for (const std::string& part : path) {
    const auto* member = at->find(part);
    const bool is_index = part.find_first_not_of("0123456789") == std::string::npos;
    if (member != nullptr)
      at = &member->value;
    else if (is_index && at->kind == JsonValue::Kind::list && std::stoul(part) < at->items.size())
      at = &at->items[std::stoul(part)];
    else
      break;
  }
  return at->place();
}

void read_seed(JsonObject& top, Scenario& scenario) {
  const JsonValue* seed = top.find("seed");
  if (seed == nullptr) return;
  const double number = seed->number;
  if (seed->kind == JsonValue::Kind::number && number >= 0.0 && number <= kLargestSeed &&
      number == std::floor(number))
    scenario.seed = static_cast<std::uint64_t>(number);
  else
    top.refuse("seed", *seed, "write a whole number from 0 to 9007199254740991");
}

} // namespace

Result<Scenario> parse_scenario(std::string_view text, const std::string& file) {
  auto document = intake::parse_json(std::string(text), file);
  if (!document) return document.error();
  if (auto fault = fault_of_kind(*document, file)) return *std::move(fault);
  Scenario scenario;
  intake::JsonNotes notes;
  notes.file = file;
  {
    JsonObject top(*document, "", notes);
    for (const char* checked : {"format", "version"})
      static_cast<void>(top.find(checked));
    set(top, "name", scenario.name);
    read_seed(top, scenario);
    if (top.require("duration_s", "the length of the recording in seconds") != nullptr)
      set(top, "duration_s", scenario.duration);
    read_preparation(top, scenario.preparation, notes);
    read_file_plan(top, scenario.file, notes);
    read_heart(top, scenario, notes);
    read_drugs(top, scenario, notes);
    read_channels(top, scenario, notes);
    top.finish();
  }
  if (notes.error) return *notes.error;
  if (const auto fault = fault_in(scenario))
    return Error{ErrorCode::bad_value, file, place_of(*document, fault->path),
                 path_text(fault->path) + ": " + fault->what, fault->remedy};
  scenario.warnings = notes.warnings;
  return scenario;
}

Result<Scenario> read_scenario(const std::string& path) {
  const auto text = intake::read_text_file(path, kMostBytes);
  if (!text) return text.error();
  return parse_scenario(*text, path);
}

} // namespace chronodrome::simulation
