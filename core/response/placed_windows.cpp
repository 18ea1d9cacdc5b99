// Chronodrome, GPL-3.0-or-later.
#include "response/placed_windows.h"

#include <algorithm>
#include <cmath>
#include <utility>

#include "base/number_text.h"

namespace chronodrome::response {
namespace {

using document::WindowChoice;
using recording::Span;

constexpr double kSameConcentration = 1e-6; // of the larger

bool is_same(Molar a, Molar b) {
  return std::abs((a - b).value()) <= kSameConcentration * std::max(std::abs(a.value()), std::abs(b.value()));
}

Seconds overlap(const Span& span, const protocol::Step& step) {
  return std::min(span.end, step.end) - std::max(span.start, step.start);
}

std::string in_words(const Span& span) {
  return number_text(span.start.value(), 9) + " to " + number_text(span.end.value(), 9) + " s";
}

std::string in_words(const WindowChoice& choice) {
  return "the window placed at " + in_words(Span{choice.start, choice.end}) + " for curve " +
         std::to_string(choice.curve) + ", " + number_text(choice.concentration.value(), 7) + " mol/L" +
         (choice.measure.empty() ? std::string() : ", " + choice.measure);
}

/// Where a choice belongs: a step that it overlaps, or else why there is none.
struct Meeting {
  std::optional<std::pair<std::size_t, std::size_t>> place; ///< curve and step
  std::string missing;
};

Meeting meeting_of(const WindowChoice& choice, const Span& span, const protocol::CurvePlan& plan) {
  Meeting meeting;
  meeting.missing = "meets no curve of that number";
  Seconds most(0.0);
  for (std::size_t c = 0; c < plan.curves.size(); ++c) {
    const auto& curve = plan.curves[c];
    if (curve.number != choice.curve) continue;
    meeting.missing = "meets no step of that concentration";
    const protocol::Step* nearest = nullptr;
    for (std::size_t s = 0; s < curve.steps.size(); ++s) {
      const auto& step = curve.steps[s];
      if (!is_same(step.concentration, choice.concentration)) continue;
      if (nearest == nullptr || overlap(span, step) > overlap(span, *nearest)) nearest = &step;
      if (overlap(span, step) <= most) continue;
      most = overlap(span, step);
      meeting.place = {c, s};
    }
    if (nearest != nullptr)
      meeting.missing = "lies beside its step, which runs from " + in_words({nearest->start, nearest->end});
  }
  return meeting;
}

} // namespace

PlacedWindows::PlacedWindows(const protocol::CurvePlan& plan, std::span<const WindowChoice> choices,
                             const std::vector<std::string>& measures, Seconds end) {
  const auto warn = [this](const WindowChoice& choice, const std::string& what, const std::string& remedy) {
    warnings_.push_back({"", {}, in_words(choice) + ", " + what + " and has no effect", remedy});
  };
  for (const WindowChoice& choice : choices) {
    const bool is_listed = choice.measure.empty() ||
                           std::find(measures.begin(), measures.end(), choice.measure) != measures.end();
    if (!is_listed) {
      warn(choice, "is of a measure that the session does not list",
           "list the measure, or delete the window");
      continue;
    }
    const Span span{std::max(choice.start, Seconds(0.0)), std::min(choice.end, end)};
    if (span.end <= span.start) {
      warn(choice, "lies outside the recording", "place it again, or delete it");
      continue;
    }
    const Meeting meeting = meeting_of(choice, span, plan);
    if (!meeting.place) {
      warn(choice, meeting.missing, "place it again, or delete it: the rule's window stands");
      continue;
    }
    const bool clipped = span.start != choice.start || span.end != choice.end;
    for (const auto& measure : measures) {
      if (choice.measure.empty() || choice.measure == measure)
        windows_[{meeting.place->first, meeting.place->second, measure}] = {span, clipped};
    }
  }
}

std::optional<PlacedWindow> PlacedWindows::of(std::size_t curve, std::size_t step,
                                              const std::string& measure) const {
  const auto found = windows_.find({curve, step, measure});
  return found == windows_.end() ? std::nullopt : std::optional(found->second);
}

} // namespace chronodrome::response
