// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <fstream>
#include <map>
#include <sstream>
#include <stdexcept>
#include <string>
#include <vector>

#include <nlohmann/json.hpp>

/// Readers of the reference data in tests/reference/data: plain tables without quotes, and their JSON notes.
/// A missing file, column or case throws, so that a test that lost its data fails.
namespace reference {

using Json = nlohmann::json;

inline std::string data_path(const std::string& name) {
  return std::string(CHRONODROME_SOURCE_DIR) + "/tests/reference/data/" + name;
}

inline Json json(const std::string& name) {
  std::ifstream in(data_path(name));
  if (!in) throw std::runtime_error("missing reference file " + name);
  return Json::parse(in);
}

struct Table {
  std::vector<std::string> names;
  std::vector<std::vector<std::string>> rows;

  [[nodiscard]] std::size_t index(const std::string& name) const {
    for (std::size_t i = 0; i < names.size(); ++i) {
      if (names[i] == name) return i;
    }
    throw std::runtime_error("no column " + name);
  }
  [[nodiscard]] const std::string& text(std::size_t row, const std::string& name) const {
    return rows.at(row).at(index(name));
  }
  [[nodiscard]] double number(std::size_t row, const std::string& name) const {
    return std::stod(text(row, name));
  }
  [[nodiscard]] std::vector<double> numbers(const std::string& name) const {
    std::vector<double> column;
    for (std::size_t row = 0; row < rows.size(); ++row)
      column.push_back(number(row, name));
    return column;
  }
};

inline std::vector<std::string> cells(std::string line) {
  if (!line.empty() && line.back() == '\r') line.pop_back();
  std::vector<std::string> parts;
  std::stringstream stream(line);
  for (std::string part; std::getline(stream, part, ',');)
    parts.push_back(part);
  if (!line.empty() && line.back() == ',') parts.emplace_back();
  return parts;
}

inline Table table(const std::string& name) {
  std::ifstream in(data_path(name));
  if (!in) throw std::runtime_error("missing reference file " + name);
  Table result;
  std::string line;
  if (!std::getline(in, line)) throw std::runtime_error("empty reference file " + name);
  result.names = cells(line);
  while (std::getline(in, line)) {
    if (!line.empty()) result.rows.push_back(cells(line));
  }
  if (result.rows.empty()) throw std::runtime_error("no rows in reference file " + name);
  return result;
}

/// The `expected` object of the case with this id.
inline Json expected(const Json& file, const std::string& id) {
  for (const Json& one : file.at("cases")) {
    if (one.at("id") == id) return one.at("expected");
  }
  throw std::runtime_error("no reference case " + id);
}

} // namespace reference
