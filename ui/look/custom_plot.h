// Chronodrome, GPL-3.0-or-later.
#pragma once

// QCustomPlot's header is written with Qt's keywords, ours are built without them: `signals` is a word of the
// trade (recording::Recording::signals). Include this instead of <qcustomplot.h>.
#define signals Q_SIGNALS
#define slots Q_SLOTS
#define emit
#define foreach Q_FOREACH
#include <qcustomplot.h>
#undef signals
#undef slots
#undef emit
#undef foreach
