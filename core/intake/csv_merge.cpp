// Chronodrome, GPL-3.0-or-later.
#include "intake/csv_merge.h"

#include <algorithm>
#include <cmath>

#include "base/number_text.h"
#include "base/parallel.h"

namespace chronodrome::intake {
namespace {

constexpr const char* kStampsFile = "time.scratch";

} // namespace

TableMerge::TableMerge(const TableLayout& layout, const ReadSettings& settings, const std::string& path,
                       recording::StoreFolder& folder)
    : layout_(layout), settings_(settings), path_(path), folder_(folder), columns_(layout.columns.size()),
      last_text_(layout.columns.size()), line_(layout.data_line) {
  std::size_t index = 0;
  for (std::size_t c = 0; c < layout.columns.size(); ++c) {
    const ColumnKind kind = layout.columns[c].kind;
    if (c == layout.time_column || (kind != ColumnKind::number && kind != ColumnKind::open)) continue;
    columns_[c].values = std::make_unique<ColumnCollector>(folder, index++, settings.limits.runs);
  }
  if (layout.time_column) stamps_ = folder.writer(kStampsFile);
}

Error TableMerge::error(ErrorCode code, std::size_t line, const std::string& what,
                        const std::string& remedy) const {
  return {code, path_, Place::at_line(line), what, remedy};
}

std::size_t TableMerge::line_of(std::size_t row) const {
  const auto after = std::upper_bound(row_lines_.begin(), row_lines_.end(), row,
                                      [](std::size_t r, const RowLine& known) { return r < known.row; });
  if (after == row_lines_.begin()) return layout_.data_line + row;
  return (after - 1)->line + (row - (after - 1)->row);
}

void TableMerge::add_missing(std::size_t c, const RowBlock& block) {
  MergedColumn& column = columns_[c];
  if (block.missing[c] > 0 && column.missing == 0) {
    const auto first = std::find_if(block.columns[c].begin(), block.columns[c].end(),
                                    [](double value) { return std::isnan(value); });
    column.missing_line = line_of(rows_ + static_cast<std::size_t>(first - block.columns[c].begin()));
  }
  column.missing += block.missing[c];
  if (column.missing_word.empty()) column.missing_word = block.missing_word[c];
}

std::optional<Error> TableMerge::add_stamps(std::vector<double>& stamps) {
  const TableColumn& column = layout_.columns[*layout_.time_column];
  for (std::size_t i = 0; i < stamps.size(); ++i) {
    if (std::isnan(stamps[i])) {
      if (rows_without_time++ == 0) without_time_line = line_of(rows_ + i);
      continue;
    }
    stamps[i] += carried_;
    // The clock passes midnight, or a clock without hours the full hour (how many hours is not known).
    const double turn = layout_.clock_has_hours ? 86400.0 : 3600.0;
    if (column.kind == ColumnKind::clock && !layout_.clock_has_days && last_stamp_ &&
        stamps[i] < *last_stamp_ - 0.5 * turn) {
      if (!layout_.clock_has_hours)
        return error(ErrorCode::ambiguous, line_of(rows_ + i),
                     "the clock of the column '" + column.source_as_written +
                         "' passes the full hour but shows no hours, so that whole hours may be missing here",
                     "export the time with hours, or as seconds; to read the rows as evenly spaced, set "
                     "recording.csv.time_column to \"\" and recording.csv.rate_hz");
      carried_ += turn;
      stamps[i] += turn;
      ++midnights;
    }
    if (last_stamp_ && stamps[i] < *last_stamp_)
      return error(ErrorCode::bad_value, line_of(rows_ + i),
                   "time goes back from " + number_text(*last_stamp_) + " to " + number_text(stamps[i]),
                   "cut the file here into two recordings, or correct the clock in the column '" +
                       column.source_as_written + "'");
    last_stamp_ = stamps[i];
  }
  stamps_->add(std::as_bytes(std::span(stamps)));
  return std::nullopt;
}

std::optional<Error> TableMerge::add_texts(std::vector<RowText>& texts) {
  for (RowText& text : texts) {
    if (text.column && text.state_unknown && last_text_[*text.column] == text.text) continue;
    if (text.column && layout_.columns[*text.column].kind != ColumnKind::text) {
      MergedColumn& column = columns_[*text.column];
      if (column.texts++ == 0) {
        column.text_line = line_ + text.line;
        column.first_text = text.text;
      }
    }
    if (texts_.size() == settings_.limits.annotations)
      return error(
          ErrorCode::over_limit, line_ + text.line,
          "more than " + std::to_string(settings_.limits.annotations) + " texts stand among the numbers",
          "check that the delimiter and the decimal mark are right, or leave the column of texts out");
    if (text.time) *text.time += carried_;
    texts_.push_back({rows_ + text.row, line_ + text.line, text.column, text.time, std::move(text.text)});
  }
  return std::nullopt;
}

std::optional<Error> TableMerge::add_columns(RowBlock& block) {
  if (layout_.time_column) {
    if (auto fault = add_stamps(block.columns[*layout_.time_column])) return fault;
  }
  // Every column has its own store: side by side.
  parallel_for(columns_.size(), settings_.threads, [&](std::size_t c) {
    if (!columns_[c].values) return;
    add_missing(c, block);
    columns_[c].values->add(rows_, block.columns[c], block.missing[c]);
  });
  for (std::size_t c = 0; c < columns_.size(); ++c) {
    if (columns_[c].values && columns_[c].values->over_limit())
      return error(ErrorCode::over_limit, line_,
                   "column '" + layout_.columns[c].source + "' has more than " +
                       std::to_string(settings_.limits.runs) + " gaps",
                   "leave the column out");
    if (block.last_text[c]) last_text_[c] = std::move(block.last_text[c]);
  }
  return std::nullopt;
}

std::optional<Error> TableMerge::add(RowBlock block) {
  const bool first_known = !block.row_lines.empty() && block.row_lines.front().row == 0;
  if (block.rows > 0 && !first_known && line_of(rows_) != line_) row_lines_.push_back({rows_, line_});
  for (const RowLine& known : block.row_lines)
    row_lines_.push_back({rows_ + known.row, line_ + known.line});
  if (block.error) {
    Error fault = *std::move(block.error);
    fault.file = path_;
    fault.place.line = line_ + fault.place.line.value_or(0);
    return fault;
  }
  for (const UnevenRow& row : block.uneven)
    uneven.push_back({line_ + row.line, row.cells});
  uneven_rows += block.uneven_rows;
  if (uneven_rows > settings_.limits.uneven_rows)
    return error(ErrorCode::damaged, uneven.front().line,
                 "more than " + std::to_string(settings_.limits.uneven_rows) +
                     " rows have too few or too many cells; "
                     "the first one has " +
                     std::to_string(uneven.front().cells) + ", expected " +
                     std::to_string(layout_.columns.size()),
                 "check the delimiter, or export again");
  if (auto fault = add_texts(block.texts)) return fault;
  if (auto fault = add_columns(block)) return fault;
  repeated_headings += block.repeated_headings;
  if (block.dropped_line) dropped_line = line_ + *block.dropped_line;
  unterminated = unterminated || block.unterminated;
  rows_ += block.rows;
  line_ += block.lines;
  return std::nullopt;
}

std::shared_ptr<const recording::Block> TableMerge::take_stamps() {
  if (!stamps_) return nullptr;
  auto block = stamps_->finish();
  folder_.drop(kStampsFile);
  return block;
}

} // namespace chronodrome::intake
