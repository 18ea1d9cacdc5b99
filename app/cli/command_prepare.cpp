// Chronodrome, GPL-3.0-or-later.
#include <algorithm>
#include <filesystem>
#include <iostream>

#include "base/number_text.h"
#include "commands.h"
#include "intake/protocol_reader.h"
#include "intake/session_reader.h"
#include "results/session_writer.h"
#include "session/analysis_settings.h"
#include "session/order_check.h"
#include "session/proposal.h"
#include "session/protocol_guess.h"
#include "session/saved_layout.h"
#include "text_table.h"

namespace fs = std::filesystem;

namespace chronodrome::cli {
namespace {

constexpr std::string_view kEnding = ".session.json";

Error wrong_usage(const std::string& file, std::string what, std::string remedy) {
  return {ErrorCode::bad_usage, file, {}, std::move(what), std::move(remedy)};
}

std::optional<Error> fault_of_out(const PrepareWords& words) {
  const fs::path out(words.out);
  const std::string name = out.filename().string();
  if (name.size() <= kEnding.size() || !name.ends_with(kEnding))
    return wrong_usage(words.out, "a session file is called NAME.session.json", "give such a name to --out");
  std::error_code fault;
  const fs::path folder = out.has_parent_path() ? out.parent_path() : fs::path(".");
  if (!fs::is_directory(folder, fault))
    return wrong_usage(words.out, "there is no folder " + folder.string(), "make it first");
  if (fs::exists(out, fault) && !words.replace)
    return wrong_usage(words.out, "the session is there already, and may hold corrections",
                       "choose another name, or write over it with --replace");
  return std::nullopt;
}

/// The path as a session in `out`'s folder says it. Errors: bad_usage where it leads out of that folder.
Result<std::string> path_in_folder_of(const std::string& out, const std::string& file) {
  std::error_code fault;
  const fs::path folder = fs::weakly_canonical(fs::absolute(out).parent_path(), fault);
  const fs::path target = fs::weakly_canonical(fs::absolute(file), fault);
  const fs::path relative = target.lexically_relative(folder);
  if (fault || relative.empty() || *relative.begin() == "..") {
    return wrong_usage(file, "the file lies outside the folder of the session, " + folder.string(),
                       "copy it there, or put the session above it with --out");
  }
  if (const std::string text = relative.generic_string(); text.find('\\') == std::string::npos) return text;
  return wrong_usage(file, "the file's name holds a backslash", "rename it");
}

struct Prepared {
  document::SessionFile session;
  std::vector<session::ChannelProposal> guesses; ///< empty: taken from a layout
  std::vector<std::string> doubts;
};

Prepared with_layout(const document::SessionFile& layout, const document::CsvChoices& csv,
                     const recording::Recording& recording) {
  auto match = session::apply_layout(layout, recording);
  match.session.csv = csv;
  return {std::move(match.session), {}, std::move(match.unmatched)};
}

Prepared guessed(const document::CsvChoices& csv, const recording::Recording& recording) {
  auto proposal = session::propose(recording);
  proposal.session.csv = csv;
  Prepared prepared{std::move(proposal.session), std::move(proposal.channels), {}};
  for (const auto& channel : prepared.guesses) {
    if (channel.role.confidence == session::Confidence::unknown)
      prepared.doubts.push_back("\"" + channel.entry.source + "\" has role other: " + channel.role.reason);
  }
  return prepared;
}

/// Names the drug log in the session. Errors: bad_usage (outside the folder), those of reading it.
Result<std::string> take_protocol(const PrepareWords& words, const recording::Recording& recording,
                                  document::SessionFile& session) {
  if (!words.protocol) {
    const auto found = session::protocols_for(recording, words.recording);
    if (found.empty()) return std::string("drug log: none; add a protocol.csv and name it in the session\n");
    if (found.front().error) return *found.front().error;
    const std::string count = std::to_string(found.front().protocol.events.size()) + " events";
    for (const auto& warning : found.front().protocol.warnings)
      report(warning);
    if (found.front().file.empty()) return "drug log: annotations of the recording, " + count + "\n";
    const auto beside = fs::path(words.recording).parent_path() / found.front().file;
    auto path = path_in_folder_of(words.out, beside.string());
    if (!path) return path.error();
    session.protocol_file = *path;
    return "drug log: " + *path + " beside the recording, " + count + "\n";
  }
  auto path = path_in_folder_of(words.out, *words.protocol);
  if (!path) return path.error();
  const auto log = intake::read_protocol(*words.protocol);
  if (!log) return log.error();
  for (const auto& warning : log->warnings)
    report(warning);
  session.protocol_file = *path;
  return "drug log: " + *path + ", " + std::to_string(log->events.size()) + " events\n";
}

std::string channels_text(const Prepared& prepared) {
  TextTable table({"channel", "source", "role", "lead", "unit", "role is"});
  std::string reasons;
  for (const auto& channel : prepared.session.channels) {
    std::string sure = "from the layout";
    for (const auto& guess : prepared.guesses) {
      if (guess.entry.label != channel.label) continue;
      sure = session::name_of(guess.role.confidence);
      reasons += "  " + channel.label + ": " + guess.role.reason;
      if (guess.lead.confidence == session::Confidence::guessed)
        reasons += "; " + channel.lead + " is guessed, " + guess.lead.reason;
      reasons += "\n";
    }
    table.add({channel.label, channel.source, channel.role, channel.lead,
               channel.unit.empty() ? "not stated" : channel.unit, sure});
  }
  std::string text = table.text() + reasons;
  for (const auto& pathway : prepared.session.pathways)
    text += "  pathway " + pathway.label + " from " + pathway.from + " to " + pathway.to + "\n";
  text += "  measures";
  for (const auto& measure : prepared.session.measures)
    text += " " + measure;
  return text + (prepared.session.measures.empty() ? " none\n" : "\n");
}

Result<document::SessionFile> layout_of(const PrepareWords& words) {
  if (!words.layout) return document::SessionFile{};
  return intake::read_session(*words.layout);
}

} // namespace

int prepare(const PrepareWords& words) {
  if (const auto fault = fault_of_out(words)) return refuse(*fault);
  const auto recording_path = path_in_folder_of(words.out, words.recording);
  if (!recording_path) return refuse(recording_path.error());
  const auto layout = layout_of(words);
  if (!layout) return refuse(layout.error());
  const auto csv = choices_of(words.reading, words.recording, layout->csv);
  if (!csv) return refuse(csv.error());
  auto read = intake::read_recording(words.recording, settings_of(*csv));
  if (!read) return refuse(with_options(read.error()));
  const auto recording = std::make_shared<const recording::Recording>(std::move(read).value());

  Prepared prepared = words.layout ? with_layout(*layout, *csv, *recording) : guessed(*csv, *recording);
  auto& session = prepared.session;
  if (session.channels.empty()) {
    return refuse({ErrorCode::not_enough_data,
                   *words.layout,
                   {},
                   "none of the layout's channels is in " + words.recording,
                   "choose another layout"});
  }
  session.files = {{*recording_path, recording->files.front().sha256}};
  const auto log = take_protocol(words, *recording, session);
  if (!log) return refuse(log.error());
  for (const auto& doubt : session::check_order(session, recording))
    prepared.doubts.push_back(doubt.text);
  for (const auto& warning : recording->warnings)
    report(warning);
  for (const auto& doubt : prepared.doubts)
    report(Warning{words.out, {}, doubt, "check the session's channels before you analyse it"});
  if (const Done written = results::write_session(session, words.out); !written)
    return refuse(written.error());
  std::cout << channels_text(prepared) << *log << "file: " << words.out << "\n";
  return kAllDone;
}

} // namespace chronodrome::cli
