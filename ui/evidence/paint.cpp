// Chronodrome, GPL-3.0-or-later.
#include "ui/evidence/paint.h"

#include <algorithm>

#include <QPaintEngine>

#include "conditioning/stretch.h"
#include "session/analysis_settings.h"
#include "session/stretches.h"
#include "ui/evidence/evidence_figure.h"

namespace chronodrome::ui::evidence {
namespace {

/// The filtered signals of a stretch, where it is short enough to be shown filtered.
std::vector<recording::Channel> filteredOf(const session::SessionResult& result, Seconds start, Seconds end) {
  std::vector<recording::Channel> filtered;
  const auto chosen = session::settings_of(result.session);
  if (!chosen || end - start > conditioning::kLongestStretch) return filtered;
  const auto& plain = chosen->settings.activation.conditioning;
  const auto blanking = session::with_stimuli_blanked(result.channels, plain);
  for (const auto& channel : result.channels) {
    const bool electrical = recording::is_electrogram(channel.role);
    if (!electrical && !recording::is_mechanical(channel.role)) continue;
    auto stretch = conditioning::condition_stretch(channel, electrical ? blanking : plain, start, end);
    if (stretch.ok()) filtered.push_back(std::move(stretch).value());
  }
  return filtered;
}

} // namespace

void paintTraces(QCPPainter& painter, QSize size, const session::SessionResult& result, Seconds start,
                 Seconds end, const look::Theme& theme) {
  if (!(end > start) || size.isEmpty()) return;
  // On a vector device traces are lines, and labels text; on pixels they may be pictures.
  if (painter.paintEngine()->type() != QPaintEngine::Raster) {
    painter.setMode(QCPPainter::pmVectorized);
    painter.setMode(QCPPainter::pmNoCaching);
  }
  EvidenceFigure figure;
  figure.setTheme(theme);
  // Borrowed for the time of this call.
  figure.setScene(sceneOf(std::shared_ptr<const session::SessionResult>(&result, [](const auto*) {})));
  Overlay none;
  none.active_row = -1;
  figure.setOverlay(none);
  auto filtered = filteredOf(result, start, end);
  const QString mode = filtered.empty() ? QStringLiteral("raw") : QStringLiteral("filtered over raw");
  figure.setFiltered(std::move(filtered), mode);
  figure.setView(start, end);
  figure.toPainter(&painter, size.width(), size.height());
}

} // namespace chronodrome::ui::evidence
