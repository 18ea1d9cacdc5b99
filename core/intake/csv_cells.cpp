// Chronodrome, GPL-3.0-or-later.
#include "intake/csv_cells.h"

#include <algorithm>
#include <array>
#include <cmath>
#include <limits>

#include "base/number_text.h"
#include "intake/csv_text.h"

namespace chronodrome::intake {
namespace {

bool is_digit(char c) {
  return c >= '0' && c <= '9';
}

bool is_line_end(char c) {
  return c == '\n' || c == '\r';
}

/// Where a record that begins at `at` may go on.
struct Cursor {
  std::string_view text;
  std::size_t at;
  [[nodiscard]] bool more() const { return at < text.size(); }
  [[nodiscard]] char here() const { return text[at]; }
};

bool is_inner_blank(char c, char delimiter) {
  return c == ' ' || (c == '\t' && delimiter != '\t');
}

void skip_blanks(Cursor& cursor, char delimiter) {
  while (cursor.more() && is_inner_blank(cursor.here(), delimiter))
    ++cursor.at;
}

/// Behind the closing quote, or nothing if the text ends first.
bool read_quoted(Cursor& cursor, Cell& cell, std::size_t& lines) {
  const std::size_t begin = ++cursor.at;
  while (cursor.more()) {
    if (cursor.here() == '"') {
      if (cursor.at + 1 < cursor.text.size() && cursor.text[cursor.at + 1] == '"') {
        cursor.at += 2;
        continue;
      }
      cell = {cursor.text.substr(begin, cursor.at - begin), true};
      ++cursor.at;
      return true;
    }
    const bool pair =
        cursor.here() == '\r' && cursor.at + 1 < cursor.text.size() && cursor.text[cursor.at + 1] == '\n';
    if (is_line_end(cursor.here()) && !pair) ++lines;
    ++cursor.at;
  }
  return false;
}

/// Passes a line end; false if the text ends where a CR might be followed by an LF.
bool pass_line_end(Cursor& cursor, bool final) {
  if (cursor.here() == '\r') {
    if (cursor.at + 1 == cursor.text.size() && !final) return false;
    ++cursor.at;
    if (cursor.more() && cursor.here() == '\n') ++cursor.at;
  } else {
    ++cursor.at;
  }
  return true;
}

void replace_all(std::string& text, std::string_view from, std::string_view to) {
  for (std::size_t at = text.find(from); at != std::string::npos; at = text.find(from, at + to.size()))
    text.replace(at, from.size(), to);
}

/// `text` without its thousands marks if they stand as they must, else empty.
std::string without_groups(std::string_view text, char decimal, std::string_view mark) {
  std::string plain;
  std::size_t at = 0, digits = 0;
  bool grouped = false;
  if (!text.empty() && (text[0] == '-' || text[0] == '+')) plain += text[at++];
  if (at < text.size() && text[at] == '0') return "";
  for (; at < text.size() && is_digit(text[at]); ++at, ++digits)
    plain += text[at];
  if (digits == 0 || digits > 3) return "";
  while (text.substr(at, mark.size()) == mark) {
    at += mark.size();
    if (text.size() - at < 3 || !std::all_of(text.begin() + static_cast<std::ptrdiff_t>(at),
                                             text.begin() + static_cast<std::ptrdiff_t>(at + 3), is_digit))
      return "";
    plain += text.substr(at, 3);
    at += 3;
    grouped = true;
  }
  if (!grouped || (at < text.size() && text[at] != decimal)) return "";
  plain += text.substr(at);
  return plain;
}

/// A number in form, but too large to be a value: 1e308.
bool is_beyond_range(const std::string& word) {
  const auto exponent = word.find_first_of("ed");
  if (exponent == std::string::npos) return word.size() > 38 && parse_number(word).has_value();
  if (!parse_number(word.substr(0, exponent)) || !parse_integer(word.substr(exponent + 1))) return false;
  const auto value = parse_number(word);
  return !value || std::abs(*value) > static_cast<double>(std::numeric_limits<float>::max());
}

} // namespace

RecordRead read_record(std::string_view text, std::size_t at, char delimiter, bool final,
                       std::vector<Cell>& cells) {
  cells.clear();
  RecordRead read;
  Cursor cursor{text, at};
  const auto stop = [&](RecordEnd end) {
    read.end = end;
    read.next = cursor.at;
    return read;
  };
  while (true) {
    skip_blanks(cursor, delimiter);
    Cell cell;
    bool whole = true;
    if (cursor.more() && cursor.here() == '"') whole = read_quoted(cursor, cell, read.lines);
    if (!whole) return stop(RecordEnd::open_quote);
    const std::size_t begin = cursor.at;
    while (cursor.more() && !is_line_end(cursor.here()) &&
           !(delimiter == ' ' ? is_inner_blank(cursor.here(), ' ') : cursor.here() == delimiter))
      ++cursor.at;
    if (!cell.quoted) cell.text = trimmed(text.substr(begin, cursor.at - begin));
    if (!cursor.more() && !final) return stop(RecordEnd::incomplete);
    const bool last = !cursor.more() || is_line_end(cursor.here());
    // Blanks at the end of a line open no cell.
    if (!(delimiter == ' ' && last && cell.text.empty() && !cell.quoted && !cells.empty()))
      cells.push_back(cell);
    if (last) break;
    ++cursor.at;
  }
  read.terminated = cursor.more();
  if (cursor.more() && !pass_line_end(cursor, final)) return stop(RecordEnd::incomplete);
  if (read.terminated) ++read.lines;
  return stop(RecordEnd::complete);
}

std::string text_of(const Cell& cell) {
  std::string text = as_utf8(trimmed(cell.text));
  if (cell.quoted) replace_all(text, "\"\"", "\"");
  std::replace_if(
      text.begin(), text.end(), [](char c) { return static_cast<unsigned char>(c) < 32; }, ' ');
  return text;
}

bool is_missing(std::string_view cell) {
  cell = trimmed(cell);
  if (cell.find_first_not_of("-") == std::string_view::npos) return true; // empty, or dashes
  static constexpr std::array<std::string_view, 32> kWords = {
      "nan",     "na",      "n/a",   "#n/a",    "#na",       "nil",      "null",       "none",
      "*",       "**",      "***",   "?",       "over",      "ovr",      "ovfl",       "ovld",
      "err",     "error",   "under", "missing", "overrange", "overflow", "over range", "out of range",
      "#value!", "#div/0!", "#num!", "#ref!",   "inf",       "infinity", "nan(ind)",   "nan(snan)"};
  std::string word = lower_case(cell.substr(0, 40));
  std::replace(word.begin(), word.end(), ',', '.');
  if (word.front() == '+' || word.front() == '-') word.erase(0, 1);
  if (word.rfind("1.#", 0) == 0) return true; // 1.#QNAN, 1.#INF
  if (std::find(kWords.begin(), kWords.end(), word) != kWords.end()) return true;
  return is_beyond_range(word);
}

NumberRead read_number(std::string_view cell, char decimal) {
  cell = trimmed(cell);
  if (cell.empty()) return {};
  // "0," before a blank is a list, not a number.
  const bool ends_in_mark = cell.back() == decimal && decimal == ',';
  if (!ends_in_mark) {
    if (const auto value = parse_number(cell, decimal)) {
      const bool fits = std::abs(*value) <= static_cast<double>(std::numeric_limits<float>::max());
      return fits ? NumberRead{NumberForm::plain, *value} : NumberRead{};
    }
  }
  std::string changed(cell);
  replace_all(changed, "\xE2\x88\x92", "-"); // the typographic minus sign
  if (changed != cell) return read_number(changed, decimal);
  const char other = decimal == '.' ? ',' : '.';
  const std::string other_mark(1, other);
  for (const std::string_view mark :
       {std::string_view(other_mark), std::string_view(" "), std::string_view("'"),
        std::string_view("\xC2\xA0"), std::string_view("\xA0"), std::string_view("\xE2\x80\xAF"),
        std::string_view("\xE2\x80\x99")}) {
    const std::string plain = without_groups(cell, decimal, mark);
    if (plain.empty()) continue;
    const auto value = parse_number(plain, decimal);
    if (!value) continue;
    // A blank or an apostrophe can only be a thousands mark; a comma or a point might be a decimal mark.
    const bool fully = plain.find(decimal) != std::string::npos || mark != other_mark ||
                       std::count(cell.begin(), cell.end(), other) > 1;
    return {fully ? NumberForm::grouped_fully : NumberForm::grouped, *value};
  }
  return {};
}

std::optional<int> decimals_of(std::string_view cell, char decimal) {
  cell = trimmed(cell);
  if (cell.find_first_of("eEdD") != std::string_view::npos) return std::nullopt;
  const auto mark = cell.rfind(decimal);
  return mark == std::string_view::npos ? 0 : static_cast<int>(cell.size() - mark - 1);
}

} // namespace chronodrome::intake
