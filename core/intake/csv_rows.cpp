// Chronodrome, GPL-3.0-or-later.
#include "intake/csv_rows.h"

#include <algorithm>
#include <cmath>
#include <limits>
#include <memory>

#include "base/number_text.h"
#include "intake/csv_quick_number.h"
#include "intake/csv_text.h"

namespace chronodrome::intake {
namespace {

constexpr double kNoValue = std::numeric_limits<double>::quiet_NaN(); // inside this room only
constexpr std::size_t kMostUneven = 100;

bool is_line_end(char c) {
  return c == '\n' || c == '\r';
}

class RowReader {
public:
  RowReader(std::string_view text, const TableLayout& layout, bool final, bool footer = false)
      : text_(text), layout_(layout), final_(final), footer_(footer), columns_(layout.columns.size()),
        delimiter_(layout.dialect.delimiter), decimal_(layout.dialect.decimal) {
    for (const TableColumn& column : layout.columns)
      kinds_.push_back(column.kind);
    for (std::size_t c = 0; c < columns_; ++c) {
      if (has_values(c)) needed_ = c + 1;
    }
    block_.missing_word.resize(columns_);
    block_.last_text.resize(columns_);
  }

  RowBlock read() {
    // About as many rows as lines of the first one's length; the buffer grows where it must.
    const std::size_t line = std::max(2 * columns_, std::min(text_.find('\n'), text_.size()));
    make_room(std::max<std::size_t>(16, text_.size() / line * 5 / 4));
    at_ = text_.data();
    const char* const end = text_.data() + text_.size();
    while (at_ < end) {
      if (block_.rows == room_) make_room(2 * room_);
      const char* p = at_;
      if (!footer_ && quick_row(p, end)) {
        keep_row(1);
        at_ = p;
      } else if (!careful_row()) {
        break;
      }
    }
    block_.bytes = static_cast<std::size_t>(at_ - text_.data());
    into_columns();
    return std::move(block_);
  }

private:
  [[nodiscard]] bool has_values(std::size_t c) const {
    return kinds_[c] == ColumnKind::number || kinds_[c] == ColumnKind::open || kinds_[c] == ColumnKind::clock;
  }
  [[nodiscard]] bool is_blank(char c) const { return c == ' ' || (c == '\t' && delimiter_ != '\t'); }
  [[nodiscard]] double* row() { return cells_.get() + block_.rows * columns_; }

  void make_room(std::size_t rows) {
    auto cells = std::make_unique_for_overwrite<double[]>(rows * columns_);
    if (cells_) std::copy_n(cells_.get(), block_.rows * columns_, cells.get());
    cells_ = std::move(cells);
    room_ = rows;
  }

  void keep_row(std::size_t lines) {
    if (block_.lines != next_line_) block_.row_lines.push_back({block_.rows, block_.lines});
    next_line_ = block_.lines + 1;
    ++block_.rows;
    block_.lines += lines;
  }

  bool quick_text(const char*& p, const char* end, std::size_t c) {
    const char* const begin = p;
    while (p < end && *p != delimiter_ && !is_line_end(*p))
      ++p;
    const std::string_view cell = trimmed({begin, static_cast<std::size_t>(p - begin)});
    if (cell.find('"') != std::string_view::npos) return false;
    if (kinds_[c] != ColumnKind::text) return true; // a counter or a date: not read
    if (cell.empty()) {
      block_.last_text[c] = "";
      return true;
    }
    return block_.last_text[c] == cell;
  }

  bool quick_row(const char*& p, const char* end) {
    double* const out = row();
    for (std::size_t c = 0; c < columns_; ++c) {
      while (p < end && is_blank(*p))
        ++p;
      if (p == end) return false;
      if (kinds_[c] == ColumnKind::number || kinds_[c] == ColumnKind::open) {
        if (*p == delimiter_ || is_line_end(*p)) {
          out[c] = kNoValue;
        } else if (!quick_number(p, end, delimiter_, decimal_, out[c])) {
          return false;
        }
      } else if (kinds_[c] == ColumnKind::clock || !quick_text(p, end, c)) {
        if (kinds_[c] != ColumnKind::clock || !quick_clock(p, end, out[c])) return false;
      }
      const char* const behind = p;
      while (p < end && is_blank(*p))
        ++p;
      if (p == end) return false;
      if (c + 1 == columns_) break;
      if (delimiter_ == ' ' ? p == behind || is_line_end(*p) : *p != delimiter_) return false;
      if (delimiter_ != ' ') ++p;
    }
    if (*p == delimiter_ && p + 1 < end && is_line_end(p[1])) ++p;
    if (!is_line_end(*p) || (*p == '\r' && p + 1 == end && !final_)) return false;
    const bool pair = *p == '\r' && p + 1 < end && p[1] == '\n';
    p += pair ? 2 : 1;
    return !is_empty_row(out);
  }

  /// Cells without any value: blank lines and the like are the careful reader's.
  bool is_empty_row(const double* out) const {
    for (std::size_t c = 0; c < columns_; ++c) {
      if (has_values(c) && !std::isnan(out[c])) return false;
    }
    return true;
  }

  bool quick_clock(const char*& p, const char* end, double& value) const {
    if (*p == '"' || *p == delimiter_ || is_line_end(*p)) return false;
    const char* const begin = p;
    while (p < end && *p != delimiter_ && !is_line_end(*p))
      ++p;
    return clock_value({begin, static_cast<std::size_t>(p - begin)}, value);
  }

  bool clock_value(std::string_view cell, double& value) const {
    const auto clock = read_clock(cell);
    if (!clock) return false;
    value = clock->seconds;
    if (clock->order == DateOrder::none || !layout_.clock_has_days) return true;
    const auto day = day_of(*clock, layout_.date_order);
    if (!day) return false;
    value += static_cast<double>(*day - layout_.clock_zero->day) * 86400.0;
    return true;
  }

  /// One record, whatever it holds. False: no whole record is left, or an error.
  bool careful_row() {
    const auto at = static_cast<std::size_t>(at_ - text_.data());
    const RecordRead record = read_record(text_, at, delimiter_, final_, record_);
    if (record.end == RecordEnd::open_quote) block_.open_quote_line = block_.lines;
    if (record.end != RecordEnd::complete) return false;
    at_ = text_.data() + record.next;
    if (!record.terminated && !footer_ && is_cut()) {
      block_.dropped_line = block_.lines;
      return true;
    }
    take_record(record.lines);
    if (block_.error) return false;
    return true;
  }

  /// The file's last line, without a line end: cut if cells or digits are missing.
  bool is_cut() {
    if (record_.size() < needed_) return true;
    if (!has_values(columns_ - 1) || record_.size() < columns_) return false;
    if (kinds_[columns_ - 1] == ColumnKind::number && record_[columns_ - 1].text.empty()) return true;
    const auto decimals = decimals_of(record_[columns_ - 1].text, decimal_);
    if (layout_.last_decimals) return decimals != layout_.last_decimals;
    block_.unterminated = true;
    return false;
  }

  struct Tally {
    std::size_t values = 0, times = 0, texts = 0, words = 0;
  };

  void take_record(std::size_t lines) {
    double* const out = row();
    std::fill(out, out + columns_, kNoValue);
    Tally tally;
    for (std::size_t c = 0; c < std::min(columns_, record_.size()); ++c) {
      const Cell& cell = record_[c];
      if (!has_values(c) || cell.text.empty()) continue;
      if (read_value(cell, c, out[c])) {
        ++(c == layout_.time_column ? tally.times : tally.values);
      } else if (is_missing(cell.text)) {
        ++tally.words;
      } else {
        ++tally.texts;
      }
    }
    // Without a time column a row of empty cells takes its time all the same.
    const bool counts =
        !layout_.time_column && columns_ > 1 && record_.size() >= columns_ && tally.texts == 0;
    if (footer_ || (tally.values + tally.times + tally.words == 0 && !counts) ||
        (tally.values == 0 && tally.texts > 0)) {
      take_line_of_its_own(tally, out, lines);
    } else {
      take_row(lines);
    }
  }

  bool read_value(const Cell& cell, std::size_t c, double& value) {
    if (kinds_[c] == ColumnKind::clock) return clock_value(cell.text, value);
    const NumberRead number = read_number(cell.text, decimal_);
    if (number.form == NumberForm::none) return false;
    if (number.form == NumberForm::grouped && !layout_.dialect.grouped && !block_.error) {
      block_.error = Error{ErrorCode::ambiguous, "", Place::at(block_.lines, c + 1),
                           "'" + shortened(as_utf8(cell.text), 40) +
                               "' has another decimal mark than the rows before it, or a "
                               "thousands mark",
                           "write all numbers alike, without thousands marks"};
    }
    value = number.value;
    return true;
  }

  void take_line_of_its_own(const Tally& tally, const double* out, std::size_t lines) {
    std::vector<std::string> texts;
    for (const Cell& cell : record_)
      texts.push_back(text_of(cell));
    while (!texts.empty() && texts.back().empty())
      texts.pop_back();
    const bool is_heading = std::find(layout_.heading_rows.begin(), layout_.heading_rows.end(), texts) !=
                            layout_.heading_rows.end();
    if (is_heading) ++block_.repeated_headings;
    if (!is_heading && !texts.empty()) {
      RowText text;
      text.row = block_.rows;
      text.line = block_.lines;
      if (tally.times > 0) text.time = out[*layout_.time_column];
      for (std::size_t c = 0; c < texts.size(); ++c) {
        if (texts[c].empty() || (c == layout_.time_column && tally.times > 0)) continue;
        if (!text.text.empty()) text.text += ' ';
        text.text += texts[c];
      }
      if (!text.text.empty()) block_.texts.push_back(std::move(text));
    }
    block_.lines += lines;
  }

  void take_row(std::size_t lines) {
    const bool extra =
        std::any_of(record_.begin() + static_cast<std::ptrdiff_t>(std::min(columns_, record_.size())),
                    record_.end(), [](const Cell& cell) { return !cell.text.empty(); });
    if (record_.size() < needed_ || extra) {
      ++block_.uneven_rows;
      if (block_.uneven.size() < kMostUneven) block_.uneven.push_back({block_.lines, record_.size()});
    }
    for (std::size_t c = 0; c < columns_; ++c) {
      const std::string_view cell = c < record_.size() ? record_[c].text : std::string_view();
      if (has_values(c)) {
        if (!std::isnan(row()[c]) || cell.empty()) continue;
        if (!is_missing(cell)) {
          keep_text(c, text_of(record_[c]), false);
        } else if (block_.missing_word[c].empty()) {
          block_.missing_word[c] = as_utf8(cell);
        }
      } else if (kinds_[c] == ColumnKind::text) {
        const std::string text = cell.empty() ? "" : text_of(record_[c]);
        if (!text.empty() && block_.last_text[c] != text)
          keep_text(c, text, !block_.last_text[c].has_value());
        block_.last_text[c] = text;
      }
    }
    keep_row(lines);
  }

  void keep_text(std::size_t column, const std::string& text, bool state_unknown) {
    RowText kept;
    kept.row = block_.rows;
    kept.line = block_.lines;
    kept.column = column;
    kept.state_unknown = state_unknown;
    kept.text = text;
    block_.texts.push_back(std::move(kept));
  }

  void into_columns() {
    block_.columns.resize(columns_);
    block_.missing.resize(columns_);
    for (std::size_t c = 0; c < columns_; ++c) {
      if (!has_values(c)) continue;
      std::vector<double>& column = block_.columns[c];
      column.resize(block_.rows);
      std::size_t missing = 0;
      for (std::size_t r = 0; r < block_.rows; ++r) {
        column[r] = cells_[r * columns_ + c];
        missing += std::isnan(column[r]) ? 1U : 0U;
      }
      block_.missing[c] = missing;
    }
  }

  std::string_view text_;
  const TableLayout& layout_;
  bool final_, footer_;
  std::size_t columns_;
  char delimiter_, decimal_;
  std::vector<ColumnKind> kinds_;
  std::size_t needed_ = 0;          ///< cells that a row must have to reach its last column of values
  std::unique_ptr<double[]> cells_; ///< row by row
  std::size_t room_ = 0;            ///< rows that fit
  std::vector<Cell> record_;
  const char* at_ = nullptr;
  std::size_t next_line_ = 0; ///< where the next row stands if it follows at once
  RowBlock block_;
};

} // namespace

RowBlock read_rows(std::string_view text, const TableLayout& layout, bool final) {
  return RowReader(text, layout, final).read();
}

RowBlock read_footer(std::string_view text, const TableLayout& layout) {
  return RowReader(text, layout, true, true).read();
}

} // namespace chronodrome::intake
