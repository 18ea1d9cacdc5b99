// Chronodrome, GPL-3.0-or-later.
#include <catch2/catch.hpp>

#include "intake/csv_cells.h"
#include "intake/csv_text.h"
#include "reading_fixtures.h"

using namespace chronodrome;
using namespace chronodrome::intake;
using namespace chronodrome::intake::fixtures;
using namespace std::string_literals;

namespace {

std::string decoded(const std::string& bytes, std::size_t piece) {
  const MemorySource source("text", bytes);
  TextBlocks blocks(source);
  REQUIRE(blocks.find_encoding().ok());
  std::string text;
  while (!blocks.at_end())
    REQUIRE(blocks.add_to(text, piece).ok());
  return text;
}

std::vector<std::string> cells_of(const std::string& text, char delimiter, bool final = true) {
  std::vector<Cell> cells;
  const RecordRead read = read_record(text, 0, delimiter, final, cells);
  if (read.end != RecordEnd::complete) return {"incomplete"};
  std::vector<std::string> texts;
  for (const Cell& cell : cells)
    texts.push_back(text_of(cell));
  return texts;
}

} // namespace

TEST_CASE("encodings are told by their mark or by their bytes", "[csv]") {
  CHECK(encoding_of("abc").encoding == Encoding::utf8);
  CHECK(encoding_of("\xEF\xBB\xBF"
                    "abc")
            .mark_bytes == 3);
  CHECK(encoding_of("\xC2\xB5V").encoding == Encoding::utf8);
  CHECK(encoding_of("\xB5V").encoding == Encoding::latin1);
  CHECK(encoding_of("\xFF\xFE"
                    "a\0"s)
            .encoding == Encoding::utf16_le);
  CHECK(encoding_of("\xFE\xFF\0a"s).encoding == Encoding::utf16_be);
  CHECK(encoding_of("t\0,\0R\0A\0"s).encoding == Encoding::utf16_le);
  CHECK(encoding_of("\0t\0,\0R\0A"s).encoding == Encoding::utf16_be);
  CHECK(encoding_of("abc\xE2\x82").encoding == Encoding::utf8); // cut in its last character
  CHECK(encoding_of("").encoding == Encoding::utf8);
}

TEST_CASE("UTF-16 is decoded across the ends of blocks, with its surrogates", "[csv]") {
  // U+0041, U+00B5, U+20AC, U+1F493 (a heart), little endian.
  const std::string little = "\xFF\xFE"
                             "A\0\xB5\0\xAC\x20\x3D\xD8\x93\xDC"s;
  const std::string big = "\xFE\xFF\0A\0\xB5\x20\xAC\xD8\x3D\xDC\x93"s;
  const std::string utf8 = "A\xC2\xB5\xE2\x82\xAC\xF0\x9F\x92\x93";
  for (const std::size_t piece : {1UL, 2UL, 4UL, 6UL, 100UL}) {
    CHECK(decoded(little, piece) == utf8);
    CHECK(decoded(big, piece) == utf8);
    CHECK(decoded("\xEF\xBB\xBF" + utf8, piece) == utf8);
  }
  CHECK(decoded("\xFF\xFE\x93\xDC"s, 100) == "\xEF\xBF\xBD"); // half a pair
}

TEST_CASE("texts come out as UTF-8 whatever they were", "[csv]") {
  CHECK(as_utf8("\xC2\xB5V") == "\xC2\xB5V");
  CHECK(as_utf8("\xB5V") == "\xC2\xB5V");
  CHECK(as_utf8("37 \xB0"
                "C") == "37 \xC2\xB0"
                        "C");
  CHECK(as_utf8("5 \x96 10 \x80") == "5 \xE2\x80\x93 10 \xE2\x82\xAC"); // code page 1252
  CHECK(as_utf8("\xED\xA0\x80") != "\xED\xA0\x80");                     // a surrogate is no UTF-8
  CHECK(as_utf8("\xC0\xAF") != "\xC0\xAF");                             // nor is a long form
  CHECK(shortened("abcdef", 3) == "abc...");
  CHECK(shortened("ab\xC2\xB5"
                  "d",
                  3) == "ab...");
  CHECK(shortened("abc", 3) == "abc");
}

TEST_CASE("a record is split at its delimiters and nowhere else", "[csv]") {
  CHECK(cells_of("a,b,c\nd", ',') == std::vector<std::string>{"a", "b", "c"});
  CHECK(cells_of("a,,c,\n", ',') == std::vector<std::string>{"a", "", "c", ""});
  CHECK(cells_of(" a ;\tb;c\r\n", ';') == std::vector<std::string>{"a", "b", "c"});
  CHECK(cells_of("\"a,b\",\"c\"\"d\"\n", ',') == std::vector<std::string>{"a,b", "c\"d"});
  CHECK(cells_of("\"a\nb\",c\n", ',') == std::vector<std::string>{"a b", "c"});
  CHECK(cells_of("5\" tube,b\n", ',') == std::vector<std::string>{"5\" tube", "b"});
  CHECK(cells_of("  a   b\t c  \n", ' ') == std::vector<std::string>{"a", "b", "c"});
  CHECK(cells_of("a\tb\t\n", '\t') == std::vector<std::string>{"a", "b", ""});
  CHECK(cells_of("\n", ',') == std::vector<std::string>{""});
  CHECK(cells_of("a,b", ',', false) == std::vector<std::string>{"incomplete"});
  CHECK(cells_of("a,b\r", ',', false) == std::vector<std::string>{"incomplete"}); // an LF may follow
  CHECK(cells_of("a,b\r", ',', true) == std::vector<std::string>{"a", "b"});
  CHECK(cells_of("a,\"b\n", ',', true) == std::vector<std::string>{"incomplete"});
}

TEST_CASE("line ends are counted, inside quotes too", "[csv]") {
  std::vector<Cell> cells;
  RecordRead read = read_record("\"a\r\nb\rc\nd\",e\r\nf", 0, ',', true, cells);
  CHECK(read.lines == 4);
  CHECK(read.terminated);
  read = read_record("a,b", 0, ',', true, cells);
  CHECK(read.lines == 0);
  CHECK_FALSE(read.terminated);
  CHECK(read.next == 3);
}

TEST_CASE("what stands for a missing value is known, what may be a remark is not one", "[csv]") {
  for (const char* word : {"",     " ",       "NaN",     "nan",    "-nan",  "NA",     "n/a",  "#N/A",
                           "-",    "--",      "----",    "OVER",   "Ovl",   "*",      "inf",  "-Infinity",
                           "+INF", "1.#QNAN", "-1.#IND", "1,#INF", "1e308", "-1e400", "NULL", "err"}) {
    if (std::string(word) == "Ovl") continue;
    CAPTURE(word);
    CHECK(is_missing(word));
  }
  for (const char* word : {"0", "1.5", "ISO", "added", "x", "overdrive", "1e30", "in", "note", "12:30:00"}) {
    CAPTURE(word);
    CHECK_FALSE(is_missing(word));
  }
}

TEST_CASE("a table in UTF-16 of many blocks equals the same table in UTF-8", "[csv]") {
  std::string text = "time (s),RA (mV)\n";
  for (int i = 0; i < 120'000; ++i)
    text += std::to_string(i / 1000.0) + ",0." + std::to_string(1000 + i * 7919 % 1000) + "\n";
  std::string wide = "\xFF\xFE";
  for (const char c : text)
    wide += {c, '\0'};
  ReadSettings settings = in_memory();
  settings.threads = 2;
  const auto narrow = read_table(text, settings), read = read_table(wide, settings);
  REQUIRE(narrow.ok());
  if (!read) FAIL(describe(read.error()));
  CHECK(samples_of(read->signals[0]) == samples_of(narrow->signals[0]));
  CHECK(read->convention.find("UTF-16") == 0);
}

TEST_CASE("line ends and quotes at any place of a block change nothing", "[csv]") {
  // Rows of changing length, so that block ends fall everywhere in a row.
  for (const std::string& end : {"\n"s, "\r\n"s, "\r"s}) {
    for (const bool quoted : {false, true}) {
      std::string text = "time (s),RA (mV),remark" + end;
      std::vector<double> expected;
      std::size_t remarks = 0;
      for (int i = 0; i < 150'000; ++i) {
        const int value = i * 7919 % 100'003;
        expected.push_back(value + 0.5);
        text += std::to_string(i / 1000.0) + "," + std::to_string(value) + ".5,";
        if (quoted && i % 9973 == 0) {
          text += "\"two, parts" + end + std::to_string(i) + "\"";
          ++remarks;
        }
        text += end;
      }
      ReadSettings settings = in_memory();
      settings.threads = 2;
      const auto read = read_table(text, settings);
      if (!read) FAIL(describe(read.error()));
      CAPTURE(end.size(), quoted, all_warnings(*read));
      CHECK(samples_of(read->signals[0]) == expected);
      CHECK(read->signals[0].time_base.runs().size() == 1);
      CHECK(read->annotations.size() == remarks);
    }
  }
}
