// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <memory>
#include <optional>
#include <string>
#include <vector>

#include "base/result.h"
#include "intake/csv_columns.h"
#include "intake/csv_layout.h"
#include "intake/csv_rows.h"
#include "recording/store_folder.h"

namespace chronodrome::intake {

/// What became of one column.
struct MergedColumn {
  std::unique_ptr<ColumnCollector> values; ///< none for the time column and for columns without numbers
  std::size_t missing = 0;
  std::size_t missing_line = 0; ///< of the first one
  std::string missing_word;
  std::size_t texts = 0;
  std::size_t text_line = 0;
  std::string first_text;
};

/// A text at a row, or at a time of its own.
struct MergedText {
  std::size_t row = 0;
  std::size_t line = 0;
  std::optional<std::size_t> column;
  std::optional<double> time; ///< in the unit of the time column
  std::string text;
};

/// Blocks of rows, joined in their order. Lines count from 1 in the file.
class TableMerge {
public:
  TableMerge(const TableLayout& layout, const ReadSettings& settings, const std::string& path,
             recording::StoreFolder& folder);

  /// Errors: bad_value (time goes back), ambiguous (a clock without hours passes the full hour), over_limit,
  /// and what the block met.
  std::optional<Error> add(RowBlock block);

  [[nodiscard]] std::size_t rows() const { return rows_; }
  [[nodiscard]] std::size_t next_line() const { return line_; }
  [[nodiscard]] std::size_t line_of(std::size_t row) const;
  [[nodiscard]] std::vector<MergedColumn>& columns() { return columns_; }
  [[nodiscard]] const std::vector<MergedText>& texts() const { return texts_; }
  /// Time stamps as they stand in the file, NaN where a row has none. Call once, after the last block.
  std::shared_ptr<const recording::Block> take_stamps();

  std::size_t uneven_rows = 0;
  std::vector<UnevenRow> uneven;
  std::size_t repeated_headings = 0;
  std::size_t midnights = 0;
  std::size_t rows_without_time = 0;
  std::size_t without_time_line = 0; ///< of the first one
  std::optional<std::size_t> dropped_line;
  bool unterminated = false;

private:
  std::optional<Error> add_stamps(std::vector<double>& stamps);
  std::optional<Error> add_columns(RowBlock& block);
  std::optional<Error> add_texts(std::vector<RowText>& texts);
  void add_missing(std::size_t column, const RowBlock& block);
  [[nodiscard]] Error error(ErrorCode code, std::size_t line, const std::string& what,
                            const std::string& remedy) const;

  const TableLayout& layout_;
  const ReadSettings& settings_;
  const std::string& path_;
  recording::StoreFolder& folder_;
  std::vector<MergedColumn> columns_;
  std::vector<MergedText> texts_;
  std::vector<std::optional<std::string>> last_text_;
  std::vector<RowLine> row_lines_;
  std::unique_ptr<recording::BlockWriter> stamps_;
  std::optional<double> last_stamp_;
  double carried_ = 0.0; ///< midnights passed, in seconds
  std::size_t rows_ = 0;
  std::size_t line_;
};

} // namespace chronodrome::intake
