// Chronodrome, GPL-3.0-or-later.
#include "intake/protocol_table.h"

#include <algorithm>
#include <optional>

#include "base/number_text.h"
#include "intake/text_file.h"

namespace chronodrome::intake {
namespace {

/// Of the first row that holds anything.
char delimiter_of(std::string_view text) {
  text.remove_prefix(std::min(text.find_first_not_of(" \r\n"), text.size()));
  std::size_t best = 0;
  char delimiter = ',';
  for (const char candidate : {',', ';', '\t'}) {
    std::size_t count = 0;
    bool quoted = false;
    for (const char c : text) {
      if (c == '"') quoted = !quoted;
      if (quoted) continue;
      if (c == '\n' || c == '\r') break;
      if (c == candidate) ++count;
    }
    if (count > best) best = count, delimiter = candidate;
  }
  return delimiter;
}

class TableSplitter {
public:
  TableSplitter(std::string_view text, std::string file, char delimiter)
      : text_(text), file_(std::move(file)), delimiter_(delimiter) {}

  Result<std::vector<TableRow>> split() {
    const auto bad = std::min(first_not_utf8(text_), text_.find('\0'));
    if (bad != std::string_view::npos) {
      while (at_ < bad)
        step();
      return fault(ErrorCode::wrong_format, "a byte here is not UTF-8 text",
                   "save the table as UTF-8 (the micro sign and accents are what differs)");
    }
    std::vector<TableRow> rows;
    while (at_ < text_.size()) {
      TableRow row;
      do {
        if (auto read = read_cell(row); !read) return read.error();
      } while (take(delimiter_));
      take_line_end();
      const bool has_text = std::any_of(row.cells.begin(), row.cells.end(),
                                        [](const TableCell& cell) { return !cell.text.empty(); });
      if (has_text) rows.push_back(std::move(row));
    }
    return rows;
  }

private:
  [[nodiscard]] bool at_end_of_cell() const {
    return at_ >= text_.size() || text_[at_] == delimiter_ || text_[at_] == '\n' || text_[at_] == '\r';
  }

  Done read_cell(TableRow& row) {
    skip_blanks();
    TableCell cell{"", line_, column_};
    if (at_ < text_.size() && text_[at_] == '"') {
      if (auto read = read_quoted(cell.text); !read) return read.error();
      skip_blanks();
      if (!at_end_of_cell())
        return fault(ErrorCode::damaged, "text follows a closing quote",
                     "double every quote inside a quoted cell");
    } else {
      const std::size_t from = at_;
      while (!at_end_of_cell())
        step();
      cell.text = text_.substr(from, at_ - from);
    }
    cell.text = std::string(trimmed(cell.text));
    row.cells.push_back(std::move(cell));
    return done();
  }

  Done read_quoted(std::string& text) {
    const std::size_t line = line_;
    const std::size_t column = column_;
    step();
    while (at_ < text_.size()) {
      if (text_[at_] == '"') {
        step();
        if (at_ >= text_.size() || text_[at_] != '"') return done();
      }
      text += text_[at_];
      step();
    }
    return Error{ErrorCode::damaged, file_, Place::at(line, column),
                 "the quote that opens here is never closed", "close it, or take it out"};
  }

  void skip_blanks() {
    while (at_ < text_.size() && (text_[at_] == ' ' || (text_[at_] == '\t' && delimiter_ != '\t')))
      step();
  }

  bool take(char wanted) {
    if (at_ >= text_.size() || text_[at_] != wanted) return false;
    step();
    return true;
  }

  void take_line_end() {
    const bool carriage = take('\r');
    if (!take('\n') && carriage) ++line_, column_ = 1; // a line that ends with CR alone
  }

  void step() {
    const char c = text_[at_++];
    if (c == '\n') {
      ++line_;
      column_ = 1;
    } else if ((static_cast<unsigned char>(c) & 0xc0U) != 0x80) {
      ++column_;
    }
  }

  [[nodiscard]] Error fault(ErrorCode code, std::string what, std::string remedy) const {
    return {code, file_, Place::at(line_, column_), std::move(what), std::move(remedy)};
  }

  std::string_view text_;
  std::string file_;
  char delimiter_;
  std::size_t at_ = 0;
  std::size_t line_ = 1;
  std::size_t column_ = 1;
};

} // namespace

Result<std::vector<TableRow>> split_table(std::string_view text, const std::string& file) {
  return split_table(text, file, delimiter_of(without_byte_order_mark(text)));
}

Result<std::vector<TableRow>> split_table(std::string_view text, const std::string& file, char delimiter) {
  return TableSplitter(without_byte_order_mark(text), file, delimiter).split();
}

} // namespace chronodrome::intake
