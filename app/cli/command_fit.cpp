// Chronodrome, GPL-3.0-or-later.
#include <iostream>

#include "base/number_text.h"
#include "commands.h"
#include "intake/response_table.h"
#include "pharmacology/fit.h"
#include "result_tables.h"
#include "results/curves_json.h"

namespace chronodrome::cli {
namespace {

std::string model_words() {
  std::string words;
  for (const auto& meaning : pharmacology::model_meanings())
    words += (words.empty() ? "" : ", ") + std::string(meaning.name);
  return words;
}

session::FittedCurve fit_one(const intake::TableCurve& rows, pharmacology::Model model) {
  std::vector<pharmacology::CurvePoint> points;
  for (const auto& point : rows.points)
    points.push_back({point.concentration, point.response, point.weight});
  session::FittedCurve curve;
  curve.curve = rows.curve;
  curve.preparation = rows.preparation;
  curve.measure = "response";
  if (rows.antagonist > Molar(0.0))
    curve.background = "antagonist " + number_text(rows.antagonist.value()) + " M";
  curve.fit = pharmacology::fit_curve(points, model);
  return curve;
}

} // namespace

int fit(const FitWords& words) {
  const auto model = pharmacology::model_named(words.model);
  if (!model) {
    std::cerr << "chronodrome-cli: error: --model " << words.model
              << " is no model of this version; choose one of " << model_words() << "\n";
    return kWrongUsage;
  }
  const auto table = intake::read_response_table(words.table);
  if (!table) return refuse(table.error());
  for (const auto& warning : table->warnings)
    report(warning);
  std::vector<session::FittedCurve> curves;
  for (const auto& rows : table->curves)
    curves.push_back(fit_one(rows, *model));
  std::cout << (words.json ? results::curves_json(curves) : fits_text(curves));
  return kAllDone;
}

} // namespace chronodrome::cli
