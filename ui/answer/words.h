// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <QString>
#include <QStringList>

#include "session/curve_view.h"

// What the answer says in words. Numbers come from ui/look.
namespace chronodrome::ui::answer {

/// `rate RA (beats/min)`, `change of rate RA from control (beats/min)`, `rate RA (% of control)`.
QString responseTitle(const session::CurveView& view);
/// `acetylcholine in the bath`.
QString concentrationTitle(const session::CurveView& view);
/// `absolute`, `change from control`, `% of control`.
QString formText(session::ResponseForm form);

/// `carbachol`, `carbachol with atropine 100 nM`.
QString curveText(const session::CurveSeries& series);
QString curveText(const session::SessionResult& result, int curve);

/// The answer in one sentence: `pEC50 6.30 (6.26 to 6.34)`, `pEC50 at most 5.09: ...`, `No
/// concentration-related response ...`. A number that the data leave open is told as its bound.
QString answerText(const session::CurveView& view);
/// Of the fit that also takes the limits; empty where there is none.
QString censoredText(const session::CurveView& view);
/// What bars, band and lines stand for, as far as the panel has them.
QString captionText(const session::CurveView& view);

/// `100 nM: 209.23 ± 0.21 beats/min`, beats, status and window, one a line.
QString pointText(const session::CurveView& view, const session::PlottedPoint& point);
/// For the bottom edge, of a point without a value or bound: its status.
QString missingText(const session::PlottedPoint& point);
/// `100 nM`, `control`.
QString stepText(const session::PlottedPoint& point);
QString stepText(Molar concentration);

/// Cells of the parameter table. An estimate whose interval is open on a side is `bound only`; a unit that
/// stands at the axis is not repeated.
QString parameterCell(const session::ParameterRow& row, const std::string& axisUnit);
QString estimateCell(const session::ParameterRow& row);
QString intervalCell(const session::ParameterRow& row);
QString determinedCell(const session::ParameterRow& row);
/// The same at length.
QString determinedText(const session::ParameterRow& row);

} // namespace chronodrome::ui::answer
