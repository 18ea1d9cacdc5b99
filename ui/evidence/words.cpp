// Chronodrome, GPL-3.0-or-later.
#include "ui/evidence/words.h"

#include <array>
#include <cmath>
#include <utility>

#include "ui/look/number_text.h"

namespace chronodrome::ui::evidence {
namespace {

using protocol::EventKind;

QString kindText(EventKind kind) {
  switch (kind) {
  case EventKind::addition:
    return QStringLiteral("addition");
  case EventKind::vehicle:
    return QStringLiteral("vehicle");
  case EventKind::antagonist:
    return QStringLiteral("antagonist");
  case EventKind::washout:
    return QStringLiteral("washout");
  case EventKind::pacing_start:
    return QStringLiteral("pacing begins");
  case EventKind::pacing_stop:
    return QStringLiteral("pacing ends");
  case EventKind::exclude_start:
    return QStringLiteral("exclusion begins");
  case EventKind::exclude_stop:
    return QStringLiteral("exclusion ends");
  case EventKind::note:
    return QStringLiteral("note");
  }
  return {};
}

} // namespace

QString lostText(const session::LostStretch& lost) {
  const QString reason = QString::fromStdString(lost.reason);
  if (lost.is_excluded)
    return reason.isEmpty() ? QStringLiteral("excluded") : QStringLiteral("excluded: ") + reason;
  static const std::array<std::pair<const char*, const char*>, 7> words{{{"gap", "gap"},
                                                                         {"saturation", "saturated"},
                                                                         {"flat", "flat line"},
                                                                         {"short", "too short to read"},
                                                                         {"step", "jump of the baseline"},
                                                                         {"noise", "noise"},
                                                                         {"stimulus", "stimulus"}}};
  for (const auto& [reason_key, text] : words) {
    if (lost.reason == reason_key) return QLatin1String(text);
  }
  return reason;
}

QString eventText(const protocol::Event& event) {
  const QString agent = QString::fromStdString(event.agent);
  if (event.kind == EventKind::note && !event.note.empty()) return QString::fromStdString(event.note);
  if ((event.kind == EventKind::addition || event.kind == EventKind::antagonist) && event.concentration)
    return agent + QLatin1Char(' ') + look::concentrationText(*event.concentration);
  return agent.isEmpty() ? kindText(event.kind) : kindText(event.kind) + QLatin1Char(' ') + agent;
}

QString shortEventText(const protocol::Event& event) {
  if ((event.kind == EventKind::addition || event.kind == EventKind::antagonist) && event.concentration)
    return look::concentrationText(*event.concentration);
  return kindText(event.kind);
}

QString plateauText(const session::PlateauWindow& window) {
  if (window.concentration == Molar(0.0)) return QStringLiteral("plateau of the control");
  return QStringLiteral("plateau ") + look::concentrationText(window.concentration);
}

QString channelText(const recording::Channel& channel) {
  const QString unit = look::unitText(channel.unit);
  const QString role = channel.role == recording::Role::other
                           ? QString()
                           : QString::fromStdString(recording::name_of(channel.role));
  if (role.isEmpty() || unit.isEmpty()) return role + unit;
  return role + QStringLiteral(", ") + unit;
}

QString acrossText(Seconds width) {
  const double s = width.value();
  QString text;
  if (s < 0.9995) {
    text = look::plainText(s * 1e3, s < 0.01 ? 1.0 : 10.0) + QStringLiteral(" ms");
  } else if (s < 59.95) {
    text = look::plainText(s, std::abs(s - std::round(s)) < 0.05 ? 10.0 : 1.0) + QStringLiteral(" s");
  } else {
    text = look::durationText(width);
    text.replace(QStringLiteral(" min 0 s"), QStringLiteral(" min"));
  }
  return text + QStringLiteral(" across");
}

QString cursorTimeText(Seconds time) {
  return look::timeText(time, 4);
}

QString millisecondsText(Seconds difference) {
  return look::plainText(in_milliseconds(difference), 1.0) + QChar(0x00A0) + QStringLiteral("ms");
}

} // namespace chronodrome::ui::evidence
