// Chronodrome, GPL-3.0-or-later.
#include "ui/evidence/scene.h"

#include <algorithm>

#include "session/cursor.h"

namespace chronodrome::ui::evidence {
namespace {

int rowOf(const session::SessionResult& result, const std::string& label) {
  const auto at = std::find_if(result.channels.begin(), result.channels.end(),
                               [&](const recording::Channel& channel) { return channel.label == label; });
  return at == result.channels.end() ? -1 : static_cast<int>(at - result.channels.begin());
}

} // namespace

const std::vector<activation::Activation>& Scene::marks(int row) const {
  static const std::vector<activation::Activation> none;
  const auto index = static_cast<std::size_t>(row);
  return result && index < result->activations.size() ? result->activations[index].marks : none;
}

Scene sceneOf(std::shared_ptr<const session::SessionResult> result) {
  Scene scene;
  scene.result = std::move(result);
  if (!scene.result) return scene;
  for (const auto& channel : scene.result->channels)
    scene.lost.push_back(session::lost_stretches(*scene.result, {channel.label}));
  scene.plateaus = session::plateau_windows(*scene.result);
  for (const auto& pathway : scene.result->pathways)
    scene.pathways.push_back({rowOf(*scene.result, pathway.from), rowOf(*scene.result, pathway.to)});
  scene.bath = session::bath_of(*scene.result);
  return scene;
}

std::vector<Pending> pendingOf(const Scene& scene, const std::vector<document::Correction>& review) {
  std::vector<Pending> pending;
  if (!scene.result) return pending;
  const auto& known = scene.result->session.review;
  for (const auto& correction : review) {
    using document::CorrectionKind;
    const bool is_mark = correction.what == CorrectionKind::add ||
                         correction.what == CorrectionKind::remove || correction.what == CorrectionKind::move;
    if (!is_mark || !correction.time) continue;
    const bool in_result = std::any_of(known.begin(), known.end(), [&](const document::Correction& other) {
      return other.seq == correction.seq && other.what == correction.what && other.time == correction.time;
    });
    const int row = rowOf(*scene.result, correction.channel);
    if (in_result || row < 0) continue;
    pending.push_back(
        {row, correction.what, *correction.time, correction.to_time.value_or(*correction.time)});
  }
  return pending;
}

} // namespace chronodrome::ui::evidence
