// Chronodrome, GPL-3.0-or-later.
#include "ui/evidence/read_out.h"

#include "ui/evidence/words.h"
#include "ui/look/number_text.h"

namespace chronodrome::ui::evidence {
namespace {

using session::ChannelReading;
using session::CursorReading;
using session::PathwayReading;

/// Filtered where there is such a value: then the head says so.
std::optional<double> shown(const ChannelReading& channel) {
  return channel.filtered ? channel.filtered : channel.raw;
}

QString valueText(const std::optional<double>& value) {
  return value ? look::plainText(*value) : QStringLiteral("no sample");
}

QString headOf(const ChannelReading& channel) {
  QString head = QString::fromStdString(channel.channel);
  const QString unit = look::unitText(channel.unit);
  if (!unit.isEmpty()) head += QStringLiteral(", ") + unit;
  return head + (channel.filtered ? QStringLiteral(", filtered") : QStringLiteral(", raw"));
}

QString delayText(const PathwayReading& pathway) {
  if (pathway.delay) {
    QString text = look::plainText(in_milliseconds(*pathway.delay), 1.0);
    if (pathway.state == conduction::DelayState::retrograde) text += QStringLiteral(" retrograde");
    return pathway.is_ambiguous ? text + QStringLiteral(" ?") : text;
  }
  if (!pathway.from_time && !pathway.to_time) return {};
  return pathway.state == conduction::DelayState::blocked ? QStringLiteral("blocked")
                                                          : QStringLiteral("not paired");
}

QString bathText(const CursorReading& reading) {
  QStringList agents;
  for (const auto& level : reading.bath)
    agents << QString::fromStdString(level.agent) + QLatin1Char(' ') +
                  look::concentrationText(level.concentration);
  return agents.isEmpty() ? QStringLiteral("no agent") : agents.join(QStringLiteral(" + "));
}

QString sinceText(const CursorReading& reading) {
  if (!reading.since_event) return {};
  const QString after =
      reading.last_event->kind == protocol::EventKind::addition
          ? QStringLiteral(" after the addition")
          : QStringLiteral(" after ") + QString::fromStdString(protocol::name_of(reading.last_event->kind));
  return look::durationText(*reading.since_event) + after;
}

QString clockText(const CursorReading& reading) {
  if (!reading.clock) return {};
  QString text = look::timeText(*reading.clock, 1);
  if (*reading.clock < Seconds(3600.0)) text.prepend(QStringLiteral("0:"));
  return QStringLiteral("clock ") + text;
}

/// `262.1 before, 259.8 after`: intervals about the nearest mark.
QString intervalsText(const ChannelReading& channel) {
  if (!channel.nearest) return {};
  const auto part = [](const std::optional<Seconds>& interval) {
    return interval ? look::plainText(in_milliseconds(*interval), 1.0) : QStringLiteral("–");
  };
  return part(channel.nearest->interval_before) + QStringLiteral(" | ") +
         part(channel.nearest->interval_after);
}

QStringList cursorRow(const QString& name, const CursorReading& reading) {
  QStringList row{name + QLatin1Char(' ') + cursorTimeText(reading.time)};
  for (const auto& pathway : reading.pathways)
    row << delayText(pathway);
  row << bathText(reading);
  for (const auto& channel : reading.channels)
    row << valueText(shown(channel));
  return row;
}

QStringList differenceRow(const CursorReading& reference, const CursorReading& second) {
  const session::CursorDifference difference = session::difference_of(reference, second);
  QString times = QStringLiteral("difference ") + millisecondsText(difference.time);
  if (difference.rate)
    times += QStringLiteral(" = ") + look::plainText(difference.rate->value()) + QStringLiteral(" beats/min");
  QStringList row{times};
  for (std::size_t p = 0; p < second.pathways.size(); ++p)
    row << QString();
  row << sinceText(second);
  for (std::size_t c = 0; c < difference.channels.size(); ++c) {
    const bool filtered = second.channels[c].filtered && reference.channels[c].filtered;
    const auto& step = filtered ? difference.channels[c].filtered : difference.channels[c].raw;
    row << (step ? look::plainText(*step) : QString());
  }
  return row;
}

QStringList intervalRow(const CursorReading& reading, bool withSince) {
  QStringList row{QStringLiteral("nearest mark: intervals, ms")};
  for (std::size_t p = 0; p < reading.pathways.size(); ++p)
    row << QString();
  QStringList bath;
  for (const QString& text : {withSince ? sinceText(reading) : QString(), clockText(reading)}) {
    if (!text.isEmpty()) bath << text;
  }
  row << bath.join(QStringLiteral(", "));
  for (const auto& channel : reading.channels)
    row << intervalsText(channel);
  return row;
}

} // namespace

QString ReadOut::text() const {
  QStringList lines{heads.join(QLatin1Char('\t'))};
  for (const QStringList& row : rows)
    lines << row.join(QLatin1Char('\t'));
  return lines.join(QLatin1Char('\n')) + QLatin1Char('\n');
}

ReadOut readOutOf(const std::optional<CursorReading>& reference, const std::optional<CursorReading>& second) {
  ReadOut out;
  const auto& leading = second ? second : reference;
  if (!leading) return out;
  out.heads << QStringLiteral("time, min:s");
  for (const auto& pathway : leading->pathways)
    out.heads << QString::fromStdString(pathway.pathway) + QStringLiteral(" delay, ms");
  out.heads << QStringLiteral("bath");
  for (const auto& channel : leading->channels)
    out.heads << headOf(channel);
  if (reference) out.rows << cursorRow(QStringLiteral("reference"), *reference);
  if (second) out.rows << cursorRow(QStringLiteral("second"), *second);
  if (reference && second) out.rows << differenceRow(*reference, *second);
  out.rows << intervalRow(*leading, !(reference && second));
  return out;
}

} // namespace chronodrome::ui::evidence
