// Chronodrome, GPL-3.0-or-later.
#include <catch2/catch.hpp>

#include <cstdio>
#include <fstream>
#include <string>

#include "intake/response_table.h"

using namespace chronodrome;
using namespace chronodrome::intake;
using Catch::Matchers::Contains;

namespace {

ResponseTable good(const std::string& text) {
  Result<ResponseTable> table = parse_response_table(text, "table.csv");
  if (!table) FAIL(describe(table.error()));
  return table.value();
}

Error bad(const std::string& text) {
  const Result<ResponseTable> table = parse_response_table(text, "table.csv");
  REQUIRE_FALSE(table.ok());
  CHECK(table.error().file == "table.csv");
  CHECK_FALSE(table.error().what.empty());
  CHECK_FALSE(table.error().remedy.empty());
  return table.error();
}

const std::string kHeader = "concentration_mol_per_l,response\n";

} // namespace

TEST_CASE("two columns make one curve", "[intake][response_table]") {
  const ResponseTable table = good(kHeader + "0,280.5\n1e-8,270\n3E-8,-12.25\n");
  REQUIRE(table.curves.size() == 1);
  const TableCurve& curve = table.curves[0];
  CHECK(curve.preparation.empty());
  CHECK(curve.curve == 1);
  CHECK(curve.antagonist == Molar(0.0));
  REQUIRE(curve.points.size() == 3);
  CHECK(curve.points[0].concentration == Molar(0.0));
  CHECK(curve.points[0].response == 280.5);
  CHECK(curve.points[1].weight == 1.0);
  CHECK(curve.points[2].concentration == Molar(3e-8));
  CHECK(curve.points[2].response == -12.25);
  CHECK(table.warnings.empty());
  CHECK_FALSE(table.has_weights);
}

TEST_CASE("columns may stand in any order and case, rows are grouped as they first appear",
          "[intake][response_table]") {
  const ResponseTable table = good("Preparation,RESPONSE,curve,weight,concentration_mol_per_l,"
                                   "antagonist_mol_per_l\n"
                                   "GP-02,1,2,0.5,0,1e-7\n"
                                   "GP-01,2,1,2,0,0\n"
                                   "GP-02,3,2,0.5,1e-8,1e-7\n"
                                   "GP-01,4,1,2,1e-8,0\n"
                                   "GP-01,5,1,2,1e-8,1e-7\n");
  REQUIRE(table.curves.size() == 3);
  CHECK(table.curves[0].preparation == "GP-02");
  CHECK(table.curves[0].curve == 2);
  CHECK(table.curves[0].antagonist == Molar(1e-7));
  REQUIRE(table.curves[0].points.size() == 2);
  CHECK(table.curves[0].points[1].response == 3.0);
  CHECK(table.curves[0].points[1].weight == 0.5);
  CHECK(table.curves[1].preparation == "GP-01");
  CHECK(table.curves[1].points.size() == 2);
  CHECK(table.curves[2].antagonist == Molar(1e-7));
  CHECK(table.curves[2].points.size() == 1);
  CHECK(table.has_weights);
  CHECK(table.has_antagonist);
}

TEST_CASE("byte order mark, quotes and all line ends are understood", "[intake][response_table]") {
  const std::string mark = "\xef\xbb\xbf";
  for (const std::string end : {"\n", "\r\n", "\r"}) {
    const ResponseTable table = good(mark + "\"concentration_mol_per_l\",\"response\",preparation" + end +
                                     "\"0\", 280 ,\"GP, \"\"old\"\"\"" + end + end + "1e-8,270,x" + end);
    REQUIRE(table.curves.size() == 2);
    CHECK(table.curves[0].preparation == "GP, \"old\"");
    CHECK(table.curves[0].points[0].response == 280.0);
    CHECK(table.curves[1].points[0].concentration == Molar(1e-8));
  }
  CHECK(good(kHeader + "0,1\n1e-8,2").curves[0].points.size() == 2); // no line end at the end
}

TEST_CASE("rows without a response are dropped, counted and warned of", "[intake][response_table]") {
  const ResponseTable table = good(kHeader + "0,1\n1e-8,\n2e-8,NaN\n3e-8,NA\n4e-8,5\n");
  CHECK(table.dropped == 3);
  CHECK(table.curves[0].dropped == 3);
  CHECK(table.curves[0].points.size() == 2);
  REQUIRE(table.warnings.size() == 3);
  CHECK(table.warnings[0].place.line == 3U);
  CHECK(table.warnings[0].place.column == 2U);

  // A curve that lost all its rows is still there, so that its fit is declined and not forgotten.
  const ResponseTable gone = good("concentration_mol_per_l,response,curve\n0,1,1\n0,,2\n");
  REQUIRE(gone.curves.size() == 2);
  CHECK(gone.curves[1].points.empty());
  CHECK(gone.curves[1].dropped == 1);

  std::string many = kHeader;
  for (int i = 0; i < 50; ++i)
    many += "1e-8,\n";
  const ResponseTable counted = good(many);
  CHECK(counted.dropped == 50);
  CHECK(counted.warnings.size() == 21); // twenty lines and one for the rest
  CHECK_THAT(counted.warnings.back().what, Contains("50 rows"));
}

TEST_CASE("an unknown column is warned of and not used", "[intake][response_table]") {
  const ResponseTable table = good("concentration_mol_per_l,colour,response\n0,red,1\n");
  REQUIRE(table.warnings.size() == 1);
  CHECK_THAT(table.warnings[0].what, Contains("colour"));
  CHECK(table.warnings[0].place.line == 1U);
  CHECK(table.warnings[0].place.column == 2U);
  CHECK(table.curves[0].points[0].response == 1.0);
}

TEST_CASE("a concentration above 0.1 mol/L puts the unit in doubt", "[intake][response_table]") {
  CHECK(good(kHeader + "0.1,1\n").warnings.empty());
  const ResponseTable table = good(kHeader + "0,1\n30,2\n100,3\n");
  REQUIRE(table.warnings.size() == 1);
  CHECK(table.warnings[0].place.line == 3U);
  CHECK_THAT(table.warnings[0].what, Contains("2 rows") && Contains("0.1 mol/L"));
  CHECK(table.curves[0].points.size() == 3); // kept all the same
}

TEST_CASE("what is no number is named with line and column", "[intake][response_table]") {
  struct Case {
    std::string text;
    std::size_t line, column;
    std::string word;
  };
  const std::string full = "concentration_mol_per_l,response,weight,curve,antagonist_mol_per_l\n";
  const std::vector<Case> cases{{kHeader + "0,1\n-1e-8,2\n", 3, 1, "-1e-8"},
                                {kHeader + "0,1\nabc,2\n", 3, 1, "abc"},
                                {kHeader + ",2\n", 2, 1, "concentration_mol_per_l"},
                                {kHeader + "nan,2\n", 2, 1, "nan"},
                                {kHeader + "1e-8,12x\n", 2, 2, "12x"},
                                {kHeader + "1e-8,inf\n", 2, 2, "inf"},
                                {full + "0,1,0,1,0\n", 2, 3, "above 0"},
                                {full + "0,1,-2,1,0\n", 2, 3, "weight"},
                                {full + "0,1,1,1.5,0\n", 2, 4, "whole number"},
                                {full + "0,1,1,-1,0\n", 2, 4, "curve"},
                                {full + "0,1,1,1,-1e-7\n", 2, 5, "antagonist"}};
  for (const Case& one : cases) {
    CAPTURE(one.text);
    const Error error = bad(one.text);
    CHECK(error.code == ErrorCode::bad_value);
    CHECK(error.place.line == one.line);
    CHECK(error.place.column == one.column);
    CHECK_THAT(error.what, Contains(one.word));
  }
}

TEST_CASE("a decimal comma makes a row too long, which is an error and not a guess",
          "[intake][response_table]") {
  const Error error = bad(kHeader + "0,280,5\n");
  CHECK(error.code == ErrorCode::bad_value);
  CHECK(error.place.line == 2U);
  CHECK_THAT(error.what, Contains("3 cells"));
  CHECK_THAT(bad(kHeader + "0\n").what, Contains("1 cells"));
}

TEST_CASE("a table without its columns, rows or end says so", "[intake][response_table]") {
  CHECK(bad("").code == ErrorCode::not_enough_data);
  CHECK(bad("\n\n").code == ErrorCode::not_enough_data);
  CHECK(bad(kHeader).code == ErrorCode::not_enough_data);
  CHECK(bad("dose,rate\n1,2\n").code == ErrorCode::wrong_format);
  CHECK_THAT(bad("concentration_mol_per_l,rate\n1,2\n").what, Contains("response"));
  CHECK(bad("concentration_mol_per_l;response\n0;1\n").code == ErrorCode::wrong_format);
  CHECK(bad("response,concentration_mol_per_l,response\n1,2,3\n").code == ErrorCode::wrong_format);
  CHECK(bad(kHeader + "0,\"1\n").code == ErrorCode::damaged);
  const Error binary = bad(kHeader + "0,\xff\xfe\n");
  CHECK(binary.code == ErrorCode::wrong_format);
  CHECK(binary.place.byte.has_value());
}

TEST_CASE("a good table cut anywhere is read in part or refused, never anything else",
          "[intake][response_table]") {
  const std::string whole = "concentration_mol_per_l,response,preparation\n0,280,\"GP, 1\"\n1e-8,270,x\n";
  for (std::size_t length = 0; length <= whole.size(); ++length) {
    CAPTURE(length);
    const Result<ResponseTable> table = parse_response_table(whole.substr(0, length), "cut.csv");
    if (table.ok()) {
      CHECK(table.value().curves.size() <= 2);
    } else {
      CHECK_FALSE(table.error().what.empty());
    }
  }
}

TEST_CASE("a table is read from its file, and a missing one is named", "[intake][response_table]") {
  const std::string path = std::string(CHRONODROME_BUILD_DIR) + "/response_table_test.csv";
  std::ofstream(path) << kHeader << "0,1\n";
  const Result<ResponseTable> table = read_response_table(path);
  REQUIRE(table.ok());
  CHECK(table.value().curves[0].points.size() == 1);
  std::remove(path.c_str());
  const Result<ResponseTable> none = read_response_table(path);
  REQUIRE_FALSE(none.ok());
  CHECK(none.error().code == ErrorCode::file_missing);
  CHECK(none.error().file == path);
}
