// Chronodrome, GPL-3.0-or-later.
#include <catch2/catch.hpp>
#include <filesystem>

#include "fuzz/read_any.h"
#include "reading_fixtures.h"

using namespace chronodrome::intake::fixtures;
namespace fs = std::filesystem;

TEST_CASE("the inputs that the fuzzers keep are read or refused soundly", "[intake]") {
  for (const std::string& kind : {std::string("csv"), std::string("edf")}) {
    const fs::path folder = fs::path(CHRONODROME_SOURCE_DIR) / "tests/fuzz/corpus" / kind;
    std::size_t files = 0;
    for (const auto& entry : fs::directory_iterator(folder)) {
      CAPTURE(entry.path().string());
      const std::string bytes = bytes_of_file(entry.path().string());
      const std::string path = "fuzz." + kind;
      chronodrome::fuzz::read_any({reinterpret_cast<const std::uint8_t*>(bytes.data()), bytes.size()},
                                  path.c_str());
      ++files;
    }
    CHECK(files >= 3); // read_any stops the program where a promise is broken
  }
}
