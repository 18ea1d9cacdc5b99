// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <optional>
#include <string>

#include <QString>
#include <QStringList>

#include "base/quantity.h"
#include "base/result.h"
#include "pharmacology/curve_fit.h"
#include "response/response.h"

// Every number that a reader sees is made here: with a point as the decimal mark whatever the locale, a real
// minus sign, units as printed in papers and no more digits than the data carry.
namespace chronodrome::ui::look {

/// Four significant digits for a value without a known error (`217.3`), fixed decimals, never `1e+02` between
/// 1e-4 and 1e6.
QString plainText(double value);
/// Digits down to the second digit of `error` (`217.30` for 0.14), at most six significant.
QString plainText(double value, double error);
/// With a space and the unit; the unit `1` (a share) is not written.
QString withUnit(double value, const std::string& unit);
/// As it stands at an axis: `bpm` becomes `beats/min`, `uV` becomes `µV`, `1` is empty.
QString unitText(const std::string& unit);

/// `300 nM`, `1 µM`, `0` for none: the prefix that leaves 1 to 999.
QString concentrationText(Molar concentration);

/// `0:12:34` or `12:34.5` from the start of the recording; `decimals` of a second (0 to 4).
QString timeText(Seconds time, int decimals = 1);
/// A stretch of time in words of its size: `12.3 ms`, `4.56 s`, `3 min 20 s`, `1 h 12 min`.
QString durationText(Seconds duration);

/// `6.30`, or `not estimated`.
QString estimateText(const pharmacology::Estimate& estimate);
/// `6.26 to 6.34`; a missing side is said: `at least 6.26`, `at most 6.34`, `not bounded`.
QString intervalText(const pharmacology::Estimate& estimate);
/// How the interval was found: `profile likelihood`, `standard error`, `held fixed` or empty.
QString methodText(const pharmacology::Estimate& estimate);
/// As papers write it: `pEC50`, `Emax`, `basal`, `nH`; others with spaces for underscores.
QString parameterText(const std::string& name);

/// `steady`, `not steady`, `censored`, `arrested`, `unreadable`, `excluded`.
QString statusText(response::Status status);
/// The value of a response with its unit, or its bound (`≥ 140 ms`), or its status in words.
QString responseText(const response::Response& response);
/// `rate:RA` as `rate of RA`, `delay:AV` as `delay AV`: how a measure is called in headings.
QString measureText(const std::string& measure);

/// One line of a warning or error for the window: what; what to do.
QString messageText(const Error& error);
QString messageText(const Warning& warning);

/// A number typed by a user: a point or a comma as the decimal mark, never both. Nothing if it is no number.
std::optional<double> typedNumber(const QString& text);
/// A time typed by a user: `1:12:30`, `12:30.5`, `4350`, `4350 s`, `72 min`, `1.2 h`. Nothing if it is no
/// time.
std::optional<Seconds> typedTime(const QString& text);

} // namespace chronodrome::ui::look
