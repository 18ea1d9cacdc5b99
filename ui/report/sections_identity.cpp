// Chronodrome, GPL-3.0-or-later.
#include <algorithm>

#include "base/number_text.h"
#include "ui/look/number_text.h"
#include "ui/report/sections.h"
#include "ui/report/words.h"
#include "ui/story/paint.h"

namespace chronodrome::ui::report {
namespace {

using session::SessionResult;

QString bytesText(std::uint64_t bytes) {
  return QString::number(bytes) + QStringLiteral(" bytes");
}

/// A number as the session states it: no digit more.
QString asStated(double value, const char* unit) {
  return QString::fromStdString(chronodrome::number_text(value)) + QChar(0x00A0) + QString::fromUtf8(unit);
}

QString animalText(const document::Preparation& one) {
  QStringList parts;
  if (!one.animal.empty()) parts.append(plain(one.animal));
  if (!one.sex.empty()) parts.append(plain(one.sex));
  if (one.mass_g) parts.append(asStated(*one.mass_g, "g"));
  return parts.isEmpty() ? QStringLiteral("not stated") : parts.join(QStringLiteral(", "));
}

QString bathText(const document::Preparation& one) {
  QStringList parts;
  if (one.bath_volume_ml) parts.append(asStated(*one.bath_volume_ml, "mL"));
  if (one.arrival_delay > Seconds(0.0))
    parts.append(look::durationText(one.arrival_delay) + QStringLiteral(" from the tap to the tissue"));
  return parts.isEmpty() ? QStringLiteral("not stated") : parts.join(QStringLiteral(", "));
}

QString doseText(const protocol::Event& event) {
  if (event.concentration) return look::concentrationText(*event.concentration);
  if (event.stock && event.volume_ml)
    return asStated(*event.volume_ml, "mL") + QStringLiteral(" of ") + look::concentrationText(*event.stock);
  return {};
}

} // namespace

void addIdentity(Content& content, const SessionResult& result) {
  const auto& one = result.session.preparation;
  Facts facts;
  facts.rows = {{QStringLiteral("Preparation"), statedOr(one.label)},
                {QStringLiteral("Species, tissue"),
                 statedOr(one.species) + QStringLiteral(", ") + statedOr(one.tissue)},
                {QStringLiteral("Temperature"),
                 one.temperature_c ? asStated(*one.temperature_c, "°C") : QStringLiteral("not stated")},
                {QStringLiteral("Date"), statedOr(one.date)},
                {QStringLiteral("Operator"), statedOr(one.operator_name)},
                {QStringLiteral("Group"), statedOr(one.group)},
                {QStringLiteral("Animal"), animalText(one)},
                {QStringLiteral("Bath"), bathText(one)}};
  if (!one.notes.empty()) facts.rows.emplace_back(QStringLiteral("Notes"), plain(one.notes));
  for (const auto& file : result.recording->files) {
    facts.rows.emplace_back(QStringLiteral("Recording"), plain(file.path) + QStringLiteral(" (") +
                                                             plain(file.kind) + QStringLiteral(", ") +
                                                             bytesText(file.bytes) + QLatin1Char(')'));
    facts.rows.emplace_back(QStringLiteral("SHA-256"), plain(file.sha256));
  }
  facts.rows.emplace_back(QStringLiteral("Length"),
                          look::durationText(result.recording->duration) + QStringLiteral(" (") +
                              secondsText(result.recording->duration) + QStringLiteral(" s)") +
                              (result.recording->clock_start
                                   ? QStringLiteral(", from ") + plain(*result.recording->clock_start)
                                   : QString()));
  content.blocks.emplace_back(std::move(facts));
}

void addProtocol(Content& content, const SessionResult& result) {
  content.blocks.emplace_back(Heading{1, QStringLiteral("Protocol")});
  if (result.protocol.events.empty()) {
    content.blocks.emplace_back(Paragraph{QStringLiteral("No events are logged."), Tone::normal});
    return;
  }
  content.blocks.emplace_back(
      Paragraph{result.protocol.file.empty()
                    ? QStringLiteral("From the annotations of the recording. Times are of the log; an agent "
                                     "reaches the tissue later by the delay stated above.")
                    : QStringLiteral("From ") + plain(result.protocol.file) +
                          QStringLiteral(". Times are of the log; an agent reaches the tissue later by the "
                                         "delay stated above."),
                Tone::quiet});
  Table table;
  table.columns = {{QStringLiteral("time"), true},   {QStringLiteral("time,\u00A0s"), true},
                   {QStringLiteral("event"), false}, {QStringLiteral("agent"), false},
                   {QStringLiteral("bath"), true},   {QStringLiteral("note"), false}};
  for (const auto& event : result.protocol.events) {
    table.rows.push_back({{look::timeText(event.time), secondsText(event.time),
                           plain(protocol::name_of(event.kind)).replace(QLatin1Char('_'), QLatin1Char(' ')),
                           plain(event.agent), doseText(event), plain(event.note)},
                          false});
  }
  content.blocks.emplace_back(withoutEmptyColumns(std::move(table)));
}

void addStory(Content& content, const SessionResult& result) {
  content.blocks.emplace_back(Heading{1, QStringLiteral("The whole recording")});
  const int rows = static_cast<int>(result.session.measures.size());
  const QSize size(kContentWidth, 112 + 66 * std::clamp(rows, 2, 7));
  const auto* all = &result;
  Figures figures;
  figures.figures.push_back(
      {size,
       QStringLiteral("Bath concentration, each measure over time with the windows that its values are read "
                      "from, and the rhythm. Times from the start of the recording."),
       QStringLiteral("Bath concentration, measures and rhythm over the whole recording"),
       [all, size](QCPPainter& painter) {
         story::paintStory(painter, size, *all, look::Theme::of(look::Mode::paper));
       }});
  content.blocks.emplace_back(std::move(figures));
}

} // namespace chronodrome::ui::report
