// Chronodrome, GPL-3.0-or-later.
#include "intake/csv_content.h"

#include <algorithm>
#include <cmath>

#include "base/number_text.h"
#include "intake/csv_time.h"

namespace chronodrome::intake {
namespace {

constexpr std::size_t kListed = 20; // gaps that get a warning each
constexpr double kRatesDiffer = 1e-4;

std::string ms_text(double seconds) {
  return number_text(seconds * 1000.0, 4) + " ms";
}

std::string plural(std::size_t count, const char* one, const char* many) {
  return std::to_string(count) + " " + (count == 1 ? one : many);
}

class ContentMaker {
public:
  ContentMaker(const TableLayout& layout, Encoding encoding, TableMerge& merge, const ReadSettings& settings,
               const std::string& path)
      : layout_(layout), encoding_(encoding), merge_(merge), settings_(settings), path_(path) {}

  Result<ReadContent> make() {
    recording_.warnings = layout_.warnings;
    recording_.file_notes = layout_.notes;
    if (merge_.rows() == 0)
      return Error{ErrorCode::not_enough_data, path_, Place::at_line(layout_.data_line),
                   "no rows of data were found", "check that the export was finished"};
    if (auto fault = find_times()) return *std::move(fault);
    if (auto fault = make_signals()) return *std::move(fault);
    place_texts();
    warn_about_rows();
    recording_.convention = convention_of(layout_, encoding_, unit_);
    recording_.clock_start = clock_start();
    recording_.file_time_of_zero = Seconds(axis_.zero);
    return std::move(content_);
  }

private:
  void warn(std::size_t line, const std::string& what, const std::string& remedy) {
    recording_.warnings.push_back({path_, Place::at_line(line), what, remedy});
  }

  std::optional<Error> find_times() {
    const auto block = merge_.take_stamps();
    std::optional<StepFound> found;
    std::span<const double> stamps;
    if (block) {
      stamps = block->doubles();
      std::optional<double> printed;
      if (layout_.time_decimals) printed = std::pow(10.0, -*layout_.time_decimals);
      found = find_step(stamps, printed);
    }
    if (found) {
      auto unit = time_unit(layout_, found->step, settings_, path_, recording_.warnings);
      if (!unit && !layout_.time_column_told && settings_.rate) {
        recording_.file_notes.push_back("column '" + layout_.columns[*layout_.time_column].source +
                                        "' counts the rows and is not read");
      } else if (!unit) {
        return unit.error();
      } else {
        unit_ = *unit;
        auto axis = find_axis(stamps, *found, unit_, settings_.rate, path_);
        if (!axis) return axis.error();
        axis_ = *std::move(axis);
        return judge_axis(found->step * unit_);
      }
    }
    if (settings_.rate) {
      axis_ = plain_axis(merge_.rows(), *settings_.rate);
      return std::nullopt;
    }
    std::string what = "the table has no time column";
    if (block) what = "the time column does not rise, so that it gives no rate";
    if (layout_.stated_rate) what += "; a header line states " + number_text(*layout_.stated_rate) + " Hz";
    return Error{ErrorCode::not_enough_data, path_, Place::at_line(layout_.data_line), what,
                 "set recording.csv.rate_hz to the sampling rate"};
  }

  std::optional<Error> judge_axis(double step) {
    const double rate = axis_.rate.value();
    if (axis_.runs.size() > settings_.limits.runs)
      return Error{ErrorCode::over_limit, path_, Place::at_line(layout_.data_line),
                   "the times have more than " + std::to_string(settings_.limits.runs) + " gaps",
                   "check the time column, or set recording.csv.time_column"};
    if (settings_.rate) {
      compare_rates(settings_.rate->value(), axis_.measured ? axis_.measured->value() : 1.0 / step,
                    "the rate that is set");
    } else if (axis_.residual_max > axis_.quantum + 1.0 / rate) {
      return Error{
          ErrorCode::bad_value, path_, Place::at_line(merge_.line_of(axis_.worst_row)),
          "the times follow no constant rate: here they are " + ms_text(axis_.residual_max) +
              " off an even " + number_text(rate, 8) + " Hz",
          "export at one constant rate; to read the rows as evenly spaced, set recording.csv.time_column to "
          "\"\" and recording.csv.rate_hz"};
    } else if (layout_.stated_rate) {
      compare_rates(*layout_.stated_rate, rate, "the header");
    }
    if (axis_.quantum > 0.0)
      warn(layout_.data_line,
           (axis_.residual_max <= 1.01 * axis_.quantum
                ? "the time stamps are rounded to " + ms_text(axis_.quantum)
                : std::string("the time stamps are uneven")) +
               "; times are rebuilt from the count of rows at " + number_text(rate, 8) +
               " Hz (stamps differ by " + ms_text(axis_.residual_max) + " at most, SD " +
               ms_text(axis_.residual_sd) + ")",
           "export more digits of the time if you can");
    warn_about_gaps();
    if (merge_.midnights > 0)
      recording_.file_notes.push_back("the clock passes " + plural(merge_.midnights, "turn", "turns") +
                                      " of the day");
    if (merge_.rows_without_time > 0)
      warn(merge_.without_time_line,
           plural(merge_.rows_without_time, "row has", "rows have") +
               " no time; placed by the rows around them",
           "check the time column");
    return std::nullopt;
  }

  void compare_rates(double stated, double measured, const std::string& who) {
    const double ratio = stated / measured - 1.0;
    if (std::abs(ratio) < kRatesDiffer) return;
    warn(layout_.data_line,
         who + " says " + number_text(stated, 8) + " Hz, the time column " + number_text(measured, 8) +
             " Hz: " + number_text(100.0 * ratio, 3) + " %, " + ms_text(std::abs(ratio) * 3600.0) +
             " an hour",
         "set recording.csv.rate_hz to the one that is right");
  }

  void warn_about_gaps() {
    double missing = 0.0;
    for (std::size_t k = 1; k < axis_.runs.size(); ++k) {
      const AxisRun& before = axis_.runs[k - 1];
      const double end = before.start + static_cast<double>(before.count) / axis_.rate.value();
      const double gap = axis_.runs[k].start - end;
      missing += gap;
      if (k <= kListed)
        warn(merge_.line_of(axis_.runs[k].row),
             "a gap of " + number_text(gap, 6) + " s before " + number_text(axis_.runs[k].start, 9) + " s",
             "no interval is measured across it");
    }
    if (axis_.runs.size() > kListed + 1)
      warn(layout_.data_line,
           plural(axis_.runs.size() - 1, "gap", "gaps") + " in all, " + number_text(missing, 6) +
               " s together",
           "check the recorder");
  }

  std::optional<Error> make_signals() {
    std::string uncalibrated, unitless;
    for (std::size_t c = 0; c < layout_.columns.size(); ++c) {
      MergedColumn& merged = merge_.columns()[c];
      if (!merged.values) continue;
      auto finished = merged.values->finish();
      const recording::SampleSummary summary = merged.values->summary();
      if (summary.count == 0) {
        if (layout_.columns[c].kind == ColumnKind::number)
          warn(merged.missing_line, "column '" + layout_.columns[c].source + "' holds no values",
               "leave it out");
        continue;
      }
      const TableColumn& column = layout_.columns[c];
      recording::Signal signal;
      signal.source = column.source;
      signal.source_as_written = column.source_as_written;
      signal.unit = column.unit;
      if (signal.unit.empty() && summary.all_whole) {
        signal.unit = "counts";
        uncalibrated += (uncalibrated.empty() ? "'" : ", '") + column.source + "'";
      } else if (signal.unit.empty()) {
        unitless += (unitless.empty() ? "'" : ", '") + column.source + "'";
      }
      signal.time_base = merged.values->time_base(axis_);
      signal.samples = finished.samples;
      signal.envelope = finished.envelope;
      signal.resolution = summary.smallest_step;
      warn_about_column(c, merged, summary, signal);
      recording_.duration = std::max(recording_.duration, signal.time_base.end());
      recording_.signals.push_back(std::move(signal));
      content_.kinds.emplace_back();
    }
    if (!uncalibrated.empty())
      warn(layout_.data_line,
           "whole numbers without a unit in " + shortened(uncalibrated, 300) + ": taken as counts",
           "give the unit and the calibration in the session");
    if (!unitless.empty())
      warn(layout_.data_line, "no unit is stated for " + shortened(unitless, 300),
           "give the unit in the session");
    if (recording_.signals.empty())
      return Error{ErrorCode::not_enough_data, path_, Place::at_line(layout_.data_line),
                   "the table holds no column of samples", "export at least one channel"};
    return std::nullopt;
  }

  void warn_about_column(std::size_t c, const MergedColumn& merged, const recording::SampleSummary& summary,
                         const recording::Signal& signal) {
    const std::string name = "column '" + layout_.columns[c].source + "'";
    if (summary.count > 1 && summary.min == summary.max)
      warn(layout_.data_line, name + " is " + number_text(summary.min, 6) + " throughout", "check the lead");
    const bool sparse = signal.time_base.rate() != axis_.rate;
    if (sparse) {
      recording_.file_notes.push_back(name + " has a value in every " +
                                      number_text(axis_.rate / signal.time_base.rate(), 6) +
                                      "th row: " + number_text(signal.time_base.rate().value(), 8) + " Hz");
    } else if (merged.missing > 0) {
      const std::string word = merged.missing_word.empty() ? "empty cell" : "'" + merged.missing_word + "'";
      warn(merged.missing_line,
           plural(merged.missing, "value is", "values are") + " missing in " + name + " (first " + word + ")",
           "they are gaps of that channel");
    }
    if (merged.texts > 0)
      warn(merged.text_line,
           "'" + shortened(merged.first_text, 60) + "' stands among the numbers of " + name +
               (merged.texts > 1 ? " (" + std::to_string(merged.texts) + " such cells)" : ""),
           "the text is kept as an annotation, the value is missing");
  }

  [[nodiscard]] Seconds time_of_row(std::size_t row) const {
    const auto after = std::upper_bound(axis_.runs.begin(), axis_.runs.end(), row,
                                        [](std::size_t r, const AxisRun& run) { return r < run.row; });
    const AxisRun& run = after == axis_.runs.begin() ? axis_.runs.front() : *(after - 1);
    return Seconds(run.start + static_cast<double>(row - run.row) / axis_.rate.value());
  }

  void place_texts() {
    std::size_t lines = 0, first_line = 0;
    std::string first;
    for (const MergedText& text : merge_.texts()) {
      const bool own_line = !text.column.has_value();
      if (own_line && text.row == merge_.rows() && !text.time) {
        recording_.file_notes.push_back(text.text); // below the table
        continue;
      }
      if (own_line && lines++ == 0) {
        first_line = text.line;
        first = text.text;
      }
      const Seconds onset = text.time ? Seconds(*text.time * unit_ - axis_.zero) : time_of_row(text.row);
      recording_.annotations.push_back({onset, std::nullopt, text.text});
    }
    std::stable_sort(recording_.annotations.begin(), recording_.annotations.end(),
                     [](const auto& a, const auto& b) { return a.onset < b.onset; });
    if (lines > 0)
      warn(first_line,
           plural(lines, "line of text stands", "lines of text stand") + " between the rows (first '" +
               first + "')",
           "kept as annotations at their times");
  }

  void warn_about_rows() {
    if (merge_.uneven_rows > 0) {
      std::string where;
      for (std::size_t i = 0; i < std::min<std::size_t>(5, merge_.uneven.size()); ++i)
        where += (where.empty() ? "line " : ", ") + std::to_string(merge_.uneven[i].line) + " (" +
                 std::to_string(merge_.uneven[i].cells) + " cells)";
      warn(merge_.uneven.front().line,
           plural(merge_.uneven_rows, "row has", "rows have") + " too few or too many cells: " + where +
               (merge_.uneven_rows > 5 ? " ..." : "") + "; expected " +
               std::to_string(layout_.columns.size()),
           "missing cells are gaps, further cells are dropped");
    }
    if (merge_.repeated_headings > 0)
      recording_.file_notes.push_back(
          plural(merge_.repeated_headings, "repeated heading", "repeated headings") + " dropped");
    if (merge_.dropped_line)
      warn(*merge_.dropped_line, "the last line is incomplete and was dropped",
           "check that the copy was finished");
    if (merge_.unterminated)
      warn(merge_.next_line(), "the last line has no line end; its last number may be cut",
           "check that the copy was finished");
    for (const std::size_t limit : {std::size_t{1'048'576}, std::size_t{65'536}}) {
      if (merge_.rows() == limit || merge_.next_line() - 1 == limit)
        warn(merge_.next_line() - 1,
             "the table has exactly " + std::to_string(limit) + " rows, where spreadsheet programs cut",
             "check against the length of the experiment");
    }
  }

  [[nodiscard]] std::optional<std::string> clock_start() const {
    if (!layout_.clock_zero) return std::nullopt;
    return clock_text(*layout_.clock_zero);
  }

  const TableLayout& layout_;
  Encoding encoding_;
  TableMerge& merge_;
  const ReadSettings& settings_;
  const std::string& path_;
  double unit_ = 1.0;
  TimeAxis axis_;
  ReadContent content_;
  recording::Recording& recording_ = content_.recording;
};

} // namespace

Result<ReadContent> table_content(const TableLayout& layout, Encoding encoding, TableMerge& merge,
                                  const ReadSettings& settings, const std::string& path) {
  return ContentMaker(layout, encoding, merge, settings, path).make();
}

} // namespace chronodrome::intake
