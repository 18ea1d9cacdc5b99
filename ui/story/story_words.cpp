// Chronodrome, GPL-3.0-or-later.
#include "ui/story/story_words.h"

#include <array>
#include <string_view>

#include "ui/look/number_text.h"

namespace chronodrome::ui::story {
namespace {

struct Kind {
  std::string_view name;
  const char* words;
  const char* brief;
  RhythmLook look;
};

constexpr std::array<Kind, 21> kKinds = {{
    {"regular", "regular", "", {Pattern::none, Tone::quiet, false}},
    {"first_degree_av_block", "first-degree AV block", "1st degree", {Pattern::level, Tone::quiet, false}},
    {"wenckebach", "Wenckebach", "Wenckebach", {Pattern::rising, Tone::caution, false}},
    {"second_degree_fixed",
     "second degree, fixed delay",
     "2nd degree",
     {Pattern::upright, Tone::caution, false}},
    {"two_to_one", "2:1 block", "2:1", {Pattern::upright, Tone::caution, false}},
    {"high_degree_av_block", "high-degree AV block", "high degree", {Pattern::squared, Tone::caution, false}},
    {"complete_av_block", "complete AV block", "complete", {Pattern::crossed, Tone::fault, false, 3.5}},
    {"junctional_escape", "junctional escape", "escape", {Pattern::level, Tone::caution, false}},
    {"ventricular_escape", "ventricular escape", "escape", {Pattern::level, Tone::caution, false}},
    {"premature_atrial", "premature atrial", "premature", {Pattern::solid, Tone::caution, true}},
    {"premature_ventricular", "premature ventricular", "premature", {Pattern::solid, Tone::caution, true}},
    {"sinus_pause", "pause", "pause", {Pattern::solid, Tone::caution, true}},
    {"arrest", "arrest", "arrest", {Pattern::solid, Tone::fault, true}},
    {"retrograde", "retrograde", "retrograde", {Pattern::falling, Tone::caution, false}},
    {"preexcitation", "preexcitation", "preexcited", {Pattern::falling, Tone::caution, false}},
    {"ventricular_tachycardia",
     "ventricular tachycardia",
     "tachycardia",
     {Pattern::solid, Tone::fault, true}},
    {"ventricular_fibrillation",
     "ventricular fibrillation",
     "fibrillation",
     {Pattern::solid, Tone::fault, true}},
    {"paced", "paced", "paced", {Pattern::upright, Tone::quiet, false}},
    {"undetermined", "undetermined", "undetermined", {Pattern::falling, Tone::quiet, false}},
    {"unreadable", "unreadable", "unreadable", {Pattern::crossed, Tone::quiet, false}},
    {session::kMixedRhythm, "changing rhythm", "changing", {Pattern::falling, Tone::caution, false}},
}};

const Kind* kindNamed(const std::string& name) {
  for (const auto& kind : kKinds) {
    if (kind.name == name) return &kind;
  }
  return nullptr;
}

QString spaced(const std::string& word) {
  return QString::fromStdString(word).replace(QLatin1Char('_'), QLatin1Char(' '));
}

QString wordsOf(const std::string& kind) {
  const Kind* known = kindNamed(kind);
  return known ? QString::fromUtf8(known->words) : spaced(kind);
}

} // namespace

RhythmLook lookOf(const std::string& kind) {
  const Kind* known = kindNamed(kind);
  return known ? known->look : RhythmLook{Pattern::falling, Tone::quiet, false};
}

QStringList blockWords(const session::RhythmBlock& block) {
  const Kind* known = kindNamed(block.kind);
  const QString words = wordsOf(block.kind);
  const QString brief = known ? QString::fromUtf8(known->brief) : words;
  QStringList all;
  if (!block.ratio.empty() && block.kind != "two_to_one") {
    const QString ratio = QString::fromStdString(block.ratio);
    all << (block.is_one_ratio ? words + QLatin1Char(' ') + ratio
                               : words + QStringLiteral(", mostly ") + ratio);
  }
  all << words;
  if (!brief.isEmpty() && brief != words) all << brief;
  if (!block.ratio.empty() && brief == words) all << QString::fromStdString(block.ratio);
  return all;
}

QString episodeText(const rhythm::Episode& episode) {
  QString text = wordsOf(episode.kind) + QStringLiteral(", ") + spanText(episode.start, episode.end);
  QString detail = spaced(episode.detail);
  detail.replace(QLatin1Char('='), QLatin1Char(' ')).replace(QLatin1Char(';'), QStringLiteral(", "));
  return detail.isEmpty() ? text : text + QStringLiteral(": ") + detail;
}

QString bandWord(response::Status status) {
  switch (status) {
  case response::Status::censored:
    return QStringLiteral("blocked");
  case response::Status::arrested:
    return QStringLiteral("arrest");
  case response::Status::unreadable:
    return QStringLiteral("unreadable");
  case response::Status::excluded:
    return QStringLiteral("left out");
  case response::Status::ok:
  case response::Status::not_steady:
    break;
  }
  return {};
}

QString spanText(Seconds start, Seconds end) {
  return look::timeText(start) + QStringLiteral(" to ") + look::timeText(end);
}

QString frameText(Seconds start, Seconds end) {
  return QStringLiteral("evidence ") + spanText(start, end) + QStringLiteral(", ") +
         look::durationText(end - start);
}

QString plateauText(const response::Response& response) {
  const QString agent = QString::fromStdString(response.agent);
  const QString where = response.concentration.value() > 0.0
                            ? agent + QLatin1Char(' ') + look::concentrationText(response.concentration)
                            : QStringLiteral("control before ") + agent;
  QString text = look::measureText(response.measure) + QStringLiteral(", ") + where + QStringLiteral(": ") +
                 look::responseText(response);
  const QString status = look::statusText(response.status);
  if (response.value) text += QStringLiteral(", ") + status;
  text += QStringLiteral(", ") + spanText(response.window_start, response.window_end);
  if (response.n_beats > 0) text += QStringLiteral(", %1 beats").arg(response.n_beats);
  if (response.is_placed) text += QStringLiteral(", placed by hand");
  return text;
}

QStringList draggedText(const response::Response& response) {
  return {spanText(response.window_start, response.window_end), look::responseText(response)};
}

QString rowUnitText(const session::Trend& trend) {
  if (trend.unit == "1") return QStringLiteral("over %1 beats").arg(session::kShareAttempts);
  return look::unitText(trend.unit);
}

QString bathText(const session::BathCourse& bath, Seconds time) {
  QStringList present;
  for (const auto& level : session::agents_at(bath, time))
    present << QString::fromStdString(level.agent) + QLatin1Char(' ') +
                   look::concentrationText(level.concentration);
  return present.join(QStringLiteral(" + "));
}

QString pointText(const session::Trend& trend, const session::TrendPoint& point) {
  QString text =
      look::measureText(trend.measure) + QLatin1Char(' ') + look::withUnit(point.value, trend.unit);
  if (point.state == session::PointState::excluded) text += QStringLiteral(" (left out)");
  if (point.state == session::PointState::flagged) text += QStringLiteral(" (flagged)");
  return text;
}

QString lostText(const session::LostStretch& stretch) {
  QString text = stretch.is_excluded ? QStringLiteral("left out ") : QStringLiteral("cannot be read ");
  text += spanText(stretch.span.start, stretch.span.end);
  if (!stretch.reason.empty()) text += QStringLiteral(": ") + spaced(stretch.reason);
  return text;
}

} // namespace chronodrome::ui::story
