// Chronodrome, GPL-3.0-or-later.
#include "results/fit_units.h"

#include "pharmacology/model.h"

namespace chronodrome::results {
namespace {

std::string_view unit_in(std::span<const pharmacology::ParameterMeaning> meanings, const std::string& name) {
  for (const auto& meaning : meanings) {
    if (meaning.name == name) return meaning.unit;
  }
  return {};
}

} // namespace

std::string unit_of_measure(const session::SessionResult& result, const std::string& measure) {
  for (const auto& row : result.responses.rows) {
    if (row.measure == measure) return row.unit;
  }
  return {};
}

std::string unit_of_parameter(const session::SessionResult& result, const session::FittedCurve& curve,
                              const std::string& parameter) {
  for (const auto& model : pharmacology::model_meanings()) {
    if (model.name != curve.fit.model) continue;
    std::string unit(unit_in(model.parameters, parameter));
    if (unit.empty()) unit = unit_in(model.derived, parameter);
    if (unit == "1") return {};
    const std::string own = unit_of_measure(result, curve.measure);
    if (unit == "response") return own == "1" ? std::string() : own;
    if (unit == "response L/mol") return own == "1" ? std::string("L/mol") : own + " L/mol";
    return unit;
  }
  return {};
}

} // namespace chronodrome::results
