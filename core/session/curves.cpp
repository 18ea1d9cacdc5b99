// Chronodrome, GPL-3.0-or-later.
#include "session/curves.h"

#include "base/parallel.h"
#include "pharmacology/censored_fit.h"
#include "pharmacology/hill_fit.h"

namespace chronodrome::session {
namespace {

using response::Response;
using response::Status;

/// The responses of one curve and measure, as the models take them.
struct CurveData {
  const Response* first = nullptr; ///< for the labels
  std::vector<pharmacology::CurvePoint> measured;
  std::vector<pharmacology::CensoredPoint> censored;
  bool has_selected = false;
};

std::vector<CurveData> gather(const response::Responses& responses) {
  std::vector<CurveData> curves;
  for (const Response& row : responses.rows) {
    const bool same = !curves.empty() && curves.back().first->curve == row.curve &&
                      curves.back().first->measure == row.measure;
    if (!same) {
      curves.emplace_back();
      curves.back().first = &row;
    }
    CurveData& data = curves.back();
    const bool measured = row.status == Status::ok || row.status == Status::not_steady;
    if (measured && row.value) {
      data.measured.push_back({row.concentration, *row.value, 1.0});
      data.has_selected = data.has_selected || row.is_selected;
    }
    const bool limited =
        (row.status == Status::censored || row.status == Status::arrested) && row.limit.has_value();
    if (limited) {
      const auto side =
          row.limit_side == "at_most" ? pharmacology::LimitSide::at_most : pharmacology::LimitSide::at_least;
      data.censored.push_back({row.concentration, *row.limit, side});
    }
  }
  return curves;
}

/// What the fit itself cannot know: where its responses came from.
void mark_selected(pharmacology::CurveFit& fit) {
  pharmacology::add_flag(fit, pharmacology::flags::kSelectedBeats,
                         "some responses were read while beats were blocked or not conducted from above");
  pharmacology::sort_flags(fit);
}

FittedCurve labelled(const CurveData& data, const std::string& preparation) {
  FittedCurve fitted;
  fitted.curve = data.first->curve;
  fitted.agent = data.first->agent;
  fitted.background = data.first->background;
  fitted.preparation = preparation;
  fitted.measure = data.first->measure;
  return fitted;
}

} // namespace

std::vector<FittedCurve> fit_curves(const response::Responses& responses, const std::string& preparation,
                                    pharmacology::Model model, const pharmacology::FitOptions& options,
                                    unsigned threads) {
  const std::vector<CurveData> curves = gather(responses);
  std::vector<FittedCurve> main(curves.size());
  std::vector<FittedCurve> second(curves.size());
  parallel_for(curves.size(), threads, [&](std::size_t i) {
    main[i] = labelled(curves[i], preparation);
    main[i].fit = pharmacology::fit_curve(curves[i].measured, model, options);
    if (curves[i].has_selected) mark_selected(main[i].fit);
    if (curves[i].censored.empty()) return;
    second[i] = labelled(curves[i], preparation);
    second[i].fit = pharmacology::fit_censored(curves[i].measured, curves[i].censored, model, options);
    if (curves[i].has_selected) mark_selected(second[i].fit);
  });
  std::vector<FittedCurve> fits = main;
  for (std::size_t i = 0; i < curves.size(); ++i) {
    if (!curves[i].censored.empty()) fits.push_back(second[i]);
  }
  return fits;
}

} // namespace chronodrome::session
