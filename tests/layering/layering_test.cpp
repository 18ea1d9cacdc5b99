// Chronodrome, GPL-3.0-or-later.
// The house holds its direction: this test reads the #include lines of every source file.
#include <algorithm>
#include <catch2/catch.hpp>
#include <filesystem>
#include <fstream>
#include <map>
#include <regex>
#include <set>
#include <string>
#include <vector>

namespace fs = std::filesystem;

namespace {

/// What each room of core may include beside itself, as DEVELOPERS.md draws it.
const std::map<std::string, std::set<std::string>>& allowed() {
  static const std::map<std::string, std::set<std::string>> rooms = [] {
    std::map<std::string, std::set<std::string>> may;
    std::set<std::string> left;
    // Rooms of one rank do not see each other.
    const std::vector<std::vector<std::string>> ranks = {{"base"},
                                                         {"numerics"},
                                                         {"recording", "protocol", "document"},
                                                         {"intake", "conditioning"},
                                                         {"activation"},
                                                         {"conduction"},
                                                         {"rhythm"},
                                                         {"response"},
                                                         {"pharmacology"},
                                                         {"session"},
                                                         {"study"},
                                                         {"results"}};
    for (const auto& rank : ranks) {
      for (const auto& room : rank)
        may[room] = left;
      left.insert(rank.begin(), rank.end());
    }
    // The simulator stays independent of what it tests.
    may["simulation"] = {"base", "numerics", "recording", "protocol", "intake"};
    return may;
  }();
  return rooms;
}

struct Include {
  std::string file, line, target;
  bool quoted = false;
};

std::vector<Include> includes_below(const std::string& folder) {
  static const std::regex pattern(R"(^\s*#\s*include\s*([<"])([^">]+)[">])");
  std::vector<Include> found;
  const fs::path root = fs::path(CHRONODROME_SOURCE_DIR) / folder;
  if (!fs::exists(root)) return found;
  for (const auto& entry : fs::recursive_directory_iterator(root)) {
    const auto extension = entry.path().extension();
    if (extension != ".h" && extension != ".cpp") continue;
    std::ifstream file(entry.path());
    for (std::string line; std::getline(file, line);) {
      std::smatch match;
      if (!std::regex_search(line, match, pattern)) continue;
      Include include;
      include.file = fs::relative(entry.path(), CHRONODROME_SOURCE_DIR).string();
      include.line = line;
      include.target = match[2];
      include.quoted = match[1] == "\"";
      found.push_back(include);
    }
  }
  return found;
}

std::string first_folder(const std::string& path) {
  return path.substr(0, path.find('/'));
}

} // namespace

TEST_CASE("a room of core includes itself and rooms left of it", "[layering]") {
  const auto includes = includes_below("core");
  REQUIRE(includes.size() > 100);
  for (const auto& include : includes) {
    if (!include.quoted) continue;
    const std::string room = first_folder(include.file.substr(std::string("core/").size()));
    const std::string target = first_folder(include.target);
    INFO(include.file << ": " << include.line);
    REQUIRE(allowed().count(room) == 1);
    CHECK((target == room || allowed().at(room).count(target) == 1));
  }
}

TEST_CASE("core knows nothing of Qt, of ui and of app", "[layering]") {
  static const std::regex qt(R"(^(Q[A-Z]|qt|qcustomplot|Qt))");
  for (const auto& include : includes_below("core")) {
    INFO(include.file << ": " << include.line);
    CHECK_FALSE(std::regex_search(include.target, qt));
    CHECK(include.target.find("ui/") == std::string::npos);
    CHECK(include.target.find("app/") == std::string::npos);
  }
}

TEST_CASE("a room of ui includes itself and rooms left of it; the panes do not see each other",
          "[layering]") {
  const std::set<std::string> panes = {"story", "evidence", "answer"};
  std::map<std::string, std::set<std::string>> may;
  may["look"] = {};
  may["document"] = {"look"};
  for (const auto& pane : panes)
    may[pane] = {"look", "document"};
  may["steps"] = {"look", "document"};
  may["report"] = {"look", "document", "story", "evidence", "answer"};
  may["window"] = {"look", "document", "story", "evidence", "answer", "steps", "report"};
  const auto includes = includes_below("ui");
  REQUIRE(includes.size() > 100);
  for (const auto& include : includes) {
    if (!include.quoted || include.target.rfind("ui/", 0) != 0) continue;
    const std::string room = first_folder(include.file.substr(std::string("ui/").size()));
    const std::string target = first_folder(include.target.substr(std::string("ui/").size()));
    INFO(include.file << ": " << include.line);
    REQUIRE(may.count(room) == 1);
    CHECK((target == room || may.at(room).count(target) == 1));
  }
}

TEST_CASE("only ui/look names a colour", "[layering]") {
  static const std::regex colour(
      R"(QColor\s*\(|Qt::(red|green|blue|black|white|gray|darkGray|yellow|cyan|magenta)\b|#[0-9A-Fa-f]{6}\b)");
  for (const auto& entry : fs::recursive_directory_iterator(fs::path(CHRONODROME_SOURCE_DIR) / "ui")) {
    if (entry.path().extension() != ".h" && entry.path().extension() != ".cpp") continue;
    if (entry.path().parent_path().filename() == "look") continue;
    std::ifstream file(entry.path());
    int number = 0;
    for (std::string line; std::getline(file, line);) {
      ++number;
      INFO(entry.path().string() << ":" << number << ": " << line);
      CHECK_FALSE(std::regex_search(line, colour));
    }
  }
}

TEST_CASE("nobody uses app", "[layering]") {
  for (const std::string folder : {"core", "ui"}) {
    for (const auto& include : includes_below(folder)) {
      INFO(include.file << ": " << include.line);
      CHECK(first_folder(include.target) != "app");
    }
  }
}

TEST_CASE("only the rooms that own files open files", "[layering]") {
  // intake reads, results writes, recording owns its stores.
  const std::set<std::string> may_open = {"intake", "results", "recording"};
  const std::set<std::string> doors = {"fstream",    "cstdio",     "stdio.h", "fcntl.h",
                                       "sys/mman.h", "sys/stat.h", "unistd.h"};
  for (const auto& include : includes_below("core")) {
    const std::string room = first_folder(include.file.substr(std::string("core/").size()));
    if (doors.count(include.target) == 0) continue;
    INFO(include.file << ": " << include.line);
    CHECK(may_open.count(room) == 1);
  }
}

TEST_CASE("random numbers and clocks stay out of the stages", "[layering]") {
  for (const auto& include : includes_below("core")) {
    const std::string room = first_folder(include.file.substr(std::string("core/").size()));
    if (room == "simulation" || room == "results") continue;
    INFO(include.file << ": " << include.line);
    CHECK((include.target != "chrono" && include.target != "ctime"));
    if (room != "pharmacology") CHECK(include.target != "random");
  }
}
