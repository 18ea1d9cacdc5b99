// Chronodrome, GPL-3.0-or-later.
#include <array>
#include <catch2/catch.hpp>
#include <filesystem>

#include "base/digest.h"
#include "intake/clock_time.h"
#include "intake/edf_times.h"
#include "intake/source_file.h"
#include "intake/written_file.h"
#include "reading_fixtures.h"

using namespace chronodrome;
using namespace chronodrome::intake;
using namespace chronodrome::intake::fixtures;
using Catch::Matchers::WithinAbs;
namespace fs = std::filesystem;

TEST_CASE("days count from 1970 through leap years and centuries", "[intake]") {
  // Day numbers by GNU date: `date -u -d 2000-02-29 +%s` / 86400.
  CHECK(day_number(1970, 1, 1) == 0);
  CHECK(day_number(2000, 2, 29) == 11016);
  CHECK(day_number(2026, 3, 4) == 20516);
  CHECK(day_number(1900, 3, 1) == -25508);
  CHECK_FALSE(day_number(1900, 2, 29).has_value());
  CHECK_FALSE(day_number(2026, 4, 31).has_value());
  CHECK_FALSE(day_number(2026, 13, 1).has_value());
  CHECK_FALSE(day_number(2026, 0, 1).has_value());
  CHECK_FALSE(day_number(0, 1, 1).has_value());
  for (std::int64_t day = -30'000; day < 60'000; day += 17) {
    const CalendarDay date = calendar_day(day);
    REQUIRE(day_number(date.year, date.month, date.day) == day);
  }
}

TEST_CASE("clock times are read and written in one form", "[intake]") {
  for (const char* text : {"2026-03-04T09:30:00", "1985-12-31T23:59:59.9999999", "2026-03-04T00:00:00.25"}) {
    const auto time = parse_clock_time(text);
    REQUIRE(time.has_value());
    CHECK(clock_text(*time) == text);
  }
  for (const char* bad :
       {"", "2026-03-04", "2026-03-04T24:00:00", "2026-02-30T10:00:00", "2026-03-04T09:30:00.",
        "2026-03-04T09:30:00Z", "2026-03-04T09:30:00.5x", "04.03.2026 09:30:00", "2026-03-04T9:30:000"})
    CHECK_FALSE(parse_clock_time(bad).has_value());
  CHECK(clock_text({0, 86399.99999999}) == "1970-01-02T00:00:00"); // rounded to the next day
}

TEST_CASE("time is carried over midnight, and differences are exact", "[intake]") {
  const auto start = *parse_clock_time("2024-02-28T23:59:58");
  CHECK(clock_text(later_by(start, 3.5)) == "2024-02-29T00:00:01.5");
  CHECK(clock_text(later_by(start, 86400.0 * 2)) == "2024-03-01T23:59:58");
  CHECK(clock_text(later_by(start, -86400.0)) == "2024-02-27T23:59:58");
  CHECK(seconds_between(start, *parse_clock_time("2024-03-01T00:00:00")) == 86402.0);
}

TEST_CASE("a source file is read at any place, never beyond its end", "[intake]") {
  const std::string path = scratch_file("source.bin");
  std::ofstream(path, std::ios::binary) << "0123456789";
  const auto source = open_source_file(path);
  REQUIRE(source.ok());
  CHECK((*source)->size() == 10);
  CHECK((*source)->path() == path);
  std::array<char, 8> bytes{};
  const auto at = [&](std::uint64_t offset) {
    const auto got = (*source)->read_at(offset, std::as_writable_bytes(std::span(bytes)));
    REQUIRE(got.ok());
    return std::string(bytes.data(), *got);
  };
  CHECK(at(0) == "01234567");
  CHECK(at(7) == "789");
  CHECK(at(10).empty());
  CHECK(at(1'000'000'000'000).empty());
  CHECK(*digest_of(**source) == sha256_of(std::string("0123456789")));
  CHECK_FALSE((*source)->changed());
  std::ofstream(path, std::ios::binary | std::ios::app) << "growing";
  CHECK((*source)->changed());
  CHECK(at(7) == "789"); // what came later is not seen
}

TEST_CASE("a file cut while it is open gives an error, not a short digest", "[intake]") {
  const std::string path = scratch_file("cut.bin");
  std::ofstream(path, std::ios::binary) << std::string(5000, 'x');
  const auto source = open_source_file(path);
  REQUIRE(source.ok());
  fs::resize_file(path, 100);
  const auto digest = digest_of(**source);
  REQUIRE_FALSE(digest.ok());
  CHECK(digest.error().code == ErrorCode::read_failed);
  CHECK(digest.error().place.byte == 100);
}

TEST_CASE("a file that grew while it was read says so and is not kept", "[intake]") {
  /// Bytes in memory that claim to have changed.
  class Growing : public MemorySource {
  public:
    using MemorySource::MemorySource;
    [[nodiscard]] bool changed() const override { return true; }
  };
  ReadSettings settings;
  settings.cache_folder = scratch_file("growing-cache");
  fs::remove_all(settings.cache_folder);
  const auto read =
      read_recording(Growing("g.csv", "time (s),RA (mV)\n0.000,1\n0.001,2.5\n0.002,3\n"), settings);
  REQUIRE(read.ok());
  CHECK(has_warning(*read, "the file changed while it was read"));
  CHECK(samples_of(read->signals[0]) == std::vector<double>{1, 2.5, 3});
  CHECK_FALSE(fs::exists(fs::path(settings.cache_folder) / std::string(64, '0')));
  for (const auto& entry : fs::directory_iterator(settings.cache_folder))
    CHECK(entry.path().filename().string().size() != 64);
}

TEST_CASE("a written file stands whole or not at all", "[intake]") {
  const std::string path = scratch_file("whole.txt");
  std::ofstream(path) << "before";
  {
    WrittenFile file(path);
    file.add("half");
  }
  CHECK(bytes_of_file(path) == "before");
  CHECK_FALSE(fs::exists(path + ".part"));
  WrittenFile file(path);
  file.add("a");
  file.add("fter");
  REQUIRE(file.finish().ok());
  CHECK(bytes_of_file(path) == "after");
  WrittenFile nowhere("/nonexistent-folder/x");
  nowhere.add("x");
  CHECK(nowhere.finish().error().code == ErrorCode::cannot_write);
}

TEST_CASE("record onsets make runs, and small differences do not", "[edf]") {
  EdfHeader header;
  header.kind = EdfKindRead::discontinuous;
  header.duration = 0.5;
  EdfSignal signal;
  signal.per_record = 100; // 200 Hz: half a sample is 2.5 ms
  header.signals = {signal};
  EdfTimes times(header);
  CHECK(times.add(10.0));
  CHECK(times.add(10.5));
  CHECK(times.add(11.0024)); // within half a sample
  CHECK(times.add(11.503));  // beyond it
  CHECK(times.add(std::nullopt));
  CHECK(times.add(20.0));
  CHECK_FALSE(times.add(20.4)); // before the record before it ends
  CHECK(times.first_onset() == 10.0);
  CHECK(times.without_onset() == 1);
  REQUIRE(times.runs().size() == 3);
  CHECK(times.runs()[0].count == 3);
  CHECK_THAT(times.runs()[1].start, WithinAbs(1.503, 1e-12));
  CHECK(times.runs()[1].count == 2);
  CHECK(times.runs()[2].record == 5);
  CHECK_THAT(times.runs()[2].start, WithinAbs(10.0, 1e-12));
}

TEST_CASE("a continuous file whose records all say zero is read as continuous", "[edf]") {
  EdfHeader header;
  header.kind = EdfKindRead::continuous;
  EdfTimes times(header);
  for (int r = 0; r < 5; ++r)
    CHECK(times.add(0.0));
  CHECK(times.runs().size() == 1);
  CHECK(times.overlapping() == 4);
}
