// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <string>

#include <QByteArray>
#include <QStringList>

#include "base/result.h"
#include "session/curve_view.h"

namespace chronodrome::ui::answer {

/// What a curve can be exported as. Widths are those of one and of two columns of print.
enum class ExportKind { pdf, svg, png, csv };
struct ExportChoice {
  ExportKind kind = ExportKind::pdf;
  int width_mm = 85; ///< of figures
};

/// What is exported: a curve in a result, as the panel shows it.
struct ExportedCurve {
  const session::SessionResult* result = nullptr;
  int curve = 0;
  std::string measure;
  session::ResponseForm form = session::ResponseForm::absolute;
};

/// Every choice, and its words in a file dialog: `PDF, 85 mm wide (*.pdf)`.
const std::vector<ExportChoice>& exportChoices();
QString filterText(const ExportChoice& choice);

/// The whole file: a figure on paper's theme with text as text, PNG at 600 dots an inch, or the responses as
/// `responses.csv` of the results holds them.
QByteArray exportedBytes(const ExportedCurve& curve, const ExportChoice& choice);

/// Writes it. Errors: cannot_write.
Done exportCurve(const QString& path, const ExportedCurve& curve, const ExportChoice& choice);

} // namespace chronodrome::ui::answer
