// Chronodrome, GPL-3.0-or-later.
// EDF files as they are met: odd, cut, hostile. Fields are patched into a file that our writer made.
#include <catch2/catch.hpp>
#include <cmath>

#include "intake/edf_annotations.h"
#include "reading_fixtures.h"

using namespace chronodrome;
using namespace chronodrome::intake;
using namespace chronodrome::intake::fixtures;
using namespace std::string_literals;
using Catch::Matchers::WithinAbs;
using Catch::Matchers::WithinRel;

namespace {

constexpr std::size_t kRecordBytes = 2 * (20 + 10) + 40; // of the file below

/// Two signals at 20 and 10 Hz and one annotation signal of 20 samples; six records of 1 s.
std::string small_file() {
  WrittenRecording written;
  written.clock_start = "2026-03-04T09:30:00";
  for (const double rate : {20.0, 10.0}) {
    WrittenSignal signal{
        rate == 20.0 ? "RA" : "T", rate == 20.0 ? "mV" : "mN", Hertz(rate), {}, -10.0, 10.0, ""};
    for (int i = 0; i < static_cast<int>(6 * rate); ++i)
      signal.samples.push_back(std::sin(i * 0.7) * 5.0);
    written.signals.push_back(signal);
  }
  written.annotations.push_back({Seconds(2.25), std::nullopt, "01234567890123456789012345"});
  const std::string bytes = edf_bytes(written, EdfKind::continuous, "small.edf");
  REQUIRE(bytes.size() == 256 * 4 + 6 * kRecordBytes);
  return bytes;
}

std::size_t field(std::size_t before, std::size_t width, std::size_t signal) {
  return 256 + 3 * before + width * signal;
}
constexpr std::size_t kUnit = 96, kPhysicalMin = 104, kPhysicalMax = 112, kDigitalMin = 120,
                      kDigitalMax = 128, kPerRecord = 216;

recording::Recording good(const std::string& bytes, const ReadSettings& settings = in_memory()) {
  auto read = read_bytes(bytes, "small.edf", settings);
  if (!read) FAIL(describe(read.error()));
  return *std::move(read);
}

Error error_of(const std::string& bytes, const std::string& path = "small.edf") {
  const auto read = read_bytes(bytes, path);
  if (read) FAIL("read as " << read->files.at(0).kind << "\n" << all_warnings(*read));
  CHECK_FALSE(read.error().remedy.empty());
  return read.error();
}

/// The annotation bytes of one record replaced.
std::string with_list(std::string bytes, std::size_t record, std::string list) {
  list.resize(40, '\0');
  return bytes.replace(1024 + record * kRecordBytes + 60, 40, list);
}

} // namespace

TEST_CASE("the small file is read without a warning", "[edf]") {
  const auto read = good(small_file());
  CHECK(all_warnings(read).empty());
  CHECK(read.annotations.size() == 1);
}

TEST_CASE("records that are not declared, missing, partial or superfluous are said and counted", "[edf]") {
  const std::string file = small_file();
  const auto unclosed = good(patched(file, 236, "-1", 8));
  CHECK(unclosed.duration == Seconds(6.0));
  CHECK(has_warning(unclosed, "small.edf:236: warning: the header states -1 records"));

  const auto cut = good(file.substr(0, file.size() - 150));
  CHECK(cut.duration == Seconds(4.0));
  CHECK(has_warning(cut, "6 records are stated, 4 are there; 2 s are missing; 50 bytes behind"));

  const auto extra = good(file + "trailing bytes");
  CHECK(extra.duration == Seconds(6.0));
  CHECK(has_warning(extra, "14 bytes follow the last record"));

  const auto more = good(patched(file, 236, "5", 8));
  CHECK(more.duration == Seconds(5.0));
  CHECK(has_warning(more, "100 bytes follow the last record"));

  CHECK(error_of(file.substr(0, 1024 + 99)).code == ErrorCode::damaged);
  CHECK(error_of(file.substr(0, 1024 + 99)).place.byte == 1024);
}

TEST_CASE("a wrong header length is replaced by the one that follows from the signals", "[edf]") {
  for (const char* length : {"768", "0", "", "abc", "99999999"}) {
    const auto read = good(patched(small_file(), 184, length, 8));
    CHECK(read.duration == Seconds(6.0));
    CHECK(has_warning(read, "small.edf:184: warning: the header states a length of '"s + length + "'"));
  }
}

TEST_CASE("header fields that are no numbers are errors with their byte", "[edf]") {
  const std::string file = small_file();
  for (const std::size_t at : {236UL, 244UL, 252UL, field(kPerRecord, 8, 1)}) {
    const Error error = error_of(patched(file, at, "abcd", at == 252 ? 4 : 8));
    CHECK(error.code == ErrorCode::bad_value);
    CHECK(error.place.byte == at);
  }
  for (const char* count : {"0", "-3"})
    CHECK(error_of(patched(file, 252, count, 4)).place.byte == 252);
  CHECK(error_of(patched(file, 252, "9999", 4)).code == ErrorCode::over_limit);
  CHECK(error_of(patched(file, 252, "500", 4)).code == ErrorCode::damaged); // longer than the file
}

TEST_CASE("sizes are judged before memory is asked for", "[edf]") {
  const Error error = error_of(patched(small_file(), field(kPerRecord, 8, 0), "99999999", 8));
  CHECK(error.code == ErrorCode::damaged);
  CHECK(error.what.find("one record takes") != std::string::npos);
  ReadSettings settings = in_memory();
  settings.limits.record_bytes = kRecordBytes - 1;
  const auto refused = read_bytes(small_file(), "small.edf", settings);
  REQUIRE_FALSE(refused.ok());
  CHECK(refused.error().code == ErrorCode::over_limit);
  settings.limits.record_bytes = kRecordBytes;
  CHECK(read_bytes(small_file(), "small.edf", settings).ok());
}

TEST_CASE("decimal commas, NUL padding and Latin-1 in the header are understood", "[edf]") {
  std::string file = patched(small_file(), field(kPhysicalMin, 8, 0), "-2,5", 8);
  file = patched(file, field(kPhysicalMax, 8, 0), "2,5", 8);
  const auto comma = good(file);
  CHECK((*comma.signals[0].rails)[1] == 2.5);
  CHECK(has_warning(comma, "decimal comma ('-2,5')"));

  file = small_file();
  for (std::size_t i = 256 + 2; i < 256 + 16; ++i)
    file[i] = '\0';
  CHECK(good(file).signals[0].source == "RA");

  file = patched(small_file(), field(kUnit, 8, 0), "\xB5V", 8);
  CHECK(good(file).signals[0].unit == "uV");
  CHECK(good(patched(small_file(), field(kUnit, 8, 0), "\xC2\xB5V", 8)).signals[0].unit == "uV");
}

TEST_CASE("a signal without a sound scale is read in counts, the others as they are", "[edf]") {
  const std::string file = small_file();
  const std::vector<std::string> odd = {patched(file, field(kPhysicalMax, 8, 0), "-10", 8),
                                        patched(file, field(kDigitalMax, 8, 0), "-32768", 8),
                                        patched(file, field(kDigitalMin, 8, 0), "32767", 8),
                                        patched(file, field(kDigitalMax, 8, 0), "8388607", 8),
                                        patched(file, field(kPhysicalMin, 8, 0), "nan", 8),
                                        patched(file, field(kPhysicalMin, 8, 0), "1e99", 8)};
  for (const std::string& bytes : odd) {
    const auto read = good(bytes);
    CHECK(read.signals[0].unit == "counts");
    CHECK(read.signals[0].resolution == 1.0);
    CHECK_FALSE(read.signals[0].rails.has_value());
    const auto samples = samples_of(read.signals[0]);
    CHECK(samples[5] == std::round(samples[5]));
    CHECK(has_warning(read, "signal 'RA' is not calibrated"));
    CHECK(read.signals[1].unit == "mN");
  }
}

TEST_CASE("a record without duration needs a rate, unless it holds annotations only", "[edf]") {
  const std::string file = patched(small_file(), 244, "0", 8);
  const Error error = error_of(file);
  CHECK(error.code == ErrorCode::bad_value);
  CHECK(error.place.byte == 244);
  ReadSettings settings = in_memory();
  settings.rate = Hertz(20.0);
  const auto read = good(file, settings);
  CHECK(read.signals[0].time_base.rate() == Hertz(20.0));
  CHECK(read.signals[1].time_base.rate() == Hertz(10.0));
  CHECK(error_of(patched(small_file(), 244, "-1", 8)).place.byte == 244);
}

TEST_CASE("dates that are odd leave the clock time unknown, or are read", "[edf]") {
  const std::string file = small_file();
  const auto start = [&](const std::string& date, const std::string& time, const std::string& plus) {
    std::string bytes = patched(patched(file, 168, date, 8), 176, time, 8);
    return good(patched(bytes, 88, plus, 80)).clock_start;
  };
  CHECK(start("04.03.26", "09.30.00", "Startdate 04-MAR-2026 X X X") == "2026-03-04T09:30:00");
  CHECK(start("04-03-26", "09:30:00", "") == "2026-03-04T09:30:00");
  CHECK(start("04/03/86", "09.30.00", "") == "1986-03-04T09:30:00"); // 85 to 99: the last century
  CHECK(start("04.03.84", "09.30.00", "") == "2084-03-04T09:30:00");
  CHECK(start("04.03.26", "09.30.00", "Startdate 04-MAR-2126 X X X") == "2126-03-04T09:30:00");
  for (const char* bad : {"00.00.00", "31.02.26", "", "X", "99.99.99", "1.2"})
    CHECK_FALSE(start(bad, "09.30.00", "").has_value());
  for (const char* bad : {"24.00.00", "25.10.00", "12.60.00", "12.00.60", ""})
    CHECK_FALSE(start("04.03.26", bad, "").has_value());
  CHECK_FALSE(start("01.01.85", "00.00.00", "Startdate X X X X").has_value());
}

TEST_CASE("labels that repeat or are blank are numbered", "[edf]") {
  std::string file = patched(small_file(), 256 + 16, "RA", 16);
  const auto repeated = good(file);
  CHECK(repeated.signals[1].source == "RA 2");
  CHECK(has_warning(repeated, "two signals are labelled 'RA'"));
  file = patched(small_file(), 256, "", 16);
  CHECK(good(file).signals[0].source == "signal 1");
  CHECK(good(patched(small_file(), 256, "1 Impedance (x)", 16)).signals[0].source == "1 Impedance (x)");
}

TEST_CASE("markers and annotation signals that do not go together are read all the same", "[edf]") {
  const auto unmarked = good(patched(small_file(), 192, "", 44));
  CHECK(unmarked.annotations.size() == 1);
  CHECK_FALSE(unmarked.file_notes.empty());
  const auto renamed = good(patched(small_file(), 256 + 32, "Status", 16));
  CHECK(renamed.annotations.empty());
  CHECK(renamed.signals.size() == 3);
  const auto contiguous = good(patched(small_file(), 192, "EDF+D", 44));
  CHECK(contiguous.signals[0].time_base.runs().size() == 1);
  CHECK(contiguous.files[0].kind == "edf+d");
}

TEST_CASE("record onsets that show a gap are trusted, whatever the marker says", "[edf]") {
  std::string file = small_file();
  for (std::size_t r = 3; r < 6; ++r)
    file = with_list(file, r, "+" + std::to_string(r + 10) + ".25\x14\x14\0"s);
  const auto read = good(file);
  REQUIRE(read.signals[0].time_base.gaps().size() == 1);
  CHECK_THAT(read.signals[0].time_base.gaps()[0].start.value(), WithinAbs(3.0, 1e-12));
  CHECK_THAT(read.signals[0].time_base.gaps()[0].end.value(), WithinAbs(13.25, 1e-12));
  CHECK(has_warning(read, "although the file says it is continuous"));
}

TEST_CASE("records that begin before the one before them ends stop a discontinuous file only", "[edf]") {
  // The last record has no follower that could outvote it.
  const auto last = good(with_list(small_file(), 5, "+1.5\x14\x14\0"s));
  CHECK(last.signals[0].time_base.runs().size() == 1);
  CHECK(has_warning(last, "1 record says that it begins before the record before it ends, but the file"));
  const std::string file = with_list(small_file(), 4, "+1.5\x14\x14\0"s);
  const auto continuous = good(file);
  CHECK(continuous.signals[0].time_base.runs().size() == 1);
  CHECK(has_warning(continuous, "record 5 says that it begins at 1.5 s, but the records around it put it at "
                                "4 s; its onset is not used"));
  CHECK_FALSE(has_warning(continuous, "begins before the record before it"));
  const Error error = error_of(patched(file, 192, "EDF+D", 44));
  CHECK(error.code == ErrorCode::damaged);
  CHECK(error.place.byte == 1024 + 4 * kRecordBytes);
}

TEST_CASE("one record onset that its neighbours outvote makes no gap in a continuous file", "[edf]") {
  const std::string late = with_list(small_file(), 2, "+9\x14\x14\0"s);
  const auto read = good(late);
  CHECK(read.signals[0].time_base.runs().size() == 1);
  CHECK(read.signals[0].time_base.end() == Seconds(6.0));
  CHECK(has_warning(read, std::to_string(1024 + 2 * kRecordBytes) +
                              ": warning: record 3 says that it begins at 9 s, but the records around it put "
                              "it at 2 s; its onset is not used"));
  CHECK_FALSE(has_warning(read, "a gap of"));
  CHECK_FALSE(has_warning(read, "records say"));
  const auto twice = good(with_list(late, 4, "+2.25\x14\x14\0"s));
  CHECK(twice.signals[0].time_base.runs().size() == 1);
  CHECK(has_warning(twice, "put it at 2 s (2 such records)"));
  // A discontinuous file may well pause for a record, but not go back behind it.
  CHECK(error_of(patched(late, 192, "EDF+D", 44)).code == ErrorCode::damaged);
}

TEST_CASE("onsets with the rounding of doubles make no gap", "[edf]") {
  std::string file = patched(small_file(), 192, "EDF+D", 44);
  for (std::size_t r = 0; r < 6; ++r)
    file = with_list(file, r, "+" + std::to_string(8192 + r) + ".202311999999\x14\x14\0"s);
  file = with_list(file, 3, "+8195.202312\x14\x14\0"s);
  const auto read = good(file);
  CHECK(read.signals[0].time_base.runs().size() == 1);
  CHECK(has_warning(read, "the first record begins 8192.20231 s after the start time"));
}

TEST_CASE("annotations are reduced by the first record's onset, sorted, and read from all their signals",
          "[edf]") {
  std::string file = small_file();
  for (std::size_t r = 0; r < 6; ++r)
    file = with_list(file, r,
                     "+" + std::to_string(r) + ".5\x14\x14\0"s +
                         (r == 2 ? "+5.25\x14late\x14\0+1.5\x15"
                                   "0.5\x14"
                                   "a\x14"
                                   "b\x14\0"s
                                 : ""s));
  const auto read = good(file);
  REQUIRE(read.annotations.size() == 3);
  CHECK(read.annotations[0].onset == Seconds(1.0));
  CHECK(read.annotations[0].duration == Seconds(0.5));
  CHECK(read.annotations[0].text == "a");
  CHECK(read.annotations[1].text == "b");
  CHECK(read.annotations[2].onset == Seconds(4.75));
  CHECK(read.file_time_of_zero == Seconds(0.5));
  CHECK(read.clock_start == "2026-03-04T09:30:00.5");
}

TEST_CASE("an annotation without a readable time is named, the others are kept", "[edf]") {
  const auto read = good(with_list(small_file(), 2,
                                   "+2\x14\x14\0+x\x14"
                                   "ISO\x14\0+2.5\x14"
                                   "ACh\x14\0"s));
  REQUIRE(read.annotations.size() == 1);
  CHECK(read.annotations[0].text == "ACh");
  CHECK(has_warning(read, "an annotation of record 3 has no readable time"));
  const auto odd = good(with_list(small_file(), 2,
                                  "+2\x14\x14\0"
                                  "2,5\x14"
                                  "ACh\x14\0"s));
  REQUIRE(odd.annotations.size() == 1);
  CHECK(odd.annotations[0].onset == Seconds(2.5));
  CHECK(has_warning(odd, "without sign or with a decimal comma"));
}

TEST_CASE("annotation lists are read as the standard spells them", "[edf]") {
  // Kemp & Olivan 2003, section 2.2.2: +180<20>Lights off<20>Close door<20><0> and two more examples.
  const auto read = read_annotation_lists("+180\x14Lights off\x14"
                                          "Close door\x14\0"
                                          "+1800.2\x15"
                                          "25.5\x14"
                                          "Apnea\x14\0"
                                          "-0.065\x14Pre-stimulus\x14\0\0\0\0"s);
  REQUIRE(read.lists.size() == 3);
  CHECK(read.lists[0].texts == std::vector<std::string>{"Lights off", "Close door"});
  CHECK_FALSE(read.lists[0].keeps_time);
  CHECK(read.lists[1].onset == 1800.2);
  CHECK(read.lists[1].duration == 25.5);
  CHECK(read.lists[2].onset == -0.065);
  CHECK(read.unreadable.empty());
  CHECK(read_annotation_lists("+567\x14\x14\0"s).lists.at(0).keeps_time);
  CHECK(read_annotation_lists("+1\x14"
                              "\xE9t\xE9\x14\0"s)
            .lists.at(0)
            .texts.at(0) == "\xC3\xA9t\xC3\xA9");
  CHECK(read_annotation_lists(std::string(100, '\0')).lists.empty());
  CHECK(read_annotation_lists("+1\x14no end"s).lists.at(0).texts.at(0) == "no end");
}

TEST_CASE("samples outside the stated digital range and coarse signals are reported", "[edf]") {
  std::string file = patched(small_file(), field(kDigitalMin, 8, 1), "-1000", 8);
  file = patched(file, field(kDigitalMax, 8, 1), "1000", 8);
  CHECK(has_warning(good(file), "of signal 'T' lie outside the digital range"));
  WrittenRecording written;
  written.signals.push_back({"A", "mV", Hertz(10.0), std::vector<double>(20, 1.0), -1000.0, 1000.0, ""});
  written.signals.push_back({"B", "mV", Hertz(10.0), std::vector<double>(20, 1.0), -1000.0, 1000.0, ""});
  written.signals[1].samples[3] = 1.3;
  const auto read = good(edf_bytes(written, EdfKind::plain, "coarse.edf"));
  CHECK(has_warning(read, "signal 'A' is 0.9918")); // the nearest step of 2000 / 65535
  CHECK(has_warning(read, "signal 'B' spans only 10 steps"));
}

TEST_CASE("what is called .edf but is something else is refused by its first bytes", "[edf]") {
  CHECK(error_of("{\nHeaderID = EH:000001 ;\n").what.find("picture") != std::string::npos);
  CHECK(error_of("\xFF"
                 "BIOSEMI" +
                 std::string(300, ' '))
            .what.find("24 bit") != std::string::npos);
  CHECK(error_of("PK\x03\x04 and more").what.find("zip") != std::string::npos);
  CHECK(error_of("time,RA\n0,1\n").what.find("'time,RA.'") != std::string::npos);
  CHECK(error_of("0       X").code == ErrorCode::wrong_format);
  CHECK(error_of("").code == ErrorCode::wrong_format);
}

TEST_CASE("the kind of file is told by its bytes, not by its name", "[edf]") {
  CHECK(read_bytes(small_file(), "small.csv")->files[0].kind == "edf+c");
  const auto table = read_bytes("0       1.5\n0.001   2.5\n0.002   3.0\n", "x.txt");
  REQUIRE(table.ok());
  CHECK(table->files[0].kind == "csv");
}

TEST_CASE("a good file cut at every length is an error or a shorter recording", "[edf]") {
  const std::string file = small_file();
  const auto whole = samples_of(good(file), "RA");
  for (std::size_t length = 0; length < file.size(); ++length) {
    const auto read = read_bytes(file.substr(0, length), "small.edf");
    CAPTURE(length);
    if (length < 1024 + kRecordBytes) {
      REQUIRE_FALSE(read.ok());
      continue;
    }
    REQUIRE(read.ok());
    const auto samples = samples_of(*read, "RA");
    REQUIRE(samples.size() == (length - 1024) / kRecordBytes * 20);
    REQUIRE(std::equal(samples.begin(), samples.end(), whole.begin()));
    REQUIRE_FALSE(read->warnings.empty());
  }
}

TEST_CASE("a header with any byte changed is read or refused, never worse", "[edf]") {
  const std::string file = small_file();
  for (std::size_t at = 0; at < 1024 + kRecordBytes; ++at) {
    for (const char other : {'\0', ' ', '0', '9', '-', ',', '.', 'X', '\x14', '\xFF'}) {
      std::string changed = file;
      changed[at] = other;
      const auto read = read_bytes(changed, "small.edf");
      CAPTURE(at, static_cast<int>(other));
      if (!read) {
        REQUIRE_FALSE(describe(read.error()).empty());
        continue;
      }
      for (const auto& signal : read->signals) {
        REQUIRE(signal.time_base.size() == signal.samples->size());
        for (const double sample : samples_of(signal))
          REQUIRE(std::isfinite(sample));
      }
    }
  }
}
