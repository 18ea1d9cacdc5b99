// Chronodrome, GPL-3.0-or-later.
#include <algorithm>

#include "pharmacology/flags.h"
#include "results/fit_units.h"
#include "ui/answer/paint.h"
#include "ui/look/number_text.h"
#include "ui/report/sections.h"
#include "ui/report/words.h"

namespace chronodrome::ui::report {
namespace {

using session::FittedCurve;
using session::SessionResult;

QString fitName(const FittedCurve& curve) {
  QString text = look::measureText(curve.measure);
  if (curve.fit.likelihood == "censored") text += QStringLiteral(", with bounds (censored)");
  return text;
}

QString preparationText(const document::Preparation& one) {
  QStringList parts;
  if (!one.label.empty()) parts.append(plain(one.label));
  if (!one.species.empty()) parts.append(plain(one.species));
  if (!one.tissue.empty()) parts.append(plain(one.tissue));
  return parts.isEmpty() ? QStringLiteral("a preparation without a label") : parts.join(QStringLiteral(", "));
}

const protocol::Curve* curveOf(const SessionResult& result, int number) {
  for (const auto& curve : result.plan.curves) {
    if (curve.number == number) return &curve;
  }
  return nullptr;
}

/// Unit at the head of a group: `rate RA, beats/min`.
QString groupText(const response::Response& row) {
  const QString unit = look::unitText(row.unit);
  return look::measureText(row.measure) +
         (unit.isEmpty() ? QStringLiteral(", share") : QStringLiteral(", ") + unit);
}

QString withoutUnit(const response::Response& row) {
  if (row.value) return valueText(row);
  if (!row.limit) return QStringLiteral("–");
  return (row.limit_side == "at_least" ? QStringLiteral("≥ ") : QStringLiteral("≤ ")) +
         look::plainText(*row.limit);
}

void addResponseTable(Content& content, const SessionResult& result, const protocol::Curve& curve) {
  Table table;
  table.columns = {{QStringLiteral("concentration"), true}, {QStringLiteral("value ± SEM"), true},
                   {QStringLiteral("n\u00A0beats"), true},  {QStringLiteral("window,\u00A0s"), true},
                   {QStringLiteral("window"), true},        {QStringLiteral("status"), false}};
  std::string measure;
  for (const auto& row : result.responses.rows) {
    if (row.curve != curve.number) continue;
    if (row.measure != measure) table.rows.push_back({{groupText(row)}, true});
    measure = row.measure;
    const bool timed = row.window_end > row.window_start;
    QString status = look::statusText(row.status);
    if (!row.flags.empty()) status += QStringLiteral(" †");
    table.rows.push_back(
        {{row.concentration.value() == 0.0 ? QStringLiteral("control")
                                           : look::concentrationText(row.concentration),
          withoutUnit(row), QString::number(row.n_beats),
          timed ? secondsText(row.window_start) + QStringLiteral(" to ") + secondsText(row.window_end)
                : QStringLiteral("–"),
          timed ? stretchText(row.window_start, row.window_end) : QStringLiteral("–"), status},
         false});
  }
  content.blocks.emplace_back(std::move(table));
}

void addRemarks(Content& content, const SessionResult& result) {
  std::vector<std::pair<QString, QString>> remarks;
  for (const auto& row : result.responses.rows) {
    for (const auto& flag : row.flags) {
      const QString text = plain(flag);
      const QString place = (row.concentration.value() == 0.0 ? QStringLiteral("control")
                                                              : look::concentrationText(row.concentration));
      const QString key = look::measureText(row.measure) + QStringLiteral(", curve ") +
                          QString::number(row.curve) + QStringLiteral(", ");
      remarks.emplace_back(key + place, text);
    }
  }
  if (remarks.empty()) return;
  content.blocks.emplace_back(Heading{2, QStringLiteral("† Remarks on single responses")});
  Table table;
  table.columns = {{QStringLiteral("response"), false}, {QStringLiteral("remark"), false}};
  for (const auto& remark : remarks)
    table.rows.push_back({{remark.first, remark.second}, false});
  content.blocks.emplace_back(std::move(table));
}

void addParameterTable(Content& content, const SessionResult& result) {
  Table table;
  table.columns = {
      {QStringLiteral("parameter"), false},     {QStringLiteral("estimate"), true},
      {QStringLiteral("unit"), false},          {QStringLiteral("95\u00A0%\u00A0interval"), true},
      {QStringLiteral("interval from"), false}, {QStringLiteral("n"), true}};
  for (const auto& curve : result.curves) {
    table.rows.push_back({{QStringLiteral("curve ") + curveName(curve.curve, curve.agent, curve.background) +
                           QStringLiteral(" – ") + fitName(curve) + QStringLiteral(" – model ") +
                           plain(curve.fit.model).replace(QLatin1Char('_'), QLatin1Char(' '))},
                          true});
    const auto add = [&](const pharmacology::NamedEstimate& one) {
      const bool is_ec50 = one.name == "ec50_mol_per_l";
      const std::string unit = results::unit_of_parameter(result, curve, one.name);
      const auto number = [](double value) { return look::concentrationText(Molar(value)); };
      QString estimate = look::estimateText(one.value);
      QString interval = look::intervalText(one.value);
      if (is_ec50 && one.value.estimate) {
        estimate = number(*one.value.estimate);
        interval = one.value.ci_low && one.value.ci_high
                       ? number(*one.value.ci_low) + QStringLiteral(" to ") + number(*one.value.ci_high)
                   : one.value.ci_low  ? QStringLiteral("at least ") + number(*one.value.ci_low)
                   : one.value.ci_high ? QStringLiteral("at most ") + number(*one.value.ci_high)
                                       : QStringLiteral("not bounded");
      }
      table.rows.push_back(
          {{look::parameterText(one.name), estimate, is_ec50 ? QString() : look::unitText(unit),
            interval.isEmpty() ? QStringLiteral("–") : interval,
            is_ec50 && one.value.estimate ? QStringLiteral("from pEC50") : look::methodText(one.value),
            QString::number(curve.fit.n_points)},
           false});
    };
    for (const auto& one : curve.fit.parameters)
      add(one);
    for (const auto& one : curve.fit.derived)
      add(one);
  }
  content.blocks.emplace_back(std::move(table));
}

} // namespace

void addMainResult(Content& content, const SessionResult& result) {
  content.blocks.emplace_back(Heading{1, QStringLiteral("Main result")});
  if (result.curves.empty()) {
    content.blocks.emplace_back(Paragraph{
        QStringLiteral("The drug log holds no concentration-response curve, so nothing was fitted."),
        Tone::normal});
    return;
  }
  content.blocks.emplace_back(Paragraph{
      QStringLiteral("One preparation (") + preparationText(result.session.preparation) +
          QStringLiteral(
              "): what follows describes it and says nothing of a population. Limits are 95\u00A0%. "
              "Where the data give only a bound, the bound stands instead of a value."),
      Tone::normal});
  Bullets bullets;
  for (const auto& curve : result.curves) {
    bullets.items.push_back({QStringLiteral("Curve ") +
                                 curveName(curve.curve, curve.agent, curve.background) +
                                 QStringLiteral(", ") + fitName(curve) + QStringLiteral(": "),
                             fitSentence(result, curve)});
  }
  content.blocks.emplace_back(std::move(bullets));
}

void addResponses(Content& content, const SessionResult& result) {
  content.blocks.emplace_back(Heading{1, QStringLiteral("Responses")});
  if (result.responses.rows.empty()) {
    content.blocks.emplace_back(Paragraph{QStringLiteral("No step was measured."), Tone::normal});
    return;
  }
  content.blocks.emplace_back(Paragraph{
      QStringLiteral("The value of each measure on the plateau of each step, as in responses.csv. SEM is "
                     "over beats, corrected for the correlation of neighbours; it is never an n of "
                     "preparations. Concentrations are nominal. † has a remark below."),
      Tone::quiet});
  std::vector<int> numbers;
  for (const auto& row : result.responses.rows) {
    if (std::find(numbers.begin(), numbers.end(), row.curve) == numbers.end()) numbers.push_back(row.curve);
  }
  for (const int number : numbers) {
    if (const auto* curve = curveOf(result, number)) {
      content.blocks.emplace_back(
          Heading{2, QStringLiteral("Curve ") + curveName(number, curve->agent, curve->background)});
      addResponseTable(content, result, *curve);
    }
  }
  addRemarks(content, result);
}

void addCurves(Content& content, const SessionResult& result) {
  if (result.curves.empty()) return;
  content.blocks.emplace_back(Heading{1, QStringLiteral("Concentration-response curves")});
  Figures row;
  const QSize size(kContentWidth / 2 - 8, 258);
  const auto* all = &result;
  const auto flush = [&] {
    if (!row.figures.empty()) content.blocks.emplace_back(std::move(row));
    row = {};
  };
  for (const auto& curve : result.curves) {
    if (curve.fit.likelihood == "censored") continue; // the same points; the table below holds its numbers
    const int number = curve.curve;
    const std::string measure = curve.measure;
    const QString name = QStringLiteral("Curve ") + curveName(number, curve.agent, curve.background) +
                         QStringLiteral(", ") + look::measureText(measure);
    row.figures.push_back({size, name, QStringLiteral("Concentration-response: ") + name,
                           [all, size, number, measure](QCPPainter& painter) {
                             answer::paintCurve(painter, size, *all, number, measure,
                                                look::Theme::of(look::Mode::paper));
                           }});
    if (row.figures.size() == 2) flush();
  }
  flush();
  content.blocks.emplace_back(Heading{2, QStringLiteral("Parameters")});
  content.blocks.emplace_back(Paragraph{
      QStringLiteral(
          "n is the number of responses that entered. An estimate is the least-squares optimum; where its "
          "interval is open on a side, read the bound and not the estimate."),
      Tone::quiet});
  addParameterTable(content, result);
}

void addFlags(Content& content, const SessionResult& result) {
  content.blocks.emplace_back(Heading{1, QStringLiteral("What weakens these numbers")});
  Bullets bullets;
  for (const auto& meaning : pharmacology::flag_meanings()) {
    QStringList places;
    for (const auto& curve : result.curves) {
      if (!curve.fit.has_flag(meaning.flag)) continue;
      places.append(fitName(curve) + QStringLiteral(" (curve ") + QString::number(curve.curve) +
                    QLatin1Char(')'));
    }
    if (places.isEmpty()) continue;
    bullets.items.push_back({flagWord(std::string(meaning.flag)) + QStringLiteral(" – "),
                             places.join(QStringLiteral("; ")) + QStringLiteral(". It means: ") +
                                 plain(meaning.meaning) + QStringLiteral(". What to do: ") +
                                 plain(meaning.advice) + QLatin1Char('.')});
  }
  if (bullets.items.empty()) {
    const auto remarked = std::count_if(result.responses.rows.begin(), result.responses.rows.end(),
                                        [](const auto& row) { return !row.flags.empty(); });
    QString text = QStringLiteral("No fit carries a flag.");
    if (remarked > 0) text += QStringLiteral(" Responses with a remark (†, above): %1.").arg(remarked);
    content.blocks.emplace_back(Paragraph{text, Tone::normal});
    return;
  }
  content.blocks.emplace_back(std::move(bullets));
}

} // namespace chronodrome::ui::report
