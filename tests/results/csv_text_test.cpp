// Chronodrome, GPL-3.0-or-later.
#include <catch2/catch.hpp>

#include "results/csv_text.h"

using namespace chronodrome;
using results::text_cell;

TEST_CASE("a text cell never becomes a formula", "[results]") {
  CHECK(text_cell("=1+1") == "'=1+1");
  CHECK(text_cell("+7") == "'+7");
  CHECK(text_cell("-RA") == "'-RA");
  CHECK(text_cell("@x") == "'@x");
  CHECK(text_cell("\tx") == "'\tx");
  CHECK(text_cell("RA-RV") == "RA-RV");
  CHECK(text_cell("") == "");
}

TEST_CASE("commas, quotes and line ends are quoted", "[results]") {
  CHECK(text_cell("a,b") == "\"a,b\"");
  CHECK(text_cell("say \"no\"") == "\"say \"\"no\"\"\"");
  CHECK(text_cell("=a,b") == "\"'=a,b\"");
  CHECK(text_cell("a\nb") == "\"a\nb\"");
}

TEST_CASE("numbers keep their sign and missing ones stay empty", "[results]") {
  results::CsvTable table("a,b,c,d");
  table.number(-1.5).number(std::optional<double>()).time(Seconds(0.25)).count(3).end_row();
  CHECK(table.take() == "a,b,c,d\n-1.5,,0.25,3\n");
}
