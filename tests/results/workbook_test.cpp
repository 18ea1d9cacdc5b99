// Chronodrome, GPL-3.0-or-later.
// The workbook, read back by openpyxl (package python3-openpyxl) and compared with the tables by Python's
// csv.
#include <catch2/catch.hpp>
#include <clocale>
#include <cstdio>
#include <map>
#include <sstream>

#include "results/dictionary.h"
#include "results/table_reader.h"
#include "results/tables.h"
#include "results/workbook.h"
#include "results/workbook_tables.h"
#include "support/sample_sessions.h"

using namespace chronodrome;
using test_support::ScratchFolder;

namespace {

struct TableCount {
  std::size_t sheets = 0, rows = 0, numbers = 0, texts = 0, differences = 0;
};

struct Comparison {
  std::map<std::string, TableCount> tables;
  std::map<std::string, std::string> heads, frozen;
  std::string sheets, made;
  bool has_formula = false;
};

Comparison compared(const ScratchFolder& folder) {
  const std::string script = std::string(CHRONODROME_SOURCE_DIR) + "/tests/results/compare_workbook.py";
  std::istringstream lines(
      test_support::output_of("/usr/bin/python3 " + script + " " + folder.path.string(), folder));
  Comparison found;
  for (std::string line; std::getline(lines, line);) {
    std::istringstream words(line);
    std::string kind, name;
    words >> kind;
    if (kind == "table") {
      words >> name;
      auto& count = found.tables[name];
      words >> count.sheets >> count.rows >> count.numbers >> count.texts >> count.differences;
    } else if (kind == "head" || kind == "frozen") {
      words >> name >> std::ws;
      std::getline(words, (kind == "head" ? found.heads : found.frozen)[name]);
    } else if (kind == "sheets" || kind == "made") {
      words >> std::ws;
      std::getline(words, kind == "sheets" ? found.sheets : found.made);
    } else if (kind == "FORMULA") {
      found.has_formula = true;
    }
  }
  return found;
}

std::string workbook_of(const session::SessionResult& result, std::span<const results::OutputFile> files,
                        std::size_t sheet_rows = results::kSheetRows) {
  const auto made = results::workbook_file(result, "x", files, sheet_rows);
  if (!made) FAIL(describe(made.error()));
  CHECK(made->name == "workbook.xlsx");
  return made->content;
}

void write_all(const ScratchFolder& folder, std::span<const results::OutputFile> files,
               const std::string& workbook) {
  for (const auto& file : files)
    folder.write(file.name, file.content);
  folder.write("workbook.xlsx", workbook);
}

} // namespace

TEST_CASE("the workbook holds the tables' values, one sheet a table", "[results]") {
  const std::string name = GENERATE("atrial-strip", "guinea-pig-heart", "rabbit-heart");
  CAPTURE(name);
  const ScratchFolder folder("test-workbook");
  const auto result = test_support::sample_session(name);
  const auto files = results::result_files(result, "x");
  write_all(folder, files, workbook_of(result, files));
  const auto found = compared(folder);
  CHECK(found.sheets.rfind("summary responses fits rhythm activations intervals delays", 0) == 0);
  CHECK_FALSE(found.has_formula);
  std::size_t tables = 0;
  for (const auto& file : files) {
    if (!file.name.ends_with(".csv")) continue;
    ++tables;
    CAPTURE(file.name);
    REQUIRE(found.tables.count(file.name) == 1);
    const auto& count = found.tables.at(file.name);
    CHECK(count.sheets == 1);
    CHECK(count.differences == 0);
  }
  CHECK(tables >= 7);
  // Times, amplitudes and confidences are numbers, labels are none.
  const auto& activations = found.tables.at("activations.csv");
  CHECK(activations.numbers == 4 * activations.rows);
  CHECK(activations.texts == 2 * activations.rows);
  CHECK(activations.rows > 2000);
  CHECK(found.heads.at("activations") == "channel|index|time_s|amplitude (of the channel)|confidence|origin");
  CHECK(found.frozen.at("activations").rfind("A2 A1:F", 0) == 0);
  CHECK(found.made.rfind("1980-01-01 00:00:00", 0) == 0);
}

TEST_CASE("the comparison sees a digit that differs", "[results]") {
  const ScratchFolder folder("test-workbook");
  const auto result = test_support::sample_session("atrial-strip");
  auto files = results::result_files(result, "x");
  const std::string workbook = workbook_of(result, files);
  std::string& rows = files[0].content;
  REQUIRE(files[0].name == "activations.csv");
  const auto digit = rows.find_last_of("0123456789");
  rows[digit] = rows[digit] == '9' ? '8' : '9';
  write_all(folder, files, workbook);
  CHECK(compared(folder).tables.at("activations.csv").differences == 1);
}

TEST_CASE("the heads of the sheet of fits are those of the dictionary", "[results]") {
  const auto result = test_support::sample_session("atrial-strip");
  const std::string table = results::fits_table(result);
  results::TableReader reader(table);
  std::vector<std::string> heads, described, cells;
  REQUIRE(reader.next(heads));
  for (const auto& row : results::column_meanings()) {
    if (row.file == "workbook.xlsx") described.emplace_back(row.column);
  }
  CHECK(heads == described);
  // One row a parameter and derived number of each fit: four and two of a Hill curve.
  std::size_t rows = 0;
  for (; reader.next(cells); ++rows) {
    CHECK(cells.size() == heads.size());
    if (cells[8] == "pec50") CHECK(cells[9].empty());
    if (cells[8] == "emax") CHECK(cells[9] == (cells[4] == "rate:RA" ? "bpm" : "mN"));
    if (cells[8] == "ec50_mol_per_l") CHECK(cells[9] == "mol/L");
  }
  CHECK(rows == 6 * result.curves.size());
}

TEST_CASE("a label is never a formula", "[results]") {
  const ScratchFolder folder("test-workbook");
  auto result = test_support::sample_session("atrial-strip");
  const std::string evil = GENERATE("=1+1", "+cmd|' /C calc'!A0", "-2+3", "@SUM(A1)", "\t=1", "{=1}");
  result.activations[0].channel = evil;
  result.session.preparation.label = evil;
  result.session.preparation.notes = evil;
  for (auto& row : result.responses.rows)
    row.agent = evil;
  for (auto& curve : result.curves)
    curve.agent = evil;
  result.warnings.push_back({evil, {}, evil, ""});
  const auto files = results::result_files(result, "x");
  write_all(folder, files, workbook_of(result, files));
  const auto found = compared(folder);
  CHECK_FALSE(found.has_formula);
  CHECK(found.tables.at("activations.csv").differences == 0);
  CHECK(found.tables.at("responses.csv").differences == 0);
}

TEST_CASE("a label with characters that XML cannot hold leaves the workbook whole", "[results]") {
  const ScratchFolder folder("test-workbook");
  auto result = test_support::sample_session("atrial-strip");
  result.activations[0].channel = GENERATE("a\x01"
                                           "b",
                                           "\xff\xfe", "x\xef\xbf\xbf", "<&>\"'");
  const auto files = results::result_files(result, "x");
  const std::string workbook = workbook_of(result, files);
  const auto harmless = results::result_files(test_support::sample_session("atrial-strip"), "x");
  write_all(folder, harmless, workbook);
  const auto found = compared(folder);
  // Every cell is there; only the label differs.
  const auto& count = found.tables.at("activations.csv");
  CHECK(count.differences == result.activations[0].marks.size());
  CHECK(count.numbers == 4 * count.rows);
}

TEST_CASE("a table that is too long for a sheet goes on in the next", "[results]") {
  const ScratchFolder folder("test-workbook");
  const auto result = test_support::sample_session("atrial-strip");
  const auto files = results::result_files(result, "x");
  write_all(folder, files, workbook_of(result, files, 1000));
  const auto found = compared(folder);
  const auto& count = found.tables.at("activations.csv");
  // 999 rows and the heads on each.
  CHECK(count.sheets == (count.rows + 998) / 999);
  CHECK(count.sheets > 2);
  CHECK(count.differences == 0);
  CHECK(found.heads.at("activations_(2)") == found.heads.at("activations"));
}

TEST_CASE("the longest sheet a spreadsheet can hold is filled to its last row", "[.long][results]") {
  const ScratchFolder folder("test-workbook");
  const auto result = test_support::sample_session("atrial-strip");
  std::string rows = "start_s,end_s,kind,detail\n";
  const std::size_t more = results::kSheetRows + 9; // one row less than that would fit, with the heads
  for (std::size_t i = 0; i < more; ++i)
    rows += std::to_string(i) + ",,,\n";
  const std::vector<results::OutputFile> files = {{"rhythm.csv", rows}};
  write_all(folder, files, workbook_of(result, files));
  const auto found = compared(folder);
  CHECK(found.tables.at("rhythm.csv").sheets == 2);
  CHECK(found.tables.at("rhythm.csv").rows == more);
  CHECK(found.tables.at("rhythm.csv").differences == 0);
}

TEST_CASE("a text that is too long for a cell says so", "[results]") {
  const ScratchFolder folder("test-workbook");
  auto result = test_support::sample_session("atrial-strip");
  for (int i = 0; i < 20000; ++i)
    result.rhythm.episodes[0].detail += "\xc3\xa9\xc3\xa9"; // two bytes a letter: the cut must not split one
  const auto files = results::result_files(result, "x");
  write_all(folder, files, workbook_of(result, files));
  const auto found = compared(folder);
  CHECK(found.tables.at("rhythm.csv").differences == 1);
  CHECK(found.tables.at("intervals.csv").differences == 0);
}

TEST_CASE("the workbook has the same bytes each time", "[results]") {
  const auto result = test_support::sample_session("guinea-pig-heart");
  const auto files = results::result_files(result, "x");
  CHECK(workbook_of(result, files) == workbook_of(result, files));
}

TEST_CASE("the workbook has the same bytes where C prints a decimal comma", "[results]") {
  const ScratchFolder folder("test-locale");
  const std::string made = (folder.path / "de_DE.utf8").string();
  // Compiled for the test where the system's sources of locales are there.
  if (std::system(("localedef -i de_DE -f UTF-8 " + made + " 2>/dev/null").c_str()) != 0) {
    WARN("no locale with a decimal comma can be made here (package locales)");
    return;
  }
  const auto result = test_support::sample_session("atrial-strip");
  const auto files = results::result_files(result, "x");
  const std::string plain = workbook_of(result, files);
  setenv("LOCPATH", folder.path.c_str(), 1);
  REQUIRE(std::setlocale(LC_ALL, "de_DE.utf8") != nullptr);
  char probe[16];
  std::snprintf(probe, sizeof probe, "%.1f", 1.5);
  const std::string continental = workbook_of(result, files);
  std::setlocale(LC_ALL, "C");
  unsetenv("LOCPATH");
  CHECK(std::string(probe) == "1,5"); // the locale does reach C
  CHECK(continental == plain);
}
