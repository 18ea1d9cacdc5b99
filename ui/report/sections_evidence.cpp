// Chronodrome, GPL-3.0-or-later.
#include <algorithm>

#include "results/report_facts.h"
#include "session/exclusions.h"
#include "ui/evidence/paint.h"
#include "ui/look/number_text.h"
#include "ui/report/sections.h"
#include "ui/report/words.h"

namespace chronodrome::ui::report {
namespace {

using session::SessionResult;

/// Episodes that a reader still reads; more are counted and left to rhythm.csv.
constexpr std::size_t kMostEpisodes = 40;

QString stepName(Molar concentration) {
  return concentration.value() == 0.0 ? QStringLiteral("control") : look::concentrationText(concentration);
}

QString channelText(const std::string& channel) {
  return channel.empty() ? QStringLiteral("all") : plain(channel);
}

/// Words of a user that may be missing.
QString orDash(const std::string& text) {
  return text.empty() ? QStringLiteral("–") : plain(text);
}

void addEpisodes(Content& content, const SessionResult& result) {
  Table table;
  table.columns = {{QStringLiteral("from,\u00A0s"), true},
                   {QStringLiteral("to,\u00A0s"), true},
                   {QStringLiteral("kind"), false},
                   {QStringLiteral("numbers of the rule"), false}};
  std::size_t passed_over = 0;
  for (const auto& episode : result.rhythm.episodes) {
    if (episode.kind == "regular") continue;
    if (table.rows.size() == kMostEpisodes) {
      ++passed_over;
      continue;
    }
    table.rows.push_back({{secondsText(episode.start), secondsText(episode.end), rhythmText(episode.kind),
                           detailText(episode.detail)},
                          false});
  }
  if (table.rows.empty()) return;
  content.blocks.emplace_back(Heading{2, QStringLiteral("Episodes other than regular")});
  content.blocks.emplace_back(std::move(table));
  if (passed_over > 0) {
    content.blocks.emplace_back(
        Paragraph{QStringLiteral("… and %1 more, in rhythm.csv.").arg(passed_over), Tone::normal});
  }
}

void addWindows(Content& content, const SessionResult& result) {
  if (result.session.windows.empty()) return;
  content.blocks.emplace_back(Heading{2, QStringLiteral("Windows placed by hand")});
  Table table;
  table.columns = {{QStringLiteral("curve"), true},    {QStringLiteral("concentration"), true},
                   {QStringLiteral("measure"), false}, {QStringLiteral("window,\u00A0s"), true},
                   {QStringLiteral("when"), false},    {QStringLiteral("who"), false},
                   {QStringLiteral("why"), false}};
  for (const auto& one : result.session.windows) {
    table.rows.push_back({{QString::number(one.curve), stepName(one.concentration),
                           one.measure.empty() ? QStringLiteral("all") : look::measureText(one.measure),
                           secondsText(one.start) + QStringLiteral(" to ") + secondsText(one.end),
                           orDash(one.when), orDash(one.who), orDash(one.why)},
                          false});
  }
  content.blocks.emplace_back(std::move(table));
}

void addCorrections(Content& content, const SessionResult& result) {
  if (result.session.review.empty()) return;
  content.blocks.emplace_back(Heading{2, QStringLiteral("Corrections")});
  Table table;
  table.columns = {{QStringLiteral("no."), true},        {QStringLiteral("what"), false},
                   {QStringLiteral("channel"), false},   {QStringLiteral("time,\u00A0s"), true},
                   {QStringLiteral("to,\u00A0s"), true}, {QStringLiteral("when"), false},
                   {QStringLiteral("who"), false},       {QStringLiteral("why"), false}};
  const auto time = [](const std::optional<Seconds>& at) {
    return at ? QString::number(at->value(), 'f', 4) : QStringLiteral("–");
  };
  for (const auto& one : result.session.review) {
    table.rows.push_back(
        {{QString::number(one.seq), plain(document::name_of(one.what)), channelText(one.channel),
          time(one.time), time(one.to_time), orDash(one.when), orDash(one.who), orDash(one.why)},
         false});
  }
  content.blocks.emplace_back(std::move(table));
}

void addExclusions(Content& content, const SessionResult& result) {
  const auto by_user = session::exclusions_of(result.session.review);
  content.blocks.emplace_back(Heading{2, QStringLiteral("Left out")});
  if (by_user.empty() && result.plan.excluded.empty()) {
    content.blocks.emplace_back(Paragraph{QStringLiteral("Nothing is excluded."), Tone::normal});
    return;
  }
  Table table;
  table.columns = {{QStringLiteral("from,\u00A0s"), true},
                   {QStringLiteral("to,\u00A0s"), true},
                   {QStringLiteral("channel"), false},
                   {QStringLiteral("by"), false}};
  for (const auto& one : by_user)
    table.rows.push_back({{secondsText(one.span.start), secondsText(one.span.end), channelText(one.channel),
                           QStringLiteral("correction")},
                          false});
  for (const auto& one : result.plan.excluded)
    table.rows.push_back(
        {{secondsText(one.start), secondsText(one.end), QStringLiteral("all"), QStringLiteral("drug log")},
         false});
  content.blocks.emplace_back(std::move(table));
}

} // namespace

void addTypicalBeats(Content& content, const SessionResult& result) {
  const auto excerpts = results::typical_beats(result);
  if (excerpts.empty()) return;
  content.blocks.emplace_back(Heading{1, QStringLiteral("Typical beats")});
  content.blocks.emplace_back(Paragraph{
      QStringLiteral("From the middle of the window that a value is read from, with the activations found "
                     "there. All excerpts of a curve have one time scale. The times lead back to the samples "
                     "of the recording."),
      Tone::quiet});
  const QSize size(kContentWidth,
                   44 + 66 * static_cast<int>(std::clamp<std::size_t>(result.channels.size(), 1, 8)));
  const auto* all = &result;
  for (const auto& excerpt : excerpts) {
    const Seconds start = excerpt.start;
    const Seconds end = excerpt.end;
    const QString caption = QStringLiteral("Curve %1, ").arg(excerpt.curve) +
                            stepName(excerpt.concentration) + QStringLiteral(": ") +
                            QString::number(start.value(), 'f', 3) + QStringLiteral(" s to ") +
                            QString::number(end.value(), 'f', 3) + QStringLiteral(" s (") +
                            look::timeText(start) + QStringLiteral("), in the window ") +
                            stretchText(excerpt.window_start, excerpt.window_end) + QLatin1Char('.');
    Figures figures;
    figures.figures.push_back({size, caption, QStringLiteral("Signals with activation marks. ") + caption,
                               [all, size, start, end](QCPPainter& painter) {
                                 evidence::paintTraces(painter, size, *all, start, end,
                                                       look::Theme::of(look::Mode::paper));
                               }});
    content.blocks.emplace_back(std::move(figures));
  }
}

void addRhythm(Content& content, const SessionResult& result) {
  content.blocks.emplace_back(Heading{1, QStringLiteral("Rhythm")});
  const auto sums = results::rhythm_sums(result);
  if (sums.empty()) {
    content.blocks.emplace_back(
        Paragraph{QStringLiteral("No electrical channel: rhythm was not judged."), Tone::normal});
    return;
  }
  content.blocks.emplace_back(Paragraph{
      QStringLiteral("By the rules whose thresholds stand under Settings. Episodes may overlap. Not looked "
                     "for: escape rhythms, premature beats, retrograde conduction, pre-excitation, paced "
                     "beats, ventricular tachycardia or fibrillation."),
      Tone::quiet});
  Table table;
  table.columns = {{QStringLiteral("kind"), false},
                   {QStringLiteral("episodes"), true},
                   {QStringLiteral("total"), true},
                   {QStringLiteral("longest"), true},
                   {QStringLiteral("first at"), true}};
  for (const auto& sum : sums)
    table.rows.push_back({{rhythmText(sum.kind), QString::number(sum.episodes), look::durationText(sum.total),
                           look::durationText(sum.longest), look::timeText(sum.first_start)},
                          false});
  content.blocks.emplace_back(std::move(table));
  addEpisodes(content, result);
}

void addEdits(Content& content, const SessionResult& result) {
  content.blocks.emplace_back(Heading{1, QStringLiteral("Corrections, windows and exclusions")});
  if (result.session.review.empty() && result.session.windows.empty())
    content.blocks.emplace_back(
        Paragraph{QStringLiteral("No mark was corrected and no window was placed by hand."), Tone::normal});
  addCorrections(content, result);
  addWindows(content, result);
  addExclusions(content, result);
}

} // namespace chronodrome::ui::report
