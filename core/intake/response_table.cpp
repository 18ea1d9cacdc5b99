// Chronodrome, GPL-3.0-or-later.
#include "intake/response_table.h"

#include <array>
#include <limits>
#include <map>
#include <optional>
#include <tuple>

#include "base/number_text.h"
#include "intake/csv_cells.h"
#include "intake/text_file.h"

namespace chronodrome::intake {
namespace {

constexpr std::size_t kLimit = std::size_t{64} << 20U;
constexpr double kDoubtful = 0.1; // mol/L: no drug is given at that, so the column may be in another unit

constexpr std::size_t kMostRowWarnings = 20;

enum Column { kConcentration, kResponse, kWeight, kCurve, kAntagonist, kPreparation, kColumns };
constexpr std::array<std::string_view, kColumns> kNames{
    "concentration_mol_per_l", "response", "weight", "curve", "antagonist_mol_per_l", "preparation"};

bool is_no_response(std::string_view cell) {
  const std::string word = lower_case(trimmed(cell));
  return word.empty() || word == "nan" || word == "na";
}

class TableParser {
public:
  TableParser(std::string_view text, const std::string& name)
      : text_(without_byte_order_mark(text)), name_(name) {}

  Result<ResponseTable> parse() {
    if (const std::size_t bad = first_not_utf8(text_); bad != std::string_view::npos) {
      return Error{ErrorCode::wrong_format, name_, Place::at_byte(bad), "the file is not UTF-8 text",
                   "save the table as CSV in UTF-8"};
    }
    while (!error_ && read_record_here()) {
      if (is_blank()) continue;
      if (header_line_ == 0) {
        take_header();
      } else {
        take_row();
      }
    }
    if (error_) return *error_;
    if (header_line_ == 0 || rows_ == 0) {
      return Error{ErrorCode::not_enough_data, name_, Place::at_line(line_ > 0 ? line_ : 1),
                   header_line_ == 0 ? "the table is empty" : "the table has a header but no rows",
                   "give a header with concentration_mol_per_l,response and a row for each concentration"};
    }
    warn_of_more_dropped();
    warn_of_doubtful_unit();
    return std::move(table_);
  }

private:
  bool read_record_here() {
    if (at_ >= text_.size()) return false;
    line_ = next_line_;
    const RecordRead record = read_record(text_, at_, ',', true, cells_);
    if (record.end == RecordEnd::open_quote) {
      fail(ErrorCode::damaged, std::nullopt, "a quote is opened and never closed", "close the quote");
      return false;
    }
    if (record.next <= at_) return false;
    at_ = record.next;
    next_line_ += record.lines > 0 ? record.lines : 1;
    return true;
  }

  [[nodiscard]] bool is_blank() const {
    for (const Cell& cell : cells_) {
      if (cell.quoted || !cell.text.empty()) return false;
    }
    return true;
  }

  void fail(ErrorCode code, std::optional<std::size_t> column, std::string what, std::string remedy) {
    const Place place = column ? Place::at(line_, *column) : Place::at_line(line_);
    if (!error_) error_ = Error{code, name_, place, std::move(what), std::move(remedy)};
  }

  void warn(std::size_t line, std::optional<std::size_t> column, std::string what, std::string remedy) {
    const Place place = column ? Place::at(line, *column) : Place::at_line(line);
    table_.warnings.push_back({name_, place, std::move(what), std::move(remedy)});
  }

  void take_header() {
    header_line_ = line_;
    header_cells_ = cells_.size();
    for (std::size_t c = 0; c < cells_.size(); ++c) {
      const std::string word = lower_case(trimmed(text_of(cells_[c])));
      bool known = false;
      for (std::size_t k = 0; k < kColumns; ++k) {
        if (word != kNames[k]) continue;
        known = true;
        if (place_[k]) {
          fail(ErrorCode::wrong_format, c + 1, "the column " + word + " stands twice", "remove one of them");
        }
        place_[k] = c;
      }
      if (!known && !word.empty()) {
        warn(line_, c + 1, "the column " + shown(text_of(cells_[c])) + " is not known and is not used",
             "known are concentration_mol_per_l, response, weight, curve, antagonist_mol_per_l, preparation");
      }
    }
    for (const Column needed : {kConcentration, kResponse}) {
      if (place_[needed]) continue;
      fail(ErrorCode::wrong_format, std::nullopt,
           "the header has no column " + std::string(kNames[needed]) + "; it begins with " +
               shown(cells_.empty() ? std::string() : text_of(cells_.front())),
           "name the columns concentration_mol_per_l,response in the first row, separated by commas");
    }
    table_.has_weights = place_[kWeight].has_value();
    table_.has_antagonist = place_[kAntagonist].has_value();
  }

  /// The text of the column in this row; empty without that column.
  [[nodiscard]] std::string cell(Column column) const {
    return place_[column] && *place_[column] < cells_.size() ? text_of(cells_[*place_[column]]) : "";
  }

  /// The number of the column; `otherwise` where it is empty; an error if it is no number, or below `least`.
  double number(Column column, std::optional<double> otherwise, double least, bool least_allowed) {
    const std::string text = cell(column);
    const std::string name(kNames[column]);
    if (otherwise && trimmed(text).empty()) return *otherwise;
    const std::size_t place = place_[column].value_or(0) + 1;
    const std::optional<double> value = parse_number(text);
    if (!value) {
      fail(ErrorCode::bad_value, place, name + " is " + shown(text) + ", expected a number",
           "write the number with a point as decimal mark, for example 3e-7");
      return 0.0;
    }
    if (*value < least || (*value == least && !least_allowed)) {
      fail(ErrorCode::bad_value, place,
           name + " is " + shown(text) + ", expected a number " +
               (least_allowed ? "of 0 or more" : "above 0"),
           column == kConcentration ? "give the concentration itself in mol/L, not its logarithm"
                                    : "correct the value");
    }
    return *value;
  }

  int curve_number() {
    const std::string text = cell(kCurve);
    if (trimmed(text).empty()) return 1;
    const auto value = parse_integer(text);
    if (!value || *value < 0 || *value > std::numeric_limits<int>::max()) {
      fail(ErrorCode::bad_value, *place_[kCurve] + 1,
           "curve is " + shown(text) + ", expected a whole number of 0 or more", "number the curves from 1");
      return 0;
    }
    return static_cast<int>(*value);
  }

  void take_row() {
    if (cells_.size() != header_cells_) {
      return fail(ErrorCode::bad_value, std::nullopt,
                  "the row has " + std::to_string(cells_.size()) + " cells, the header has " +
                      std::to_string(header_cells_),
                  "give each row as many cells as the header; decimal commas are not allowed");
    }
    ++rows_;
    const double concentration = number(kConcentration, std::nullopt, 0.0, true);
    const double antagonist = number(kAntagonist, 0.0, 0.0, true);
    const double weight = number(kWeight, 1.0, 0.0, false);
    const int curve = curve_number();
    if (error_) return;
    TableCurve& into = curve_for(cell(kPreparation), curve, antagonist);
    if (concentration > kDoubtful || antagonist > kDoubtful) {
      ++doubtful_;
      if (doubtful_ == 1) first_doubtful_line_ = line_;
    }
    if (is_no_response(cell(kResponse))) {
      ++into.dropped;
      ++table_.dropped;
      if (table_.dropped <= kMostRowWarnings) {
        warn(line_, *place_[kResponse] + 1, "the row has no response and is left out",
             "fill it in if it was measured");
      }
      return;
    }
    const double response = number(kResponse, std::nullopt, -std::numeric_limits<double>::infinity(), true);
    if (!error_) into.points.push_back({Molar(concentration), response, weight});
  }

  TableCurve& curve_for(const std::string& preparation, int curve, double antagonist) {
    const std::string label(trimmed(preparation));
    const auto [place, is_new] = index_.try_emplace({label, curve, antagonist}, table_.curves.size());
    if (is_new) {
      TableCurve fresh;
      fresh.preparation = label;
      fresh.curve = curve;
      fresh.antagonist = Molar(antagonist);
      table_.curves.push_back(fresh);
    }
    return table_.curves[place->second];
  }

  void warn_of_more_dropped() {
    if (table_.dropped <= kMostRowWarnings) return;
    warn(header_line_, *place_[kResponse] + 1,
         std::to_string(table_.dropped) + " rows have no response and are left out; the first " +
             std::to_string(kMostRowWarnings) + " are listed",
         "fill them in if they were measured");
  }

  void warn_of_doubtful_unit() {
    if (doubtful_ == 0) return;
    warn(first_doubtful_line_, std::nullopt,
         std::to_string(doubtful_) + (doubtful_ == 1 ? " row has" : " rows have") +
             " a concentration above 0.1 mol/L, the first of them here",
         "check that the column is in mol/L");
  }

  std::string_view text_;
  const std::string& name_;
  std::size_t at_ = 0, line_ = 0, next_line_ = 1, header_line_ = 0, header_cells_ = 0, rows_ = 0;
  std::size_t doubtful_ = 0, first_doubtful_line_ = 0;
  std::array<std::optional<std::size_t>, kColumns> place_;
  std::map<std::tuple<std::string, int, double>, std::size_t> index_; // of the curves
  std::vector<Cell> cells_;
  std::optional<Error> error_;
  ResponseTable table_;
};

} // namespace

Result<ResponseTable> parse_response_table(std::string_view text, const std::string& name) {
  return TableParser(text, name).parse();
}

Result<ResponseTable> read_response_table(const std::string& path) {
  Result<std::string> text = read_text_file(path, kLimit);
  if (!text) return text.error();
  return parse_response_table(*text, path);
}

} // namespace chronodrome::intake
