// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <string>
#include <vector>

#include "results/output_folder.h"
#include "session/session_result.h"

namespace chronodrome::results {

// Each table is the whole text of one file of the results folder (`resources/formats/results.md`).
std::string activations_csv(const session::SessionResult& result);
std::string intervals_csv(const session::SessionResult& result);
std::string delays_csv(const session::SessionResult& result);
std::string rhythm_csv(const session::SessionResult& result);
std::string responses_csv(const session::SessionResult& result);
std::string mechanics_csv(const session::SessionResult& result);
std::string quality_csv(const session::SessionResult& result);
std::string conduction_csv(const session::SessionResult& result);

/// `summary.json`. `program_version` as the build states it.
std::string summary_json(const session::SessionResult& result, const std::string& program_version);

/// Every file of the results folder but workbook and reports, in a fixed order; `mechanics.csv` and
/// `conduction.csv` only where they apply.
std::vector<OutputFile> result_files(const session::SessionResult& result,
                                     const std::string& program_version);

} // namespace chronodrome::results
