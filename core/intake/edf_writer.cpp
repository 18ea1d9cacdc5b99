// Chronodrome, GPL-3.0-or-later.
#include <algorithm>
#include <cmath>
#include <cstdint>

#include "base/number_text.h"
#include "intake/clock_time.h"
#include "intake/edf_written_header.h"
#include "intake/recording_writer.h"
#include "intake/written_file.h"

namespace chronodrome::intake {
namespace {

/// A time as a TAL spells it: a sign, digits, a tenth of a microsecond at most, no exponent.
std::string signed_time(double seconds) {
  std::string text = fixed_text(seconds, 7);
  while (text.back() == '0')
    text.pop_back();
  if (text.back() == '.') text.pop_back();
  return text.front() == '-' ? text : "+" + text;
}

std::string unsigned_time(double seconds) {
  return signed_time(seconds).substr(1);
}

/// Which records stand in the file, and what their annotation signals hold.
struct Records {
  std::vector<std::size_t> kept; ///< numbers on the time axis
  std::vector<std::string> lists;
};

std::size_t record_count(const WrittenRecording& recording, const std::vector<std::size_t>& per_record) {
  std::size_t count = recording.signals.empty() ? 1 : 0;
  for (std::size_t s = 0; s < per_record.size(); ++s) {
    const std::size_t samples = recording.signals[s].samples.size();
    count = std::max(count, (samples + per_record[s] - 1) / per_record[s]);
  }
  return count;
}

Records lay_out(const WrittenRecording& recording, EdfKind kind, std::size_t count, double start) {
  const double duration = recording.signals.empty() ? 0.0 : recording.record_duration.value();
  const double slack = 1e-9 * duration; // decimals of the caller's spans
  Records records;
  for (std::size_t r = 0; r < count; ++r) {
    const double from = static_cast<double>(r) * duration, to = from + duration;
    const bool left_out =
        std::any_of(recording.left_out.begin(), recording.left_out.end(), [&](const recording::Span& span) {
          return from >= span.start.value() - slack && to <= span.end.value() + slack;
        });
    if (!left_out) records.kept.push_back(r);
  }
  if (kind == EdfKind::plain) return records;
  for (const std::size_t r : records.kept)
    records.lists.push_back(signed_time(start + static_cast<double>(r) * duration) +
                            std::string("\x14\x14\0", 3));
  for (const WrittenAnnotation& annotation : recording.annotations) {
    if (records.kept.empty()) break;
    // The record that holds the onset, or the last one before it.
    const auto after = std::upper_bound(
        records.kept.begin(), records.kept.end(), annotation.onset.value(),
        [&](double onset, std::size_t r) { return onset < static_cast<double>(r) * duration - slack; });
    const std::size_t at =
        after == records.kept.begin() ? 0 : static_cast<std::size_t>(after - records.kept.begin()) - 1;
    std::string& list = records.lists[at];
    list += signed_time(start + annotation.onset.value());
    if (annotation.duration) list += "\x15" + unsigned_time(annotation.duration->value());
    list += "\x14" + annotation.text + std::string("\x14\0", 2);
  }
  return records;
}

std::int16_t digital_of(double value, const EdfScale& scale) {
  const double steps = (value - scale.physical_min) / (scale.physical_max - scale.physical_min) *
                       (scale.digital_max - scale.digital_min);
  const double digital =
      std::clamp(std::round(steps + scale.digital_min), static_cast<double>(scale.digital_min),
                 static_cast<double>(scale.digital_max));
  return static_cast<std::int16_t>(digital);
}

void add_samples(std::string& bytes, const WrittenSignal& signal, const EdfScale& scale, std::size_t first,
                 std::size_t count) {
  for (std::size_t i = first; i < first + count; ++i) {
    const double value = signal.samples[std::min(i, signal.samples.size() - 1)];
    const auto digital = static_cast<std::uint16_t>(digital_of(value, scale));
    bytes += static_cast<char>(digital & 0xFFU);
    bytes += static_cast<char>(digital >> 8U);
  }
}

} // namespace

Done write_edf(const std::string& path, const WrittenRecording& recording, EdfKind kind) {
  auto header = edf_header_of(path, recording, kind);
  if (!header) return header.error();
  const double start = header->sub_second_start;
  const std::size_t count = record_count(recording, header->per_record);
  const Records records = lay_out(recording, kind, count, start);
  if (records.kept.empty())
    return Error{
        ErrorCode::bad_usage, path, {}, "no record is left to write", "leave out less of the recording"};
  std::size_t widest = 0;
  for (const std::string& list : records.lists)
    widest = std::max(widest, list.size());
  header->annotation_samples = (widest + 1) / 2;
  header->records = records.kept.size();
  auto head = edf_header_text(path, *header, recording, kind);
  if (!head) return head.error();

  WrittenFile file(path);
  file.add(*head);
  std::string bytes;
  for (std::size_t k = 0; k < records.kept.size(); ++k) {
    bytes.clear();
    for (std::size_t s = 0; s < recording.signals.size(); ++s)
      add_samples(bytes, recording.signals[s], header->scales[s], records.kept[k] * header->per_record[s],
                  header->per_record[s]);
    if (kind != EdfKind::plain) {
      bytes += records.lists[k];
      bytes.append(2 * header->annotation_samples - records.lists[k].size(), '\0');
    }
    file.add(bytes);
  }
  return file.finish();
}

} // namespace chronodrome::intake
