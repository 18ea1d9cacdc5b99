// Chronodrome, GPL-3.0-or-later.
#include "intake/edf_reader.h"

#include <algorithm>
#include <cmath>
#include <cstring>

#include "base/number_text.h"
#include "intake/csv_text.h"
#include "intake/edf_annotations.h"
#include "intake/edf_times.h"
#include "recording/signal_writer.h"

namespace chronodrome::intake {
namespace {

constexpr std::uint64_t kBatchBytes = std::uint64_t{1} << 22U;
constexpr std::size_t kListed = 20; // gaps and unreadable annotations that get a warning each
constexpr double kFewSteps = 16.0;  // a signal that spans fewer steps of its converter is coarse

std::string counted(std::uint64_t count, const char* one, const char* many) {
  return std::to_string(count) + " " + (count == 1 ? one : many);
}

/// A signal with samples while it is read.
struct SignalInProgress {
  const EdfSignal* about = nullptr;
  recording::SignalWriter writer;
  std::uint64_t outside = 0; ///< samples beyond the digital range that the header states
  std::vector<std::int16_t> batch;
};

void copy_samples(std::span<const std::byte> record, const EdfSignal& signal,
                  std::vector<std::int16_t>& into) {
  const std::size_t before = into.size();
  into.resize(before + signal.per_record);
  const std::byte* from = record.data() + signal.byte_in_record;
  for (std::size_t i = 0; i < signal.per_record; ++i) {
    const auto low = static_cast<unsigned>(from[2 * i]), high = static_cast<unsigned>(from[2 * i + 1]);
    into[before + i] = static_cast<std::int16_t>(low | high << 8U);
  }
}

class FileReader {
public:
  FileReader(const ByteSource& source, const ReadSettings& settings, recording::StoreFolder& folder,
             EdfHeader header)
      : source_(source), settings_(settings), folder_(folder), header_(std::move(header)), times_(header_) {}

  Result<ReadContent> read() {
    recording_.warnings = header_.warnings;
    recording_.file_notes = header_.notes;
    content_.kind = header_.kind == EdfKindRead::plain        ? "edf"
                    : header_.kind == EdfKindRead::continuous ? "edf+c"
                                                              : "edf+d";
    begin_signals();
    if (auto fault = read_records()) return *std::move(fault);
    finish_signals();
    finish_annotations();
    report_times();
    return std::move(content_);
  }

private:
  void warn(std::uint64_t byte, const std::string& what, const std::string& remedy) {
    recording_.warnings.push_back(
        {source_.path(), Place::at_byte(static_cast<std::size_t>(byte)), what, remedy});
  }
  [[nodiscard]] std::uint64_t byte_of(std::uint64_t record) const {
    return header_.header_bytes + record * header_.record_bytes;
  }

  void begin_signals() {
    std::size_t index = 0;
    for (const EdfSignal& signal : header_.signals) {
      if (signal.annotations) continue;
      if (signal.per_record == 0) {
        warn(0, "signal '" + signal.label + "' has no samples", "it is left out");
        continue;
      }
      signals_.push_back({&signal, recording::SignalWriter(folder_, index++, signal.scale), 0, {}});
    }
  }

  std::optional<Error> read_records() {
    const std::uint64_t at_once = std::max<std::uint64_t>(1, kBatchBytes / header_.record_bytes);
    std::vector<std::byte> batch;
    for (std::uint64_t first = 0; first < header_.records; first += at_once) {
      const std::uint64_t count = std::min(at_once, header_.records - first);
      batch.resize(static_cast<std::size_t>(count * header_.record_bytes));
      const auto got = source_.read_at(byte_of(first), batch);
      if (!got) return got.error();
      if (*got < batch.size())
        return Error{ErrorCode::read_failed, source_.path(),
                     Place::at_byte(static_cast<std::size_t>(byte_of(first) + *got)),
                     "the file ends before its size", "wait until the recorder has closed the file"};
      for (std::uint64_t r = 0; r < count; ++r) {
        const auto record = std::span(batch).subspan(static_cast<std::size_t>(r * header_.record_bytes),
                                                     static_cast<std::size_t>(header_.record_bytes));
        for (SignalInProgress& signal : signals_)
          copy_samples(record, *signal.about, signal.batch);
        if (auto fault = read_annotations(record, first + r)) return fault;
      }
      write_batch();
      if (folder_.failed()) return std::nullopt; // the caller reads again, into memory
    }
    return std::nullopt;
  }

  void write_batch() {
    for (SignalInProgress& signal : signals_) {
      if (const auto& range = signal.about->digital; range && ((*range)[0] > -32768 || (*range)[1] < 32767)) {
        const auto low = static_cast<std::int16_t>((*range)[0]),
                   high = static_cast<std::int16_t>((*range)[1]);
        for (const std::int16_t sample : signal.batch)
          signal.outside += sample < low || sample > high ? 1U : 0U;
      }
      signal.writer.add(signal.batch);
      signal.batch.clear();
    }
  }

  std::optional<Error> read_annotations(std::span<const std::byte> record, std::uint64_t number) {
    std::optional<double> onset;
    bool first_signal = true;
    for (const EdfSignal& signal : header_.signals) {
      if (!signal.annotations) continue;
      const auto bytes = record.subspan(signal.byte_in_record, 2 * signal.per_record);
      EdfAnnotationsRead read =
          read_annotation_lists({reinterpret_cast<const char*>(bytes.data()), bytes.size()});
      if (first_signal && !read.lists.empty() && read.lists.front().keeps_time)
        onset = read.lists.front().onset;
      first_signal = false;
      for (EdfAnnotationList& list : read.lists) {
        if (list.odd && odd_++ == 0) odd_record_ = number;
        for (std::string& text : list.texts)
          keep(list, std::move(text));
      }
      for (const std::string& text : read.unreadable) {
        if (unreadable_++ < kListed)
          warn(byte_of(number) + signal.byte_in_record,
               "an annotation of record " + std::to_string(number + 1) + " has no readable time: '" + text +
                   "'",
               "it was dropped; the others are kept");
      }
    }
    if (recording_.annotations.size() > settings_.limits.annotations)
      return Error{
          ErrorCode::over_limit, source_.path(), Place::at_byte(static_cast<std::size_t>(byte_of(number))),
          "the file holds more than " + std::to_string(settings_.limits.annotations) + " annotations",
          "export fewer annotations"};
    if (!times_.add(header_.has_annotations() ? onset : std::nullopt))
      return Error{ErrorCode::damaged, source_.path(),
                   Place::at_byte(static_cast<std::size_t>(byte_of(number))),
                   "record " + std::to_string(number + 1) + " begins at " +
                       number_text(onset.value_or(0.0), 9) + " s, before the record before it ends",
                   "cut the file here into two recordings, or correct its record onsets"};
    if (times_.runs().size() > settings_.limits.runs)
      return Error{ErrorCode::over_limit, source_.path(),
                   Place::at_byte(static_cast<std::size_t>(byte_of(number))),
                   "the file has more than " + std::to_string(settings_.limits.runs) + " gaps",
                   "check the record onsets"};
    return std::nullopt;
  }

  void keep(const EdfAnnotationList& list, std::string text) {
    recording::Annotation annotation;
    annotation.onset = Seconds(list.onset);
    if (list.duration) annotation.duration = Seconds(*list.duration);
    annotation.text = std::move(text);
    recording_.annotations.push_back(std::move(annotation));
  }

  [[nodiscard]] recording::TimeBase time_base(const EdfSignal& signal) const {
    std::vector<recording::Run> runs;
    for (const RecordRun& run : times_.runs())
      runs.push_back({static_cast<std::size_t>(run.record) * signal.per_record,
                      static_cast<std::size_t>(run.count) * signal.per_record, Seconds(run.start)});
    return {Hertz(static_cast<double>(signal.per_record) / header_.duration), std::move(runs)};
  }

  void finish_signals() {
    for (SignalInProgress& in_progress : signals_) {
      const EdfSignal& about = *in_progress.about;
      const recording::SampleSummary summary = in_progress.writer.summary();
      auto finished = in_progress.writer.finish();
      recording::Signal signal;
      signal.source = about.label;
      signal.source_as_written = about.label;
      signal.unit = about.unit;
      signal.time_base = time_base(about);
      signal.samples = finished.samples;
      signal.envelope = finished.envelope;
      signal.rails = about.rails;
      signal.resolution = about.resolution;
      signal.prefilter = about.prefilter;
      judge(signal, summary, in_progress.outside);
      recording_.duration = std::max(recording_.duration, signal.time_base.end());
      recording_.signals.push_back(std::move(signal));
      content_.kinds.emplace_back(about.scale);
    }
  }

  void judge(const recording::Signal& signal, const recording::SampleSummary& summary,
             std::uint64_t outside) {
    const std::string name = "signal '" + signal.source + "'";
    const double steps = (summary.max - summary.min) / signal.resolution;
    if (summary.count > 1 && summary.min == summary.max) {
      warn(header_.header_bytes, name + " is " + number_text(summary.min, 6) + " throughout",
           "check the lead");
    } else if (summary.count > 1 && steps < kFewSteps - 0.5) {
      warn(header_.header_bytes,
           name + " spans only " + number_text(std::round(steps), 3) + " steps of its converter",
           "amplitudes are coarse; record with a higher gain");
    }
    if (outside > 0)
      warn(header_.header_bytes,
           counted(outside, "sample", "samples") + " of " + name + (outside == 1 ? " lies" : " lie") +
               " outside the digital range that the header states",
           "kept as they are");
  }

  void finish_annotations() {
    const Seconds zero(times_.first_onset());
    std::size_t outside = 0;
    for (recording::Annotation& annotation : recording_.annotations) {
      annotation.onset -= zero;
      const bool before = annotation.onset.value() < 0.0;
      if (before || (header_.has_samples() && annotation.onset > recording_.duration)) ++outside;
    }
    std::stable_sort(recording_.annotations.begin(), recording_.annotations.end(),
                     [](const auto& a, const auto& b) { return a.onset < b.onset; });
    if (outside > 0)
      warn(header_.header_bytes,
           counted(outside, "annotation lies", "annotations lie") +
               " before the first or behind the last sample",
           "check the times of the annotations");
    if (odd_ > 0)
      warn(byte_of(odd_record_),
           counted(odd_, "annotation has", "annotations have") +
               " a time without sign or with a decimal comma (first in record " +
               std::to_string(odd_record_ + 1) + ")",
           "read all the same");
    if (unreadable_ > kListed)
      warn(header_.header_bytes, std::to_string(unreadable_) + " annotations in all have no readable time",
           "they were dropped");
  }

  void report_times() {
    const double zero = times_.first_onset();
    recording_.file_time_of_zero = Seconds(zero);
    if (header_.start) recording_.clock_start = clock_text(later_by(*header_.start, zero));
    if (zero < 0.0 || zero >= 1.0)
      warn(header_.header_bytes,
           "the first record begins " + number_text(zero, 9) + " s after the start time of the header",
           "less than a second is usual; check the clock time");
    if (header_.has_annotations() && times_.without_onset() > 0 && header_.has_samples())
      warn(header_.header_bytes,
           counted(times_.without_onset(), "record does not say when it begins",
                   "records do not say when they begin"),
           "taken to follow the record before");
    if (const auto& odd = times_.first_isolated())
      warn(byte_of(odd->record),
           "record " + std::to_string(odd->record + 1) + " says that it begins at " +
               number_text(odd->onset, 9) + " s, but the records around it put it at " +
               number_text(odd->expected, 9) + " s" +
               (times_.isolated() > 1 ? " (" + std::to_string(times_.isolated()) + " such records)" : ""),
           "its onset is not used; check the file");
    if (times_.overlapping() > 0)
      warn(header_.header_bytes,
           counted(times_.overlapping(), "record says that it begins before the record before it ends",
                   "records say that they begin before the record before them ends") +
               ", but the file says it is continuous",
           "it is read as continuous");
    report_gaps();
  }

  void report_gaps() {
    const auto& runs = times_.runs();
    double missing = 0.0;
    for (std::size_t k = 1; k < runs.size(); ++k) {
      const double end = runs[k - 1].start + static_cast<double>(runs[k - 1].count) * header_.duration;
      const double gap = runs[k].start - end;
      missing += gap;
      if (k <= kListed)
        warn(byte_of(runs[k].record),
             "a gap of " + number_text(gap, 6) + " s before " + number_text(runs[k].start, 9) +
                 " s (record " + std::to_string(runs[k].record + 1) + ")" +
                 (header_.kind == EdfKindRead::continuous ? ", although the file says it is continuous" : ""),
             "no interval is measured across it");
    }
    if (runs.size() > kListed + 1)
      warn(header_.header_bytes,
           std::to_string(runs.size() - 1) + " gaps in all, " + number_text(missing, 6) + " s together",
           "check the recorder");
    if (runs.size() == 1 && header_.kind == EdfKindRead::discontinuous)
      recording_.file_notes.push_back("marked as discontinuous, but without gaps");
  }

  const ByteSource& source_;
  const ReadSettings& settings_;
  recording::StoreFolder& folder_;
  EdfHeader header_;
  EdfTimes times_;
  std::vector<SignalInProgress> signals_;
  std::size_t odd_ = 0, unreadable_ = 0;
  std::uint64_t odd_record_ = 0;
  ReadContent content_;
  recording::Recording& recording_ = content_.recording;
};

} // namespace

Result<ReadContent> read_edf(const ByteSource& source, const ReadSettings& settings,
                             recording::StoreFolder& folder) {
  auto header = read_edf_header(source, settings);
  if (!header) return header.error();
  return FileReader(source, settings, folder, *std::move(header)).read();
}

} // namespace chronodrome::intake
