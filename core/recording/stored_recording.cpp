// Chronodrome, GPL-3.0-or-later.
#include "recording/stored_recording.h"

#include <algorithm>
#include <bit>
#include <cstring>

#include "recording/signal_writer.h"

namespace chronodrome::recording {
namespace {

constexpr const char* kAboutFile = "recording.about";

/// Numbers as this machine holds them, texts with their length before them.
class Packer {
public:
  void put(std::uint64_t value) {
    const auto* bytes = reinterpret_cast<const std::byte*>(&value);
    bytes_.insert(bytes_.end(), bytes, bytes + sizeof(value));
  }
  void put(double value) { put(std::bit_cast<std::uint64_t>(value)); }
  void put(const std::string& text) {
    put(std::uint64_t{text.size()});
    const auto bytes = std::as_bytes(std::span(text));
    bytes_.insert(bytes_.end(), bytes.begin(), bytes.end());
  }
  template <class Value, class Put>
  void put(const std::optional<Value>& value, Put put_value) {
    put(std::uint64_t{value.has_value()});
    if (value) put_value(*value);
  }
  template <class Value, class Put>
  void put(const std::vector<Value>& values, Put put_value) {
    put(std::uint64_t{values.size()});
    for (const Value& value : values)
      put_value(value);
  }
  [[nodiscard]] const std::vector<std::byte>& bytes() const { return bytes_; }

private:
  std::vector<std::byte> bytes_;
};

/// The way back. The checksum has been compared, so that a fault here means another version's layout.
class Unpacker {
public:
  explicit Unpacker(std::span<const std::byte> bytes) : rest_(bytes) {}
  [[nodiscard]] bool good() const { return good_; }
  [[nodiscard]] bool at_end() const { return rest_.empty(); }

  std::uint64_t number() {
    std::uint64_t value = 0;
    if (rest_.size() < sizeof(value)) return fail();
    std::memcpy(&value, rest_.data(), sizeof(value));
    rest_ = rest_.subspan(sizeof(value));
    return value;
  }
  double real() { return std::bit_cast<double>(number()); }
  Seconds seconds() { return Seconds(real()); }
  std::string text() {
    const std::uint64_t size = number();
    if (size > rest_.size()) return fail(), std::string();
    std::string value(reinterpret_cast<const char*>(rest_.data()), size);
    rest_ = rest_.subspan(size);
    return value;
  }
  template <class Take>
  auto optional(Take take) -> std::optional<decltype(take())> {
    if (number() == 0) return std::nullopt;
    return take();
  }
  template <class Take>
  auto list(Take take) -> std::vector<decltype(take())> {
    std::vector<decltype(take())> values;
    const std::uint64_t count = number();
    if (count > rest_.size()) fail(); // every value takes bytes
    for (std::uint64_t i = 0; good_ && i < count; ++i)
      values.push_back(take());
    return values;
  }
  std::uint64_t fail() {
    good_ = false;
    rest_ = {};
    return 0;
  }

private:
  std::span<const std::byte> rest_;
  bool good_ = true;
};

void pack(Packer& to, const Place& place) {
  for (const auto& part : {place.line, place.column, place.byte})
    to.put(part, [&](std::size_t value) { to.put(std::uint64_t{value}); });
}

Place unpack_place(Unpacker& from) {
  Place place;
  for (auto* part : {&place.line, &place.column, &place.byte})
    *part = from.optional([&] { return static_cast<std::size_t>(from.number()); });
  return place;
}

void pack(Packer& to, const Signal& signal, const StoreKind& kind) {
  to.put(signal.source);
  to.put(signal.source_as_written);
  to.put(signal.unit);
  to.put(signal.time_base.rate().value());
  to.put(signal.time_base.runs(), [&](const Run& run) {
    to.put(std::uint64_t{run.first});
    to.put(std::uint64_t{run.count});
    to.put(run.start.value());
  });
  to.put(signal.rails, [&](const std::array<double, 2>& rails) {
    to.put(rails[0]);
    to.put(rails[1]);
  });
  to.put(signal.resolution);
  to.put(signal.prefilter);
  to.put(kind, [&](const DigitalScale& scale) {
    to.put(scale.gain);
    to.put(scale.digital_min);
    to.put(scale.physical_min);
  });
}

std::shared_ptr<const Envelope> envelope_in(const Block& block, std::size_t samples) {
  std::vector<std::vector<float>> levels;
  const std::span<const float> all(reinterpret_cast<const float*>(block.bytes().data()),
                                   block.bytes().size() / sizeof(float));
  std::size_t cells = (samples + Envelope::kFinest - 1) / Envelope::kFinest, at = 0;
  while (true) {
    if (at + 2 * cells > all.size()) return nullptr;
    levels.emplace_back(all.begin() + static_cast<std::ptrdiff_t>(at),
                        all.begin() + static_cast<std::ptrdiff_t>(at + 2 * cells));
    at += 2 * cells;
    if (at == all.size()) return std::make_shared<const Envelope>(std::move(levels), samples);
    cells = (cells + Envelope::kFactor - 1) / Envelope::kFactor;
  }
}

bool runs_are_sound(const std::vector<Run>& runs) {
  std::size_t next = 0;
  for (std::size_t i = 0; i < runs.size(); ++i) {
    if (runs[i].count == 0 || runs[i].first != next) return false;
    if (i > 0 && !(runs[i].start > runs[i - 1].start)) return false;
    next += runs[i].count;
  }
  return true;
}

Signal unpack_signal(Unpacker& from, StoreKind& kind) {
  Signal signal;
  signal.source = from.text();
  signal.source_as_written = from.text();
  signal.unit = from.text();
  const double rate = from.real();
  auto runs = from.list([&] {
    Run run;
    run.first = from.number();
    run.count = from.number();
    run.start = from.seconds();
    return run;
  });
  if (!(rate > 0.0) || !runs_are_sound(runs)) {
    from.fail();
  } else {
    signal.time_base = TimeBase(Hertz(rate), std::move(runs));
  }
  signal.rails = from.optional([&] {
    const double low = from.real();
    return std::array<double, 2>{low, from.real()};
  });
  signal.resolution = from.real();
  signal.prefilter = from.text();
  kind = from.optional([&] {
    DigitalScale scale;
    scale.gain = from.real();
    scale.digital_min = from.real();
    scale.physical_min = from.real();
    return scale;
  });
  return signal;
}

} // namespace

void store_recording(const Recording& recording, const std::vector<StoreKind>& kinds, StoreFolder& folder) {
  if (!folder.on_disk() || folder.failed()) return;
  Packer to;
  to.put(recording.files, [&](const SourceFile& file) {
    to.put(file.kind);
    to.put(file.sha256);
    to.put(file.bytes);
    to.put(file.start.value());
  });
  to.put(recording.clock_start, [&](const std::string& clock) { to.put(clock); });
  to.put(recording.file_time_of_zero.value());
  to.put(std::uint64_t{recording.signals.size()});
  for (std::size_t i = 0; i < recording.signals.size(); ++i)
    pack(to, recording.signals[i], kinds[i]);
  to.put(recording.annotations, [&](const Annotation& annotation) {
    to.put(annotation.onset.value());
    to.put(annotation.duration, [&](Seconds duration) { to.put(duration.value()); });
    to.put(annotation.text);
  });
  to.put(recording.file_notes, [&](const std::string& note) { to.put(note); });
  to.put(recording.convention);
  to.put(recording.warnings, [&](const Warning& warning) {
    pack(to, warning.place);
    to.put(warning.what);
    to.put(warning.remedy);
  });
  to.put(recording.duration.value());
  const auto writer = folder.writer(kAboutFile);
  writer->add(to.bytes());
  writer->finish();
  folder.commit();
}

std::optional<Recording> stored_recording(const std::string& cache_folder, const std::string& key,
                                          const std::string& path) {
  const auto about = stored_block(cache_folder, key, kAboutFile);
  if (!about) return std::nullopt;
  Unpacker from(about->bytes());
  Recording recording;
  recording.files = from.list([&] {
    SourceFile file;
    file.path = path;
    file.kind = from.text();
    file.sha256 = from.text();
    file.bytes = from.number();
    file.start = from.seconds();
    return file;
  });
  recording.clock_start = from.optional([&] { return from.text(); });
  recording.file_time_of_zero = from.seconds();
  std::vector<StoreKind> kinds;
  recording.signals = from.list([&] {
    kinds.emplace_back();
    return unpack_signal(from, kinds.back());
  });
  recording.annotations = from.list([&] {
    Annotation annotation;
    annotation.onset = from.seconds();
    annotation.duration = from.optional([&] { return from.seconds(); });
    annotation.text = from.text();
    return annotation;
  });
  recording.file_notes = from.list([&] { return from.text(); });
  recording.convention = from.text();
  recording.warnings = from.list([&] {
    Warning warning;
    warning.file = path;
    warning.place = unpack_place(from);
    warning.what = from.text();
    warning.remedy = from.text();
    return warning;
  });
  recording.duration = from.seconds();
  if (!from.good() || !from.at_end()) return std::nullopt;
  for (std::size_t i = 0; i < recording.signals.size(); ++i) {
    Signal& signal = recording.signals[i];
    const auto samples = stored_block(cache_folder, key, samples_file(i));
    const auto envelope = stored_block(cache_folder, key, envelope_file(i));
    if (!samples || !envelope) return std::nullopt;
    signal.samples = kinds[i] ? digital_store(samples, *kinds[i]) : double_store(samples);
    signal.envelope = envelope_in(*envelope, signal.samples->size());
    if (!signal.envelope || signal.samples->size() != signal.time_base.size()) return std::nullopt;
  }
  return recording;
}

} // namespace chronodrome::recording
