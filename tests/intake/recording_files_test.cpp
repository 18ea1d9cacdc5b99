// Chronodrome, GPL-3.0-or-later.
// Files on disk: the cache, sources that fail, several files of one session.
#include <catch2/catch.hpp>
#include <filesystem>

#include "base/digest.h"
#include "reading_fixtures.h"

using namespace chronodrome;
using namespace chronodrome::intake;
using namespace chronodrome::intake::fixtures;
using Catch::Matchers::WithinAbs;
namespace fs = std::filesystem;

namespace {

std::string table_text(int rows) {
  std::string text = "invented heart\ntime (s),RA (mV),LVP (mmHg),note\n";
  for (int i = 0; i < rows; ++i)
    text += std::to_string(i / 1000.0 + (i >= rows / 2 ? 1.0 : 0.0)) + "," + std::to_string(i * 37 % 101) +
            ".25," + (i % 50 == 7 ? "NaN" : std::to_string(80 + i % 3)) + "," +
            (i == 10 ? "addition ISO 1e-7 M" : "") + "\n";
  return text;
}

std::string edf_text() {
  WrittenRecording written;
  written.clock_start = "2026-03-04T09:30:00.5";
  written.signals.push_back({"RA", "mV", Hertz(1000.0), {}, 0, 0, ""});
  for (int i = 0; i < 5000; ++i)
    written.signals[0].samples.push_back((i * 7919 % 1000) * 0.01);
  written.annotations.push_back({Seconds(1.0), std::nullopt, "washout"});
  return edf_bytes(written, EdfKind::continuous, "cached.edf");
}

std::string write_file(const std::string& name, const std::string& bytes) {
  const std::string path = scratch_file(name);
  fs::create_directories(fs::path(path).parent_path());
  std::ofstream(path, std::ios::binary) << bytes;
  return path;
}

ReadSettings with_cache(const std::string& name) {
  ReadSettings settings;
  settings.cache_folder = (fs::path(CHRONODROME_BUILD_DIR) / "test-read-cache" / name).string();
  fs::remove_all(settings.cache_folder);
  return settings;
}

void check_same(const recording::Recording& a, const recording::Recording& b) {
  REQUIRE(a.signals.size() == b.signals.size());
  for (std::size_t i = 0; i < a.signals.size(); ++i) {
    const auto &x = a.signals[i], &y = b.signals[i];
    CHECK(x.source == y.source);
    CHECK(x.source_as_written == y.source_as_written);
    CHECK(x.unit == y.unit);
    CHECK(x.resolution == y.resolution);
    CHECK(x.rails == y.rails);
    CHECK(x.time_base.rate() == y.time_base.rate());
    REQUIRE(x.time_base.runs().size() == y.time_base.runs().size());
    for (std::size_t k = 0; k < x.time_base.runs().size(); ++k)
      CHECK(x.time_base.runs()[k].start == y.time_base.runs()[k].start);
    CHECK(samples_of(x) == samples_of(y));
    CHECK(x.envelope->levels() == y.envelope->levels());
  }
  REQUIRE(a.annotations.size() == b.annotations.size());
  for (std::size_t i = 0; i < a.annotations.size(); ++i) {
    CHECK(a.annotations[i].onset == b.annotations[i].onset);
    CHECK(a.annotations[i].text == b.annotations[i].text);
  }
  CHECK(all_warnings(a) == all_warnings(b));
  CHECK(a.file_notes == b.file_notes);
  CHECK(a.convention == b.convention);
  CHECK(a.clock_start == b.clock_start);
  CHECK(a.file_time_of_zero == b.file_time_of_zero);
  CHECK(a.duration == b.duration);
  CHECK(a.files.at(0).sha256 == b.files.at(0).sha256);
}

} // namespace

TEST_CASE("a recording read from the cache equals the one read fresh, bit for bit", "[intake]") {
  for (const bool table : {true, false}) {
    const std::string path =
        table ? write_file("cached.csv", table_text(3000)) : write_file("cached.edf", edf_text());
    const ReadSettings settings = with_cache(table ? "csv" : "edf");
    const auto first = read_recording(path, settings);
    if (!first) FAIL(describe(first.error()));
    std::size_t folders = 0;
    for (const auto& entry : fs::directory_iterator(settings.cache_folder)) {
      ++folders;
      CHECK(entry.path().filename().string().size() == 64);
    }
    CHECK(folders == 1);
    const auto cached = read_recording(path, settings);
    REQUIRE(cached.ok());
    check_same(*first, *cached);
    const auto fresh = read_recording(path, in_memory());
    REQUIRE(fresh.ok());
    check_same(*first, *fresh);
    fs::remove_all(settings.cache_folder); // safe at any time
    CHECK(samples_of(cached->signals[0]) == samples_of(fresh->signals[0]));
  }
}

TEST_CASE("settings that change the reading have their own place in the cache", "[intake]") {
  const std::string path = write_file("setting.csv", "RA (mV)\n1.5\n2.5\n3.5\n2.0\n");
  ReadSettings settings = with_cache("settings");
  settings.rate = Hertz(100.0);
  CHECK(read_recording(path, settings)->signals[0].time_base.rate() == Hertz(100.0));
  settings.rate = Hertz(200.0);
  CHECK(read_recording(path, settings)->signals[0].time_base.rate() == Hertz(200.0));
  settings.threads = 3; // does not
  CHECK(read_recording(path, settings).ok());
  CHECK(std::distance(fs::directory_iterator(settings.cache_folder), fs::directory_iterator()) == 2);
}

TEST_CASE("a damaged cache is made again, a cache that cannot be written is done without", "[intake]") {
  const std::string path = write_file("damaged.csv", table_text(500));
  const ReadSettings settings = with_cache("damaged");
  const auto first = read_recording(path, settings);
  REQUIRE(first.ok());
  for (const auto& entry : fs::recursive_directory_iterator(settings.cache_folder)) {
    if (entry.is_regular_file() && entry.file_size() > 200) fs::resize_file(entry, entry.file_size() - 1);
  }
  const auto again = read_recording(path, settings);
  REQUIRE(again.ok());
  CHECK(samples_of(again->signals[0]) == samples_of(read_recording(path, in_memory())->signals[0]));
  ReadSettings blocked = settings;
  blocked.cache_folder = write_file("not-a-folder", "x") + "/cache";
  const auto without = read_recording(path, blocked);
  REQUIRE(without.ok());
  check_same(*without, *read_recording(path, in_memory()));
}

TEST_CASE("the recording does not depend on the number of threads or on block ends", "[intake]") {
  const std::string text = table_text(120'000); // several blocks
  ReadSettings one = in_memory();
  const auto single = read_table(text, one);
  REQUIRE(single.ok());
  for (const unsigned threads : {2U, 3U, 7U}) {
    ReadSettings several = in_memory();
    several.threads = threads;
    const auto read = read_table(text, several);
    REQUIRE(read.ok());
    check_same(*single, *read);
  }
}

TEST_CASE("files have identity, and their paths may be anything", "[intake]") {
  const std::string text = table_text(100);
  const std::string long_name =
      "Herz-\xC3\xBC/\xD1\x81\xD0\xB5\xD1\x80\xD0\xB4\xD1\x86\xD0\xB5 \xE5\xBF\x83/" + std::string(200, 'x') +
      ".csv";
  const std::string path = write_file(long_name, text);
  const auto read = read_recording(path, in_memory());
  if (!read) FAIL(describe(read.error()));
  CHECK(read->files[0].path == path);
  CHECK(read->files[0].bytes == text.size());
  CHECK(read->files[0].sha256 == sha256_of(text));
  CHECK(bytes_of_file(path) == text);
}

TEST_CASE("what cannot be opened is said so", "[intake]") {
  for (const std::string& path :
       {std::string("/nonexistent/heart.edf"), std::string(CHRONODROME_BUILD_DIR)}) {
    const auto read = read_recording(path, in_memory());
    REQUIRE_FALSE(read.ok());
    CHECK(read.error().code == ErrorCode::file_missing);
    CHECK(read.error().file == path);
  }
}

TEST_CASE("a source that fails at its n-th read gives an error, whatever n is", "[intake]") {
  for (const bool table : {true, false}) {
    const std::string bytes = table ? table_text(100'000) : edf_text();
    const std::string path = table ? "failing.csv" : "failing.edf";
    int last = 0;
    for (int n = 1; n < 100 && last == 0; ++n) {
      const FailingSource source(path, bytes, n);
      const auto read = read_recording(source, in_memory());
      if (read.ok()) {
        last = n;
        CHECK(source.reads() < n);
        continue;
      }
      CHECK(read.error().code == ErrorCode::read_failed);
    }
    CHECK(last > 4); // it did fail before, and went through at last
  }
}

TEST_CASE("several files of one session are placed by their clock times", "[intake]") {
  WrittenRecording part;
  part.signals.push_back({"RA", "mV", Hertz(100.0), std::vector<double>(200, 0.0), -5.0, 5.0, ""});
  part.signals.push_back({"T", "mN", Hertz(50.0), std::vector<double>(100, 1.0), -5.0, 5.0, ""});
  for (std::size_t i = 0; i < 200; ++i)
    part.signals[0].samples[i] = std::sin(static_cast<double>(i));
  const auto write = [&](const std::string& name, const std::string& start, const std::string& text) {
    part.clock_start = start;
    part.annotations = {{Seconds(0.5), std::nullopt, text}};
    const std::string path = scratch_file(name);
    REQUIRE(write_edf(path, part, EdfKind::continuous).ok());
    return path;
  };
  const std::string a = write("part-a.edf", "2026-03-04T23:59:58", "one");
  const std::string b = write("part-b.edf", "2026-03-05T00:00:00", "two"); // at once
  part.signals.pop_back();
  const std::string c = write("part-c.edf", "2026-03-05T00:00:03.5", "three"); // 1.5 s later, one signal less
  const std::vector<std::string> paths = {a, b, c};
  const auto read = read_recordings(paths, in_memory());
  if (!read) FAIL(describe(read.error()));
  REQUIRE(read->signals.size() == 2);
  const auto& base = read->signals[0].time_base;
  REQUIRE(base.runs().size() == 2);
  CHECK(base.runs()[0].count == 400);
  CHECK_THAT(base.runs()[1].start.value(), WithinAbs(5.5, 1e-9));
  CHECK(read->signals[1].time_base.size() == 200);
  CHECK(read->files.size() == 3);
  CHECK_THAT(read->files[2].start.value(), WithinAbs(5.5, 1e-9));
  CHECK(read->duration == base.end());
  const auto samples = samples_of(read->signals[0]);
  REQUIRE(samples.size() == 600);
  CHECK(samples[250] == samples[50]);
  CHECK(samples[450] == samples[50]);
  REQUIRE(read->annotations.size() == 3);
  CHECK_THAT(read->annotations[2].onset.value(), WithinAbs(6.0, 1e-9));
  CHECK(has_warning(*read, "a gap of 1.5 s to the file before it"));
  CHECK(has_warning(*read, "signal 'T' is missing in this file"));
  const auto whole = read->signals[0].envelope->columns(*read->signals[0].samples, 0, 600, 1);
  CHECK(whole[0].max >= 0.99);

  const std::string early = write("part-d.edf", "2026-03-04T23:59:59", "overlap");
  const auto overlap = read_recordings(std::vector<std::string>{a, early}, in_memory());
  REQUIRE_FALSE(overlap.ok());
  CHECK(overlap.error().code == ErrorCode::bad_value);
  CHECK(overlap.error().what.find("1 s before") != std::string::npos);
  CHECK_FALSE(read_recordings(std::vector<std::string>{b, a}, in_memory()).ok());
  CHECK(read_recordings(std::vector<std::string>{}, in_memory()).error().code == ErrorCode::bad_usage);
}

TEST_CASE("tables whose time columns run on are placed by them, others are refused", "[intake]") {
  const std::string a = write_file("a.csv", "time (s),RA (mV)\n0.0,1\n0.1,2.5\n0.2,3\n");
  const std::string b = write_file("b.csv", "time (s),RA (mV)\n0.5,4\n0.6,5.5\n0.7,6\n");
  const auto read = read_recordings(std::vector<std::string>{a, b}, in_memory());
  if (!read) FAIL(describe(read.error()));
  CHECK(samples_of(read->signals[0]) == std::vector<double>{1, 2.5, 3, 4, 5.5, 6});
  REQUIRE(read->signals[0].time_base.gaps().size() == 1);
  CHECK_THAT(read->signals[0].time_base.gaps()[0].end.value(), WithinAbs(0.5, 1e-12));
  const auto again = read_recordings(std::vector<std::string>{a, a}, in_memory());
  REQUIRE_FALSE(again.ok());
  CHECK(again.error().code == ErrorCode::not_enough_data);
  const std::string other_unit = write_file("c.csv", "time (s),RA (uV)\n0.5,4\n0.6,5.5\n0.7,6\n");
  CHECK_FALSE(read_recordings(std::vector<std::string>{a, other_unit}, in_memory()).ok());
  const std::string other_rate = write_file("d.csv", "time (s),RA (mV)\n0.50,4\n0.55,5.5\n0.60,6\n");
  const auto rates = read_recordings(std::vector<std::string>{a, other_rate}, in_memory());
  REQUIRE_FALSE(rates.ok());
  CHECK(rates.error().what.find("20 Hz here, at 10 Hz before") != std::string::npos);
}
