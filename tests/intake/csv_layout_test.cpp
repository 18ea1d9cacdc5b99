// Chronodrome, GPL-3.0-or-later.
// How the head of a table is understood: delimiter, decimal mark, names, units, the kinds of columns.
#include <catch2/catch.hpp>

#include "intake/csv_headings.h"
#include "intake/csv_layout.h"
#include "reading_fixtures.h"

using namespace chronodrome;
using namespace chronodrome::intake;
using namespace chronodrome::intake::fixtures;

namespace {

HeadReading reading_of(const std::string& text) {
  auto reading = find_dialect(text, true, "t.csv", in_memory());
  if (!reading) FAIL(describe(reading.error()) << "\n" << text);
  return *std::move(reading);
}

TableLayout layout_of(const std::string& text) {
  auto layout = find_layout(reading_of(text), text, "t.csv", in_memory());
  if (!layout) FAIL(describe(layout.error()) << "\n" << text);
  return *std::move(layout);
}

const std::string kRows = "0.000,1.5,2.5\n0.001,1.25,2\n0.002,3.5,4\n";

} // namespace

TEST_CASE("a delimiter inside texts is not taken for the one between cells", "[csv]") {
  // cpython#119123: frequency alone finds the comma.
  const auto list =
      reading_of("time (s);RA (mV);remark\n0.1;1.5;a, b, c, d\n0.2;2.5;e, f, g, h\n0.3;3.5;i, j, k, l\n");
  CHECK(list.dialect.delimiter == ';');
  CHECK(list.width == 3);
  const auto title = reading_of("a;b;c;d;e;f\na;b;c;d\n" + kRows);
  CHECK(title.dialect.delimiter == ',');
}

TEST_CASE("texts among the numbers do not change the dialect", "[csv]") {
  std::string text = "time (s);RA (mV)\n";
  for (int i = 0; i < 50; ++i)
    text += (i % 10 == 4 ? "ISO, 1e-7 M\n" : "") + std::string("0,") + std::to_string(100 + i) + ";" +
            std::to_string(i) + ",5\n";
  const auto reading = reading_of(text);
  CHECK(reading.dialect.delimiter == ';');
  CHECK(reading.dialect.decimal == ',');
  CHECK(reading.numeric == std::vector<bool>{true, true});
}

TEST_CASE("the names are the row above the data, or above the units", "[csv]") {
  struct Head {
    const char* above;
    std::vector<std::string> sources;
    std::vector<std::string> units;
    std::size_t notes;
  };
  const std::vector<Head> heads = {
      {"t (s),A (mV),B (mN)\n", {"t", "A", "B"}, {"s", "mV", "mN"}, 0},
      {"t,A,B\ns,mV,mN\n", {"t", "A", "B"}, {"s", "mV", "mN"}, 0},
      {"t,A,B\ns,mV,mN\nSmp,Smp,Smp\n", {"t", "A", "B"}, {"s", "mV", "mN"}, 1},
      {"s,mV,mN\nt,A,B\n", {"t", "A", "B"}, {"s", "mV", "mN"}, 0},
      {"Heart 1\nOperator,NN\nt,A,B\ns,mV,\n", {"t", "A", "B"}, {"s", "mV", ""}, 2},
      {"t,A,B\n(s),(mV),(-)\n", {"t", "A", "B"}, {"s", "mV", ""}, 0},
      {"Gain,100,200\nt,A,B\n", {"t", "A", "B"}, {"", "", ""}, 1},
      {"t (s),A (mV),B (mN),,\n", {"t", "A", "B"}, {"s", "mV", "mN"}, 0},
  };
  for (const Head& head : heads) {
    const TableLayout layout = layout_of(head.above + kRows);
    CAPTURE(head.above);
    REQUIRE(layout.columns.size() == 3);
    for (std::size_t c = 0; c < 3; ++c) {
      CHECK(layout.columns[c].source == head.sources[c]);
      CHECK(layout.columns[c].unit == head.units[c]);
    }
    CHECK(layout.notes.size() == head.notes);
    CHECK(layout.time_column == 0);
  }
}

TEST_CASE("columns are told by what they hold", "[csv]") {
  const auto layout = layout_of("n,date,clock,RA (mV),state,later\n"
                                "1,04.03.2026,09:30:00.000,1.5,control,\n"
                                "2,04.03.2026,09:30:00.001,NaN,control,\n"
                                "3,04.03.2026,09:30:00.002,2.5,ISO,\n");
  std::vector<ColumnKind> kinds;
  for (const TableColumn& column : layout.columns)
    kinds.push_back(column.kind);
  CHECK(kinds == std::vector<ColumnKind>{ColumnKind::counter, ColumnKind::date, ColumnKind::clock,
                                         ColumnKind::number, ColumnKind::text, ColumnKind::open});
  CHECK(layout.time_column == 2);
  REQUIRE(layout.clock_zero.has_value());
  CHECK(clock_text(*layout.clock_zero) == "2026-03-04T09:30:00");
  CHECK_FALSE(layout.clock_has_days);
}

TEST_CASE("names for time are known in several languages, and units name it too", "[csv]") {
  for (const char* name : {"time (s)", "Time [s]", "t", "Zeit (s)", "Temps (s)", "tiempo", "timestamp",
                           "elapsed", "ms", "seconds", "time_ms", "t/s", "Time, ms"}) {
    CAPTURE(name);
    const std::string text = std::string("RA (mV),") + name + "\n1.5,0.000\n2.5,0.001\n0.5,0.002\n";
    // "Time, ms" holds the delimiter: it needs its quotes.
    const std::string quoted = std::string("RA (mV),\"") + name + "\"\n1.5,0.000\n2.5,0.001\n0.5,0.002\n";
    CHECK(layout_of(std::string(name).find(',') == std::string::npos ? text : quoted).time_column == 1);
  }
  CHECK_FALSE(layout_of("RA (mV),RV (mV)\n1.5,0.000\n2.5,0.001\n0.5,0.002\n").time_column.has_value());
}

TEST_CASE("the resolution of the stamps is that of their digits", "[csv]") {
  CHECK(layout_of("t (s),A (mV)\n0.0,1.5\n0.125,2.5\n0.25,1\n").time_decimals == 3);
  CHECK(layout_of("t (ms),A (mV)\n0,1.5\n1,2.5\n2,1\n").time_decimals == 0);
  CHECK_FALSE(layout_of("t (s),A (mV)\n0e0,1.5\n1e-3,2.5\n2e-3,1\n").time_decimals.has_value());
  CHECK(layout_of("time,A (mV)\n09:30:00.25,1.5\n09:30:00.50,2.5\n").time_decimals == 2);
}

TEST_CASE("a header line that states the rate is understood where it says hertz", "[csv]") {
  CHECK(rate_in({"Sampling rate: 1000 Hz"}) == 1000.0);
  CHECK(rate_in({"Heart 3", "fs=2.5 kHz"}) == 2500.0);
  CHECK(rate_in({"Sample rate (Hz),500"}) == 500.0);
  CHECK(rate_in({"sampling frequency\t250 Hz, 4 channels"}) == 250.0);
  CHECK_FALSE(rate_in({"Heart rate 240 bpm"}).has_value());
  CHECK_FALSE(rate_in({"Sampling rate: high"}).has_value());
  CHECK_FALSE(rate_in({"Samples: 1000"}).has_value());
  CHECK_FALSE(rate_in({}).has_value());
}

TEST_CASE("more columns than the limit are refused, as many are read", "[csv]") {
  std::string names = "time (s)", rows;
  for (int c = 1; c < 10; ++c)
    names += ",E" + std::to_string(c) + " (mV)";
  for (int r = 0; r < 3; ++r) {
    rows += "0.00" + std::to_string(r);
    for (int c = 1; c < 10; ++c)
      rows += "," + std::to_string(r * c) + ".5";
    rows += "\n";
  }
  ReadSettings settings = in_memory();
  settings.limits.signals = 10;
  CHECK(read_table(names + "\n" + rows, settings).ok());
  settings.limits.signals = 9;
  const auto refused = read_table(names + "\n" + rows, settings);
  REQUIRE_FALSE(refused.ok());
  CHECK(refused.error().code == ErrorCode::over_limit);
}

TEST_CASE("the limit on texts is a limit on texts", "[csv]") {
  std::string text = "time (s),RA (mV),remark\n";
  for (int i = 0; i < 20; ++i)
    text += "0." + std::to_string(100 + i) + "," + std::to_string(i % 3) + ".5,remark " + std::to_string(i) +
            "\n";
  ReadSettings settings = in_memory();
  settings.limits.annotations = 20;
  CHECK(read_table(text, settings)->annotations.size() == 20);
  settings.limits.annotations = 19;
  CHECK(read_table(text, settings).error().code == ErrorCode::over_limit);
}
