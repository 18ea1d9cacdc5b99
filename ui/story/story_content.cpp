// Chronodrome, GPL-3.0-or-later.
#include "ui/story/story_content.h"

#include <utility>

#include "session/trend_stretches.h"

namespace chronodrome::ui::story {

std::shared_ptr<const StoryContent> contentOf(std::shared_ptr<const session::SessionResult> result) {
  auto content = std::make_shared<StoryContent>();
  if (!result) return content;
  for (const auto& measure : result->session.measures)
    content->trends.push_back(session::trend_of(*result, measure));
  content->bath = session::bath_course(*result);
  content->lost = session::lost_stretches(*result, {});
  if (result->recording) content->end = result->recording->duration;
  content->result = std::move(result);
  return content;
}

StepRef stepOf(const response::Response& response) {
  return {response.curve, response.concentration, response.measure};
}

bool isOfStep(const response::Response& response, const StepRef& step) {
  return response.curve == step.curve && response.concentration == step.concentration &&
         (step.measure.empty() || step.measure == response.measure);
}

recording::Span stepStretch(const session::SessionResult& result, const response::Response& response) {
  const Seconds middle = 0.5 * (response.window_start + response.window_end);
  for (const auto& curve : result.plan.curves) {
    if (curve.number != response.curve) continue;
    for (const auto& step : curve.steps) {
      if (step.concentration == response.concentration && step.start <= middle && middle <= step.end)
        return {step.start, step.end};
    }
  }
  return {Seconds(0.0), result.recording ? result.recording->duration : response.window_end};
}

} // namespace chronodrome::ui::story
