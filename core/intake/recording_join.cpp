// Chronodrome, GPL-3.0-or-later.
#include <algorithm>
#include <cmath>
#include <set>

#include "base/number_text.h"
#include "intake/clock_time.h"
#include "intake/recording_reader.h"
#include "recording/stores.h"

namespace chronodrome::intake {
namespace {

using recording::Recording;
using recording::Run;
using recording::Signal;

/// When each file begins, on the clock of the first.
Result<std::vector<double>> starts_of(const std::vector<Recording>& parts) {
  std::vector<double> starts(parts.size(), 0.0);
  const bool all_clocks = std::all_of(parts.begin(), parts.end(),
                                      [](const Recording& part) { return part.clock_start.has_value(); });
  for (std::size_t i = 1; i < parts.size(); ++i) {
    const std::string& file = parts[i].files.front().path;
    if (all_clocks) {
      const auto first = parse_clock_time(*parts.front().clock_start),
                 own = parse_clock_time(*parts[i].clock_start);
      if (!first || !own)
        return Error{
            ErrorCode::internal_fault, file, {}, "a clock time that was read cannot be read", "report this"};
      starts[i] = seconds_between(*first, *own);
    } else {
      // The second file's own time column may run on from the first's.
      starts[i] = (parts[i].file_time_of_zero - parts.front().file_time_of_zero).value();
      if (!(starts[i] > 0.0))
        return Error{ErrorCode::not_enough_data,
                     file,
                     {},
                     "the files do not tell when they begin, so that they cannot be placed in time",
                     "use files with a start date and time, or with a time column that runs on"};
    }
  }
  return starts;
}

std::optional<Error> order_fault(const std::vector<Recording>& parts, const std::vector<double>& starts,
                                 std::vector<Warning>& warnings) {
  for (std::size_t i = 1; i < parts.size(); ++i) {
    const std::string& file = parts[i].files.front().path;
    const double end = starts[i - 1] + parts[i - 1].duration.value();
    if (starts[i] < starts[i - 1])
      return Error{ErrorCode::bad_value,
                   file,
                   {},
                   "the file begins before " + parts[i - 1].files.front().path,
                   "list the files in order of time"};
    double fastest = 1.0;
    for (const Signal& signal : parts[i].signals)
      fastest = std::max(fastest, signal.time_base.rate().value());
    const double gap = starts[i] - end;
    if (gap < -0.5 / fastest)
      return Error{ErrorCode::bad_value,
                   file,
                   {},
                   "the file begins " + number_text(-gap, 6) + " s before " +
                       parts[i - 1].files.front().path + " ends",
                   "leave one of them out, or correct their start times"};
    if (gap > 0.5 / fastest)
      warnings.push_back({file,
                          {},
                          "a gap of " + number_text(gap, 6) + " s to the file before it",
                          "no interval is measured across it"});
  }
  return std::nullopt;
}

/// One signal through all files.
class SignalJoin {
public:
  SignalJoin(const std::vector<Recording>& parts, const std::vector<double>& starts)
      : parts_(parts), starts_(starts) {}

  Result<Signal> join(const std::string& source, std::vector<Warning>& warnings) {
    Signal joined;
    double weighted_rate = 0.0, samples = 0.0;
    std::vector<std::shared_ptr<const recording::SampleStore>> stores;
    std::vector<Run> runs;
    std::optional<std::size_t> before; // the last file that has it
    for (std::size_t i = 0; i < parts_.size(); ++i) {
      const auto found = std::find_if(parts_[i].signals.begin(), parts_[i].signals.end(),
                                      [&](const Signal& signal) { return signal.source == source; });
      if (found == parts_[i].signals.end()) {
        warnings.push_back({parts_[i].files.front().path,
                            {},
                            "signal '" + source + "' is missing in this file",
                            "it has a gap there"});
        continue;
      }
      if (auto fault = before ? difference(joined, *found, i) : std::nullopt) return *std::move(fault);
      if (!before) joined = *found;
      if (found->rails != joined.rails) joined.rails.reset();
      joined.resolution = std::max(joined.resolution, found->resolution);
      weighted_rate += found->time_base.rate().value() * static_cast<double>(found->samples->size());
      add_runs(runs, *found, samples, starts_[i]);
      samples += static_cast<double>(found->samples->size());
      stores.push_back(found->samples);
      before = i;
    }
    joined.time_base = recording::TimeBase(Hertz(weighted_rate / samples), std::move(runs));
    joined.samples = recording::joined_store(std::move(stores));
    joined.envelope = recording::Envelope::of(*joined.samples);
    return joined;
  }

private:
  /// Rates that drift apart by less than a sample over a file are one.
  std::optional<Error> difference(const Signal& a, const Signal& b, std::size_t part) const {
    const std::string& file = parts_[part].files.front().path;
    if (a.unit != b.unit)
      return Error{ErrorCode::bad_value,
                   file,
                   {},
                   "signal '" + a.source + "' is in '" + b.unit + "' here, in '" + a.unit + "' before",
                   "export the files in the same unit"};
    const double apart = std::abs(a.time_base.rate() / b.time_base.rate() - 1.0);
    if (apart * static_cast<double>(b.samples->size()) > 1.0)
      return Error{ErrorCode::bad_value,
                   file,
                   {},
                   "signal '" + a.source + "' is sampled at " + number_text(b.time_base.rate().value(), 8) +
                       " Hz here, at " + number_text(a.time_base.rate().value(), 8) + " Hz before",
                   "use files of one rate"};
    return std::nullopt;
  }

  /// A file that follows without a gap goes on with the run before it.
  static void add_runs(std::vector<Run>& runs, const Signal& signal, double samples, double start) {
    const double period = 1.0 / signal.time_base.rate().value();
    for (const Run& run : signal.time_base.runs()) {
      const Seconds at = run.start + Seconds(start);
      if (!runs.empty()) {
        Run& last = runs.back();
        const double end = last.start.value() + static_cast<double>(last.count) * period;
        if (at.value() - end < 0.5 * period) {
          last.count += run.count;
          continue;
        }
      }
      runs.push_back({static_cast<std::size_t>(samples) + run.first, run.count, at});
    }
  }

  const std::vector<Recording>& parts_;
  const std::vector<double>& starts_;
};

std::vector<std::string> sources_of(const std::vector<Recording>& parts) {
  std::vector<std::string> sources;
  std::set<std::string> taken;
  for (const Recording& part : parts) {
    for (const Signal& signal : part.signals) {
      if (taken.insert(signal.source).second) sources.push_back(signal.source);
    }
  }
  return sources;
}

} // namespace

Result<Recording> read_recordings(std::span<const std::string> paths, const ReadSettings& settings) {
  if (paths.empty())
    return Error{ErrorCode::bad_usage, "", {}, "no recording is given", "name at least one file"};
  std::vector<Recording> parts;
  for (const std::string& path : paths) {
    auto part = read_recording(path, settings);
    if (!part) return part.error();
    parts.push_back(*std::move(part));
  }
  if (parts.size() == 1) return std::move(parts.front());

  auto starts = starts_of(parts);
  if (!starts) return starts.error();
  Recording joined;
  joined.clock_start = parts.front().clock_start;
  joined.file_time_of_zero = parts.front().file_time_of_zero;
  if (auto fault = order_fault(parts, *starts, joined.warnings)) return *std::move(fault);
  for (std::size_t i = 0; i < parts.size(); ++i) {
    Recording& part = parts[i];
    part.files.front().start = Seconds((*starts)[i]);
    joined.files.push_back(part.files.front());
    for (recording::Annotation annotation : part.annotations) {
      annotation.onset += Seconds((*starts)[i]);
      joined.annotations.push_back(std::move(annotation));
    }
    joined.file_notes.insert(joined.file_notes.end(), part.file_notes.begin(), part.file_notes.end());
    joined.warnings.insert(joined.warnings.end(), part.warnings.begin(), part.warnings.end());
    if (i == 0) joined.convention = part.convention;
  }
  std::stable_sort(joined.annotations.begin(), joined.annotations.end(),
                   [](const auto& a, const auto& b) { return a.onset < b.onset; });
  SignalJoin join(parts, *starts);
  for (const std::string& source : sources_of(parts)) {
    auto signal = join.join(source, joined.warnings);
    if (!signal) return signal.error();
    joined.duration = std::max(joined.duration, signal->time_base.end());
    joined.signals.push_back(*std::move(signal));
  }
  return joined;
}

} // namespace chronodrome::intake
