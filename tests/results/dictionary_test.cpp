// Chronodrome, GPL-3.0-or-later.
#include <algorithm>
#include <catch2/catch.hpp>
#include <map>
#include <set>
#include <sstream>

#include "activation/activation.h"
#include "conduction/conduction.h"
#include "response/response.h"
#include "results/dictionary.h"
#include "results/table_reader.h"
#include "results/tables.h"
#include "rhythm/intervals.h"
#include "support/sample_sessions.h"

using namespace chronodrome;

namespace {

/// Heads of every CSV that the sample sessions lead to, by file.
std::map<std::string, std::vector<std::string>> written_heads() {
  std::map<std::string, std::vector<std::string>> heads;
  for (const char* name : {"atrial-strip", "guinea-pig-heart", "rabbit-heart"}) {
    for (const auto& file : results::result_files(test_support::sample_session(name), "x")) {
      if (!file.name.ends_with(".csv")) continue;
      results::TableReader reader(file.content);
      reader.next(heads[file.name]);
    }
  }
  return heads;
}

std::set<std::string> words_of(std::string_view values) {
  std::istringstream in{std::string(values)};
  std::set<std::string> words;
  for (std::string word; in >> word;)
    words.insert(word == "empty" ? "" : word);
  return words;
}

} // namespace

TEST_CASE("the dictionary holds each column of each table that is written, in order, and no other",
          "[results]") {
  const auto written = written_heads();
  CHECK(written.size() >= 9);
  std::map<std::string, std::vector<std::string>> described;
  for (const auto& row : results::column_meanings()) {
    if (row.file == "workbook.xlsx") continue; // a sheet: held by the workbook's own test
    described[std::string(row.file)].emplace_back(row.column);
    CHECK_FALSE(row.meaning.empty());
  }
  CHECK(described == written);
}

TEST_CASE("dictionary.csv names the tables of its folder only", "[results]") {
  const auto files = results::result_files(test_support::sample_session("guinea-pig-heart"), "x");
  const auto dictionary = std::find_if(files.begin(), files.end(),
                                       [](const auto& file) { return file.name == "dictionary.csv"; });
  REQUIRE(dictionary != files.end());
  std::set<std::string> named;
  results::TableReader reader(dictionary->content);
  std::vector<std::string> cells;
  REQUIRE(reader.next(cells));
  CHECK(cells == std::vector<std::string>{"file", "column", "meaning", "unit", "values"});
  while (reader.next(cells)) {
    REQUIRE(cells.size() == 5);
    named.insert(cells[0]);
  }
  std::set<std::string> there = {"workbook.xlsx"};
  for (const auto& file : files) {
    if (file.name.ends_with(".csv")) there.insert(file.name);
  }
  CHECK(named == there);
  CHECK(named.count("mechanics.csv") == 0);
}

TEST_CASE("the words that a column may hold are those the program writes", "[results]") {
  using results::meaning_of;
  std::set<std::string> states, statuses, origins, flags;
  for (int i = 0; i < 4; ++i)
    states.insert(conduction::name_of(static_cast<conduction::DelayState>(i)));
  for (int i = 0; i < 6; ++i)
    statuses.insert(response::name_of(static_cast<response::Status>(i)));
  for (int i = 0; i < 3; ++i)
    origins.insert(activation::name_of(static_cast<activation::Origin>(i)));
  for (int i = 0; i < 7; ++i)
    flags.insert(rhythm::name_of(static_cast<rhythm::IntervalFlag>(i)));
  CHECK(words_of(meaning_of("delays.csv", "state")->values) == states);
  CHECK(words_of(meaning_of("responses.csv", "status")->values) == statuses);
  CHECK(words_of(meaning_of("activations.csv", "origin")->values) == origins);
  CHECK(words_of(meaning_of("intervals.csv", "flag")->values) == flags);
  const auto kinds = words_of(meaning_of("rhythm.csv", "kind")->values);
  for (const char* name : {"atrial-strip", "guinea-pig-heart", "rabbit-heart"}) {
    for (const auto& episode : test_support::sample_session(name).rhythm.episodes) {
      INFO(episode.kind);
      CHECK(kinds.count(episode.kind) == 1);
    }
  }
}

TEST_CASE("a table is read back as it was written", "[results]") {
  results::TableReader reader("a,\"b \"\"c\"\", d\"\n,\n\"two\nlines\",x\n");
  std::vector<std::string> cells;
  REQUIRE(reader.next(cells));
  CHECK(cells == std::vector<std::string>{"a", "b \"c\", d"});
  REQUIRE(reader.next(cells));
  CHECK(cells == std::vector<std::string>{"", ""});
  REQUIRE(reader.next(cells));
  CHECK(cells == std::vector<std::string>{"two\nlines", "x"});
  CHECK_FALSE(reader.next(cells));
}
