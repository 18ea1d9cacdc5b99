// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <array>
#include <map>
#include <optional>
#include <string>
#include <variant>
#include <vector>

#include "base/quantity.h"
#include "base/result.h"

namespace chronodrome::document {

/// What a session file says about the preparation. Text as written; a missing number is missing.
struct Preparation {
  std::string label, species, tissue, animal, sex, date, operator_name, group, notes;
  std::optional<double> temperature_c;
  std::optional<double> bath_volume_ml;
  std::optional<double> mass_g;
  Seconds arrival_delay; ///< `arrival_delay_s`: from the tap to the tissue
};

struct RecordingFile {
  std::string path;                  ///< relative to the session file, inside its folder tree
  std::optional<std::string> sha256; ///< checked if given
};

/// How the CSV is to be read; nothing: find out, and refuse where that is not sure.
struct CsvChoices {
  std::optional<double> rate_hz;
  std::optional<char> delimiter;
  std::optional<char> decimal;
  std::optional<std::string> time_column; ///< header text; an empty text: there is none
};

/// Two raw readings and what they stand for.
struct Calibration {
  std::array<double, 2> raw{};
  std::array<double, 2> value{};
  std::string unit;
};

struct ChannelEntry {
  std::string source, label, role, lead, unit;
  bool invert = false;
  std::optional<std::array<double, 2>> position_mm;
  std::optional<Calibration> calibration;
  Seconds skew;
};

struct PathwayEntry {
  std::string label, from, to;
  std::optional<double> distance_mm;
};

using SettingValue = std::variant<bool, double, std::string>;

enum class CorrectionKind { add, remove, move, retype, exclude, include, redetect };
/// As the file writes it: `delete` for remove.
std::string name_of(CorrectionKind kind);
std::optional<CorrectionKind> correction_named(const std::string& name);
/// All names, as a message lists them.
std::string correction_names();

/// One correction by the user: data, applied between stages and replayed on every run.
struct Correction {
  int seq = 0;
  std::string when, who, channel, why;
  CorrectionKind what = CorrectionKind::add;
  std::optional<Seconds> time, to_time;
};

/// A plateau's window that the user has placed by hand, instead of the one the rule gives. Data like a
/// correction: replayed on every run.
struct WindowChoice {
  int curve = 0;
  Molar concentration;        ///< of the step, as the drug log states it; 0: the control
  std::string measure;        ///< `rate:RA`; empty: every measure of the step
  Seconds start, end;         ///< 0 <= start < end
  std::string when, who, why; ///< as in a correction
};

/// The newest session format that this program writes.
inline constexpr int kSessionVersion = 1;

/// A session file (`resources/formats/session.md`), as plain values.
struct SessionFile {
  std::string path;   ///< where it was read from
  std::string folder; ///< its folder, to which paths are relative
  std::string name;   ///< NAME of NAME.session.json
  int version = 1;    ///< above kSessionVersion: opened for reading only, never saved
  Preparation preparation;
  std::vector<RecordingFile> files;
  CsvChoices csv;
  std::vector<ChannelEntry> channels;
  std::vector<PathwayEntry> pathways;
  std::optional<std::string> protocol_file; ///< nothing: EDF+ annotations carry the protocol
  std::vector<std::string> measures;
  std::map<std::string, SettingValue> analysis;
  std::vector<Correction> review;    ///< by seq
  std::vector<WindowChoice> windows; ///< as the file lists them; a later one of the same step wins
  std::string as_read;               ///< the JSON text, so that unknown keys survive load and save
  std::vector<Warning> warnings;
};

} // namespace chronodrome::document
