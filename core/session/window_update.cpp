// Chronodrome, GPL-3.0-or-later.
// A plateau's window is dragged: one measure is read and fitted again, all else stays.
#include <algorithm>

#include "response/placed_windows.h"
#include "session/analysis.h"
#include "session/curves.h"
#include "session/response_inputs.h"

namespace chronodrome::session {
namespace {

using response::Responses;

/// `before`, with the rows of the one measure taken from `renewed`, in the places where they stood.
std::vector<response::Response> with_rows(std::vector<response::Response> before,
                                          const std::vector<response::Response>& renewed,
                                          const std::string& measure) {
  auto next = renewed.begin();
  for (auto& row : before) {
    if (row.measure == measure && next != renewed.end()) row = *next++;
  }
  return before;
}

bool is_main(const FittedCurve& curve) {
  return curve.fit.likelihood == "gaussian";
}

/// The fits of a whole analysis: main ones first, each part by curve and then by the measures' order. A
/// second fit may have come or gone with the window, so the order is made anew.
std::vector<FittedCurve> with_fits(const std::vector<FittedCurve>& before,
                                   const std::vector<FittedCurve>& renewed, const Responses& responses,
                                   const std::string& measure) {
  std::vector<FittedCurve> fits;
  for (const bool main : {true, false}) {
    const response::Response* last = nullptr;
    for (const auto& row : responses.rows) {
      const bool same = last != nullptr && last->curve == row.curve && last->measure == row.measure;
      last = &row;
      if (same) continue;
      const auto& source = row.measure == measure ? renewed : before;
      const auto found = std::find_if(source.begin(), source.end(), [&](const FittedCurve& fit) {
        return fit.curve == row.curve && fit.measure == row.measure && is_main(fit) == main;
      });
      if (found != source.end()) fits.push_back(*found);
    }
  }
  return fits;
}

/// Warnings of all windows, of whatever measure, in place of those of `result`: responses are the last stage
/// that warns.
void tell_of_windows(SessionResult& result) {
  const response::PlacedWindows placed(result.plan, result.session.windows, result.session.measures,
                                       result.recording->duration);
  result.warnings.resize(result.warnings.size() - result.responses.warnings.size());
  result.responses.warnings = placed.warnings();
  for (Warning warning : placed.warnings()) {
    warning.file = result.session.path;
    result.warnings.push_back(std::move(warning));
  }
}

} // namespace

Result<SessionResult> with_windows_of(const SessionInputs& inputs, const SessionResult& before,
                                      const std::string& measure) {
  const auto& measures = inputs.session.measures;
  if (std::find(measures.begin(), measures.end(), measure) == measures.end()) {
    return Error{ErrorCode::bad_usage,
                 inputs.session.path,
                 {},
                 "the session does not list the measure " + measure,
                 "add it to the session's measures"};
  }
  SessionResult result = before;
  result.session = inputs.session;
  result.session_sha256 = inputs.session_sha256;
  auto own = response_inputs(result, {measure});
  std::erase_if(own.placed, [&](const document::WindowChoice& choice) {
    return !choice.measure.empty() && choice.measure != measure;
  });
  auto renewed = response::compute(own, inputs.settings.response);
  if (!renewed) return renewed.error();
  tell_of_windows(result);
  result.responses.rows = with_rows(std::move(result.responses.rows), renewed->rows, measure);
  const auto fits =
      fit_curves(*renewed, inputs.session.preparation.label, inputs.settings.model, inputs.settings.fit, 0);
  result.curves = with_fits(before.curves, fits, result.responses, measure);
  return result;
}

} // namespace chronodrome::session
