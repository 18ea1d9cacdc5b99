// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <array>
#include <cstddef>
#include <cstdint>
#include <memory>
#include <optional>
#include <span>
#include <string>
#include <vector>

#include "base/quantity.h"
#include "base/result.h"
#include "recording/envelope.h"
#include "recording/sample_store.h"
#include "recording/time_base.h"

namespace chronodrome::recording {

/// One file as it was read: the identity that every result leads back to.
struct SourceFile {
  std::string path;   ///< as given
  std::string kind;   ///< "csv", "edf", "edf+c", "edf+d"
  std::string sha256; ///< 64 hex digits over the whole file
  std::uint64_t bytes = 0;
  Seconds start; ///< of its first sample, on the recording's clock
};

/// A signal as it stands in the file, in the file's own unit, at its native rate.
struct Signal {
  std::string source;            ///< header text or EDF label, trimmed, without the bracketed unit
  std::string source_as_written; ///< header text or EDF label, trimmed, with a bracketed unit if there is one
  std::string unit;              ///< as normalised ("mV", "uV", "mN", "mmHg", "counts"); empty: none stated
  TimeBase time_base;
  std::shared_ptr<const SampleStore> samples;
  std::shared_ptr<const Envelope> envelope;
  /// Values at which the converter clips, in `unit`, where the file states them (EDF physical minimum and
  /// maximum).
  std::optional<std::array<double, 2>> rails;
  double resolution = 0.0; ///< smallest step between values in `unit`; 0: not known
  std::string prefilter;   ///< text of the EDF header, for the report
};

/// Text at a time: an EDF+ annotation, or a comment met in a CSV.
struct Annotation {
  Seconds onset;
  std::optional<Seconds> duration;
  std::string text;
};

/// What a recording holds, whatever its files are. Immutable once made; share it as shared_ptr<const
/// Recording>. Zero of time is the first sample of the first file; gaps keep their length.
struct Recording {
  std::vector<SourceFile> files;
  std::optional<std::string> clock_start; ///< ISO 8601 local time of zero, where the file tells
  Seconds file_time_of_zero;              ///< what the file's own time column or record onset read at zero
  std::vector<Signal> signals;
  std::vector<Annotation> annotations; ///< by onset
  std::vector<std::string> file_notes; ///< header lines that are not data
  std::string convention;              ///< how a table was read: its encoding, delimiter, decimal mark, times
  std::vector<Warning> warnings;
  Seconds duration; ///< end of the last sample period of any signal

  /// Signal whose source (with or without its bracketed unit) is `source`, or nothing.
  [[nodiscard]] const Signal* find(const std::string& source) const;
};

enum class Role {
  sinus,
  atrial,
  his,
  ventricular,
  ecg,
  map,
  stimulus,
  tension,
  pressure,
  flow,
  temperature,
  other
};
enum class Lead { none, unipolar, bipolar };

/// True for roles whose activations are electrical (sinus, atrial, his, ventricular, ecg, map).
bool is_electrogram(Role role);
/// True for tension and pressure.
bool is_mechanical(Role role);
std::string name_of(Role role);
std::string name_of(Lead lead);
std::optional<Role> role_named(const std::string& name);
std::optional<Lead> lead_named(const std::string& name);

/// A signal with the meaning that the session gives it. Values are in `unit` after calibration and inversion.
struct Channel {
  std::string label;
  Role role = Role::other;
  Lead lead = Lead::none;
  std::string unit;
  std::shared_ptr<const Recording> recording; ///< keeps the signal alive
  std::size_t signal = 0;                     ///< index into recording->signals
  double gain = 1.0;                          ///< value = gain * raw + offset; a negative gain inverts
  double offset = 0.0;
  Seconds skew; ///< added to every time of this channel (converters that sample in turn)
  std::optional<std::array<double, 2>> position_mm;

  [[nodiscard]] const Signal& raw() const { return recording->signals[signal]; }
  [[nodiscard]] const TimeBase& time_base() const { return raw().time_base; }
  /// Samples first ... first + out.size() - 1 in `unit`. Requires: the range lies within the signal.
  void read(std::size_t first, std::span<double> out) const;
  /// Time of a (fractional) sample position, with skew.
  [[nodiscard]] Seconds time_at(double position) const { return time_base().time_at(position) + skew; }
};

} // namespace chronodrome::recording
