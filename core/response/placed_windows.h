// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <cstddef>
#include <map>
#include <optional>
#include <span>
#include <string>
#include <tuple>
#include <vector>

#include "base/result.h"
#include "document/session_file.h"
#include "protocol/curve_plan.h"
#include "recording/time_base.h"

namespace chronodrome::response {

/// A window that a person has placed on a step.
struct PlacedWindow {
  recording::Span span; ///< clipped to the recording
  bool clipped = false;
};

/// Which windows the user's choices put on which steps.
///
/// A choice belongs to the step of its curve that has its concentration (to within a millionth, so that a
/// computed concentration may be written with seven digits); of several such steps to the one that it
/// overlaps most, of equals to the first. It must overlap that step's own stretch. A later choice of the same
/// step and measure wins. A choice without effect is a warning that says why.
class PlacedWindows {
public:
  /// `measures`: those that the session lists. `end`: of the recording.
  PlacedWindows(const protocol::CurvePlan& plan, std::span<const document::WindowChoice> choices,
                const std::vector<std::string>& measures, Seconds end);

  /// The window for a step (by its indices in the plan) and a measure, or nothing: the rule's then stands.
  [[nodiscard]] std::optional<PlacedWindow> of(std::size_t curve, std::size_t step,
                                               const std::string& measure) const;
  [[nodiscard]] const std::vector<Warning>& warnings() const { return warnings_; }

private:
  using Key = std::tuple<std::size_t, std::size_t, std::string>;

  std::map<Key, PlacedWindow> windows_;
  std::vector<Warning> warnings_;
};

} // namespace chronodrome::response
