// Chronodrome, GPL-3.0-or-later.
#include <catch2/catch.hpp>
#include <filesystem>
#include <fstream>
#include <numeric>

#include "recording/checksum.h"
#include "recording/recording.h"
#include "recording/signal_writer.h"
#include "recording/store_folder.h"
#include "recording/stored_recording.h"
#include "recording/stores.h"

using namespace chronodrome;
using namespace chronodrome::recording;
namespace fs = std::filesystem;

namespace {

const std::string kKey(64, 'a');

std::string fresh_folder(const std::string& name) {
  const fs::path folder = fs::path(CHRONODROME_BUILD_DIR) / "test-stores" / name;
  fs::remove_all(folder);
  return folder.string();
}

std::vector<double> all_of(const SampleStore& store) {
  std::vector<double> samples(store.size());
  store.read(0, samples);
  return samples;
}

std::vector<double> ramp(std::size_t count) {
  std::vector<double> samples(count);
  std::iota(samples.begin(), samples.end(), 0.5);
  return samples;
}

/// A recording of two signals, one of doubles and one of integers, written into `folder`.
Recording written(StoreFolder& folder) {
  Recording recording;
  recording.files.push_back({"heart.csv", "csv", std::string(64, 'b'), 1234, Seconds(0.0)});
  recording.clock_start = "2026-03-04T09:30:00.25";
  recording.file_time_of_zero = Seconds(0.1 + 0.2); // a value whose last bit matters
  recording.annotations.push_back({Seconds(1.0 / 3.0), Seconds(2.0), "addition ISO 1e-7 M"});
  recording.annotations.push_back({Seconds(5.0), std::nullopt, ""});
  recording.file_notes = {"a note"};
  recording.convention = "a convention";
  recording.warnings.push_back({"heart.csv", Place::at(3, 4), "something was dropped", "look"});
  recording.duration = Seconds(12.0);
  SignalWriter doubles(folder, 0);
  doubles.add(ramp(1000));
  const DigitalScale scale{0.25, -100.0, -5.0};
  SignalWriter integers(folder, 1, scale);
  integers.add(std::vector<std::int16_t>{-100, 0, 100, 32767, -32768});
  for (SignalWriter* writer : {&doubles, &integers}) {
    Signal signal;
    signal.source = writer == &doubles ? "RA" : "RV";
    signal.source_as_written = signal.source + " (mV)";
    signal.unit = "mV";
    signal.time_base = TimeBase(Hertz(1000.0 / 3.0), {{0, writer->summary().count, Seconds(0.0)}});
    if (writer == &integers) signal.rails = {-1.0, 2.0};
    signal.resolution = 0.25;
    auto finished = writer->finish();
    signal.samples = finished.samples;
    signal.envelope = finished.envelope;
    recording.signals.push_back(signal);
  }
  store_recording(recording, {std::nullopt, scale}, folder);
  return recording;
}

} // namespace

TEST_CASE("integers are read through their scale", "[recording]") {
  const auto store = store_of(std::vector<std::int16_t>{-100, 0, 100}, {0.25, -100.0, -5.0});
  CHECK(all_of(*store) == std::vector<double>{-5.0, 20.0, 45.0});
}

TEST_CASE("joined stores read as one, across their seams", "[recording]") {
  const auto joined = joined_store(
      {store_of({1.0, 2.0, 3.0}), store_of(std::vector<double>{}), store_of({4.0}), store_of({5.0, 6.0})});
  REQUIRE(joined->size() == 6);
  CHECK(all_of(*joined) == std::vector<double>{1, 2, 3, 4, 5, 6});
  std::vector<double> middle(3);
  joined->read(2, middle);
  CHECK(middle == std::vector<double>{3, 4, 5});
}

TEST_CASE("a checksum does not depend on the cut and sees every bit", "[recording]") {
  std::vector<std::byte> bytes(1001);
  for (std::size_t i = 0; i < bytes.size(); ++i)
    bytes[i] = static_cast<std::byte>(i * 37);
  Checksum whole;
  whole.add(bytes);
  for (const std::size_t piece : {1UL, 5UL, 32UL, 100UL}) {
    Checksum pieces;
    for (std::size_t at = 0; at < bytes.size(); at += piece)
      pieces.add(std::span(bytes).subspan(at, std::min(piece, bytes.size() - at)));
    CHECK(pieces.value() == whole.value());
  }
  for (std::size_t i = 0; i < bytes.size(); ++i) {
    bytes[i] ^= std::byte{16};
    Checksum changed;
    changed.add(bytes);
    REQUIRE(changed.value() != whole.value());
    bytes[i] ^= std::byte{16};
  }
  Checksum shorter;
  shorter.add(std::span(bytes).first(1000));
  CHECK(shorter.value() != whole.value());
}

TEST_CASE("a stored recording comes back bit for bit, under another path", "[recording]") {
  const std::string cache = fresh_folder("round");
  StoreFolder folder(cache, kKey);
  REQUIRE(folder.on_disk());
  const Recording before = written(folder);
  const auto after = stored_recording(cache, kKey, "elsewhere/heart.csv");
  REQUIRE(after.has_value());
  CHECK(after->files[0].path == "elsewhere/heart.csv");
  CHECK(after->files[0].sha256 == before.files[0].sha256);
  CHECK(after->files[0].bytes == 1234);
  CHECK(after->clock_start == before.clock_start);
  CHECK(after->file_time_of_zero == before.file_time_of_zero);
  CHECK(after->duration == before.duration);
  CHECK(after->file_notes == before.file_notes);
  CHECK(after->convention == before.convention);
  REQUIRE(after->warnings.size() == 1);
  CHECK(describe(after->warnings[0]) == "elsewhere/heart.csv:3:4: warning: something was dropped; look");
  REQUIRE(after->annotations.size() == 2);
  CHECK(after->annotations[0].onset == before.annotations[0].onset);
  CHECK(after->annotations[0].duration == before.annotations[0].duration);
  CHECK_FALSE(after->annotations[1].duration.has_value());
  REQUIRE(after->signals.size() == 2);
  for (std::size_t i = 0; i < 2; ++i) {
    const Signal &a = before.signals[i], &b = after->signals[i];
    CHECK(b.source_as_written == a.source_as_written);
    CHECK(b.unit == a.unit);
    CHECK(b.rails == a.rails);
    CHECK(b.time_base.rate() == a.time_base.rate());
    CHECK(b.time_base.size() == a.time_base.size());
    CHECK(all_of(*b.samples) == all_of(*a.samples));
    CHECK(b.envelope->levels() == a.envelope->levels());
  }
}

TEST_CASE("a store folder that was cut, changed or made for another key is not used", "[recording]") {
  const std::string cache = fresh_folder("damage");
  const auto make = [&] {
    fs::remove_all(cache);
    StoreFolder folder(cache, kKey);
    written(folder);
  };
  make();
  REQUIRE(stored_recording(cache, kKey, "x").has_value());
  CHECK_FALSE(stored_recording(cache, std::string(64, 'c'), "x").has_value());
  for (const auto& name : {"recording.about", "signal-0.samples", "signal-1.samples", "signal-1.envelope"}) {
    const fs::path file = fs::path(cache) / kKey / name;
    CAPTURE(name);
    make();
    fs::resize_file(file, fs::file_size(file) - 8);
    CHECK_FALSE(stored_recording(cache, kKey, "x").has_value());
    make();
    {
      std::fstream stream(file, std::ios::in | std::ios::out | std::ios::binary);
      stream.seekp(static_cast<std::streamoff>(fs::file_size(file)) - 3);
      stream.put('\x5A');
    }
    CHECK_FALSE(stored_recording(cache, kKey, "x").has_value());
    make();
    fs::remove(file);
    CHECK_FALSE(stored_recording(cache, kKey, "x").has_value());
    make();
    {
      std::fstream stream(file, std::ios::in | std::ios::out | std::ios::binary);
      stream.seekp(8); // the version
      stream.put('\x7F');
    }
    CHECK_FALSE(stored_recording(cache, kKey, "x").has_value());
  }
}

TEST_CASE("a store folder may be deleted while it is in use", "[recording]") {
  const std::string cache = fresh_folder("deleted");
  StoreFolder folder(cache, kKey);
  const Recording recording = written(folder);
  const auto again = stored_recording(cache, kKey, "x");
  fs::remove_all(cache);
  CHECK(all_of(*recording.signals[0].samples) == ramp(1000));
  REQUIRE(again.has_value());
  CHECK(all_of(*again->signals[0].samples) == ramp(1000));
}

TEST_CASE("a folder that is not finished leaves nothing behind", "[recording]") {
  const std::string cache = fresh_folder("unfinished");
  {
    StoreFolder folder(cache, kKey);
    SignalWriter writer(folder, 0);
    writer.add(ramp(10));
  }
  CHECK(fs::is_empty(cache));
}

TEST_CASE("a broken folder under the same key is replaced", "[recording]") {
  const std::string cache = fresh_folder("replaced");
  fs::create_directories(fs::path(cache) / kKey);
  std::ofstream(fs::path(cache) / kKey / "recording.about") << "rubbish";
  StoreFolder folder(cache, kKey);
  written(folder);
  CHECK(stored_recording(cache, kKey, "x").has_value());
}

TEST_CASE("a cache that cannot be written leaves the samples in memory", "[recording]") {
  const std::string cache = fresh_folder("blocked");
  fs::create_directories(fs::path(cache).parent_path());
  std::ofstream{cache} << "a file where the folder should be";
  StoreFolder folder(cache, kKey);
  CHECK_FALSE(folder.on_disk());
  const Recording recording = written(folder);
  CHECK_FALSE(folder.failed());
  CHECK(all_of(*recording.signals[0].samples) == ramp(1000));
  fs::remove(cache);
}

TEST_CASE("a writer sums up what went by, however it was cut", "[recording]") {
  StoreFolder memory;
  SignalWriter writer(memory, 0);
  writer.add(std::vector<double>{1.0, 1.0, 1.5});
  writer.add(std::vector<double>{});
  writer.add(std::vector<double>{1.25, -3.0});
  CHECK(writer.summary().count == 5);
  CHECK(writer.summary().min == -3.0);
  CHECK(writer.summary().max == 1.5);
  CHECK(writer.summary().smallest_step == 0.25); // across the cut
  CHECK_FALSE(writer.summary().all_whole);
}
