// Chronodrome, GPL-3.0-or-later.
#include <iostream>

#include "base/number_text.h"
#include "commands.h"
#include "intake/recording_reader.h"
#include "results/inspection_json.h"
#include "session/inspection.h"
#include "text_table.h"

namespace chronodrome::cli {
namespace {

std::string percent(double share) {
  return fixed_text(100.0 * share, 1);
}

std::string signals_text(const recording::Recording& recording,
                         const std::vector<session::SignalLook>& looks) {
  TextTable table({"signal", "unit", "rate, Hz", "samples", "gaps", "missing, s", "min", "max", "noise SD",
                   "clipped, %", "unreadable, %"});
  for (std::size_t i = 0; i < recording.signals.size(); ++i) {
    const auto& signal = recording.signals[i];
    const auto& look = looks[i];
    std::string unreadable = percent(look.unreadable_share);
    for (const auto& reason : look.reasons)
      unreadable += " " + reason;
    table.add({signal.source_as_written, signal.unit.empty() ? "not stated" : signal.unit,
               number_text(signal.time_base.rate().value(), 9), std::to_string(signal.time_base.size()),
               std::to_string(look.gaps), fixed_text(look.missing.value(), 3), number_text(look.min, 5),
               number_text(look.max, 5), number_text(look.noise_sd, 3), percent(look.clipped_share),
               unreadable});
  }
  return table.text();
}

std::string recording_text(const recording::Recording& recording,
                           const std::vector<session::SignalLook>& looks) {
  std::string text;
  for (const auto& file : recording.files) {
    text += file.path + ": " + file.kind + ", " + std::to_string(file.bytes) + " bytes, SHA-256 " +
            file.sha256 + "\n";
  }
  text += "length " + fixed_text(recording.duration.value(), 3) + " s, starts " +
          recording.clock_start.value_or("at a time the file does not state") + "\n\n";
  text += signals_text(recording, looks);
  if (!recording.annotations.empty()) {
    TextTable table({"annotation", "onset, s"});
    for (const auto& annotation : recording.annotations)
      table.add({annotation.text, fixed_text(annotation.onset.value(), 3)});
    text += "\n" + table.text();
  }
  if (!recording.file_notes.empty()) text += "\nnotes of the file\n";
  for (const auto& note : recording.file_notes)
    text += "  " + note + "\n";
  return text;
}

} // namespace

int inspect(const InspectWords& words) {
  const auto choices = choices_of(words.reading, words.recording);
  if (!choices) return refuse(choices.error());
  auto read = intake::read_recording(words.recording, settings_of(*choices));
  if (!read) return refuse(with_options(read.error()));
  const auto recording = std::make_shared<const recording::Recording>(std::move(read).value());
  for (const auto& warning : recording->warnings)
    report(warning);
  const auto looks = session::inspect(recording, 0);
  if (!looks) return refuse(looks.error());
  std::cout << (words.json ? results::inspection_json(*recording, *looks)
                           : recording_text(*recording, *looks));
  return kAllDone;
}

} // namespace chronodrome::cli
