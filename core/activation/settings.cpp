// Chronodrome, GPL-3.0-or-later.
#include "activation/settings.h"

namespace chronodrome::activation {

std::optional<Error> ActivationSettings::check() const {
  const auto wrong = [](const char* what, const char* remedy) {
    return Error{ErrorCode::bad_usage, "", {}, what, remedy};
  };
  if (auto error = conditioning.check()) return error;
  for (const auto& refractory : {refractory_atrial, refractory_ventricular}) {
    if (refractory && !(*refractory > Seconds(0.0) && *refractory <= Seconds(2.0)))
      return wrong("activation.refractory_atrial_s and activation.refractory_ventricular_s must lie above 0 "
                   "and not exceed 2 s",
                   "leave them out for the values of the species");
  }
  const auto is_share = [](double value) { return value > 0.0 && value < 1.0; };
  if (!is_share(threshold_share))
    return wrong("activation.threshold_share must lie between 0 and 1", "leave it out for 0.35");
  if (!(noise_ratio > 1.0) || !(strong_ratio >= noise_ratio))
    return wrong("activation.noise_ratio must exceed 1 and activation.strong_ratio not lie below it",
                 "leave them out for 3.4 and 4");
  if (!is_share(near_field_share) || !is_share(far_field_share) || far_field_share > near_field_share)
    return wrong("activation.far_field_share and activation.near_field_share must lie between 0 and 1, the "
                 "first not above the second",
                 "leave them out for 0.3 and 0.5");
  if (longest_far_field_lead < Seconds(0.0))
    return wrong("activation.longest_far_field_lead_s must not be negative", "leave it out for 0.005 s");
  if (!is_share(twitch_share))
    return wrong("activation.twitch_share must lie between 0 and 1", "leave it out for 0.3");
  return std::nullopt;
}

} // namespace chronodrome::activation
