// Chronodrome, GPL-3.0-or-later.
#include "results/curves_json.h"

#include "base/json_text.h"

namespace chronodrome::results {

namespace {

constexpr std::string_view kConcentration = "_mol_per_l";

bool is_concentration(const std::string& name) {
  return name.size() >= kConcentration.size() &&
         name.compare(name.size() - kConcentration.size(), kConcentration.size(), kConcentration) == 0;
}

void write_estimate(JsonText& json, const pharmacology::NamedEstimate& one) {
  const pharmacology::Estimate& value = one.value;
  const bool whole = !is_concentration(one.name);
  json.open_object(one.name).number("estimate", value.estimate);
  if (whole) json.number("se", value.se);
  json.number("ci_low", value.ci_low).number("ci_high", value.ci_high);
  if (whole) json.text("ci_method", value.ci_method);
  json.close_object();
}

void write_fit(JsonText& json, const LabelledFit& labelled) {
  const pharmacology::CurveFit& fit = labelled.fit;
  json.open_object();
  if (labelled.curve >= 0) {
    json.count("curve", static_cast<std::size_t>(labelled.curve));
  } else {
    json.number("curve", static_cast<double>(labelled.curve));
  }
  json.text("agent", labelled.agent).text("background", labelled.background);
  json.text("preparation", labelled.preparation).text("measure", labelled.measure);
  json.text("model", fit.model).text("likelihood", fit.likelihood).count("n_points", fit.n_points);
  json.open_object("parameters");
  for (const pharmacology::NamedEstimate& one : fit.parameters)
    write_estimate(json, one);
  json.close_object().open_object("derived");
  for (const pharmacology::NamedEstimate& one : fit.derived)
    write_estimate(json, one);
  json.close_object().open_object("fit");
  json.number("residual_sd", fit.residual_sd);
  json.number("df", static_cast<double>(fit.df)).number("rss", fit.rss).number("aicc", fit.aicc);
  json.truth("converged", fit.converged).close_object();
  json.open_list("flags");
  for (const std::string& flag : fit.flags)
    json.item(flag);
  json.close_list().close_object();
}

} // namespace

std::string curves_json(std::span<const LabelledFit> fits) {
  JsonText json;
  json.open_list();
  for (const LabelledFit& fit : fits)
    write_fit(json, fit);
  json.close_list();
  return json.take();
}

} // namespace chronodrome::results
