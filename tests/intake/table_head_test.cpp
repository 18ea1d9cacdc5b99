// Chronodrome, GPL-3.0-or-later.
#include "intake/table_head.h"

#include <catch2/catch.hpp>

#include "intake/watched_source.h"

using namespace chronodrome;
using intake::MemorySource;

namespace {

std::string rows(const std::string& row, int count) {
  std::string text;
  for (int i = 0; i < count; ++i)
    text += row + "\n";
  return text;
}

} // namespace

TEST_CASE("the head of a table says how it would be read", "[intake]") {
  const MemorySource source("a.csv", "Lab;7\nt (s);RA (mV)\n" + rows("0,001;1,25", 40));
  const auto head = intake::head_of(source, {}, 3);
  REQUIRE(head.ok());
  CHECK(head->is_table);
  CHECK(head->delimiter == ';');
  CHECK(head->decimal == ',');
  CHECK(head->time_column == "t (s)");
  CHECK(head->columns == std::vector<std::string>{"t (s)", "RA (mV)"});
  CHECK(head->lines == std::vector<std::string>{"Lab;7", "t (s);RA (mV)", "0,001;1,25"});
  CHECK(head->data_line == 3);
}

TEST_CASE("what cannot be told is left open, and the error names the choice", "[intake]") {
  const MemorySource source("a.csv", "RA\n" + rows("1,234", 40));
  const auto head = intake::head_of(source, {}, 5);
  REQUIRE(head.ok());
  CHECK(head->is_table);
  const MemorySource doubtful("b.csv", "RA;RV\n" + rows("1,234;2,345", 40));
  const auto open = intake::head_of(doubtful, {}, 5);
  REQUIRE(open.ok());
  CHECK_FALSE(open->decimal.has_value());
  intake::ReadSettings settings;
  settings.use_cache = false;
  settings.rate = Hertz(1000.0);
  const auto read = intake::read_recording(doubtful, settings);
  REQUIRE_FALSE(read.ok());
  CHECK(intake::choices_asked(read.error()) == std::vector<std::string>{"decimal"});
  settings.decimal = ',';
  CHECK(intake::read_recording(doubtful, settings).ok());
  const auto chosen = intake::head_of(doubtful, settings, 5);
  REQUIRE(chosen.ok());
  CHECK(chosen->decimal == ',');
}

TEST_CASE("other files have no head of a table", "[intake]") {
  for (const std::string& text :
       {std::string("0       ") + std::string(300, ' '), std::string("PK\x03\x04 and so on")}) {
    const MemorySource source("a.bin", text);
    const auto head = intake::head_of(source, {}, 5);
    REQUIRE(head.ok());
    CHECK_FALSE(head->is_table);
  }
}

TEST_CASE("an error that no choice helps asks for none", "[intake]") {
  CHECK(intake::choices_asked({ErrorCode::damaged, "a", {}, "x", "close the quote"}).empty());
  CHECK(intake::choices_asked({ErrorCode::bad_value,
                               "a",
                               {},
                               "x",
                               "set recording.csv.time_column to \"\" and recording.csv.rate_hz"}) ==
        std::vector<std::string>{"time_column", "rate_hz"});
}

TEST_CASE("a watched source counts what it hands out and stops when told", "[intake]") {
  const MemorySource source("a.csv", "t (s),RA (mV)\n0,1\n0.001,2\n0.002,3\n");
  std::atomic<std::uint64_t> delivered{0};
  std::atomic<bool> cancelled{false};
  const intake::WatchedSource watched(source, delivered, cancelled);
  intake::ReadSettings settings;
  settings.use_cache = false;
  REQUIRE(intake::read_recording(watched, settings).ok());
  CHECK(delivered.load() >= 2 * source.size());
  cancelled = true;
  const auto stopped = intake::read_recording(watched, settings);
  REQUIRE_FALSE(stopped.ok());
  CHECK(stopped.error().code == ErrorCode::cancelled);
}
