// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <memory>
#include <string>
#include <vector>

#include "base/result.h"
#include "results/output_folder.h"
#include "session/session_result.h"

namespace chronodrome::cli {

/// Makes reports for readers. What painting needs is set up at the first report, without a display, and lives
/// as long as this object; a run without reports never touches it. Requires: one thread.
class Reports {
public:
  Reports();
  ~Reports();
  Reports(const Reports&) = delete;
  Reports& operator=(const Reports&) = delete;

  /// `report.pdf` and `report.html`. Errors: bad_usage where the program was built without its desktop part;
  /// those of painting.
  Result<std::vector<results::OutputFile>> make(const session::SessionResult& result,
                                                const std::string& version);

private:
  class Painting;
  std::unique_ptr<Painting> painting_;
};

} // namespace chronodrome::cli
