// Chronodrome, GPL-3.0-or-later.
#include "intake/edf_header.h"

#include <algorithm>
#include <cmath>
#include <set>

#include "base/number_text.h"
#include "intake/edf_fields.h"
#include "intake/units.h"

namespace chronodrome::intake {
namespace {

// Fields of the fixed part, by byte.
constexpr std::size_t kPatientField = 8, kRecordingField = 88, kHeaderBytesField = 184, kReservedField = 192,
                      kRecordsField = 236, kDurationField = 244, kSignalsField = 252, kFixedPart = 256;
// Widths of the fields that repeat for every signal, in their order.
constexpr std::size_t kLabelWidth = 16, kTransducerWidth = 80, kUnitWidth = 8, kNumberWidth = 8,
                      kFilterWidth = 80;

constexpr double kLargestPhysical = 1e30; // beyond it a header field is damaged, not a range

Result<std::string> bytes_of(const ByteSource& source, std::size_t count) {
  std::string bytes(count, '\0');
  const auto got = source.read_at(0, std::as_writable_bytes(std::span(bytes)));
  if (!got) return got.error();
  if (*got < count)
    return Error{ErrorCode::damaged, source.path(), Place::at_byte(*got),
                 "the file ends inside its header: it has " + std::to_string(*got) + " bytes, the header " +
                     std::to_string(count),
                 "copy the file again"};
  return bytes;
}

class HeaderReader {
public:
  HeaderReader(const ByteSource& source, const ReadSettings& settings, std::string bytes, std::size_t signals)
      : source_(source), settings_(settings), fields_(std::move(bytes), source.path()), signals_(signals) {}

  Result<EdfHeader> read() {
    read_identity();
    if (auto fault = read_signals()) return *std::move(fault);
    settle_kind();
    if (auto fault = read_duration()) return *std::move(fault);
    if (auto fault = count_records()) return *std::move(fault);
    header_.warnings = fields_.take_warnings();
    return std::move(header_);
  }

private:
  /// Byte of a signal's field: `before` are the widths of the fields that come before it.
  [[nodiscard]] std::size_t at(std::size_t before, std::size_t width, std::size_t signal) const {
    return kFixedPart + before * signals_ + width * signal;
  }

  void read_identity() {
    for (const std::size_t field : {kPatientField, kRecordingField}) {
      const std::string text = fields_.text(field, 80);
      if (!text.empty() && text != "X X X X") header_.notes.push_back(text);
    }
    const std::string reserved = fields_.text(kReservedField, 44);
    if (reserved.rfind("EDF+C", 0) == 0) {
      header_.kind = EdfKindRead::continuous;
    } else if (reserved.rfind("EDF+D", 0) == 0) {
      header_.kind = EdfKindRead::discontinuous;
    } else if (!reserved.empty()) {
      header_.notes.push_back("reserved field: " + reserved);
    }
    header_.start = edf_start(fields_, header_.kind != EdfKindRead::plain, header_.notes);
  }

  std::optional<Error> read_signals() {
    std::set<std::string> taken;
    std::uint64_t bytes = 0;
    for (std::size_t s = 0; s < signals_; ++s) {
      EdfSignal signal;
      signal.label = fields_.text(at(0, kLabelWidth, s), kLabelWidth);
      signal.annotations = signal.label == "EDF Annotations";
      std::size_t before = kLabelWidth + kTransducerWidth;
      signal.unit = normalised_unit(fields_.text(at(before, kUnitWidth, s), kUnitWidth));
      before += kUnitWidth + 4 * kNumberWidth;
      signal.prefilter = fields_.text(at(before, kFilterWidth, s), kFilterWidth);
      const std::size_t count_at = at(before + kFilterWidth, kNumberWidth, s);
      const auto count = fields_.integer(count_at, kNumberWidth, "the number of samples a record");
      if (!count) return count.error();
      if (*count < 0 || *count > 1'000'000'000'000)
        return fields_.fault(ErrorCode::bad_value, count_at,
                             "signal " + std::to_string(s + 1) + " has " + std::to_string(*count) +
                                 " samples a record",
                             "the header is damaged; export the recording again");
      signal.per_record = static_cast<std::size_t>(*count);
      signal.byte_in_record = bytes;
      bytes += 2 * static_cast<std::uint64_t>(*count);
      if (!signal.annotations) {
        name(signal, s, taken);
        calibrate(signal, s);
      }
      header_.signals.push_back(std::move(signal));
    }
    header_.record_bytes = bytes;
    if (bytes > settings_.limits.record_bytes)
      return fields_.fault(ErrorCode::over_limit, at(216, kNumberWidth, 0),
                           "one data record would take " + std::to_string(bytes) + " bytes; the limit is " +
                               std::to_string(settings_.limits.record_bytes) + " and the file has " +
                               std::to_string(source_.size()),
                           "the header is damaged; export the recording again");
    return std::nullopt;
  }

  void name(EdfSignal& signal, std::size_t s, std::set<std::string>& taken) {
    const std::string label = signal.label;
    if (label.empty()) signal.label = "signal " + std::to_string(s + 1);
    for (int number = 2; !taken.insert(signal.label).second; ++number)
      signal.label =
          (label.empty() ? "signal " + std::to_string(s + 1) : label) + " " + std::to_string(number);
    if (signal.label == label) return;
    fields_.warn(at(0, kLabelWidth, s),
                 label.empty() ? "signal " + std::to_string(s + 1) + " has no label"
                               : "two signals are labelled '" + label + "'",
                 "it is called '" + signal.label + "' here");
  }

  /// Scale and range; a signal whose numbers make no scale is read in counts.
  void calibrate(EdfSignal& signal, std::size_t s) {
    const std::size_t before = kLabelWidth + kTransducerWidth + kUnitWidth;
    const std::size_t physical_at = at(before, kNumberWidth, s);
    const auto physical_min = parse(physical_at);
    const auto physical_max = parse(at(before + kNumberWidth, kNumberWidth, s));
    const auto digital_min = parse(at(before + 2 * kNumberWidth, kNumberWidth, s));
    const auto digital_max = parse(at(before + 3 * kNumberWidth, kNumberWidth, s));
    std::string fault;
    if (!physical_min || !physical_max || !digital_min || !digital_max) {
      fault = "its range is not given in numbers";
    } else if (*digital_min < -32768.0 || *digital_max > 32767.0) {
      fault = "its digital range " + number_text(*digital_min) + " to " + number_text(*digital_max) +
              " does not fit 16 bits";
    } else if (*digital_min >= *digital_max) {
      fault =
          "its digital range " + number_text(*digital_min) + " to " + number_text(*digital_max) + " is empty";
    } else if (*physical_min == *physical_max) {
      fault = "its physical minimum and maximum are both " + number_text(*physical_min);
    } else if (std::abs(*physical_min) > kLargestPhysical || std::abs(*physical_max) > kLargestPhysical) {
      fault = "its physical range is beyond all measure";
    }
    signal.resolution = 1.0;
    if (!fault.empty()) {
      fields_.warn(physical_at, "signal '" + signal.label + "' is not calibrated: " + fault,
                   "it is read in counts; give a calibration in the session");
      signal.unit = "counts";
      return;
    }
    signal.digital = {static_cast<int>(*digital_min), static_cast<int>(*digital_max)};
    signal.scale.gain = (*physical_max - *physical_min) / (*digital_max - *digital_min);
    signal.scale.digital_min = *digital_min;
    signal.scale.physical_min = *physical_min;
    signal.rails = {std::min(*physical_min, *physical_max), std::max(*physical_min, *physical_max)};
    signal.resolution = std::abs(signal.scale.gain);
    if (!signal.unit.empty()) return;
    const bool counts = signal.scale.gain == 1.0 && *digital_min == *physical_min;
    if (counts) signal.unit = "counts";
    fields_.warn(at(kLabelWidth + kTransducerWidth, kUnitWidth, s),
                 "signal '" + signal.label + "' states no unit",
                 counts ? "it is read in counts" : "give the unit in the session");
  }

  std::optional<double> parse(std::size_t field) {
    const auto value = fields_.number(field, kNumberWidth, "a range");
    return value ? std::optional(*value) : std::nullopt;
  }

  void settle_kind() {
    if (header_.kind != EdfKindRead::plain && !header_.has_annotations()) {
      header_.notes.push_back("marked as EDF+, but without annotations: read as EDF");
      header_.kind = EdfKindRead::plain;
    } else if (header_.kind == EdfKindRead::plain && header_.has_annotations()) {
      header_.notes.push_back("not marked as EDF+, but with annotations: read as EDF+");
      header_.kind = EdfKindRead::continuous;
    }
  }

  std::optional<Error> read_duration() {
    const auto duration = fields_.number(kDurationField, 8, "the duration of a record");
    if (!duration) return duration.error();
    header_.duration = *duration;
    if (!header_.has_samples() && *duration >= 0.0) return std::nullopt;
    if (*duration > 0.0 && *duration < 1e9) return std::nullopt;
    if (*duration == 0.0 && settings_.rate) {
      std::size_t most = 0;
      for (const EdfSignal& signal : header_.signals)
        most = std::max(most, signal.annotations ? 0 : signal.per_record);
      header_.duration = static_cast<double>(most) / settings_.rate->value();
      fields_.warn(kDurationField, "the records have no duration",
                   "the rate that is set, " + number_text(settings_.rate->value()) + " Hz, is used");
      return std::nullopt;
    }
    return fields_.fault(ErrorCode::bad_value, kDurationField,
                         "the duration of a record is " + number_text(*duration) +
                             " s, so that there is no rate",
                         "set recording.csv.rate_hz to the highest rate in the file");
  }

  std::optional<Error> count_records() {
    header_.header_bytes = kFixedPart * (signals_ + 1);
    const std::string stated = fields_.text(kHeaderBytesField, 8);
    if (parse_integer(stated) != static_cast<std::int64_t>(header_.header_bytes))
      fields_.warn(kHeaderBytesField,
                   "the header states a length of '" + stated + "' bytes, but " + std::to_string(signals_) +
                       " signals take " + std::to_string(header_.header_bytes),
                   "the length that follows from the signals is used");
    const auto declared = fields_.integer(kRecordsField, 8, "the number of records");
    if (!declared) return declared.error();
    if (header_.record_bytes == 0)
      return fields_.fault(ErrorCode::damaged, kSignalsField, "the signals have no samples",
                           "the header is damaged; export the recording again");
    const std::uint64_t bytes = source_.size() - header_.header_bytes;
    const std::uint64_t present = bytes / header_.record_bytes, rest = bytes % header_.record_bytes;
    if (present == 0)
      return fields_.fault(ErrorCode::damaged, static_cast<std::size_t>(header_.header_bytes),
                           "the file holds no whole data record: " + std::to_string(bytes) +
                               " bytes follow the header, one record takes " +
                               std::to_string(header_.record_bytes),
                           "copy the file again");
    header_.records = present;
    report_records(*declared, present, rest);
    return std::nullopt;
  }

  void report_records(std::int64_t declared, std::uint64_t present, std::uint64_t rest) {
    const auto seconds = [&](double records) { return number_text(records * header_.duration, 6) + " s"; };
    const std::string dropped = rest == 0 ? ""
                                          : "; " + std::to_string(rest) +
                                                " bytes behind the last whole record "
                                                "were dropped";
    if (declared <= 0) {
      fields_.warn(kRecordsField,
                   "the header states " + std::to_string(declared) +
                       " records: the recorder did not close the file",
                   std::to_string(present) + " whole records are there" + dropped);
    } else if (static_cast<std::uint64_t>(declared) > present) {
      fields_.warn(static_cast<std::size_t>(source_.size()),
                   "the file is cut: " + std::to_string(declared) + " records are stated, " +
                       std::to_string(present) + " are there",
                   seconds(static_cast<double>(declared) - static_cast<double>(present)) + " are missing" +
                       dropped);
    } else if (static_cast<std::uint64_t>(declared) < present || rest > 0) {
      header_.records = std::min<std::uint64_t>(present, static_cast<std::uint64_t>(declared));
      const std::uint64_t end = header_.header_bytes + header_.records * header_.record_bytes;
      fields_.warn(static_cast<std::size_t>(end),
                   std::to_string(source_.size() - end) +
                       " bytes follow the last record that the header states",
                   "they are not read");
    }
  }

  const ByteSource& source_;
  const ReadSettings& settings_;
  EdfFields fields_;
  std::size_t signals_;
  EdfHeader header_;
};

} // namespace

bool EdfHeader::has_samples() const {
  return std::any_of(signals.begin(), signals.end(),
                     [](const EdfSignal& signal) { return !signal.annotations && signal.per_record > 0; });
}

bool EdfHeader::has_annotations() const {
  return std::any_of(signals.begin(), signals.end(),
                     [](const EdfSignal& signal) { return signal.annotations; });
}

Result<EdfHeader> read_edf_header(const ByteSource& source, const ReadSettings& settings) {
  auto fixed = bytes_of(source, kFixedPart);
  if (!fixed) return fixed.error();
  EdfFields fields(*fixed, source.path());
  const auto signals = fields.integer(kSignalsField, 4, "the number of signals");
  if (!signals) return signals.error();
  if (*signals < 1)
    return fields.fault(ErrorCode::bad_value, kSignalsField,
                        "the number of signals is " + std::to_string(*signals) + ", expected 1 or more",
                        "the header is damaged; export the recording again");
  if (static_cast<std::uint64_t>(*signals) > settings.limits.signals)
    return fields.fault(ErrorCode::over_limit, kSignalsField,
                        "the file has " + std::to_string(*signals) + " signals; the limit is " +
                            std::to_string(settings.limits.signals),
                        "export fewer signals");
  const auto count = static_cast<std::size_t>(*signals);
  auto bytes = bytes_of(source, kFixedPart * (count + 1));
  if (!bytes) return bytes.error();
  return HeaderReader(source, settings, *std::move(bytes), count).read();
}

} // namespace chronodrome::intake
