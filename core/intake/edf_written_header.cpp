// Chronodrome, GPL-3.0-or-later.
#include "intake/edf_written_header.h"

#include <algorithm>
#include <array>
#include <cmath>

#include "base/number_text.h"
#include "intake/clock_time.h"

namespace chronodrome::intake {
namespace {

constexpr std::size_t kNumberWidth = 8;

Error usage(const std::string& path, const std::string& what, const std::string& remedy) {
  return {ErrorCode::bad_usage, path, {}, what, remedy};
}

bool is_printable_ascii(const std::string& text) {
  return std::all_of(text.begin(), text.end(), [](char c) { return c >= ' ' && c <= '~'; });
}

/// The nearest number to `value` that eight characters hold, not above it (`side` < 0), not below it
/// (`side` > 0), or on whichever side (0).
std::string number_of_eight(double value, int side) {
  const auto fits = [&](const std::string& text) {
    const auto read = parse_number(text);
    return text.size() <= kNumberWidth && read && (side >= 0 || *read <= value) &&
           (side <= 0 || *read >= value);
  };
  const std::string exact = exact_text(value);
  if (fits(exact)) return exact;
  // Plain decimals, as every reader understands them; an exponent only where they would lose the value.
  for (int decimals = 6; decimals >= 0; --decimals) {
    const double step = std::pow(10.0, -decimals);
    if (std::abs(value) < 100.0 * step && decimals == 6) break; // fewer than three digits would be left
    for (int nudge = 0; nudge <= 2; ++nudge) {
      std::string text = fixed_text(value + side * nudge * step, decimals);
      if (fits(text)) return text;
    }
  }
  for (int digits = 4; digits >= 1; --digits) {
    for (int nudge = 0; nudge <= 2; ++nudge) {
      const double step = std::pow(10.0, std::floor(std::log10(std::abs(value))) - digits + 1);
      std::string text = number_text(value + side * nudge * step, digits);
      if (fits(text)) return text;
    }
  }
  return side < 0 && value >= 0.0 ? "0" : side > 0 && value <= 0.0 ? "0" : "";
}

Result<EdfScale> scale_of(const std::string& path, const WrittenSignal& signal) {
  EdfScale scale;
  scale.digital_min = signal.digital_min;
  scale.digital_max = signal.digital_max;
  if (scale.digital_min < -32768 || scale.digital_max > 32767 || scale.digital_min >= scale.digital_max)
    return usage(path, "signal " + signal.label + " has an impossible digital range",
                 "give a range within -32768 to 32767");
  double low = signal.physical_min, high = signal.physical_max;
  int side = 0;
  if (low == 0.0 && high == 0.0) {
    const auto [least, most] = std::minmax_element(signal.samples.begin(), signal.samples.end());
    low = *least;
    high = *most;
    side = 1;
    if (low == high) {
      const double around = std::max(1.0, std::abs(low) * 0.01);
      low -= around;
      high += around;
    }
  }
  scale.physical_min_text = number_of_eight(low, -side);
  scale.physical_max_text = number_of_eight(high, side);
  const auto min = parse_number(scale.physical_min_text), max = parse_number(scale.physical_max_text);
  if (!min || !max || *min == *max)
    return usage(path, "the range of signal " + signal.label + " does not fit the header's eight characters",
                 "write the signal in a larger or smaller unit");
  scale.physical_min = *min;
  scale.physical_max = *max;
  return scale;
}

std::optional<Error> fault_in(const std::string& path, const WrittenSignal& signal) {
  if (signal.label.size() > 16 || !is_printable_ascii(signal.label))
    return usage(path, "the label '" + signal.label + "' is longer than 16 ASCII characters", "shorten it");
  if (signal.unit.size() > 8 || !is_printable_ascii(signal.unit))
    return usage(path, "the unit '" + signal.unit + "' is longer than 8 ASCII characters",
                 "write uV for microvolts");
  if (signal.prefilter.size() > 80 || !is_printable_ascii(signal.prefilter))
    return usage(path, "the filter text of " + signal.label + " is longer than 80 ASCII characters",
                 "shorten it");
  if (signal.samples.empty())
    return usage(path, "signal " + signal.label + " has no samples", "leave it out");
  if (!std::all_of(signal.samples.begin(), signal.samples.end(), [](double v) { return std::isfinite(v); }))
    return usage(path, "signal " + signal.label + " holds a value that is not a number",
                 "leave the stretch out instead");
  return std::nullopt;
}

std::optional<Error> fault_in(const std::string& path, const WrittenRecording& recording, EdfKind kind) {
  if (kind == EdfKind::plain && (!recording.annotations.empty() || recording.signals.empty()))
    return usage(path, "a plain EDF file holds signals and no annotations", "write EDF+");
  if (kind != EdfKind::discontinuous && !recording.left_out.empty())
    return usage(path, "only a discontinuous file can leave records out", "write EDF+D");
  for (const WrittenAnnotation& annotation : recording.annotations) {
    if (annotation.text.find_first_of(std::string("\0\x14\x15", 3)) != std::string::npos)
      return usage(path, "an annotation holds one of the control characters that end an annotation",
                   "take it out of the text");
    if (!std::isfinite(annotation.onset.value()) ||
        (annotation.duration && !(annotation.duration->value() >= 0.0)))
      return usage(path, "an annotation has an impossible time",
                   "give a finite onset and a duration of 0 or more");
  }
  for (const WrittenSignal& signal : recording.signals) {
    if (auto fault = fault_in(path, signal)) return fault;
  }
  return std::nullopt;
}

/// Date and time fields and the start of an EDF+ recording field.
struct StartFields {
  std::string date = "01.01.85", time = "00.00.00", long_date = "X"; // unknown: EDF+'s earliest date
};

Result<StartFields> start_of(const std::string& path, const std::string& clock_start, double& fraction) {
  StartFields fields;
  if (clock_start.empty()) return fields;
  const auto clock = parse_clock_time(clock_start);
  if (!clock)
    return usage(path, "the start '" + clock_start + "' is no date and time", "write 2026-03-04T09:30:00");
  const CalendarDay day = calendar_day(clock->day);
  if (day.year < 1985 || day.year > 2084)
    return usage(path, "the year " + std::to_string(day.year) + " does not fit an EDF header",
                 "give a year from 1985 to 2084");
  constexpr std::array<const char*, 12> kMonths = {"JAN", "FEB", "MAR", "APR", "MAY", "JUN",
                                                   "JUL", "AUG", "SEP", "OCT", "NOV", "DEC"};
  const std::string text = clock_text({clock->day, std::floor(clock->second)});
  fraction = clock->second - std::floor(clock->second);
  fields.date = text.substr(8, 2) + "." + text.substr(5, 2) + "." + text.substr(2, 2);
  fields.time = text.substr(11, 2) + "." + text.substr(14, 2) + "." + text.substr(17, 2);
  fields.long_date =
      text.substr(8, 2) + "-" + kMonths[static_cast<std::size_t>(day.month - 1)] + "-" + text.substr(0, 4);
  return fields;
}

} // namespace

Result<EdfWrittenHeader> edf_header_of(const std::string& path, const WrittenRecording& recording,
                                       EdfKind kind) {
  if (auto fault = fault_in(path, recording, kind)) return *std::move(fault);
  EdfWrittenHeader header;
  const double duration = recording.signals.empty() ? 0.0 : recording.record_duration.value();
  header.duration_text = exact_text(duration);
  if (header.duration_text.size() > kNumberWidth && header.duration_text.rfind("0.", 0) == 0)
    header.duration_text.erase(0, 1); // .9980469 just fits
  if (header.duration_text.find('e') != std::string::npos || header.duration_text.size() > kNumberWidth ||
      (!recording.signals.empty() && !(duration > 0.0)))
    return usage(path, "a record of " + header.duration_text + " s does not fit the header",
                 "choose a duration that eight characters hold, for example 0.5");
  for (const WrittenSignal& signal : recording.signals) {
    const double samples = signal.rate.value() * duration;
    if (!(samples >= 1.0 && samples < 1e8) || std::abs(samples - std::round(samples)) > 1e-9 * samples)
      return usage(path,
                   "signal " + signal.label + " at " + number_text(signal.rate.value()) +
                       " Hz does not fill records of " + header.duration_text + " s",
                   "choose a record duration that holds whole samples of every signal");
    header.per_record.push_back(static_cast<std::size_t>(std::round(samples)));
    auto scale = scale_of(path, signal);
    if (!scale) return scale.error();
    header.scales.push_back(*std::move(scale));
  }
  auto fields = start_of(path, recording.clock_start, header.sub_second_start);
  if (!fields) return fields.error();
  if (kind == EdfKind::plain && header.sub_second_start > 0.0)
    return usage(path, "a plain EDF file starts on a whole second", "write EDF+ or give whole seconds");
  return header;
}

Result<std::string> edf_header_text(const std::string& path, const EdfWrittenHeader& header,
                                    const WrittenRecording& recording, EdfKind kind) {
  double fraction = 0.0;
  const auto start = start_of(path, recording.clock_start, fraction);
  if (!start) return start.error();
  std::string text, too_long;
  const auto field = [&](std::string content, std::size_t width) {
    if (content.size() > width) too_long = content;
    content.resize(width, ' ');
    text += content;
  };
  const bool plus = kind != EdfKind::plain;
  const std::size_t signals = recording.signals.size() + (plus ? 1 : 0);
  std::string about = recording.recording_text;
  if (plus) {
    std::replace(about.begin(), about.end(), ' ', '_'); // a blank would start a new subfield
    about = "Startdate " + start->long_date + " X X " + (about.empty() ? "X" : about);
  }
  field("0", 8);
  field(plus ? "X X X X" : "X", 80);
  field(about, 80);
  field(start->date, 8);
  field(start->time, 8);
  field(std::to_string(256 * (signals + 1)), 8);
  field(kind == EdfKind::continuous ? "EDF+C" : kind == EdfKind::discontinuous ? "EDF+D" : "", 44);
  field(std::to_string(header.records), 8);
  field(header.duration_text, 8);
  field(std::to_string(signals), 4);
  const auto column = [&](std::size_t width, const auto& of_signal, const std::string& of_annotations) {
    for (std::size_t s = 0; s < recording.signals.size(); ++s)
      field(of_signal(s), width);
    if (plus) field(of_annotations, width);
  };
  using Index = std::size_t;
  column(
      16, [&](Index s) { return recording.signals[s].label; }, "EDF Annotations");
  column(
      80, [](Index) { return std::string(); }, "");
  column(
      8, [&](Index s) { return recording.signals[s].unit; }, "");
  column(
      8, [&](Index s) { return header.scales[s].physical_min_text; }, "-1");
  column(
      8, [&](Index s) { return header.scales[s].physical_max_text; }, "1");
  column(
      8, [&](Index s) { return std::to_string(header.scales[s].digital_min); }, "-32768");
  column(
      8, [&](Index s) { return std::to_string(header.scales[s].digital_max); }, "32767");
  column(
      80, [&](Index s) { return recording.signals[s].prefilter; }, "");
  column(
      8, [&](Index s) { return std::to_string(header.per_record[s]); },
      std::to_string(header.annotation_samples));
  column(
      32, [](Index) { return std::string(); }, "");
  if (!too_long.empty()) return usage(path, "'" + too_long + "' does not fit its header field", "shorten it");
  if (!is_printable_ascii(text))
    return usage(path, "an EDF header holds ASCII characters only",
                 "write the recording text without accents");
  return text;
}

} // namespace chronodrome::intake
