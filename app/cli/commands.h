// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <optional>
#include <string>
#include <vector>

#include "base/result.h"
#include "reading_words.h"

namespace chronodrome::cli {

/// Exit statuses of the program (contract section 1).
enum ExitStatus { kAllDone = 0, kSomeFailed = 1, kWrongUsage = 2, kNothingDone = 3 };

struct InspectWords {
  std::string recording;
  bool json = false;
  ReadingWords reading;
};

struct PrepareWords {
  std::string recording;
  std::optional<std::string> layout, protocol;
  std::string out;
  bool replace = false;
  ReadingWords reading;
};

struct AnalyseWords {
  std::vector<std::string> sessions;
  std::string out;
  unsigned jobs = 0;
  bool no_report = false;
};

struct FitWords {
  std::string table;
  std::string model = "hill";
  bool json = false;
};

struct SimulateWords {
  std::string scenario;
  std::string out;
};

int inspect(const InspectWords& words);
int prepare(const PrepareWords& words);
int analyse(const AnalyseWords& words);
int fit(const FitWords& words);
int simulate(const SimulateWords& words);

/// To standard error, one line.
void report(const Error& error);
void report(const Warning& warning);

/// Standard exit for an error before any work was done: wrong usage or nothing done.
int refuse(const Error& error);

} // namespace chronodrome::cli
