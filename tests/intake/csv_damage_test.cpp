// Chronodrome, GPL-3.0-or-later.
// Tables that are partly good: what is dropped or assumed is said, with its line, and nothing is invented.
#include <catch2/catch.hpp>

#include "reading_fixtures.h"

using namespace chronodrome;
using namespace chronodrome::intake;
using namespace chronodrome::intake::fixtures;
using Catch::Matchers::WithinAbs;
using Catch::Matchers::WithinRel;

namespace {

recording::Recording good(const std::string& text, const ReadSettings& settings = in_memory()) {
  auto read = read_table(text, settings);
  if (!read) FAIL(describe(read.error()) << "\n" << text);
  return *std::move(read);
}

Error error_of(const std::string& text, const ReadSettings& settings = in_memory()) {
  const auto read = read_table(text, settings);
  if (read) FAIL("read as: " << read->convention << "\n" << all_warnings(*read));
  return read.error();
}

const std::string kHead = "time (s),RA (mV),RV (mV)\n";

} // namespace

TEST_CASE("a missing value is a gap of its channel and of no other", "[csv]") {
  for (const std::string word : {"NaN", "NA", "-", "---", "OVER", "#N/A", "", "inf", "-Infinity", "1.#QNAN",
                                 "1e308", "null", "n/a", "#VALUE!", "*"}) {
    CAPTURE(word);
    const auto read = good(kHead + "0.000,1,2\n0.001," + word + ",3\n0.002,5,4.5\n0.003,7,8\n");
    CHECK(samples_of(read, "RA") == std::vector<double>{1, 5, 7});
    CHECK(samples_of(read, "RV") == std::vector<double>{2, 3, 4.5, 8});
    const auto& base = read.signals[0].time_base;
    REQUIRE(base.runs().size() == 2);
    CHECK(base.runs()[1].start == Seconds(0.002));
    CHECK(read.signals[1].time_base.runs().size() == 1);
    CHECK(has_warning(read, "table.csv:3: warning: 1 value is missing in column 'RA'"));
  }
}

TEST_CASE("missing values are counted for each column, with the first line", "[csv]") {
  std::string text = kHead;
  for (int i = 0; i < 100; ++i)
    text += "0." + std::to_string(1000 + i).substr(1) + "," + (i % 7 == 3 ? "OVER" : "1.5") + ",2.5\n";
  const auto read = good(text);
  CHECK(has_warning(read, "table.csv:5: warning: 14 values are missing in column 'RA' (first 'OVER')"));
  CHECK(read.signals[0].time_base.runs().size() == 15);
}

TEST_CASE("a channel with a value in every tenth row has a tenth of the rate", "[csv]") {
  std::string text = "time (s),RA (mV),LVP (mmHg)\n";
  for (int i = 0; i < 100; ++i)
    text += "0." + std::to_string(1000 + i).substr(1) + ",0.5," +
            (i % 10 == 0 ? std::to_string(i) + ".5" : "") + "\n";
  const auto read = good(text);
  REQUIRE(read.find("LVP") != nullptr);
  const auto& base = read.find("LVP")->time_base;
  CHECK_THAT(base.rate().value(), WithinRel(100.0, 1e-12));
  CHECK(base.runs().size() == 1);
  CHECK(samples_of(read, "LVP") ==
        std::vector<double>{0.5, 10.5, 20.5, 30.5, 40.5, 50.5, 60.5, 70.5, 80.5, 90.5});
}

TEST_CASE("a step longer than one and a half samples is a gap that keeps its length", "[csv]") {
  // The check value of the methods reference, 1.2 (iii): 0, 1, 2, 3, 7, 8 ms.
  const auto read = good("time (ms),RA (mV)\n0,1\n1,2\n2,3.5\n3,4\n7,5\n8,6\n");
  const auto& base = read.signals[0].time_base;
  REQUIRE(base.gaps().size() == 1);
  CHECK_THAT(base.gaps()[0].start.value(), WithinAbs(0.004, 1e-12));
  CHECK_THAT(base.gaps()[0].end.value(), WithinAbs(0.007, 1e-12));
  CHECK_THAT(base.rate().value(), WithinRel(1000.0, 1e-12));
  CHECK(has_warning(read, "table.csv:6: warning: a gap of 0.003 s before 0.007 s"));
}

TEST_CASE("the rate is that of the stretches between gaps", "[csv]") {
  std::string text = "time (s),RA (mV)\n";
  for (int i = 0; i < 3000; ++i) {
    const double time = i / 1234.5 + (i >= 1000 ? 5.0 : 0.0) + (i >= 2000 ? 0.25 : 0.0);
    text += std::to_string(time) + ",0." + std::to_string(i % 10) + "\n"; // six decimals
  }
  const auto read = good(text);
  const auto& base = read.signals[0].time_base;
  REQUIRE(base.runs().size() == 3);
  // Stamps to 1 us over three stretches of 0.81 s: 1e-6 / 2.4.
  CHECK_THAT(base.rate().value(), WithinRel(1234.5, 2e-6));
  CHECK_THAT(base.runs()[1].start.value(), WithinAbs(1000 / 1234.5 + 5.0, 2e-6));
  CHECK_THAT(base.runs()[2].start.value(), WithinAbs(2000 / 1234.5 + 5.25, 2e-6));
}

TEST_CASE("rounded time stamps are rebuilt from the count of rows", "[csv]") {
  struct Rounded {
    double rate;
    int decimals;
  };
  for (const Rounded rounded : {Rounded{2000.0, 3}, Rounded{1024.0, 3}, Rounded{990.0, 3}, Rounded{400.0, 3},
                                Rounded{1000.0, 1}, Rounded{5000.0, 2}, Rounded{250.0, 2}}) {
    const int rows = 20'000;
    std::string text = "time (s),RA (mV)\n";
    const double unit = std::pow(10.0, rounded.decimals);
    for (int i = 0; i < rows; ++i) {
      const auto stamp = static_cast<long>(std::lround(i / rounded.rate * unit));
      const std::string digits =
          std::to_string(stamp % static_cast<long>(unit) + static_cast<long>(unit)).substr(1);
      text += std::to_string(stamp / static_cast<long>(unit)) + "." + digits + ",0." +
              std::to_string(i % 10) + "\n";
    }
    CAPTURE(rounded.rate, rounded.decimals);
    const auto read = good(text);
    const auto& base = read.signals[0].time_base;
    CHECK(base.runs().size() == 1);
    CHECK(base.size() == rows);
    // First and last stamp are each off by half a unit of the last digit.
    CHECK_THAT(base.rate().value(), WithinRel(rounded.rate, rounded.rate / unit / rows * 1.01));
    CHECK(has_warning(read, "the time stamps are rounded"));
    CHECK(has_warning(read, "SD"));
  }
}

TEST_CASE("a gap among rounded stamps is placed to a fraction of their rounding", "[csv]") {
  std::string text = "time (s),RA (mV)\n";
  for (int i = 0; i < 4000; ++i) {
    const double time = i / 2000.0 + (i >= 2000 ? 1.2503 : 0.0);
    text += std::to_string(std::lround(time * 1000.0)) + "e-3,0." + std::to_string(i % 10) + "\n";
  }
  const auto read = good(text);
  const auto& base = read.signals[0].time_base;
  REQUIRE(base.runs().size() == 2);
  // Thousands of stamps average their rounding of 1 ms out; what stays is its asymmetry at the steps of 0.5
  // ms.
  CHECK_THAT(base.runs()[1].start.value(), WithinAbs(2.2503, 0.0006));
}

TEST_CASE("whole seconds at 1 kHz are divided by the count of rows", "[csv]") {
  std::string text = "clock,RA (mV)\n";
  for (int i = 0; i < 10'000; ++i)
    text += "09:30:" + std::to_string(110 + i / 1000).substr(1) + ",0." + std::to_string(i % 10) + "\n";
  const auto read = good(text);
  CHECK(read.signals[0].time_base.runs().size() == 1);
  CHECK_THAT(read.signals[0].time_base.rate().value(), WithinRel(1000.0, 0.12)); // 9 s known to 1 s
  CHECK(has_warning(read, "rounded to 1000 ms"));
}

TEST_CASE("time that goes back is an error with its line", "[csv]") {
  const Error error = error_of(kHead + "0.000,1,2\n0.001,2,3\n0.0005,3,4\n0.001,1,1\n");
  CHECK(error.code == ErrorCode::bad_value);
  CHECK(error.place.line == 4);
  CHECK(error.what.find("goes back") != std::string::npos);
}

TEST_CASE("times that follow no rate are refused", "[csv]") {
  std::string text = "time (s),RA (mV)\n";
  double time = 0.0;
  for (int i = 0; i < 1000; ++i) {
    text += std::to_string(time) + ",0." + std::to_string(i % 10) + "\n";
    time += i < 500 ? 0.001 : 0.0013; // the rate changes half way
  }
  const Error error = error_of(text);
  CHECK(error.code == ErrorCode::bad_value);
  CHECK(error.what.find("constant rate") != std::string::npos);
}

TEST_CASE("a header that states another rate than the times is reported in % and ms an hour", "[csv]") {
  std::string text = "Sampling rate: 1000 Hz\ntime (s),RA (mV)\n";
  for (int i = 0; i < 10'000; ++i)
    text += std::to_string(i / 999.0) + ",0." + std::to_string(i % 10) + "\n";
  const auto read = good(text);
  CHECK_THAT(read.signals[0].time_base.rate().value(), WithinRel(999.0, 1e-6));
  CHECK(has_warning(read, "the header says 1000 Hz, the time column 999"));
  CHECK(has_warning(read, "3604 ms an hour")); // 1/999 of 3600 s
}

TEST_CASE("text among the numbers becomes an annotation at its time", "[csv]") {
  const auto read = good(kHead + "0.000,1,2\n0.001,ISO added,3\n0.002,5,4\n");
  REQUIRE(read.annotations.size() == 1);
  CHECK(read.annotations[0].text == "ISO added");
  CHECK(read.annotations[0].onset == Seconds(0.001));
  CHECK(samples_of(read, "RA") == std::vector<double>{1, 5});
  CHECK(has_warning(read, "table.csv:3: warning: 'ISO added' stands among the numbers of column 'RA'"));
}

TEST_CASE("a line of text between the rows becomes an annotation and takes no time", "[csv]") {
  const auto read =
      good(kHead + "0.000,1,2\n0.001,2,3\n0.0014,ACh 1e-6 M,\n# washout\n0.002,5,4\n0.003,1,1\n");
  CHECK(samples_of(read, "RA") == std::vector<double>{1, 2, 5, 1});
  CHECK(read.signals[0].time_base.runs().size() == 1);
  REQUIRE(read.annotations.size() == 2);
  CHECK(read.annotations[0].text == "ACh 1e-6 M");
  CHECK_THAT(read.annotations[0].onset.value(), WithinAbs(0.0014, 1e-12));
  CHECK(read.annotations[1].text == "# washout");
  CHECK_THAT(read.annotations[1].onset.value(), WithinAbs(0.002, 1e-12));
}

TEST_CASE("a column of comments becomes annotations where it changes", "[csv]") {
  const auto read =
      good("time (s),RA (mV),comment\n0.000,1,\n0.001,2,\"addition ISO, 1e-7 M\"\n0.002,3,\n0.003,4,washout\n"
           "0.004,5,washout\n0.005,6,\n");
  REQUIRE(read.annotations.size() == 2);
  CHECK(read.annotations[0].text == "addition ISO, 1e-7 M");
  CHECK(read.annotations[0].onset == Seconds(0.001));
  CHECK(read.annotations[1].text == "washout");
  CHECK(read.signals.size() == 1);
}

TEST_CASE("comments far behind the head of the table are found in a column that was empty", "[csv]") {
  std::string text = "time (s),RA (mV),remark\n";
  for (int i = 0; i < 8000; ++i)
    text += std::to_string(i / 1000.0) + ",0." + std::to_string(i % 10) + "," +
            (i == 7500 ? "addition ACh 1e-6 M" : "") + "\n";
  const auto read = good(text);
  REQUIRE(read.annotations.size() == 1);
  CHECK_THAT(read.annotations[0].onset.value(), WithinAbs(7.5, 1e-9));
  CHECK(read.signals.size() == 1);
}

TEST_CASE("rows with too few or too many cells are named, up to a limit", "[csv]") {
  const std::string text = kHead + "0.000,1,2\n0.001,2\n0.002,3,4,99\n0.003,5,6\n";
  const auto read = good(text);
  CHECK(samples_of(read, "RA") == std::vector<double>{1, 2, 3, 5});
  CHECK(samples_of(read, "RV") == std::vector<double>{2, 4, 6});
  CHECK(
      has_warning(read, "2 rows have too few or too many cells: line 3 (2 cells), 4 (4 cells); expected 3"));
  ReadSettings settings = in_memory();
  settings.limits.uneven_rows = 2;
  CHECK(read_table(text, settings).ok());
  settings.limits.uneven_rows = 1;
  CHECK(error_of(text, settings).code == ErrorCode::damaged);
}

TEST_CASE("a table without names keeps its first sample and says so", "[csv]") {
  const auto read = good("0.000,1.5,2\n0.001,2.5,3\n0.002,3.5,5\n");
  REQUIRE(read.signals.size() == 2);
  CHECK(read.signals[0].source == "column 2");
  CHECK(samples_of(read, "column 2") == std::vector<double>{1.5, 2.5, 3.5});
  CHECK(has_warning(read, "no row of column names"));
}

TEST_CASE("columns of the same name are numbered, empty ones ignored, constant ones reported", "[csv]") {
  const auto read = good(
      "time (s),EG (mV),EG (mV),Unnamed,LVP (mmHg)\n0.000,1,5,,80.5\n0.001,2,6,,80.5\n0.002,3.5,7,,80.5\n");
  REQUIRE(read.signals.size() == 3);
  CHECK(read.signals[1].source == "EG 2");
  CHECK(samples_of(read, "EG 2") == std::vector<double>{5, 6, 7});
  CHECK(has_warning(read, "two columns are called 'EG'"));
  CHECK(has_warning(read, "column 'LVP' is 80.5 throughout"));
}

TEST_CASE("whole numbers without a unit are counts, other numbers stay without one", "[csv]") {
  const auto read = good("time (s),A,B\n0.000,512,0.5\n0.001,515,0.25\n0.002,499,0.5\n");
  CHECK(read.signals[0].unit == "counts");
  CHECK(read.signals[0].resolution == 3.0);
  CHECK(read.signals[1].unit.empty());
  CHECK(has_warning(read, "'A': taken as counts"));
  CHECK(has_warning(read, "no unit is stated for 'B'"));
}

TEST_CASE("an unknown unit in square brackets is kept as it stands", "[csv]") {
  const auto read = good("time [s],RA [furlong],RV (left)\n0.000,1.5,0.5\n0.001,2,1\n");
  CHECK(read.signals[0].unit == "furlong");
  CHECK(read.signals[0].source_as_written == "RA [furlong]");
  CHECK(read.signals[1].source == "RV (left)");
}

TEST_CASE("a quote that is not closed is an error with its line", "[csv]") {
  const Error error = error_of(kHead + "0.000,1,2\n0.001,\"2,3\n0.002,3,4\n");
  CHECK(error.code == ErrorCode::damaged);
  CHECK(error.what.find("line 3") != std::string::npos);
  ReadSettings settings = in_memory();
  settings.limits.line_bytes = 1000;
  std::string text = "time (s),RA (mV),remark\n";
  for (int i = 0; i < 100'000; ++i)
    text += std::to_string(i / 1000.0) + ",0.5," + (i == 80'000 ? "\"open" : "") + "\n";
  const Error far = error_of(text, settings);
  CHECK(far.code == ErrorCode::damaged);
  CHECK(far.place.line == 80'002);
}

TEST_CASE("a quoted cell may hold delimiters, quotes and line ends", "[csv]") {
  const auto read =
      good("time (s),RA (mV),remark\n0.000,1,\"a \"\"b\"\", c\nd\"\n0.001,2.5,\n0.002,OVER,last\n");
  REQUIRE(read.annotations.size() == 2);
  CHECK(read.annotations[0].text == "a \"b\", c d");
  CHECK(read.annotations[1].text == "last");
  CHECK(samples_of(read, "RA") == std::vector<double>{1, 2.5});
  CHECK(has_warning(read, "table.csv:5: warning: 1 value is missing")); // the quoted line end counts
}

TEST_CASE("the last line is dropped where it is cut", "[csv]") {
  const std::string text = kHead + "0.000,1.25,2.25\n0.001,2.50,3.25\n0.002,5.00,4.75";
  for (std::size_t cut = text.size(); cut > kHead.size() + 33; --cut) {
    const auto read = good(text.substr(0, cut));
    const auto rv = samples_of(read, "RV");
    CAPTURE(cut, text.substr(0, cut));
    if (cut == text.size()) {
      CHECK(rv == std::vector<double>{2.25, 3.25, 4.75});
    } else {
      CHECK(rv == std::vector<double>{2.25, 3.25}); // never 4 or 4.7
      CHECK(has_warning(read, "table.csv:4: warning: the last line is incomplete"));
    }
  }
}

TEST_CASE("a table cut at any byte gives an error or a shorter recording", "[csv]") {
  std::string text = "Heart 3, invented\n" + kHead;
  for (int i = 0; i < 40; ++i)
    text += "0." + std::to_string(1000 + i).substr(1) + "," + std::to_string(i % 7) + ".25,-" +
            std::to_string(i % 3) + ".50\n";
  const auto whole = good(text);
  const auto ra = samples_of(whole, "RA");
  for (std::size_t cut = 0; cut < text.size(); ++cut) {
    const auto read = read_table(text.substr(0, cut));
    if (!read) continue;
    for (const auto& signal : read->signals) {
      if (signal.source != "RA") continue;
      const auto samples = samples_of(signal);
      CAPTURE(cut);
      REQUIRE(samples.size() <= ra.size());
      CHECK(std::equal(samples.begin(), samples.end(), ra.begin()));
    }
  }
}

TEST_CASE("a table with any byte changed is read or refused, and never more", "[csv]") {
  std::string text = "Heart 3, invented\n" + kHead;
  for (int i = 0; i < 12; ++i)
    text += "0." + std::to_string(1000 + i).substr(1) + "," + std::to_string(i % 7) + ".25,-" +
            std::to_string(i % 3) + ".50\n";
  std::size_t refused = 0, read_well = 0;
  for (std::size_t at = 0; at < text.size(); ++at) {
    for (const char other : {'\0', ',', ';', '"', '\n', '\r', '9', '.', '-', 'e', '\xB5', '\xFF'}) {
      std::string changed = text;
      changed[at] = other;
      const auto read = read_table(changed);
      if (!read) {
        ++refused;
        CHECK_FALSE(read.error().remedy.empty());
        continue;
      }
      ++read_well;
      for (const auto& signal : read->signals) {
        for (const double sample : samples_of(signal))
          REQUIRE(std::isfinite(sample));
        REQUIRE(signal.time_base.size() == signal.samples->size());
      }
    }
  }
  CHECK(refused > 100);
  CHECK(read_well > 100);
}

TEST_CASE("a table of exactly as many rows as a spreadsheet holds is suspected", "[csv]") {
  std::string text = "time (s),RA (mV)\n";
  for (int i = 0; i < 65'535; ++i)
    text += std::to_string(i / 1000.0) + ",0." + std::to_string(i % 10) + "\n";
  CHECK(has_warning(good(text), "exactly 65536 rows"));
  CHECK_FALSE(has_warning(good(text + "65.535,0.5\n0065.536,0.5\n"), "exactly"));
}

TEST_CASE("what is no text is refused by name", "[csv]") {
  using namespace std::string_literals;
  const auto code_and_what = [](const std::string& bytes) {
    const auto read = read_table(bytes);
    REQUIRE_FALSE(read.ok());
    CHECK(read.error().code == ErrorCode::wrong_format);
    return read.error().what;
  };
  CHECK(code_and_what("PK\x03\x04\x14\0\x06\0"s).find("xlsx") != std::string::npos);
  CHECK(code_and_what("\xD0\xCF\x11\xE0\xA1\xB1\x1A\xE1"s).find("spreadsheet") != std::string::npos);
  CHECK(code_and_what("\x89PNG\r\n\x1A\n\0\0\0\rIHDR"s).find("PNG") != std::string::npos);
  CHECK(code_and_what("%PDF-1.4"s).find("PDF") != std::string::npos);
  CHECK(code_and_what("\x01\x02\x03\x04\x05\x06\x07\x08\0\0\0\0"s).find("binary") != std::string::npos);
  CHECK(code_and_what("\xFF"
                      "BIOSEMI........"s)
            .find("BDF") != std::string::npos);
  CHECK(code_and_what("").find("empty") != std::string::npos);
}

TEST_CASE("an empty table says what was read last", "[csv]") {
  CHECK(error_of("time (s),RA (mV)\n").what.find("line 1") != std::string::npos);
  CHECK(error_of("\n\n").code == ErrorCode::not_enough_data);
  CHECK(error_of("time (s)\n0.001\n0.002\n0.003\n").what.find("no column of samples") != std::string::npos);
}

TEST_CASE("lines below the table become notes, whatever numbers they hold", "[csv]") {
  std::string text = kHead;
  for (int i = 0; i < 50; ++i)
    text += "0.0" + std::to_string(10 + i) + ",1.5,2.5\n";
  for (const std::string end : {"\n", "", "\r\n\r\n"}) {
    const auto read = good(text + "Totals,12,75.5\nMean,1.5,2.5\n\nEnd of data" + end);
    CHECK(samples_of(read, "RA").size() == 50);
    CHECK(samples_of(read, "RA").back() == 1.5);
    CHECK(read.annotations.empty());
    CHECK(read.file_notes == std::vector<std::string>{"Totals 12 75.5", "Mean 1.5 2.5", "End of data"});
    CHECK_FALSE(has_warning(read, "no time"));
  }
  // A damaged time is no footer.
  const auto damaged = good(text + "0.0x6,7.5,2.5\n");
  CHECK(samples_of(damaged, "RA").back() == 7.5);
}

TEST_CASE("the lines below a table of many blocks are notes for any number of threads", "[csv]") {
  std::string text = kHead;
  for (int i = 0; i < 300'000; ++i)
    text += std::to_string(i / 1000) + "." + std::to_string(1000 + i % 1000).substr(1) + ",1.5,2.5\n";
  for (const unsigned threads : {1U, 3U}) {
    ReadSettings settings = in_memory();
    settings.threads = threads;
    const auto read = good(text + "Totals,12,13\n", settings);
    CHECK(samples_of(read, "RA").size() == 300'000);
    CHECK(read.file_notes == std::vector<std::string>{"Totals 12 13"});
  }
}

TEST_CASE("a row without a time is told with its line", "[csv]") {
  const auto read = good(kHead + "0.000,1,2\n0.001,2,3\n,2.5,4\n0.003,1,1\n");
  CHECK(has_warning(read, "table.csv:4: warning: 1 row has no time; placed by the rows around them"));
}

TEST_CASE("a line without an end is blamed for itself", "[csv]") {
  const std::string endless(2U << 20U, '1');
  const Error behind = error_of(kHead + "0," + endless);
  CHECK(behind.code == ErrorCode::over_limit);
  CHECK(behind.place.line == 2);
  CHECK(behind.what.find("the line is longer than 1048") == 0);
  const Error alone = error_of(std::string(2U << 20U, 'x'));
  CHECK(alone.code == ErrorCode::over_limit);
  CHECK(alone.place.line == 1);
}

TEST_CASE("one stray zero byte spoils its cell and nothing else", "[csv]") {
  const auto read = good(kHead + "0.000,1,2\n0.001," + std::string(1, '\0') + "2,3\n0.002,3,4\n");
  CHECK(samples_of(read, "RA") == std::vector<double>{1, 3});
  CHECK(samples_of(read, "RV") == std::vector<double>{2, 3, 4});
  CHECK(has_warning(read, "table.csv:3: warning: '"));
}

TEST_CASE("a clock without hours that passes the full hour is refused", "[csv]") {
  std::string text = "time,RA (mV)\n";
  for (int i = 0; i < 40; ++i)
    text +=
        (i < 20 ? "59:5" : "00:0") + std::to_string(i % 20 / 2) + "." + (i % 2 == 0 ? "0" : "5") + ",1.5\n";
  const Error error = error_of(text);
  CHECK(error.code == ErrorCode::ambiguous);
  CHECK(error.place.line == 22);
  CHECK(error.what.find("passes the full hour but shows no hours") != std::string::npos);
}
