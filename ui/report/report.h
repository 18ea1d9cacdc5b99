// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <string>
#include <vector>

#include "base/result.h"
#include "results/output_folder.h"
#include "session/session_result.h"

// The session's report for readers. Painting needs a QApplication and belongs to its thread; no display is
// needed. The same result and version give the same bytes on one machine.
namespace chronodrome::ui::report {

/// `report.html`: one file that refers to nothing outside itself.
std::string reportHtml(const session::SessionResult& result, const std::string& version);

/// `report.pdf`: A4, to print and to sign. Errors: cannot_write where no font is installed (the text would be
/// empty boxes).
Result<std::string> reportPdf(const session::SessionResult& result, const std::string& version);

/// Both, or the first error.
Result<std::vector<results::OutputFile>> reportFiles(const session::SessionResult& result,
                                                     const std::string& version);

} // namespace chronodrome::ui::report
