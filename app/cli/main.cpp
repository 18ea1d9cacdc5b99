// Chronodrome, GPL-3.0-or-later.
#include <CLI/CLI.hpp>
#include <cstdio>
#include <exception>
#include <iostream>

#include "commands.h"

namespace chronodrome::cli {
namespace {

constexpr const char* kAbout =
    "Beats, conduction delays and concentration-response curves from isolated-heart recordings.\n"
    "Research use only; not for diagnosis. Animal work under local licence.";

constexpr const char* kStatuses =
    "Exit status: 0 all done, 1 some inputs failed and at least one is done, 2 wrong usage, 3 nothing done.\n"
    "Errors and warnings go to standard error as FILE:LINE: error|warning: what is wrong; what to do.";

/// The command chosen on the command line, ready to run.
struct Chosen {
  InspectWords inspect;
  PrepareWords prepare;
  AnalyseWords analyse;
  FitWords fit;
  SimulateWords simulate;
};

void add_reading(CLI::App& command, ReadingWords& words) {
  command.add_option("--rate-hz", words.rate_hz, "sampling rate of a CSV without a time column");
  command.add_option("--delimiter", words.delimiter, "of a CSV: one character, or tab");
  command.add_option("--decimal", words.decimal, "decimal mark of a CSV: . or ,");
  command.add_option("--time-column", words.time_column, "header of a CSV's time column");
}

void add_inspect(CLI::App& app, InspectWords& words) {
  auto* command = app.add_subcommand("inspect", "say what a CSV or EDF/EDF+ recording holds");
  command->add_option("RECORDING", words.recording, "the recording")->required();
  command->add_flag("--json", words.json, "as JSON");
  add_reading(*command, words.reading);
}

void add_prepare(CLI::App& app, PrepareWords& words) {
  auto* command = app.add_subcommand(
      "prepare", "a session from a recording, with roles and pathways guessed or taken from another session");
  command->add_option("RECORDING", words.recording, "the recording, in the session's folder or below")
      ->required();
  command->add_option(
      "--layout", words.layout,
      "a session of the same set-up: its channels, pathways, measures and settings are taken");
  command->add_option("--protocol", words.protocol,
                      "the drug log (default: protocol.csv beside the recording, or its annotations)");
  command->add_option("--out", words.out, "the session to write, NAME.session.json")->required();
  command->add_flag("--replace", words.replace, "write over a session that is there");
  add_reading(*command, words.reading);
}

void add_analyse(CLI::App& app, AnalyseWords& words) {
  auto* command =
      app.add_subcommand("analyse", "the main job: from sessions to beats, delays, plateaus and curves");
  command->add_option("SESSION", words.sessions, "one or more NAME.session.json")->required();
  command->add_option("--out", words.out, "folder for the results; each session gets DIR/NAME")->required();
  command->add_option("--jobs", words.jobs,
                      "threads to use (default: all cores); does not change any result");
  command->add_flag("--no-report", words.no_report, "leave out report.pdf and report.html");
}

void add_fit(CLI::App& app, FitWords& words) {
  auto* command = app.add_subcommand("fit", "fit concentration-response rows measured elsewhere");
  command->add_option("TABLE", words.table, "CSV with concentration_mol_per_l,response")->required();
  command->add_option("--model", words.model, "the model (default hill)");
  command->add_flag("--json", words.json, "as JSON, always a list");
}

void add_simulate(CLI::App& app, SimulateWords& words) {
  auto* command =
      app.add_subcommand("simulate", "make a recording with known truth, its session and protocol");
  command->add_option("SCENARIO", words.scenario, "the scenario, JSON")->required();
  command->add_option("--out", words.out, "folder for the files")->required();
}

int run(int argc, char** argv) {
  CLI::App app(kAbout, "chronodrome-cli");
  app.footer(kStatuses);
  app.set_version_flag("--version", std::string("Chronodrome ") + CHRONODROME_VERSION);
  app.require_subcommand(1);
  Chosen chosen;
  add_inspect(app, chosen.inspect);
  add_prepare(app, chosen.prepare);
  add_analyse(app, chosen.analyse);
  add_fit(app, chosen.fit);
  add_simulate(app, chosen.simulate);
  for (auto* command : app.get_subcommands([](CLI::App*) { return true; }))
    command->footer(kStatuses);
  try {
    app.parse(argc, argv);
  } catch (const CLI::ParseError& problem) {
    if (problem.get_exit_code() == 0) {
      app.exit(problem); // --help and --version print and end well
      return kAllDone;
    }
    std::cerr << "chronodrome-cli: error: " << problem.what()
              << "; chronodrome-cli --help lists the commands\n";
    return kWrongUsage;
  }
  if (app.got_subcommand("inspect")) return inspect(chosen.inspect);
  if (app.got_subcommand("prepare")) return prepare(chosen.prepare);
  if (app.got_subcommand("analyse")) return analyse(chosen.analyse);
  if (app.got_subcommand("fit")) return fit(chosen.fit);
  return simulate(chosen.simulate);
}

} // namespace
} // namespace chronodrome::cli

int main(int argc, char** argv) {
  try {
    const int status = chronodrome::cli::run(argc, argv);
    if (std::cout.flush()) return status;
    std::fputs(
        "chronodrome-cli: error: standard output cannot be written; free some space or choose another file\n",
        stderr);
    return chronodrome::cli::kNothingDone;
  } catch (const std::bad_alloc&) {
    std::fputs("chronodrome-cli: error: out of memory; close other programs or analyse fewer sessions at "
               "once (--jobs 1)\n",
               stderr);
  } catch (const std::exception& fault) {
    std::fprintf(stderr, "chronodrome-cli: error: internal fault: %s; please report it with the input file\n",
                 fault.what());
  }
  return chronodrome::cli::kNothingDone;
}
