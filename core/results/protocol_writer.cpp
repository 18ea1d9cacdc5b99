// Chronodrome, GPL-3.0-or-later.
#include "results/protocol_writer.h"

#include <algorithm>
#include <array>
#include <iterator>
#include <optional>
#include <vector>

#include "base/number_text.h"
#include "protocol/concentration.h"
#include "results/output_folder.h"

namespace chronodrome::results {
namespace {

using protocol::Event;
using protocol::Protocol;

struct Cells {
  std::string number, unit;
};

/// As it is, in quotes where a table needs them.
std::string quoted_where_needed(std::string text) {
  std::replace(text.begin(), text.end(), '\0', ' '); // no reader of tables takes it
  if (text.find_first_of(",\"\r\n") == std::string::npos) return text;
  std::string quoted = "\"";
  for (const char c : text) {
    if (c == '"') quoted += '"';
    quoted += c;
  }
  return quoted + '"';
}

/// The shortest number that is exactly `concentration` when read in `unit`, or nothing. More digits than a
/// person can have meant are none: 8.2 mmol/L that was typed as 0.0082 M is not 8.200000000000001 mM.
std::optional<std::string> exact_in(Molar concentration, const std::string& unit) {
  const auto one = protocol::concentration_in(1.0, unit);
  if (!one) return std::nullopt;
  const double value = concentration / *one;
  for (int digits = 1; digits <= 15; ++digits) {
    const auto number = parse_number(number_text(value, digits));
    if (number && protocol::concentration_in(*number, unit) == concentration) return exact_text(*number);
  }
  return std::nullopt;
}

/// Whether a person would write it so: 0.05 uM and 1500 nM yes, 0.0000001 M no.
bool reads_well(Molar concentration, const std::string& unit) {
  const auto one = protocol::concentration_in(1.0, unit);
  if (!one) return false;
  const double value = concentration / *one;
  const double least = unit == "M" ? 1.0 - 1e-9 : unit == "pM" ? 0.0 : 0.01; // nothing is finer than pM
  return value == 0.0 || (value >= least && value < 10'000.0);
}

/// The unit that puts 1 to 1000 before the point, as far as there is one.
std::string usual_unit(Molar concentration) {
  if (concentration == Molar(0.0)) return "M";
  constexpr std::array<const char*, 5> kUnits = {"M", "mM", "uM", "nM", "pM"};
  for (const std::string unit : kUnits) {
    // What is 1 but for rounding is 1: 1e-6 mol/L is 1 uM, not 1000 nM.
    if (concentration / *protocol::concentration_in(1.0, unit) >= 1.0 - 1e-9) return unit;
  }
  return "pM";
}

Cells concentration_cells(const Event& event) {
  if (!event.concentration) return {"", event.unit};
  const Molar concentration = *event.concentration;
  for (const auto& unit : {event.unit, usual_unit(concentration)}) {
    if (!reads_well(concentration, unit)) continue;
    if (const auto number = exact_in(concentration, unit)) return {*number, unit};
  }
  return {exact_text(concentration.value()), "M"};
}

/// A column that stands in the table only where an event has something in it.
struct OptionalColumn {
  const char* name;
  std::string (*cell)(const Event&);
};

constexpr std::array<OptionalColumn, 4> kOptional = {{
    {"stock_mol_per_l",
     [](const Event& e) { return e.stock ? exact_text(e.stock->value()) : std::string(); }},
    {"volume_ml", [](const Event& e) { return e.volume_ml ? exact_text(*e.volume_ml) : std::string(); }},
    {"arrival_s", [](const Event& e) { return e.arrival ? exact_text(e.arrival->value()) : std::string(); }},
    {"curve", [](const Event& e) { return e.curve ? std::to_string(*e.curve) : std::string(); }},
}};

std::vector<OptionalColumn> used_columns(const Protocol& protocol) {
  std::vector<OptionalColumn> used;
  std::copy_if(kOptional.begin(), kOptional.end(), std::back_inserter(used),
               [&](const OptionalColumn& column) {
                 return std::any_of(protocol.events.begin(), protocol.events.end(),
                                    [&](const Event& event) { return !column.cell(event).empty(); });
               });
  return used;
}

} // namespace

std::string protocol_text(const Protocol& protocol) {
  const auto optional = used_columns(protocol);
  std::string text = "time_s,event,agent,concentration,unit,note";
  for (const auto& column : optional)
    text += std::string(",") + column.name;
  text += '\n';
  for (const Event& event : protocol.events) {
    const Cells concentration = concentration_cells(event);
    text += exact_text(event.time.value()) + ',' + name_of(event.kind) + ',';
    text += quoted_where_needed(event.agent) + ',' + concentration.number + ',';
    text += quoted_where_needed(concentration.unit) + ',' + quoted_where_needed(event.note);
    for (const auto& column : optional)
      text += ',' + column.cell(event);
    text += '\n';
  }
  return text;
}

Done write_protocol(const Protocol& protocol, const std::string& path) {
  return write_behind_links(path, protocol_text(protocol));
}

} // namespace chronodrome::results
