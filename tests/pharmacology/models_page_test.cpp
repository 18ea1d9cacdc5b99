// Chronodrome, GPL-3.0-or-later.
#include <catch2/catch.hpp>

#include <algorithm>
#include <cstdlib>
#include <fstream>
#include <iterator>

#include "pharmacology/flags.h"
#include "pharmacology/model.h"
#include "pharmacology/models_page.h"

using namespace chronodrome;
using namespace chronodrome::pharmacology;
using Catch::Matchers::Contains;

TEST_CASE("the page of models is the program's own tables", "[pharmacology][page]") {
  const std::string path = std::string(CHRONODROME_SOURCE_DIR) + "/resources/formats/models.md";
  // CHRONODROME_WRITE_PAGES=1 writes the page anew after a model or a flag was changed.
  if (std::getenv("CHRONODROME_WRITE_PAGES") != nullptr) std::ofstream(path) << models_page();
  std::ifstream file(path);
  const std::string page{std::istreambuf_iterator<char>(file), {}};
  CHECK(page == models_page());
}

TEST_CASE("the page names every model, number and flag, one table row each", "[pharmacology][page]") {
  const std::string page = models_page();
  std::size_t rows = 2; // head and rule of the flags' table
  for (const ModelMeaning& model : model_meanings()) {
    CHECK_THAT(page, Contains("## `" + std::string(model.name) + "`"));
    CHECK_THAT(page, Contains("\n    " + std::string(model.equation) + "\n"));
    rows += 2 + model.parameters.size() + model.derived.size();
    for (const auto& list : {model.parameters, model.derived}) {
      for (const ParameterMeaning& one : list) {
        CHECK_THAT(page, Contains("| " + std::string(one.unit) + " | " + std::string(one.meaning) + " |\n"));
        CHECK_THAT(page, Contains("| `" + std::string(one.name) + "` |"));
      }
    }
  }
  for (const FlagMeaning& flag : flag_meanings()) {
    CHECK_THAT(page, Contains("| `" + std::string(flag.flag) + "` | " + std::string(flag.meaning) + " | " +
                              std::string(flag.advice) + " |\n"));
    ++rows;
  }
  // A vertical bar in a meaning would break its row in two.
  std::size_t found = 0, bars = 0;
  for (std::size_t at = 0; at < page.size();) {
    const std::size_t end = page.find('\n', at);
    const std::string line = page.substr(at, end - at);
    if (line.rfind("| ", 0) == 0) {
      ++found;
      bars = static_cast<std::size_t>(std::count(line.begin(), line.end(), '|'));
      CAPTURE(line);
      CHECK((bars == 4 || bars == 5));
    }
    at = end + 1;
  }
  CHECK(found == rows);
}
