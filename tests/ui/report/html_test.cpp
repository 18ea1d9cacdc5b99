// Chronodrome, GPL-3.0-or-later.
#include <catch2/catch.hpp>

#include "report_support.h"
#include "ui/look/number_text.h"
#include "ui/report/words.h"

using namespace chronodrome;
using namespace chronodrome::test_support;

namespace {

/// Text and structure of the page as Python's XML parser reads it; throws where it is not well-formed.
std::string parsed(const std::string& html, const ScratchFolder& folder) {
  const std::string file = folder.write("report.html", html);
  const std::string script = "import sys, xml.etree.ElementTree as E\n"
                             "tree = E.parse(sys.argv[1])\n"
                             "names = sorted(set(e.tag for e in tree.iter()))\n"
                             "marks = sorted(set(a for e in tree.iter() for a in e.attrib))\n"
                             "print(\"TAGS\", *names)\n"
                             "print(\"MARKS\", *marks)\n"
                             "print(\"TEXT\", \"\".join(tree.getroot().itertext()))\n";
  const std::string program = folder.write("read.py", script);
  return output_of("PYTHONIOENCODING=utf-8 /usr/bin/python3 " + program + " " + file, folder);
}

} // namespace

TEST_CASE("the page is well-formed, refers to nothing outside, and holds the numbers", "[report]") {
  const std::string name = GENERATE("atrial-strip", "guinea-pig-heart", "rabbit-heart");
  CAPTURE(name);
  const ScratchFolder folder("test-report-html");
  const auto result = sample_session(name);
  const std::string html = ui::report::reportHtml(result, "1.2.3");
  for (const char* outside : {"http:", "https:", "//www", "<script", "src=", "url(", "@import", "<link",
                              "<img", "<image", "<iframe", "<object", "javascript:", "file:", "xlink"}) {
    INFO(outside);
    CHECK_FALSE(holds(html, outside));
  }
  const std::string page = parsed(html, folder);
  CHECK(holds(page, " svg"));
  const std::string text = squeezed(page);
  for (const auto& row : result.responses.rows)
    CHECK(holds(text, squeezed(ui::report::valueText(row).toStdString())));
  for (const auto& curve : result.curves) {
    for (const auto& one : curve.fit.parameters)
      CHECK(holds(text, squeezed(ui::look::intervalText(one.value).toStdString())));
  }
  for (const auto& warning : result.warnings)
    CHECK(holds(text, squeezed(describe(warning))));
  for (const auto& file : result.recording->files)
    CHECK(holds(text, file.sha256));
}

TEST_CASE("labels are text, whatever they hold", "[report]") {
  const ScratchFolder folder("test-report-html");
  auto result = sample_session("atrial-strip");
  const std::string evil =
      GENERATE("<script>alert(1)</script>", "\" onload=\"alert(1)", "a & b < c > d ' e", "]]><!--",
               "&amp;&#x1;", "\x01\x02\x1b[31m", "</title></style><b>", "line\nend");
  auto& preparation = result.session.preparation;
  for (auto* text : {&preparation.label, &preparation.species, &preparation.tissue, &preparation.animal,
                     &preparation.date, &preparation.operator_name, &preparation.group, &preparation.notes})
    *text = evil;
  for (auto& channel : result.channels)
    channel.label = evil;
  for (auto& channel : result.activations)
    channel.channel = evil;
  for (auto& event : result.protocol.events) {
    event.agent = evil;
    event.note = evil;
  }
  for (auto& curve : result.plan.curves)
    curve.agent = evil;
  for (auto& row : result.responses.rows) {
    row.agent = evil;
    row.flags = {evil};
  }
  for (auto& curve : result.curves)
    curve.agent = evil;
  result.session.path = evil;
  result.warnings = {{evil, {}, evil, evil}};
  result.session.review = {{1, evil, evil, evil, evil, document::CorrectionKind::add, Seconds(1.0), {}}};
  const std::string plain_page =
      parsed(ui::report::reportHtml(sample_session("atrial-strip"), "1.2.3"), folder);
  const std::string page = parsed(ui::report::reportHtml(result, "1.2.3"), folder);
  // No element and no attribute that a page of harmless labels does not have.
  const auto first_lines = [](const std::string& text) { return text.substr(0, text.find("\nTEXT")); };
  CHECK(first_lines(page) == first_lines(plain_page));
  const std::string shown = squeezed(ui::report::plain(evil).toStdString());
  CHECK(holds(squeezed(page), shown));
  CHECK_FALSE(pdf_of(result).empty());
}
