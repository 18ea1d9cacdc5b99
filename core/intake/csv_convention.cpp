// Chronodrome, GPL-3.0-or-later.
#include <array>
#include <cmath>

#include "base/number_text.h"
#include "intake/csv_content.h"

namespace chronodrome::intake {
namespace {

// A step of at most 10 ms is taken for seconds where no unit is stated: in milliseconds it would mean more
// than 100 kHz, faster than hearts are recorded. Larger steps may be either.
constexpr double kSurelySeconds = 0.01;
constexpr double kFastest = 1e6; // Hz; a rate beyond it is no rate
constexpr double kTooSlow =
    2.0; // Hz; "seconds" that rise by 0.5 or more a row are suspected to be milliseconds
constexpr double kAgrees = 0.02; // a rate that is set or stated picks the unit that comes so near

struct Unit {
  const char* name;
  double seconds;
};
constexpr std::array<Unit, 3> kUnits = {{{"s", 1.0}, {"ms", 1e-3}, {"us", 1e-6}}};

std::optional<Unit> unit_for(double step, double rate) {
  for (const Unit& unit : kUnits) {
    if (std::abs(step * unit.seconds * rate - 1.0) < kAgrees) return unit;
  }
  return std::nullopt;
}

std::string rate_text(double hertz) {
  return hertz >= 1000.0 ? number_text(hertz / 1000.0, 6) + " kHz" : number_text(hertz, 6) + " Hz";
}

std::string delimiter_text(char delimiter) {
  switch (delimiter) {
  case ',':
    return "commas";
  case ';':
    return "semicolons";
  case '\t':
    return "tabs";
  case ' ':
    return "blanks";
  default:
    return std::string("'") + delimiter + "'";
  }
}

} // namespace

Result<double> time_unit(const TableLayout& layout, double step, const ReadSettings& settings,
                         const std::string& path, std::vector<Warning>& warnings) {
  const TableColumn& column = layout.columns[*layout.time_column];
  const Place place = Place::at(layout.data_line, *layout.time_column + 1);
  const std::string both = "rises by " + number_text(step, 6) + " a row: " + rate_text(1.0 / step) +
                           " if it is in seconds, " + rate_text(1000.0 / step) + " if in milliseconds";
  if (layout.time_unit) {
    const bool suspected =
        *layout.time_unit == 1.0 && column.kind != ColumnKind::clock && 1.0 / step <= kTooSlow;
    if (!suspected) return *layout.time_unit;
    if (settings.rate) {
      if (const auto unit = unit_for(step, settings.rate->value())) return unit->seconds;
    }
    return Error{ErrorCode::ambiguous, path, place,
                 "the time column '" + column.source + "' says seconds but " + both,
                 "set recording.csv.rate_hz"};
  }
  const bool set = settings.rate.has_value();
  const auto known = set ? std::optional(settings.rate->value()) : layout.stated_rate;
  if (known) {
    if (const auto unit = unit_for(step, *known)) {
      warnings.push_back({path, place,
                          "the time column '" + column.source + "' has no unit; " + unit->name +
                              " agrees with the rate of " + rate_text(*known) +
                              (set ? " that is set" : " that the header states"),
                          "name the unit in the heading"});
      return unit->seconds;
    }
    if (set)
      return Error{
          ErrorCode::bad_value, path, place,
          "the column '" + column.source + "' rises by " + number_text(step, 6) + " a row, which is no " +
              rate_text(*known) + " in s, ms or us",
          "correct recording.csv.rate_hz, or set recording.csv.time_column to \"\" if it holds no times"};
  }
  if (step <= kSurelySeconds && 1.0 / step <= kFastest) {
    warnings.push_back({path, place,
                        "the time column '" + column.source + "' has no unit; read as seconds, which makes " +
                            rate_text(1.0 / step),
                        "name the unit in the heading, or set recording.csv.rate_hz"});
    return 1.0;
  }
  return Error{
      ErrorCode::ambiguous, path, place, "the time column '" + column.source + "' has no unit and " + both,
      "set recording.csv.rate_hz, or name the unit in the heading; if the column holds no times, set "
      "recording.csv.time_column to \"\" too"};
}

std::string convention_of(const TableLayout& layout, Encoding encoding, double unit) {
  std::string text = name_of(encoding) + " text; columns divided by " +
                     delimiter_text(layout.dialect.delimiter) + "; decimal " +
                     (layout.dialect.decimal == ',' ? "comma" : "point") +
                     (layout.dialect.grouped ? "; thousands marks" : "");
  if (!layout.time_column) return text + "; no time column";
  const TableColumn& column = layout.columns[*layout.time_column];
  text += "; times from column '" + column.source + "'";
  if (column.kind == ColumnKind::clock)
    return text + (layout.clock_has_hours ? " as time of day" : " as minutes and seconds");
  for (const Unit& known : kUnits) {
    if (known.seconds == unit) return text + " in " + known.name;
  }
  return text + " in units of " + number_text(unit) + " s";
}

} // namespace chronodrome::intake
