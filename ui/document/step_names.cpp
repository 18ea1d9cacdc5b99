// Chronodrome, GPL-3.0-or-later.
#include "ui/document/step_names.h"

#include "ui/look/number_text.h"

namespace chronodrome::ui {
namespace {

using document::CorrectionKind;

QString timeOf(const std::optional<Seconds>& time) {
  return look::timeText(time.value_or(Seconds(0.0)), 3); // marks are placed to the millisecond
}

QString stretchStep(const QString& verb, const document::Correction& correction) {
  const QString on = correction.channel.empty() ? QStringLiteral("all channels")
                                                : QString::fromStdString(correction.channel);
  return QStringLiteral("%1 %2 to %3 on %4")
      .arg(verb, timeOf(correction.time), timeOf(correction.to_time), on);
}

} // namespace

QString stepNameOf(const document::Correction& correction) {
  const QString on = QString::fromStdString(correction.channel);
  const QString at = timeOf(correction.time);
  switch (correction.what) {
  case CorrectionKind::add:
    return QStringLiteral("add activation on %1 at %2").arg(on, at);
  case CorrectionKind::remove:
    return QStringLiteral("delete activation on %1 at %2").arg(on, at);
  case CorrectionKind::move:
    return QStringLiteral("move activation on %1 from %2 to %3").arg(on, at, timeOf(correction.to_time));
  case CorrectionKind::exclude:
    return stretchStep(QStringLiteral("exclude"), correction);
  case CorrectionKind::include:
    return stretchStep(QStringLiteral("include"), correction);
  case CorrectionKind::retype:
    return QStringLiteral("change kind of activation on %1 at %2").arg(on, at);
  case CorrectionKind::redetect:
    return QStringLiteral("find activations on %1 again").arg(on);
  }
  return QStringLiteral("correction");
}

QString windowStepName(const QString& verb, Molar concentration, const std::string& measure) {
  const QString step =
      concentration == Molar(0.0) ? QStringLiteral("control") : look::concentrationText(concentration);
  const QString of = measure.empty()
                         ? QStringLiteral("all measures")
                         : QString::fromStdString(measure).replace(QLatin1Char(':'), QLatin1Char(' '));
  return QStringLiteral("%1 window, %2, %3").arg(verb, step, of);
}

} // namespace chronodrome::ui
