// Chronodrome, GPL-3.0-or-later.
#include <algorithm>
#include <filesystem>
#include <iostream>
#include <map>
#include <new>
#include <thread>

#include "base/parallel.h"
#include "commands.h"
#include "reports.h"
#include "result_tables.h"
#include "results/output_folder.h"
#include "results/tables.h"
#include "results/workbook.h"
#include "session/analysis.h"

namespace fs = std::filesystem;

namespace chronodrome::cli {
namespace {

constexpr std::string_view kEnding = ".session.json";

/// NAME of NAME.session.json; nothing if the file is called otherwise.
std::optional<std::string> name_of_session(const std::string& path) {
  const std::string file = fs::path(path).filename().string();
  if (file.size() <= kEnding.size() || !file.ends_with(kEnding)) return std::nullopt;
  const std::string name = file.substr(0, file.size() - kEnding.size());
  // DIR/. and DIR/.. are other folders than the one that was asked for.
  return name == "." || name == ".." ? std::nullopt : std::optional(name);
}

/// Names of all sessions, or the first reason not to start.
Result<std::vector<std::string>> names_of(const std::vector<std::string>& sessions) {
  std::map<std::string, std::string> first_with;
  std::vector<std::string> names;
  for (const auto& path : sessions) {
    const auto name = name_of_session(path);
    if (!name) {
      return Error{ErrorCode::bad_usage,
                   path,
                   {},
                   "a session file is called NAME.session.json",
                   "rename it, or name the session instead of the recording"};
    }
    const auto [place, is_new] = first_with.emplace(*name, path);
    if (!is_new) {
      return Error{ErrorCode::bad_usage,
                   path,
                   {},
                   "two sessions have the name " + *name + " (the other is " + place->second +
                       "), and would share one folder",
                   "rename one of them, or analyse them into different folders"};
    }
    names.push_back(*name);
  }
  return names;
}

/// What one session has come to so far.
struct Outcome {
  std::optional<Error> failure;
  std::vector<Warning> warnings;
  std::string shown;                            ///< for standard output
  std::optional<session::SessionResult> result; ///< until its files are written
  std::vector<results::OutputFile> files;
};

/// Every file but the reports.
Result<std::vector<results::OutputFile>> tables_of(const session::SessionResult& result) {
  auto files = results::result_files(result, CHRONODROME_VERSION);
  auto workbook = results::workbook_file(result, CHRONODROME_VERSION, files);
  if (!workbook) return workbook.error();
  files.push_back(*std::move(workbook));
  return files;
}

/// Reads and analyses a session and makes its tables: what can be done beside other sessions.
void work_on(Outcome& outcome, const std::string& path, unsigned threads) {
  session::LoadOptions options;
  options.threads = threads;
  const auto inputs = session::load_session(path, options);
  if (!inputs) {
    outcome.failure = inputs.error();
    return;
  }
  auto result = session::analyse(*inputs, threads);
  if (!result) {
    outcome.failure = result.error();
    outcome.warnings = inputs->warnings;
    return;
  }
  outcome.warnings = result->warnings;
  auto files = tables_of(*result);
  if (!files) {
    outcome.failure = files.error();
    return;
  }
  outcome.files = *std::move(files);
  outcome.result = *std::move(result);
}

/// Adds the reports. One that cannot be made takes no number with it: a warning, in the summary too.
void add_reports(Outcome& outcome, const std::string& folder, Reports& reports) {
  auto made = reports.make(*outcome.result, CHRONODROME_VERSION);
  if (made) {
    for (auto& file : *made)
      outcome.files.push_back(std::move(file));
    return;
  }
  const Error& error = made.error();
  const Warning warning{(fs::path(folder) / error.file).string(), error.place, error.what, error.remedy};
  outcome.warnings.push_back(warning);
  outcome.result->warnings.push_back(warning);
  if (auto files = tables_of(*outcome.result)) {
    outcome.files = *std::move(files);
  } else {
    outcome.failure = files.error();
  }
}

/// Paints (which belongs to the first thread) and writes. `reports` null: none are wanted.
void finish(Outcome& outcome, const std::string& folder, Reports* reports) {
  if (outcome.failure) return;
  if (reports != nullptr) add_reports(outcome, folder, *reports);
  if (outcome.failure) return;
  if (const Done written = results::write_output_folder(folder, outcome.files); !written) {
    outcome.failure = written.error();
    return;
  }
  outcome.shown = session_text(*outcome.result) + "files: " + folder + "/\n";
}

/// One session must not take the others with it, whatever goes wrong.
template <class Work>
void guarded(Outcome& outcome, const std::string& path, Work work) {
  try {
    work();
  } catch (const std::bad_alloc&) {
    outcome.failure =
        Error{ErrorCode::over_limit, path, {}, "out of memory", "analyse it alone, with --jobs 1"};
  } catch (const std::exception& fault) {
    outcome.failure = Error{ErrorCode::internal_fault,
                            path,
                            {},
                            std::string("internal fault: ") + fault.what(),
                            "please report it with the input file"};
  }
}

} // namespace

int analyse(const AnalyseWords& words) {
  const auto names = names_of(words.sessions);
  if (!names) return refuse(names.error());
  if (const Done usable = results::check_output_folder(words.out, *names); !usable) {
    report(usable.error());
    return kWrongUsage;
  }
  std::vector<Outcome> outcomes(words.sessions.size());
  std::size_t failed = 0;
  const auto show = [&](std::size_t i) {
    for (const auto& warning : outcomes[i].warnings)
      report(warning);
    if (outcomes[i].failure) report(*outcomes[i].failure);
    std::cout << outcomes[i].shown << std::flush;
    if (outcomes[i].failure) ++failed;
  };
  const auto folder_of = [&](std::size_t i) { return (fs::path(words.out) / (*names)[i]).string(); };
  Reports reports;
  // One session uses all threads itself; of several, each takes one, in groups that are shown in order.
  const unsigned jobs = words.jobs != 0 ? words.jobs : std::max(1U, std::thread::hardware_concurrency());
  for (std::size_t start = 0; start < outcomes.size(); start += jobs) {
    const std::size_t group = std::min<std::size_t>(jobs, outcomes.size() - start);
    const unsigned each = group > 1 ? std::max(1U, jobs / static_cast<unsigned>(group)) : jobs;
    parallel_for(group, jobs, [&](std::size_t i) {
      Outcome& outcome = outcomes[start + i];
      const std::string& path = words.sessions[start + i];
      guarded(outcome, path, [&] { work_on(outcome, path, each); });
    });
    for (std::size_t i = start; i < start + group; ++i) {
      guarded(outcomes[i], words.sessions[i],
              [&] { finish(outcomes[i], folder_of(i), words.no_report ? nullptr : &reports); });
      show(i);
      outcomes[i] = {};
    }
  }
  if (failed == 0) return kAllDone;
  return failed == outcomes.size() ? kNothingDone : kSomeFailed;
}

} // namespace chronodrome::cli
