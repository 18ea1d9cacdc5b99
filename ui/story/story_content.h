// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <memory>
#include <optional>
#include <vector>

#include "response/response.h"
#include "session/bath_course.h"
#include "session/session_result.h"
#include "session/trend.h"
#include "ui/document/focus.h"

namespace chronodrome::ui::story {

/// All that the story draws of one result; made once, then only read.
struct StoryContent {
  std::shared_ptr<const session::SessionResult> result;
  std::vector<session::Trend> trends; ///< one a measure, in the session's order
  session::BathCourse bath;
  std::vector<session::LostStretch> lost; ///< what is lost of all channels
  Seconds end;                            ///< of the recording
};

/// Reads flow channels' samples; everything else is quick.
std::shared_ptr<const StoryContent> contentOf(std::shared_ptr<const session::SessionResult> result);

/// The step that a response belongs to.
StepRef stepOf(const response::Response& response);

/// True if the step names this response: an empty measure means all.
bool isOfStep(const response::Response& response, const StepRef& step);

/// The stretch in which the window of a response may lie: its step; of a step that the plan does not hold,
/// the recording.
recording::Span stepStretch(const session::SessionResult& result, const response::Response& response);

} // namespace chronodrome::ui::story
