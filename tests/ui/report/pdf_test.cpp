// Chronodrome, GPL-3.0-or-later.
#include <catch2/catch.hpp>
#include <regex>
#include <sstream>

#include "report_support.h"
#include "ui/look/number_text.h"
#include "ui/report/words.h"

using namespace chronodrome;
using namespace chronodrome::test_support;

TEST_CASE("the numbers of the analysis stand in the PDF as text", "[report]") {
  const std::string name = GENERATE("atrial-strip", "guinea-pig-heart", "rabbit-heart");
  CAPTURE(name);
  const ScratchFolder folder("test-report-pdf");
  const auto result = sample_session(name);
  const std::string text = squeezed_pdf(pdf_of(result), folder);
  CHECK(holds(text, result.session_sha256));
  for (const auto& file : result.recording->files)
    CHECK(holds(text, file.sha256));
  for (const auto& row : result.responses.rows) {
    const std::string value = squeezed(ui::report::valueText(row).toStdString());
    INFO(row.measure << " at " << row.concentration.value() << ": " << value);
    CHECK(holds(text, value));
    for (const auto& flag : row.flags)
      CHECK(holds(text, squeezed(flag)));
  }
  for (const auto& curve : result.curves) {
    for (const auto& one : curve.fit.parameters) {
      INFO(curve.measure << " " << one.name);
      CHECK(holds(text, squeezed(ui::look::estimateText(one.value).toStdString())));
      CHECK(holds(text, squeezed(ui::look::intervalText(one.value).toStdString())));
    }
    for (const auto& flag : curve.fit.flags)
      CHECK(holds(text, squeezed(ui::report::flagWord(flag).toStdString())));
  }
  CHECK(holds(text, "notfordiagnosis"));
  CHECK(holds(text, "ethicscommittee"));
}

TEST_CASE("all fonts are embedded, pages are A4 and counted, and no clock is in the file", "[report]") {
  const std::string name = GENERATE("atrial-strip", "guinea-pig-heart", "rabbit-heart");
  CAPTURE(name);
  const ScratchFolder folder("test-report-pdf");
  const std::string pdf = pdf_of(sample_session(name));
  const auto pages = pages_of(pdf, folder);
  REQUIRE(pages.size() >= 4);
  for (std::size_t i = 0; i < pages.size(); ++i) {
    CHECK(holds(pages[i], "page " + std::to_string(i + 1) + " of " + std::to_string(pages.size())));
    CHECK(holds(pages[i], "Chronodrome 1.2.3"));
  }
  const std::string file = (folder.path / "report.pdf").string();
  std::istringstream fonts(output_of("pdffonts " + file, folder));
  std::string line;
  std::getline(fonts, line);
  const auto column = line.find("emb");
  std::getline(fonts, line);
  int count = 0;
  for (; std::getline(fonts, line); ++count) {
    INFO(line);
    CHECK(line.substr(column, 3) == "yes");
    CHECK(line.substr(column + 8, 3) == "yes"); // a map back to characters: it can be searched and copied
  }
  CHECK(count >= 2);
  const std::string info = output_of("pdfinfo " + file, folder);
  CHECK(holds(info, "A4"));
  CHECK(holds(info, "Report on SMR-"));
  CHECK_FALSE(holds(info, "CreationDate"));
}

TEST_CASE("the same analysis gives the same report, byte for byte", "[report]") {
  const auto result = sample_session("guinea-pig-heart");
  CHECK(pdf_of(result) == pdf_of(result));
  CHECK(ui::report::reportHtml(result, "1.2.3") == ui::report::reportHtml(result, "1.2.3"));
}

TEST_CASE("every warning of an analysis is in the PDF, however many and however long", "[report]") {
  const ScratchFolder folder("test-report-pdf");
  auto result = sample_session("atrial-strip");
  const std::string path(600, 'p');
  for (int i = 0; i < 120; ++i)
    result.warnings.push_back({path + std::to_string(i), Place::at_line(7),
                               "what " + std::to_string(i) + " <&> \"x\"", "do this; then that"});
  const std::string pdf = pdf_of(result);
  CHECK(pages_of(pdf, folder).size() > 15);
  // The heads and feet of the pages may stand in the middle of a text that goes over.
  std::string text = squeezed_pdf(pdf, folder);
  text = std::regex_replace(text,
                            std::regex("SMR-A07·2026-03-04Chronodrome1.2.3session[0-9a-f]{12}·"
                                       "researchuseonly,notfordiagnosispage[0-9]+of[0-9]+"),
                            "");
  CHECK_FALSE(holds(text, "page3of"));
  for (const auto& warning : result.warnings)
    CHECK(holds(text, squeezed(describe(warning))));
}

TEST_CASE("a table that goes over pages repeats its heads, and no heading stands last on a page",
          "[report]") {
  const ScratchFolder folder("test-report-pdf");
  auto result = sample_session("rabbit-heart");
  const auto rows = result.responses.rows;
  for (int i = 0; i < 3; ++i)
    result.responses.rows.insert(result.responses.rows.end(), rows.begin(), rows.end());
  const auto pages = pages_of(pdf_of(result), folder);
  int with_rows = 0;
  for (const auto& page : pages) {
    // A row of the table of responses has a window in seconds and as a time.
    if (!std::regex_search(page, std::regex("[0-9.]+ to [0-9.]+ +[0-9]+:[0-9]{2}\\.[0-9] to .* steady")))
      continue;
    ++with_rows;
    CHECK(holds(page, "value ± SEM"));
  }
  CHECK(with_rows >= 4);
  for (const auto& page : pages) {
    std::istringstream lines(page);
    std::string line, last;
    while (std::getline(lines, line)) {
      if (squeezed(line).empty() || holds(line, "page ")) continue;
      last = line;
    }
    const std::string end = squeezed(last);
    INFO(last);
    for (const char* heading :
         {"Responses", "Parameters", "Protocol", "Typicalbeats", "Thewholerecording", "Rhythm",
          "Signalquality", "Warnings", "Settings", "Definitions", "Origin", "Cautions"})
      CHECK(end != heading);
  }
}

TEST_CASE("a session without beats, curves or log still gives a report", "[report]") {
  const ScratchFolder folder("test-report-pdf");
  auto result = sample_session("atrial-strip");
  result.responses.rows.clear();
  result.curves.clear();
  result.plan.curves.clear();
  result.protocol.events.clear();
  result.rhythm.episodes.clear();
  for (auto& channel : result.activations) {
    channel.marks.clear();
    channel.beats.clear();
    channel.quality.clear();
  }
  for (auto& intervals : result.intervals)
    intervals.clear();
  const std::string text = squeezed_pdf(pdf_of(result), folder);
  CHECK(holds(text, "Noeventsarelogged"));
  CHECK(holds(text, "nothingwasfitted"));
}
