// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <QString>

#include "document/session_file.h"

namespace chronodrome::ui {

// Names of undo steps, as they stand behind "Undo" in the menu.

/// `add activation on RA at 12:34.567`, `exclude 10:00.000 to 10:12.500 on all channels` ...
QString stepNameOf(const document::Correction& correction);
/// `place window, 300 nM, rate RA`; `verb` is `place` or `release`.
QString windowStepName(const QString& verb, Molar concentration, const std::string& measure);

} // namespace chronodrome::ui
