// Chronodrome, GPL-3.0-or-later.
#include "protocol/ladder.h"

#include "base/number_text.h"
#include "protocol/concentration.h"

namespace chronodrome::protocol {
namespace {

// The last digit lets 1 nM to 1 uM count as a factor of 1000 whatever the rounding.
constexpr double kUnitSlip = 1000.0 * (1.0 - 1e-9);

Warning doubt(const Event& event, const std::string& file, std::string what, std::string remedy) {
  Warning warning;
  warning.file = file;
  if (event.line > 0) warning.place = Place::at_line(event.line);
  warning.what = std::move(what);
  warning.remedy = std::move(remedy);
  return warning;
}

bool ends_series(const Event& event, const std::string& agent) {
  return event.kind == EventKind::antagonist ||
         (event.kind == EventKind::washout && (event.agent.empty() || agent_key(event.agent) == agent));
}

} // namespace

std::vector<Warning> ladder_warnings(const std::vector<Event>& events, const std::vector<Event>& as_written,
                                     LadderPart part, const std::string& file) {
  std::vector<Warning> warnings;
  std::optional<std::size_t> before; // the addition before, of the same series
  for (std::size_t i = 0; i < events.size(); ++i) {
    const Event& event = events[i];
    if (before && ends_series(event, agent_key(events[*before].agent))) before.reset();
    if (event.kind != EventKind::addition || !event.concentration) continue;
    const bool stated = as_written[i].concentration.has_value();
    const double now = event.concentration->value();
    if (now > 1.0 && stated == (part == LadderPart::stated)) {
      warnings.push_back(doubt(event, file,
                               "a bath concentration of " + number_text(now, 4) + " mol/L is hardly meant",
                               "check the number and its unit"));
    }
    const bool same_series = before && agent_key(events[*before].agent) == agent_key(event.agent) &&
                             events[*before].curve == event.curve;
    if (same_series) {
      const bool pair_stated = stated && as_written[*before].concentration.has_value();
      const double last = events[*before].concentration->value();
      const std::string steps = event.agent + " goes from " + concentration_text(Molar(last)) + " to " +
                                concentration_text(Molar(now));
      if (pair_stated == (part == LadderPart::stated)) {
        if (last > 0.0 && now / last >= kUnitSlip) {
          warnings.push_back(doubt(event, file, steps + ", a factor of " + number_text(now / last, 4),
                                   "check the unit of both rows"));
        } else if (now < last) {
          warnings.push_back(doubt(event, file, steps + " without a washout between",
                                   "add the washout, or check the exponent"));
        }
      }
    }
    before = i;
  }
  return warnings;
}

} // namespace chronodrome::protocol
