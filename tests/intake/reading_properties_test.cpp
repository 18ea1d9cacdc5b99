// Chronodrome, GPL-3.0-or-later.
// What a change of the file must change in the recording, and what it must not.
#include <catch2/catch.hpp>
#include <cmath>
#include <numbers>

#include "base/number_text.h"
#include "reading_fixtures.h"

using namespace chronodrome;
using namespace chronodrome::intake;
using namespace chronodrome::intake::fixtures;
using Catch::Matchers::WithinAbs;

namespace {

WrittenRecording heart(double gain = 1.0) {
  WrittenRecording written;
  for (int s = 0; s < 3; ++s) {
    WrittenSignal signal{"E" + std::to_string(s), "mV", Hertz(500.0), {}, -10.0, 10.0, ""};
    for (int i = 0; i < 2000; ++i)
      signal.samples.push_back(
          gain * std::round(1000.0 * std::sin(2.0 * std::numbers::pi * (s + 1) * i / 500.0)) / 250.0);
    written.signals.push_back(std::move(signal));
  }
  return written;
}

recording::Recording through_table(const WrittenRecording& written, const CsvLayout& layout) {
  const std::string path = scratch_file("property.csv");
  REQUIRE(write_csv(path, written, layout).ok());
  auto read = read_recording(path, in_memory());
  if (!read) FAIL(describe(read.error()));
  return *std::move(read);
}

CsvLayout with_time() {
  CsvLayout layout;
  layout.time_column = "time";
  return layout;
}

} // namespace

TEST_CASE("a shift of the time column moves the file's time of zero and nothing else", "[intake]") {
  std::string text = "time (s),RA (mV)\n", shifted = text;
  for (int i = 0; i < 3000; ++i) {
    const double gap = i >= 1000 ? 0.75 : 0.0;
    const std::string value = "," + fixed_text(std::sin(0.1 * i), 4) + "\n";
    text += fixed_text(i / 1000.0 + gap, 4) + value;
    shifted += fixed_text(i / 1000.0 + gap + 1234.5, 4) + value;
  }
  const auto at_zero = read_table(text), later = read_table(shifted);
  REQUIRE(at_zero.ok());
  REQUIRE(later.ok());
  CHECK_THAT((later->file_time_of_zero - at_zero->file_time_of_zero).value(), WithinAbs(1234.5, 1e-9));
  CHECK(samples_of(later->signals[0]) == samples_of(at_zero->signals[0]));
  const auto &a = at_zero->signals[0].time_base, &b = later->signals[0].time_base;
  REQUIRE(a.runs().size() == 2);
  REQUIRE(b.runs().size() == 2);
  CHECK_THAT(b.runs()[1].start.value(), WithinAbs(a.runs()[1].start.value(), 1e-9));
  CHECK_THAT(b.rate().value(), Catch::Matchers::WithinRel(a.rate().value(), 1e-10));
}

TEST_CASE("the order of the columns changes the order of the signals only", "[intake]") {
  WrittenRecording written = heart();
  const auto before = through_table(written, with_time());
  std::swap(written.signals[0], written.signals[2]);
  const auto after = through_table(written, with_time());
  for (const char* source : {"E0", "E1", "E2"})
    CHECK(samples_of(before, source) == samples_of(after, source));
  CHECK(before.signals[0].source == "E0");
  CHECK(after.signals[0].source == "E2");
}

TEST_CASE("a sign turned in the file is turned in the samples", "[intake]") {
  const auto before = through_table(heart(), with_time()), after = through_table(heart(-1.0), with_time());
  auto samples = samples_of(before, "E1");
  for (double& sample : samples)
    sample = -sample;
  CHECK(samples_of(after, "E1") == samples);
}

TEST_CASE("a table and an EDF file of the same recording agree to half a step of the converter", "[intake]") {
  WrittenRecording written = heart();
  written.clock_start = "2026-03-04T09:30:00";
  const auto table = through_table(written, with_time());
  const std::string path = scratch_file("property.edf");
  REQUIRE(write_edf(path, written, EdfKind::continuous).ok());
  const auto edf = read_recording(path, in_memory());
  REQUIRE(edf.ok());
  for (std::size_t s = 0; s < 3; ++s) {
    const auto a = samples_of(table.signals[s]), b = samples_of(edf->signals[s]);
    REQUIRE(a.size() == b.size());
    for (std::size_t i = 0; i < a.size(); ++i)
      REQUIRE(std::abs(a[i] - b[i]) <= 0.5000001 * edf->signals[s].resolution);
    CHECK(table.signals[s].time_base.rate() == edf->signals[s].time_base.rate());
    CHECK(table.signals[s].time_base.end() == edf->signals[s].time_base.end());
  }
}

TEST_CASE("a file cut behind a row gives the same recording up to there", "[intake]") {
  std::string text = "time (s),RA (mV),remark\n";
  std::vector<std::size_t> ends;
  for (int i = 0; i < 500; ++i) {
    text += fixed_text(i / 1000.0 + (i >= 200 ? 0.5 : 0.0), 3) + "," + fixed_text(std::cos(0.2 * i), 3) +
            "," + (i % 100 == 50 ? "mark" : "") + "\n";
    ends.push_back(text.size());
  }
  const auto whole = read_table(text);
  REQUIRE(whole.ok());
  const auto all = samples_of(whole->signals[0]);
  for (std::size_t rows = 10; rows <= 500; rows += 35) {
    const auto part = read_table(text.substr(0, ends[rows - 1]));
    REQUIRE(part.ok());
    const auto samples = samples_of(part->signals[0]);
    REQUIRE(samples.size() == rows);
    CHECK(std::equal(samples.begin(), samples.end(), all.begin()));
    for (std::size_t i = 0; i < rows; i += 9)
      CHECK_THAT(part->signals[0].time_base.time_at(static_cast<double>(i)).value(),
                 WithinAbs(whole->signals[0].time_base.time_at(static_cast<double>(i)).value(), 1e-9));
    CHECK(part->annotations.size() == (rows + 49) / 100);
  }
}

TEST_CASE("an hour of eight channels is read whole from the cache's stores", "[.long][intake]") {
  WrittenRecording written;
  for (int s = 0; s < 8; ++s) {
    WrittenSignal signal{"E" + std::to_string(s), "mV", Hertz(1000.0), {}, -10.0, 10.0, ""};
    for (int i = 0; i < 3'600'000; ++i)
      signal.samples.push_back((i * (s + 3) % 4096) * 0.0025 - 5.0);
    written.signals.push_back(std::move(signal));
  }
  const std::string path = scratch_file("hour.csv");
  REQUIRE(write_csv(path, written, with_time()).ok());
  ReadSettings settings;
  settings.cache_folder = scratch_file("hour-cache");
  std::filesystem::remove_all(settings.cache_folder);
  for (int round = 0; round < 2; ++round) { // fresh, then from the cache
    const auto read = read_recording(path, settings);
    if (!read) FAIL(describe(read.error()));
    REQUIRE(read->signals.size() == 8);
    for (std::size_t s = 0; s < 8; ++s) {
      const auto samples = samples_of(read->signals[s]);
      REQUIRE(samples.size() == 3'600'000);
      for (std::size_t i = 0; i < samples.size(); ++i) // four decimals are written
        REQUIRE(std::abs(samples[i] - written.signals[s].samples[i]) <= 1e-12);
    }
    CHECK(read->warnings.empty());
  }
  std::filesystem::remove_all(settings.cache_folder);
  std::filesystem::remove(path);
}
