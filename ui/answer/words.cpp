// Chronodrome, GPL-3.0-or-later.
#include "ui/answer/words.h"

#include "pharmacology/flags.h"
#include "ui/look/number_text.h"

namespace chronodrome::ui::answer {
namespace {

using pharmacology::Estimate;
using session::CurveSeries;
using session::CurveView;
using session::ParameterRow;
using session::PlottedPoint;
using session::ResponseForm;

QString text(const std::string& words) {
  return QString::fromStdString(words);
}

QString sentence(QString words) {
  if (words.isEmpty()) return words;
  words.replace(0, 1, words.at(0).toUpper());
  return words.endsWith(QLatin1Char('.')) ? words : words + QLatin1Char('.');
}

bool isConcentration(const ParameterRow& row) {
  return row.unit == "mol/L";
}

/// One side of an interval missing where the other is there: the estimate is where the search ended, no more.
bool isBoundOnly(const Estimate& estimate) {
  return estimate.ci_low.has_value() != estimate.ci_high.has_value();
}

/// Neither side, although an interval was looked for.
bool isOpen(const Estimate& estimate) {
  return !estimate.ci_low && !estimate.ci_high && estimate.ci_method == "profile";
}

/// A limit alone has no error beside it that says its digits.
QString boundText(const Estimate& estimate, bool is_exponent) {
  const double bound = estimate.ci_low ? *estimate.ci_low : *estimate.ci_high;
  const QString side = estimate.ci_low ? QStringLiteral("at least ") : QStringLiteral("at most ");
  return side + (is_exponent ? look::plainText(bound, 0.1) : look::plainText(bound));
}

bool isExponent(const std::string& name) {
  return name.rfind("pec50", 0) == 0;
}

/// Neither limit nor error: the curve passes through all points.
bool hasNoScatter(const Estimate& estimate) {
  return estimate.estimate && !estimate.se && !estimate.ci_low && !estimate.ci_high &&
         estimate.ci_method.empty();
}

QString concentrationInterval(const Estimate& estimate) {
  if (estimate.ci_low && estimate.ci_high) {
    QString low = look::concentrationText(Molar(*estimate.ci_low));
    const QString high = look::concentrationText(Molar(*estimate.ci_high));
    // The unit once, where both sides have it.
    const QChar space(0x00A0);
    if (low.section(space, 1) == high.section(space, 1)) low = low.section(space, 0, 0);
    return low + QStringLiteral(" to ") + high;
  }
  if (estimate.ci_low) return QStringLiteral("at least ") + look::concentrationText(Molar(*estimate.ci_low));
  if (estimate.ci_high) return QStringLiteral("at most ") + look::concentrationText(Molar(*estimate.ci_high));
  return isOpen(estimate) ? QStringLiteral("not bounded") : QString();
}

QString withReason(const QString& what, const pharmacology::CurveFit& fit, std::string_view flag) {
  for (std::size_t i = 0; i < fit.flags.size() && i < fit.reasons.size(); ++i) {
    if (fit.flags[i] == flag) return what + QStringLiteral(": ") + text(fit.reasons[i]);
  }
  return what;
}

QString ofOpenSide(const pharmacology::CurveFit& fit, const Estimate& pec50) {
  namespace flags = pharmacology::flags;
  const QString bound = QStringLiteral("pEC50 ") + boundText(pec50, true);
  const bool above = pec50.ci_high.has_value();
  const auto flag = above ? flags::kUpperPlateauOpen : flags::kLowerPlateauOpen;
  if (!fit.has_flag(flag)) return bound;
  return bound + (above ? QStringLiteral(": the plateau at high concentration was not reached")
                        : QStringLiteral(": the plateau at low concentration was not reached"));
}

QString ofLocations(const pharmacology::CurveFit& fit, const QString& prefix) {
  QStringList parts;
  for (const pharmacology::NamedEstimate& one : fit.parameters) {
    if (one.name.rfind("pec50", 0) != 0) continue;
    const Estimate& value = one.value;
    if (isBoundOnly(value) && one.name == "pec50") return prefix + ofOpenSide(fit, value);
    QString part = look::parameterText(one.name) + QLatin1Char(' ');
    if (isBoundOnly(value)) {
      part += boundText(value, true);
    } else if (value.estimate && value.ci_low && value.ci_high) {
      part += look::estimateText(value) + QStringLiteral(" (") + look::intervalText(value) + QLatin1Char(')');
    } else if (hasNoScatter(value)) {
      part += look::estimateText(value) + QStringLiteral(" (no scatter, so no interval)");
    } else {
      part += QStringLiteral("cannot be estimated");
      if (one.name == "pec50" && !fit.reason.empty())
        part += QStringLiteral(". ") + sentence(text(fit.reason));
    }
    parts.push_back(part);
  }
  return parts.isEmpty() ? QString() : prefix + parts.join(QStringLiteral(", "));
}

} // namespace

QString formText(ResponseForm form) {
  switch (form) {
  case ResponseForm::absolute:
    return QStringLiteral("absolute");
  case ResponseForm::change_from_control:
    return QStringLiteral("change from control");
  case ResponseForm::percent_of_control:
    return QStringLiteral("% of control");
  }
  return {};
}

QString responseTitle(const CurveView& view) {
  const QString measure = look::measureText(view.measure);
  const QString unit = look::unitText(view.unit);
  const QString brackets = unit.isEmpty() ? QString() : QStringLiteral(" (%1)").arg(unit);
  switch (view.form) {
  case ResponseForm::absolute:
    return measure + brackets;
  case ResponseForm::change_from_control:
    return QStringLiteral("change of %1 from control%2").arg(measure, brackets);
  case ResponseForm::percent_of_control:
    return measure + QStringLiteral(" (% of control)");
  }
  return {};
}

QString concentrationTitle(const CurveView& view) {
  bool same = true;
  for (const CurveSeries& other : view.others)
    same = same && other.agent == view.chosen.agent;
  return same ? text(view.chosen.agent) + QStringLiteral(" in the bath")
              : QStringLiteral("bath concentration");
}

QString curveText(const CurveSeries& series) {
  QStringList others;
  for (const protocol::AgentLevel& level : series.background)
    others.push_back(text(level.agent) + QLatin1Char(' ') + look::concentrationText(level.concentration));
  const QString agent = text(series.agent);
  return others.isEmpty() ? agent : agent + QStringLiteral(" with ") + others.join(QStringLiteral(" + "));
}

QString curveText(const session::SessionResult& result, int curve) {
  CurveSeries named;
  for (const response::Response& row : result.responses.rows) {
    if (row.curve == curve) named.agent = row.agent;
  }
  for (const protocol::Curve& planned : result.plan.curves) {
    if (planned.number == curve) named.background = planned.background_agents;
  }
  return curveText(named);
}

QString answerText(const CurveView& view) {
  namespace flags = pharmacology::flags;
  const pharmacology::CurveFit& fit = view.chosen.fit;
  if (fit.model.empty()) return QStringLiteral("No fit.");
  if (fit.has_flag(flags::kDeclined))
    return sentence(withReason(QStringLiteral("Not fitted"), fit, flags::kDeclined));
  if (fit.has_flag(flags::kNoResponse)) {
    QString mean;
    for (const ParameterRow& row : view.parameters) {
      if (row.name == "basal" && !row.is_censored)
        mean = QStringLiteral("; mean %1 %2").arg(estimateCell(row), look::unitText(row.unit)).trimmed();
    }
    return sentence(withReason(QStringLiteral("No EC50"), fit, flags::kNoResponse) + mean);
  }
  if (fit.has_flag(flags::kNotConverged))
    return sentence(withReason(QStringLiteral("No answer"), fit, flags::kNotConverged));
  const QString locations = ofLocations(fit, {});
  if (!locations.isEmpty()) return locations;
  return fit.model == "linear" ? QStringLiteral("A straight line: it has no EC50.")
                               : QStringLiteral("A constant: it has no EC50.");
}

QString censoredText(const CurveView& view) {
  if (!view.chosen.censored) return {};
  const pharmacology::CurveFit& fit = *view.chosen.censored;
  namespace flags = pharmacology::flags;
  if (fit.has_flag(flags::kDeclined) && view.chosen.fit.has_flag(flags::kDeclined)) return {};
  const QString prefix = QStringLiteral("With the limits taken in: ");
  if (!fit.reason.empty() && !fit.find("pec50")->estimate) return prefix + text(fit.reason);
  return ofLocations(fit, prefix);
}

QString captionText(const CurveView& view) {
  QStringList parts;
  bool has_error = false, has_band = false, has_outside = false;
  for (const PlottedPoint& point : view.chosen.points)
    has_error = has_error || point.sem.has_value();
  for (const session::LinePiece& piece : view.chosen.line) {
    has_band = has_band || !piece.band.empty();
    has_outside = has_outside || !piece.is_inside;
  }
  if (has_error)
    parts << QStringLiteral("Bars, where larger than the mark: SEM over beats of this one preparation.");
  if (has_band) parts << QStringLiteral("Band: 95 % for the curve.");
  if (!view.chosen.ec50.empty()) parts << QStringLiteral("On the axis: EC50 with its 95 % interval.");
  if (has_outside) parts << QStringLiteral("Dashed: beyond the concentrations tested.");
  if (view.form != ResponseForm::absolute) parts << QStringLiteral("The control is taken as known.");
  return parts.join(QLatin1Char(' '));
}

QString stepText(Molar concentration) {
  return concentration.value() == 0.0 ? QStringLiteral("control") : look::concentrationText(concentration);
}

QString stepText(const PlottedPoint& point) {
  return stepText(point.concentration);
}

QString missingText(const PlottedPoint& point) {
  return look::statusText(point.status);
}

QString pointText(const CurveView& view, const PlottedPoint& point) {
  const QString unit = look::unitText(view.unit);
  const QString after = unit.isEmpty() ? QString() : QChar(0x00A0) + unit;
  QString value = look::statusText(point.status);
  if (point.value && point.sem)
    value = look::plainText(*point.value, *point.sem) + QStringLiteral(" ± ") +
            look::plainText(*point.sem, *point.sem) + after;
  else if (point.value)
    value = look::plainText(*point.value) + after;
  else if (point.bound)
    value = (point.is_at_least ? QStringLiteral("≥ ") : QStringLiteral("≤ ")) +
            look::plainText(*point.bound) + after;
  QStringList lines{stepText(point) + QStringLiteral(": ") + value};
  QString how = look::statusText(point.status);
  if (point.is_selected) how += QStringLiteral(", from selected beats");
  if (point.n_beats > 0) how += QStringLiteral(", %1 beats").arg(point.n_beats);
  lines << how;
  lines << look::timeText(point.window_start, 0) + QStringLiteral(" to ") +
               look::timeText(point.window_end, 0) +
               (point.is_placed ? QStringLiteral(", placed by hand") : QString());
  return lines.join(QLatin1Char('\n'));
}

QString parameterCell(const ParameterRow& row, const std::string& axisUnit) {
  QString name = look::parameterText(row.name);
  if (isConcentration(row)) return name;
  const QString unit = look::unitText(row.unit);
  if (!unit.isEmpty() && row.unit != axisUnit) name += QStringLiteral(", ") + unit;
  return row.is_censored ? name + QStringLiteral(" (with limits)") : name;
}

QString estimateCell(const ParameterRow& row) {
  if (isBoundOnly(row.value)) return QStringLiteral("bound only");
  if (isOpen(row.value) || !row.value.estimate) return QStringLiteral("open");
  return isConcentration(row) ? look::concentrationText(Molar(*row.value.estimate))
                              : look::estimateText(row.value);
}

QString intervalCell(const ParameterRow& row) {
  if (hasNoScatter(row.value)) return QStringLiteral("none");
  if (isConcentration(row)) return concentrationInterval(row.value);
  if (isBoundOnly(row.value)) return boundText(row.value, isExponent(row.name));
  return look::intervalText(row.value);
}

QString determinedCell(const ParameterRow& row) {
  if (row.is_censored) return QStringLiteral("with limits");
  if (isConcentration(row) && row.name.rfind("ec50", 0) == 0) return QStringLiteral("from pEC50");
  if (row.value.ci_method == "profile") return QStringLiteral("profile");
  if (hasNoScatter(row.value)) return QStringLiteral("no scatter");
  return look::methodText(row.value);
}

QString determinedText(const ParameterRow& row) {
  if (row.is_censored)
    return QStringLiteral("fit that also takes the responses known only as limits; standard error");
  if (hasNoScatter(row.value)) return QStringLiteral("the curve passes through all points: no interval");
  if (isConcentration(row) && row.name.rfind("ec50", 0) == 0)
    return QStringLiteral("estimate and limits of pEC50, as a concentration");
  return look::methodText(row.value);
}

} // namespace chronodrome::ui::answer
