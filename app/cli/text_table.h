// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <string>
#include <vector>

namespace chronodrome::cli {

/// Columns set side by side for a terminal: the first to the left, the others to the right, two blanks
/// between. Width counts characters of UTF-8, not bytes.
class TextTable {
public:
  explicit TextTable(std::vector<std::string> head) { rows_.push_back(std::move(head)); }
  void add(std::vector<std::string> row) { rows_.push_back(std::move(row)); }
  [[nodiscard]] std::string text(const std::string& indent = "  ") const;

private:
  std::vector<std::vector<std::string>> rows_;
};

} // namespace chronodrome::cli
