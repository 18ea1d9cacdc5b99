// Chronodrome, GPL-3.0-or-later.
// One recording in the spellings that locales and exports give it: every one must give the same samples.
#include <catch2/catch.hpp>

#include "reading_fixtures.h"

using namespace chronodrome;
using namespace chronodrome::intake;
using namespace chronodrome::intake::fixtures;
using namespace std::string_literals;

namespace {

struct Variant {
  const char* name;
  std::string text;
  std::string unit = "mV";
};

std::string utf16(const std::string& ascii, bool little, bool mark) {
  std::string wide = mark ? (little ? "\xFF\xFE"s : "\xFE\xFF"s) : ""s;
  for (const char c : ascii)
    wide += little ? std::string{c, '\0'} : std::string{'\0', c};
  return wide;
}

const std::string kPlain =
    "time (s),RA (mV),RV (mV)\n0.000,1.25,-0.5\n0.001,1.5,2\n0.002,1e-1,-3.25\n0.003,0,100\n";

std::string with(std::string text, const std::string& from, const std::string& to) {
  for (auto at = text.find(from); at != std::string::npos; at = text.find(from, at + to.size()))
    text.replace(at, from.size(), to);
  return text;
}

/// The plain table in another delimiter and decimal mark.
std::string spelled(const std::string& delimiter, const std::string& decimal,
                    const std::string& line_end = "\n") {
  std::string text = with(with(kPlain, ",", "|"), ".", decimal);
  return with(with(text, "|", delimiter), "\n", line_end);
}

std::vector<Variant> variants() {
  return {
      {"comma and point", kPlain},
      {"semicolon and comma", spelled(";", ",")},
      {"semicolon and point", spelled(";", ".")},
      {"tab and point", spelled("\t", ".")},
      {"tab and comma", spelled("\t", ",")},
      {"bar and point", spelled("|", ".")},
      {"comma and blank", spelled(", ", ".")},
      {"semicolon and blanks around", spelled(" ; ", ",")},
      {"CRLF", spelled(",", ".", "\r\n")},
      {"CR alone", spelled(";", ",", "\r")},
      {"mixed line ends", with(with(kPlain, "-0.5\n", "-0.5\r\n"), "-3.25\n", "-3.25\r")},
      {"blank lines", with(kPlain, "\n0.002", "\n\n0.002")},
      {"byte-order mark", "\xEF\xBB\xBF" + kPlain},
      {"UTF-16 little endian with mark", utf16(kPlain, true, true)},
      {"UTF-16 big endian with mark", utf16(kPlain, false, true)},
      {"UTF-16 little endian without mark", utf16(kPlain, true, false)},
      {"UTF-16 big endian without mark", utf16(kPlain, false, false)},
      {"units in square brackets", with(with(kPlain, "(", "["), ")", "]")},
      {"a row of units", with(with(with(kPlain, " (s)", ""), " (mV)", ""), "\n0.000", "\ns,mV,mV\n0.000")},
      {"a row of bracketed units",
       with(with(with(kPlain, " (s)", ""), " (mV)", ""), "\n0.000", "\n(s),[mV],[mV]\n0.000")},
      {"units behind a slash", "time/s,RA (mV),RV (mV)" + kPlain.substr(kPlain.find('\n'))},
      {"times in milliseconds",
       with(with(with(with(with(kPlain, "(s)", "(ms)"), "\n0.000", "\n0"), "\n0.001", "\n1"), "\n0.002",
                 "\n2"),
            "\n0.003", "\n3")},
      {"times in microseconds",
       "time (us),RA (mV),RV (mV)\n0,1.25,-0.5\n1000,1.5,2\n2000,1e-1,-3.25\n3000,0,100\n"},
      {"times that do not begin at zero",
       "time (s),RA (mV),RV (mV)\n12.500,1.25,-0.5\n12.501,1.5,2\n12.502,1e-1,-3.25\n12.503,0,100\n"},
      {"times of day",
       "clock,RA (mV),RV "
       "(mV)\n09:30:00.000,1.25,-0.5\n09:30:00.001,1.5,2\n09:30:00.002,1e-1,-3.25\n09:30:00.003,0,100\n"},
      {"times of day with decimal comma",
       "Zeit;RA (mV);RV "
       "(mV)\n09:30:00,000;1,25;-0,5\n09:30:00,001;1,5;2\n09:30:00,002;1e-1;-3,25\n09:30:00,003;0;100\n"},
      {"dates and times",
       "time,RA (mV),RV (mV)\n2026-03-04 23:59:59.998,1.25,-0.5\n2026-03-04 23:59:59.999,1.5,2\n2026-03-05 "
       "00:00:00.000,1e-1,-3.25\n2026-03-05 00:00:00.001,0,100\n"},
      {"midnight without dates",
       "time;RA (mV);RV "
       "(mV)\n23:59:59.998;1.25;-0.5\n23:59:59.999;1.5;2\n00:00:00.000;0.1;-3.25\n00:00:00.001;0;100\n"},
      {"lines of text above", "Heart 12, invented\nOperator: NN\n\nGain,100\n" + kPlain},
      {"lines of text below", kPlain + "End of data\nTotals,,\n"},
      {"a title in the first cell", "Recording of an invented heart,,\n" + kPlain},
      {"delimiters at the ends of all rows", with(kPlain, "\n", ",\n")},
      {"delimiters at the ends of the data rows", with(with(kPlain, "\n", ",\n"), "RV (mV),\n", "RV (mV)\n")},
      {"a delimiter at the end of the first data row", with(kPlain, "-0.5\n", "-0.5,\n")},
      {"blanks of fixed width", "time(s)    RA(mV)   RV(mV)\n  0.000     1.25     -0.5\n  0.001     1.5      "
                                " 2\n  0.002     1e-1    -3.25\n  0.003     0       100\n"},
      {"blanks and separate units",
       "time (s)   RA (mV)   RV (mV)\n0.000  1.25  -0.5\n0.001  1.5  2\n0.002  1e-1  -3.25\n0.003  0  100\n"},
      {"quoted headings", "\"time (s)\",\"RA (mV)\",\"RV (mV)\"" + kPlain.substr(kPlain.find('\n'))},
      {"everything quoted, with decimal commas",
       "\"time (s)\",\"RA (mV)\",\"RV "
       "(mV)\"\n\"0,000\",\"1,25\",\"-0,5\"\n\"0,001\",\"1,5\",\"2\"\n\"0,002\",\"1e-1\",\"-3,25\"\n\"0,"
       "003\",\"0\",\"100\"\n"},
      {"exponents with decimal comma", "time (s);RA (mV);RV "
                                       "(mV)\n0,0E+00;1,25E+00;-5,0E-01\n1,0E-03;1,5E+00;2,0E+00\n2,0E-03;1,"
                                       "0E-01;-3,25E+00\n3,0E-03;0;1,0E+02\n"},
      {"exponents with D", "time (s),RA (mV),RV "
                           "(mV)\n0.0D+00,1.25D+00,-5.0D-01\n1.0D-03,1.5D+00,2.0D+00\n2.0D-03,1.0D-01,-3.25D+"
                           "00\n3.0D-03,0,1.0D+02\n"},
      {"signs and typographic minus", "time (s),RA (mV),RV (mV)\n0.000,+1.25,\xE2\x88\x92"
                                      "0.5\n0.001,+1.5,+2\n0.002,+.1,-3.25\n0.003,-0,100\n"},
      {"a repeated heading", with(kPlain, "\n0.002", "\ntime (s),RA (mV),RV (mV)\n0.002")},
      {"no line end at the end", kPlain.substr(0, kPlain.size() - 1)},
      {"an empty column between",
       "time (s),RA (mV),,RV (mV)\n0.000,1.25,,-0.5\n0.001,1.5,,2\n0.002,1e-1,,-3.25\n0.003,0,,100\n"},
      {"a counter beside the time",
       "sample,time (s),RA (mV),RV "
       "(mV)\n1,0.000,1.25,-0.5\n2,0.001,1.5,2\n3,0.002,1e-1,-3.25\n4,0.003,0,100\n"},
      {"u for micro", with(kPlain, "(mV)", "(uV)"), "uV"},
      {"micro sign", with(kPlain, "(mV)", "(\xC2\xB5V)"), "uV"},
      {"Greek mu", with(kPlain, "(mV)", "(\xCE\xBCV)"), "uV"},
      {"micro sign in Latin-1", with(kPlain, "(mV)", "(\xB5V)"), "uV"},
  };
}

} // namespace

TEST_CASE("every spelling of a table gives the same samples", "[csv]") {
  const auto all = variants();
  REQUIRE(all.size() >= 40);
  for (const Variant& variant : all) {
    CAPTURE(variant.name, variant.text);
    const auto read = read_table(variant.text);
    if (!read) FAIL(describe(read.error()));
    CAPTURE(all_warnings(*read), read->convention);
    REQUIRE(read->signals.size() == 2);
    CHECK(read->signals[0].source == "RA");
    CHECK(read->signals[1].source == "RV");
    CHECK(read->signals[0].unit == variant.unit);
    CHECK(samples_of(read->signals[0]) == std::vector<double>{1.25, 1.5, 0.1, 0.0});
    CHECK(samples_of(read->signals[1]) == std::vector<double>{-0.5, 2.0, -3.25, 100.0});
    // Stamps near 86400 s are doubles to 1.5e-11 s, of a step of 1e-3 s.
    CHECK_THAT(read->signals[0].time_base.rate().value(), Catch::Matchers::WithinRel(1000.0, 1e-7));
    REQUIRE(read->signals[0].time_base.runs().size() == 1);
    CHECK(read->signals[0].time_base.start() == Seconds(0.0));
    CHECK(read->annotations.empty());
    CHECK(read->files.at(0).kind == "csv");
    CHECK_FALSE(read->convention.empty());
  }
}

TEST_CASE("the convention that was found is stated", "[csv]") {
  const auto read = read_table(spelled(";", ","));
  REQUIRE(read.ok());
  CHECK(read->convention ==
        "UTF-8 text; columns divided by semicolons; decimal comma; times from column 'time' in s");
  CHECK(read->warnings.empty());
}

TEST_CASE("a table keeps what stands above and below it", "[csv]") {
  const auto read = read_table("Heart 12, invented\nSerial: 0815\n" + kPlain + "End of data\n");
  REQUIRE(read.ok());
  CHECK(read->file_notes == std::vector<std::string>{"Heart 12, invented", "Serial: 0815", "End of data"});
}

TEST_CASE("the time of zero stays known", "[csv]") {
  const auto later = read_table("time (s),RA (mV)\n12.500,1\n12.501,2.5\n12.502,3\n");
  REQUIRE(later.ok());
  CHECK(later->file_time_of_zero == Seconds(12.5));
  CHECK_FALSE(later->clock_start.has_value());
  const auto dated = read_table("time,RA (mV)\n04.03.2026 09:30:00.250,1\n04.03.2026 09:30:00.251,2.5\n");
  REQUIRE(dated.ok());
  CHECK(dated->clock_start == "2026-03-04T09:30:00.25");
  const auto beside =
      read_table("date,time,RA (mV)\n2026-03-04,09:30:00.250,1\n2026-03-04,09:30:00.251,2.5\n");
  REQUIRE(beside.ok());
  CHECK(beside->clock_start == "2026-03-04T09:30:00.25");
  CHECK(beside->signals.size() == 1);
  const auto unsure = read_table("time,RA (mV)\n04/03/2026 09:30:00.250,1\n04/03/2026 09:30:00.251,2.5\n");
  REQUIRE(unsure.ok());
  CHECK_FALSE(unsure->clock_start.has_value());
  CHECK(has_warning(*unsure, "day or the month first"));
}
