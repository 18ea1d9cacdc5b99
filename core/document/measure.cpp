// Chronodrome, GPL-3.0-or-later.
#include "document/measure.h"

#include <array>

namespace chronodrome::document {
namespace {

struct NamedKind {
  MeasureKind kind;
  const char* name;
};

constexpr std::array<NamedKind, 8> kKinds = {{{MeasureKind::rate, "rate"},
                                              {MeasureKind::delay, "delay"},
                                              {MeasureKind::conducted, "conducted"},
                                              {MeasureKind::velocity, "velocity"},
                                              {MeasureKind::force, "force"},
                                              {MeasureKind::pressure, "pressure"},
                                              {MeasureKind::dpdt_max, "dpdt_max"},
                                              {MeasureKind::flow, "flow"}}};

} // namespace

std::string name_of(MeasureKind kind) {
  for (const auto& known : kKinds) {
    if (known.kind == kind) return known.name;
  }
  return "";
}

std::optional<Measure> measure_named(const std::string& text) {
  const auto colon = text.find(':');
  if (colon == std::string::npos || colon + 1 == text.size()) return std::nullopt;
  for (const auto& known : kKinds) {
    if (text.compare(0, colon, known.name) == 0) return Measure{known.kind, text.substr(colon + 1)};
  }
  return std::nullopt;
}

bool is_of_pathway(MeasureKind kind) {
  return kind == MeasureKind::delay || kind == MeasureKind::conducted || kind == MeasureKind::velocity;
}

std::string measure_forms() {
  std::string forms;
  for (const auto& known : kKinds) {
    forms += (forms.empty() ? "" : ", ") + std::string(known.name) +
             (is_of_pathway(known.kind) ? ":PATHWAY" : ":CHANNEL");
  }
  return forms;
}

} // namespace chronodrome::document
