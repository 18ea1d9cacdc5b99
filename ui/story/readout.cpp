// Chronodrome, GPL-3.0-or-later.
#include "ui/story/readout.h"

#include <algorithm>

#include "ui/look/number_text.h"
#include "ui/story/story_words.h"

namespace chronodrome::ui::story {
namespace {

constexpr double kReachPixels = 6.0; // of a point from the pointer
constexpr qsizetype kMostEpisodes = 8;

bool isBand(Hit::Part part) {
  return part == Hit::Part::band || part == Hit::Part::bandStart || part == Hit::Part::bandEnd;
}

/// Row at a height, whatever else lies there.
std::optional<std::size_t> rowAt(const StoryFigure& figure, QPointF place) {
  for (std::size_t trend = 0; trend < figure.rowCount(); ++trend) {
    const QRect row = figure.rowRect(trend);
    if (!row.isNull() && place.y() >= row.top() - 4 && place.y() <= row.bottom() + 4) return trend;
  }
  return std::nullopt;
}

bool isInRhythm(const StoryFigure& figure, QPointF place) {
  return place.y() >= figure.rhythmRect().top() && place.y() <= figure.rhythmRect().bottom();
}

QString bathLine(const StoryFigure& figure, QPointF place, Seconds time) {
  const auto& bath = figure.state().content->bath;
  const int lane = figure.laneAt(place.y());
  if (lane < 0) return {};
  for (const auto& step : bath.lanes[static_cast<std::size_t>(lane)].steps) {
    if (time < step.start || time >= step.end) continue;
    QString text = QString::fromStdString(bath.lanes[static_cast<std::size_t>(lane)].agent) +
                   QLatin1Char(' ') + look::concentrationText(step.concentration) + QStringLiteral(" from ") +
                   look::timeText(step.start) + QStringLiteral(" to ") + look::timeText(step.end);
    if (step.logged && *step.logged != step.start)
      text += QStringLiteral("; added at ") + look::timeText(*step.logged);
    return text;
  }
  return {};
}

QString rhythmLine(const StoryFigure& figure, Seconds time) {
  const auto& rhythm = figure.state().content->result->rhythm;
  const std::size_t episode = session::episode_at(rhythm, time);
  return episode < rhythm.episodes.size() ? episodeText(rhythm.episodes[episode]) : QString();
}

} // namespace

QString readoutText(const StoryFigure& figure, QPointF place) {
  const auto& content = figure.state().content;
  const Hit hit = figure.hitAt(place);
  if (!content || hit.part == Hit::Part::nothing || hit.part == Hit::Part::gutter) return {};
  const Seconds time = std::clamp(hit.time, Seconds(0.0), content->end);
  QStringList parts{look::timeText(time)};
  const auto trend = rowAt(figure, place);
  if (isBand(hit.part)) {
    parts << plateauText(figure.state().bands->responses.rows[hit.response]);
    return parts.join(QStringLiteral("  ·  "));
  }
  if (trend) {
    const auto& row = content->trends[*trend];
    const Seconds reach = figure.timeAt(place.x() + kReachPixels) - figure.timeAt(place.x());
    if (const auto point = session::point_near(row, time, reach)) parts << pointText(row, *point);
  } else if (isInRhythm(figure, place)) {
    parts << rhythmLine(figure, time);
  } else if (figure.laneAt(place.y()) >= 0) {
    parts << bathLine(figure, place, time);
  }
  const QString bath = bathText(content->bath, time);
  if (!bath.isEmpty() && figure.laneAt(place.y()) < 0) parts << bath;
  if (const auto* lost = figure.lostAt(trend, time)) parts << lostText(*lost);
  parts.removeAll(QString());
  return parts.join(QStringLiteral("  ·  "));
}

QString tooltipText(const StoryFigure& figure, QPointF place) {
  const auto& content = figure.state().content;
  const Hit hit = figure.hitAt(place);
  if (!content || !content->result || hit.part == Hit::Part::nothing) return {};
  if (hit.part == Hit::Part::gutter) {
    const auto trend = rowAt(figure, place);
    return trend ? look::measureText(content->trends[*trend].measure) : QString();
  }
  if (isInRhythm(figure, place)) {
    const auto* block = figure.blockAt(place.x());
    if (block == nullptr) return {};
    QStringList lines;
    for (const std::size_t episode : block->episodes)
      lines << episodeText(content->result->rhythm.episodes[episode]);
    const qsizetype left = lines.size() - kMostEpisodes;
    if (left > 0) {
      lines.resize(kMostEpisodes);
      lines << QStringLiteral("and %1 more").arg(left);
    }
    return lines.join(QLatin1Char('\n'));
  }
  if (isBand(hit.part)) {
    const auto& response = figure.state().bands->responses.rows[hit.response];
    QStringList lines{plateauText(response)};
    for (const auto& flag : response.flags)
      lines << QString::fromStdString(flag);
    return lines.join(QLatin1Char('\n'));
  }
  if (figure.laneAt(place.y()) >= 0) return bathLine(figure, place, hit.time);
  return {};
}

} // namespace chronodrome::ui::story
