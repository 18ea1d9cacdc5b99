// Chronodrome, GPL-3.0-or-later.
#include <catch2/catch.hpp>
#include <filesystem>
#include <fstream>
#include <iterator>

#include "results/output_folder.h"

namespace fs = std::filesystem;
using namespace chronodrome;

namespace {

struct Folder {
  fs::path path = fs::path(CHRONODROME_BUILD_DIR) / "test-output-folder";
  Folder() { fs::remove_all(path); }
  ~Folder() { fs::remove_all(path); }
};

std::string content_of(const fs::path& path) {
  std::ifstream file(path);
  return {std::istreambuf_iterator<char>(file), {}};
}

} // namespace

TEST_CASE("results are written, written over, and stale ones removed", "[results]") {
  const Folder folder;
  const std::string out = (folder.path / "gp").string();
  const std::vector<std::string> names = {"gp"};
  REQUIRE(results::check_output_folder(folder.path.string(), names).ok());
  const std::vector<results::OutputFile> first = {{"rhythm.csv", "a\n"}, {"mechanics.csv", "b\n"}};
  REQUIRE(results::write_output_folder(out, first).ok());
  REQUIRE(results::check_output_folder(folder.path.string(), names).ok());
  const std::vector<results::OutputFile> second = {{"rhythm.csv", "c\n"}};
  REQUIRE(results::write_output_folder(out, second).ok());
  CHECK(content_of(folder.path / "gp" / "rhythm.csv") == "c\n");
  CHECK_FALSE(fs::exists(folder.path / "gp" / "mechanics.csv"));
  CHECK(std::distance(fs::directory_iterator(out), fs::directory_iterator()) == 1);
}

TEST_CASE("a file that is not ours stops the work before it starts", "[results]") {
  const Folder folder;
  fs::create_directories(folder.path / "gp");
  const std::vector<std::string> names = {"gp"};
  const std::string strange = GENERATE("notes.txt", "gp/thesis.doc");
  std::ofstream(folder.path / strange) << "mine";
  const auto checked = results::check_output_folder(folder.path.string(), names);
  REQUIRE_FALSE(checked.ok());
  CHECK(checked.error().file == (folder.path / strange).string());
}

TEST_CASE("what a killed run of ours left is no obstacle", "[results]") {
  const Folder folder;
  fs::create_directories(folder.path / "gp");
  std::ofstream(folder.path / "gp" / "delays.csv.part") << "half";
  const std::vector<std::string> names = {"gp"};
  CHECK(results::check_output_folder(folder.path.string(), names).ok());
}

TEST_CASE("a place that cannot be written gives the system's reason", "[results]") {
  const auto written = results::write_whole_file("/proc/nothing/here.csv", "x");
  REQUIRE_FALSE(written.ok());
  CHECK(written.error().code == ErrorCode::cannot_write);
}
