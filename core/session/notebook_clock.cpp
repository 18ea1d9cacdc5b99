// Chronodrome, GPL-3.0-or-later.
#include "session/notebook_clock.h"

#include <cmath>
#include <vector>

#include "base/number_text.h"
#include "intake/clock_time.h"

namespace chronodrome::session {
namespace {

constexpr double kDay = 86400.0;
constexpr double kEarlier = 3600.0; // seconds before the start that still belong to the same day

/// Seconds of the day, or nothing.
std::optional<double> clock_seconds(const std::string& text) {
  std::vector<double> parts;
  std::string_view rest = trimmed(text);
  while (true) {
    const auto colon = rest.find(':');
    const std::string_view part = rest.substr(0, colon);
    const auto number = parse_number(part, part.find(',') != std::string_view::npos ? ',' : '.');
    if (part.empty() || !number || *number < 0.0 || part.front() == '+') return std::nullopt;
    parts.push_back(*number);
    if (colon == std::string_view::npos) break;
    rest = rest.substr(colon + 1);
  }
  if (parts.size() < 2 || parts.size() > 3) return std::nullopt;
  for (std::size_t i = 0; i + 1 < parts.size() || i < 2; ++i) {
    if (parts[i] != std::floor(parts[i])) return std::nullopt; // only seconds have fractions
  }
  const double second = parts.size() == 3 ? parts[2] : 0.0;
  if (parts[0] >= 24.0 || parts[1] >= 60.0 || second >= 60.0) return std::nullopt;
  return 3600.0 * parts[0] + 60.0 * parts[1] + second;
}

} // namespace

std::optional<Seconds> time_of_clock(const std::string& clock_start, const std::string& text) {
  const auto start = intake::parse_clock_time(clock_start);
  const auto clock = clock_seconds(text);
  if (!start || !clock) return std::nullopt;
  double after = *clock - start->second;
  if (after < -kEarlier) after += kDay;
  return Seconds(after);
}

std::optional<std::string> clock_at(const std::string& clock_start, Seconds time) {
  const auto start = intake::parse_clock_time(clock_start);
  if (!start) return std::nullopt;
  const double tenths = std::round(10.0 * intake::later_by(*start, time.value()).second);
  const auto whole = static_cast<long>(std::fmod(tenths, 10.0 * kDay));
  const auto two = [](long value) { return (value < 10 ? "0" : "") + std::to_string(value); };
  const long seconds = whole / 10;
  std::string text = two(seconds / 3600) + ":" + two(seconds / 60 % 60) + ":" + two(seconds % 60);
  if (whole % 10 != 0) text += "." + std::to_string(whole % 10);
  return text;
}

} // namespace chronodrome::session
