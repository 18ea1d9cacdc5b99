// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <QString>

#include "ui/report/content.h"

namespace chronodrome::ui::report {

/// The figure as an <svg> element to stand inside a page: vectors and real text, no reference to anything
/// outside, and only characters that XML can hold.
QString svgOf(const Figures::Figure& figure);

} // namespace chronodrome::ui::report
