// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <memory>
#include <optional>
#include <vector>

#include "document/session_file.h"
#include "protocol/bath_timeline.h"
#include "session/session_result.h"
#include "session/stretches.h"
#include "session/trend_stretches.h"

namespace chronodrome::ui::evidence {

/// A pathway as rows of the figure; row 0 is the topmost.
struct PathwayRows {
  int from = 0;
  int to = 0;
};

/// A correction that the result does not hold yet.
struct Pending {
  int row = 0;
  document::CorrectionKind what = document::CorrectionKind::add;
  Seconds time, to_time;
};

/// What the figure draws, one row a channel; made once for each result.
struct Scene {
  std::shared_ptr<const session::SessionResult> result; ///< null: nothing to draw
  std::vector<std::vector<session::LostStretch>> lost;  ///< parallel to channels
  std::vector<session::PlateauWindow> plateaus;
  std::vector<PathwayRows> pathways; ///< parallel to result->pathways
  protocol::BathTimeline bath;
  std::vector<Pending> pending;
  bool is_stale = false; ///< marks are older than the edits

  [[nodiscard]] int rows() const { return result ? static_cast<int>(result->channels.size()) : 0; }
  [[nodiscard]] const recording::Channel& channel(int row) const {
    return result->channels[static_cast<std::size_t>(row)];
  }
  /// Marks of a row; none where there is no analysis.
  [[nodiscard]] const std::vector<activation::Activation>& marks(int row) const;
};

Scene sceneOf(std::shared_ptr<const session::SessionResult> result);

/// Corrections of `review` that the scene's result was made without.
std::vector<Pending> pendingOf(const Scene& scene, const std::vector<document::Correction>& review);

} // namespace chronodrome::ui::evidence
