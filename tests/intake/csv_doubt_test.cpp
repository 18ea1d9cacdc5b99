// Chronodrome, GPL-3.0-or-later.
// What can be read in two ways is an error that says what to set, and the setting then settles it.
#include <catch2/catch.hpp>

#include "reading_fixtures.h"

using namespace chronodrome;
using namespace chronodrome::intake;
using namespace chronodrome::intake::fixtures;

namespace {

Error error_of(const std::string& text, const ReadSettings& settings = in_memory()) {
  const auto read = read_table(text, settings);
  if (read) FAIL("read as: " << read->convention);
  return read.error();
}

ReadSettings with_decimal(char decimal) {
  ReadSettings settings = in_memory();
  settings.decimal = decimal;
  return settings;
}

ReadSettings with_rate(double hertz) {
  ReadSettings settings = in_memory();
  settings.rate = Hertz(hertz);
  return settings;
}

} // namespace

TEST_CASE("decimal commas between comma delimiters are never guessed", "[csv]") {
  const std::string text = "0,001,1,25\n0,002,1,50\n0,003,1,75\n";
  const Error error = error_of(text);
  CHECK(error.code == ErrorCode::ambiguous);
  CHECK(error.place.line == 1);
  CHECK(error.remedy.find("recording.csv.decimal") != std::string::npos);
  CHECK(error_of("time,RA\n0,001,1,25\n0,002,1,50\n").code == ErrorCode::ambiguous);
  CHECK(error_of("1,25\n1,30\n1,35\n").code == ErrorCode::ambiguous);
}

TEST_CASE("a name for every whole number settles that commas divide", "[csv]") {
  const auto read = read_table("t (ms),RA (mV),RV (mV),LV (mV)\n0,1,25,3\n1,2,30,4\n2,3,35,5\n");
  REQUIRE(read.ok());
  CHECK(samples_of(*read, "RV") == std::vector<double>{25, 30, 35});
}

TEST_CASE("one name above decimal commas is one column", "[csv]") {
  const auto read = read_table("RA (mV)\n1,25\n1,50\n-2,75\n", with_rate(1000.0));
  REQUIRE(read.ok());
  CHECK(samples_of(*read, "RA") == std::vector<double>{1.25, 1.5, -2.75});
}

TEST_CASE("a mark that may divide thousands or decimals is never guessed", "[csv]") {
  const std::string points = "RA (mV);RV (mV)\n1.000;2.500\n3.125;4.250\n";
  const Error error = error_of(points, with_rate(500.0));
  CHECK(error.code == ErrorCode::ambiguous);
  CHECK(error.remedy.find("recording.csv.decimal") != std::string::npos);
  ReadSettings settings = with_rate(500.0);
  settings.decimal = '.';
  auto read = read_table(points, settings);
  REQUIRE(read.ok());
  CHECK(samples_of(*read, "RV") == std::vector<double>{2.5, 4.25});
  settings.decimal = ',';
  read = read_table(points, settings);
  REQUIRE(read.ok());
  CHECK(samples_of(*read, "RV") == std::vector<double>{2500, 4250});
  CHECK(read->convention.find("thousands") != std::string::npos);
}

TEST_CASE("one number that cannot have thousands settles the mark", "[csv]") {
  // readr#1061: 1.0 and 2.0 were read as 10 and 20.
  const auto read = read_table("RA (mV);RV (mV)\n1.0;2.0\n1.000;2.500\n", with_rate(500.0));
  REQUIRE(read.ok());
  CHECK(samples_of(*read, "RA") == std::vector<double>{1.0, 1.0});
  const auto zero = read_table("time (s);RA (mV)\n0.000;1.250\n0.001;2.500\n");
  REQUIRE(zero.ok());
  CHECK(samples_of(*zero, "RA") == std::vector<double>{1.25, 2.5});
}

TEST_CASE("thousands marks that can be nothing else are read", "[csv]") {
  const std::vector<std::string> tables = {
      "time (s);RA (mV)\n0.000;1,234.5\n0.001;2,345.75\n",
      "time (s);RA (mV)\n0,000;1.234,5\n0,001;2.345,75\n",
      "time (s);RA (mV)\n0,000;1 234,5\n0,001;2 345,75\n",
      "time (s);RA (mV)\n0,000;1\xC2\xA0"
      "234,5\n0,001;2\xE2\x80\xAF"
      "345,75\n",
      "time (s);RA (mV)\n0.000;1'234.5\n0.001;2'345.75\n",
      "time (s),RA (mV)\n0.000,\"1,234.5\"\n0.001,\"2,345.75\"\n",
  };
  for (const std::string& table : tables) {
    CAPTURE(table);
    const auto read = read_table(table);
    if (!read) FAIL(describe(read.error()));
    CHECK(samples_of(*read, "RA") == std::vector<double>{1234.5, 2345.75});
  }
}

TEST_CASE("a number with another decimal mark far down the table is an error with its line", "[csv]") {
  std::string text = "time (s);RA (mV)\n";
  for (int i = 0; i < 6000; ++i)
    text += std::to_string(i / 1000) + "." + std::to_string(1000 + i % 1000).substr(1) + ";0.5\n";
  text += "6.000;1,234\n";
  const Error error = error_of(text);
  CHECK(error.code == ErrorCode::ambiguous);
  CHECK(error.place.line == 6002);
  CHECK(error.place.column == 2);
}

TEST_CASE("times without a unit are read as seconds only where nothing else is possible", "[csv]") {
  const auto seconds = read_table("time,RA (mV)\n0.000,1\n0.001,2.5\n0.002,3\n");
  REQUIRE(seconds.ok());
  CHECK(seconds->signals[0].time_base.rate() == Hertz(1000.0));
  CHECK(has_warning(*seconds, "no unit"));
  for (const char* step : {"1", "0.1", "2", "0.05"}) {
    std::string text = "time,RA (mV)\n";
    for (int i = 0; i < 4; ++i)
      text += std::to_string(i * std::stod(step)) + ",1.5\n";
    CAPTURE(text);
    const Error error = error_of(text);
    CHECK(error.code == ErrorCode::ambiguous);
    CHECK(error.remedy.find("recording.csv.rate_hz") != std::string::npos);
  }
  const auto told = read_table("time,RA (mV)\n0,1\n1,2.5\n2,3\n", with_rate(1000.0));
  REQUIRE(told.ok());
  CHECK(told->signals[0].time_base.rate() == Hertz(1000.0));
  const auto header = read_table("Sampling rate: 1 kHz\ntime,RA (mV)\n0,1\n1,2.5\n2,3\n");
  REQUIRE(header.ok());
  CHECK(header->signals[0].time_base.rate() == Hertz(1000.0));
  CHECK(error_of("time,RA (mV)\n0,1\n1,2.5\n2,3\n", with_rate(300.0)).code == ErrorCode::bad_value);
}

TEST_CASE("seconds that rise by one a row are suspected to be milliseconds", "[csv]") {
  const Error error = error_of("time (s),RA (mV)\n0,1\n1,2.5\n2,3\n");
  CHECK(error.code == ErrorCode::ambiguous);
  CHECK(error.what.find("1 Hz") != std::string::npos);
  CHECK(error.what.find("1 kHz") != std::string::npos);
}

TEST_CASE("without a time column the rate must be told, and is never 1 Hz", "[csv]") {
  const std::string text = "RA (mV),RV (mV)\n1.5,2\n2.5,3\n3.5,1\n";
  const Error error = error_of(text);
  CHECK(error.code == ErrorCode::not_enough_data);
  CHECK(error.remedy.find("recording.csv.rate_hz") != std::string::npos);
  const auto read = read_table(text, with_rate(250.0));
  REQUIRE(read.ok());
  CHECK(read->signals[0].time_base.rate() == Hertz(250.0));
  CHECK(read->duration == Seconds(3.0 / 250.0));
  CHECK(error_of("Rate: 500 Hz\n" + text).what.find("500 Hz") != std::string::npos);
  CHECK(error_of("sample,RA (mV)\n1,1.5\n2,2.5\n3,3\n").remedy.find("rate_hz") != std::string::npos);
}

TEST_CASE("the time column can be named, and denied", "[csv]") {
  const std::string text = "A (ms),B (s),RA (mV)\n0,0.000,1.5\n1,0.002,2.5\n2,0.004,3.5\n";
  ReadSettings settings = in_memory();
  settings.time_column = "B (s)";
  auto read = read_table(text, settings);
  REQUIRE(read.ok());
  CHECK(read->signals.back().time_base.rate() == Hertz(500.0));
  settings.time_column = "C";
  CHECK(error_of(text, settings).code == ErrorCode::bad_usage);
  settings.time_column = "";
  settings.rate = Hertz(100.0);
  read = read_table(text, settings);
  REQUIRE(read.ok());
  CHECK(read->signals.size() == 3);
  CHECK(read->signals[0].time_base.rate() == Hertz(100.0));
}

TEST_CASE("settings that cannot be are refused before anything is read", "[csv]") {
  CHECK(error_of("x", with_rate(0.0)).code == ErrorCode::bad_usage);
  CHECK(error_of("x", with_rate(-5.0)).code == ErrorCode::bad_usage);
  CHECK(error_of("x", with_decimal(';')).code == ErrorCode::bad_usage);
  ReadSettings settings = with_decimal(',');
  settings.delimiter = ',';
  CHECK(error_of("x", settings).code == ErrorCode::bad_usage);
  settings.delimiter = '1';
  CHECK(error_of("x", settings).code == ErrorCode::bad_usage);
}

TEST_CASE("columns of numbers without names are not given the wrong ones", "[csv]") {
  const Error error = error_of("RA (mV),RV (mV)\n1,0.5,0.25\n2,0.75,0.5\n3,1.5,2.5\n", with_rate(100.0));
  CHECK(error.code == ErrorCode::wrong_format);
  CHECK(error.place.column == 3);
}

TEST_CASE("a column called T is time only if it rises and its unit does not speak against it", "[csv]") {
  const auto tension = read_table("RA (mV),T (mN)\n1.5,2\n2.5,3\n3,1\n", with_rate(100.0));
  REQUIRE(tension.ok());
  CHECK(samples_of(*tension, "T") == std::vector<double>{2, 3, 1});
  const auto falling = read_table("RA,T\n1.5,2.5\n2.5,3\n3,1\n", with_rate(100.0));
  REQUIRE(falling.ok());
  CHECK(falling->signals.size() == 2);
  const auto time = read_table("RA (mV),t\n1.5,0.000\n2.5,0.002\n3,0.004\n");
  REQUIRE(time.ok());
  CHECK(time->signals[0].time_base.rate() == Hertz(500.0));
  CHECK(read_table("time_s,RA_mV\n0.000,0.5\n0.002,1.5\n")->signals[0].unit == "mV");
  CHECK(read_table("time (s),lead_s\n0.000,0.5\n0.002,1.5\n")->signals[0].unit.empty());
}

TEST_CASE("an index without a name counts rows, or is the time", "[csv]") {
  const auto counted = read_table(",time (s),RA (mV)\n0,0.000,0.5\n1,0.002,1.5\n2,0.004,0.5\n");
  REQUIRE(counted.ok());
  REQUIRE(counted->signals.size() == 1);
  CHECK(counted->signals[0].time_base.rate() == Hertz(500.0));
  const Error error = error_of(",RA (mV)\n0,0.5\n1,1.5\n2,0.5\n");
  CHECK(error.what.find("no time column") != std::string::npos);
  const auto time = read_table(",RA (mV)\n0.000,0.5\n0.002,1.5\n0.004,0.5\n");
  REQUIRE(time.ok());
  CHECK(time->signals[0].time_base.rate() == Hertz(500.0));
}
