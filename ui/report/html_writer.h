// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <QByteArray>

#include "ui/report/content.h"

namespace chronodrome::ui::report {

/// The content as one HTML file, also well-formed XML: figures inside it, no script, nothing fetched from
/// anywhere, every text escaped.
QByteArray htmlOf(const Content& content);

} // namespace chronodrome::ui::report
