// Chronodrome, GPL-3.0-or-later.
#include <algorithm>
#include <cmath>
#include <map>

#include "base/number_text.h"
#include "intake/recording_writer.h"
#include "intake/written_file.h"

namespace chronodrome::intake {
namespace {

Error usage(const std::string& path, const std::string& what, const std::string& remedy) {
  return {ErrorCode::bad_usage, path, {}, what, remedy};
}

std::optional<Error> fault_in(const std::string& path, const WrittenRecording& recording,
                              const CsvLayout& layout) {
  if (layout.delimiter == layout.decimal)
    return usage(path, "the delimiter is also the decimal mark", "choose a semicolon or a tab as delimiter");
  if (recording.signals.empty())
    return usage(path, "there is no signal to write", "give at least one signal");
  for (const WrittenSignal& signal : recording.signals) {
    if (signal.rate != recording.signals.front().rate ||
        signal.samples.size() != recording.signals.front().samples.size())
      return usage(path, "the signals differ in rate or length", "write EDF, or one table for each rate");
    if (!std::all_of(signal.samples.begin(), signal.samples.end(), [](double v) { return std::isfinite(v); }))
      return usage(path, "signal " + signal.label + " holds a value that is not a number",
                   "leave the stretch out instead");
  }
  return std::nullopt;
}

/// A text cell, quoted where the reader would otherwise split it.
std::string cell_of(const std::string& text, char delimiter) {
  if (text.find_first_of(std::string("\"\n\r") + delimiter) == std::string::npos) return text;
  std::string quoted = "\"";
  for (const char c : text) {
    if (c == '"') quoted += '"';
    quoted += c;
  }
  return quoted + "\"";
}

void add_number(std::string& row, double value, int decimals, char decimal) {
  const std::size_t before = row.size();
  row += fixed_text(value, decimals);
  if (decimal == '.') return;
  const auto point = row.find('.', before);
  if (point != std::string::npos) row[point] = decimal;
}

std::string heading(const WrittenRecording& recording, const CsvLayout& layout) {
  std::string names, units;
  const auto add = [&](const std::string& name, const std::string& unit) {
    if (!names.empty()) names += layout.delimiter;
    if (!units.empty()) units += layout.delimiter;
    const bool bracketed = !layout.units_row && !unit.empty();
    names += cell_of(bracketed ? name + " (" + unit + ")" : name, layout.delimiter);
    units += unit.empty() ? "-" : unit;
  };
  if (layout.time_column) add(*layout.time_column, "s");
  for (const WrittenSignal& signal : recording.signals)
    add(signal.label, signal.unit);
  if (layout.comment_column) add(*layout.comment_column, "");
  std::string text;
  for (const std::string& line : layout.header_lines)
    text += line + "\n";
  text += names + "\n";
  if (layout.units_row) text += units + "\n";
  return text;
}

/// Comments by row: the annotation goes to the sample nearest to its onset, at the edge if it lies outside.
std::map<std::size_t, std::string> comments_of(const WrittenRecording& recording, std::size_t rows) {
  std::map<std::size_t, std::string> comments;
  if (rows == 0) return comments;
  for (const WrittenAnnotation& annotation : recording.annotations) {
    const double at = std::round(annotation.onset.value() * recording.signals.front().rate.value());
    const double last = static_cast<double>(rows - 1);
    std::string& text = comments[static_cast<std::size_t>(std::clamp(at, 0.0, last))];
    text += (text.empty() ? "" : "; ") + annotation.text;
  }
  return comments;
}

} // namespace

Done write_csv(const std::string& path, const WrittenRecording& recording, const CsvLayout& layout) {
  if (auto fault = fault_in(path, recording, layout)) return *std::move(fault);
  const std::size_t rows = recording.signals.front().samples.size();
  const double rate = recording.signals.front().rate.value();
  const auto comments =
      layout.comment_column ? comments_of(recording, rows) : std::map<std::size_t, std::string>{};
  WrittenFile file(path);
  file.add(heading(recording, layout));
  std::string text, pending;
  for (std::size_t i = 0; i < rows; ++i) {
    const double time = static_cast<double>(i) / rate;
    const auto comment = comments.find(i);
    if (comment != comments.end()) pending += (pending.empty() ? "" : "; ") + comment->second;
    const bool left_out =
        std::any_of(recording.left_out.begin(), recording.left_out.end(), [&](const recording::Span& span) {
          return time >= span.start.value() && time < span.end.value();
        });
    if (left_out) continue; // its comment goes to the next row that is written
    const std::size_t row_start = text.size();
    if (layout.time_column) add_number(text, time, layout.time_decimals, layout.decimal);
    for (const WrittenSignal& signal : recording.signals) {
      if (text.size() > row_start) text += layout.delimiter;
      add_number(text, signal.samples[i], layout.value_decimals, layout.decimal);
    }
    if (layout.comment_column) {
      text += layout.delimiter + cell_of(pending, layout.delimiter);
      pending.clear();
    }
    text += '\n';
    if (text.size() > (1U << 20U)) {
      file.add(text);
      text.clear();
    }
  }
  file.add(text);
  return file.finish();
}

} // namespace chronodrome::intake
