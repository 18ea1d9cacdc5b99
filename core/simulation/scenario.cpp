// Chronodrome, GPL-3.0-or-later.
#include "simulation/scenario.h"

#include <array>
#include <utility>

#include "simulation/scenario_fault.h"

namespace chronodrome::simulation {
namespace {

constexpr std::array<std::pair<EffectTarget, const char*>, 8> kTargets = {{
    {EffectTarget::rate, "rate"},
    {EffectTarget::delay, "delay"},
    {EffectTarget::force, "force"},
    {EffectTarget::pressure, "pressure"},
    {EffectTarget::delay_min, "delay_min"},
    {EffectTarget::delay_span, "delay_span"},
    {EffectTarget::recovery_tau, "recovery_tau"},
    {EffectTarget::recovery_min, "recovery_min"},
}};

constexpr std::array<std::pair<Chamber, const char*>, 3> kChambers = {{
    {Chamber::atrial, "atrial"},
    {Chamber::his, "his"},
    {Chamber::ventricular, "ventricular"},
}};

} // namespace

std::string name_of(EffectTarget target) {
  for (const auto& [value, name] : kTargets) {
    if (value == target) return name;
  }
  return "";
}

std::optional<EffectTarget> effect_target_named(const std::string& name) {
  for (const auto& [value, text] : kTargets) {
    if (name == text) return value;
  }
  return std::nullopt;
}

std::string name_of(Chamber chamber) {
  for (const auto& [value, name] : kChambers) {
    if (value == chamber) return name;
  }
  return "";
}

std::optional<Chamber> chamber_named(const std::string& name) {
  for (const auto& [value, text] : kChambers) {
    if (name == text) return value;
  }
  return std::nullopt;
}

Chamber chamber_of(const ChannelPlan& channel) {
  if (channel.chamber) return *channel.chamber;
  switch (channel.role) {
  case recording::Role::sinus:
  case recording::Role::atrial:
  case recording::Role::tension:
    return Chamber::atrial;
  case recording::Role::his:
    return Chamber::his;
  default:
    return Chamber::ventricular;
  }
}

std::vector<std::string> measures_of(const Scenario& scenario) {
  if (!scenario.measures.empty()) return scenario.measures;
  std::vector<std::string> measures;
  for (const ChannelPlan& channel : scenario.channels) {
    if (recording::is_electrogram(channel.role)) measures.push_back("rate:" + channel.label);
    if (channel.role == recording::Role::tension) measures.push_back("force:" + channel.label);
    if (channel.role == recording::Role::pressure) {
      measures.push_back("pressure:" + channel.label);
      measures.push_back("dpdt_max:" + channel.label);
    }
    if (channel.role == recording::Role::flow) measures.push_back("flow:" + channel.label);
  }
  for (const PathwayPlan& pathway : scenario.pathways)
    measures.push_back("delay:" + pathway.label);
  return measures;
}

std::string path_text(const std::vector<std::string>& path) {
  std::string text;
  for (const std::string& part : path) {
    const bool is_index = part.find_first_not_of("0123456789") == std::string::npos;
    if (is_index)
      text += "[" + part + "]";
    else
      text += (text.empty() ? "" : ".") + part;
  }
  return text;
}

std::optional<Error> Scenario::check() const {
  const auto fault = fault_in(*this);
  if (!fault) return std::nullopt;
  return Error{ErrorCode::bad_usage, "", {}, path_text(fault->path) + ": " + fault->what, fault->remedy};
}

} // namespace chronodrome::simulation
