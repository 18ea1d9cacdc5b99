// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <QByteArray>

#include "ui/report/content.h"

namespace chronodrome::ui::report {

/// The content as a PDF, A4 upright: fonts embedded, text that can be searched, figures as vectors, a running
/// head and `page x of y`. Carries no date of its making, so that the same content gives the same bytes.
QByteArray pdfOf(const Content& content);

} // namespace chronodrome::ui::report
