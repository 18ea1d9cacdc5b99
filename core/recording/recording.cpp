// Chronodrome, GPL-3.0-or-later.
#include "recording/recording.h"

#include <cassert>
#include <utility>

namespace chronodrome::recording {
namespace {

constexpr std::array<std::pair<Role, const char*>, 12> kRoles = {{{Role::sinus, "sinus"},
                                                                  {Role::atrial, "atrial"},
                                                                  {Role::his, "his"},
                                                                  {Role::ventricular, "ventricular"},
                                                                  {Role::ecg, "ecg"},
                                                                  {Role::map, "map"},
                                                                  {Role::stimulus, "stimulus"},
                                                                  {Role::tension, "tension"},
                                                                  {Role::pressure, "pressure"},
                                                                  {Role::flow, "flow"},
                                                                  {Role::temperature, "temperature"},
                                                                  {Role::other, "other"}}};

} // namespace

const Signal* Recording::find(const std::string& source) const {
  // The text as it stands in the file wins: "T" and "T (mV)" may both be there.
  for (const Signal& signal : signals) {
    if (signal.source_as_written == source) return &signal;
  }
  for (const Signal& signal : signals) {
    if (signal.source == source) return &signal;
  }
  return nullptr;
}

bool is_electrogram(Role role) {
  switch (role) {
  case Role::sinus:
  case Role::atrial:
  case Role::his:
  case Role::ventricular:
  case Role::ecg:
  case Role::map:
    return true;
  case Role::stimulus:
  case Role::tension:
  case Role::pressure:
  case Role::flow:
  case Role::temperature:
  case Role::other:
    return false;
  }
  return false;
}

bool is_mechanical(Role role) {
  return role == Role::tension || role == Role::pressure;
}

std::string name_of(Role role) {
  for (const auto& [value, name] : kRoles) {
    if (value == role) return name;
  }
  return "other";
}

std::string name_of(Lead lead) {
  switch (lead) {
  case Lead::unipolar:
    return "unipolar";
  case Lead::bipolar:
    return "bipolar";
  case Lead::none:
    break;
  }
  return "";
}

std::optional<Role> role_named(const std::string& name) {
  for (const auto& [value, text] : kRoles) {
    if (name == text) return value;
  }
  return std::nullopt;
}

std::optional<Lead> lead_named(const std::string& name) {
  if (name == "unipolar") return Lead::unipolar;
  if (name == "bipolar") return Lead::bipolar;
  if (name.empty()) return Lead::none;
  return std::nullopt;
}

void Channel::read(std::size_t first, std::span<double> out) const {
  raw().samples->read(first, out);
  if (gain == 1.0 && offset == 0.0) return;
  for (double& value : out)
    value = gain * value + offset;
}

} // namespace chronodrome::recording
