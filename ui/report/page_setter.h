// Chronodrome, GPL-3.0-or-later.
#pragma once

#include "ui/look/theme.h"
#include "ui/report/content.h"
#include "ui/report/page_flow.h"

namespace chronodrome::ui::report {

/// Sets the blocks of a content into pages of `height`: no heading without what it heads, no figure without
/// its caption, no single line of a paragraph alone. Requires: `content` and `theme` outlive the pages.
PageFlow pagesOf(const Content& content, const look::Theme& theme, double height);

} // namespace chronodrome::ui::report
