// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <string>

#include <QString>

#include "ui/look/custom_plot.h"

#include "session/curve_view.h"
#include "session/session_result.h"
#include "ui/look/theme.h"

namespace chronodrome::ui::answer {

/// Draws the concentration-response panel of one measure into `size` at the painter's origin: points, fit and
/// band of `curve`, the others of the measure fainter beside it. For the report and for exported figures.
/// Nothing is drawn where the curve has no such responses.
void paintCurve(QCPPainter& painter, QSize size, const session::SessionResult& result, int curve,
                const std::string& measure, const look::Theme& theme,
                session::ResponseForm form = session::ResponseForm::absolute);

/// What the figure's bars, band and lines stand for: belongs under it.
QString curveCaption(const session::SessionResult& result, int curve, const std::string& measure,
                     session::ResponseForm form = session::ResponseForm::absolute);

/// The answer in one sentence, with bounds where the data leave a side open.
QString curveAnswer(const session::SessionResult& result, int curve, const std::string& measure);

} // namespace chronodrome::ui::answer
