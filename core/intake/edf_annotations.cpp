// Chronodrome, GPL-3.0-or-later.
#include "intake/edf_annotations.h"

#include <algorithm>
#include <cmath>

#include "base/number_text.h"
#include "intake/csv_text.h"

namespace chronodrome::intake {
namespace {

constexpr char kTextEnd = '\x14', kDurationMark = '\x15';

std::string readable(std::string_view bytes) {
  std::string text = as_utf8(trimmed(bytes));
  std::replace_if(
      text.begin(), text.end(), [](char c) { return static_cast<unsigned char>(c) < 32; }, ' ');
  return std::string(trimmed(text));
}

/// Digits and a decimal mark, with a sign if `signed_time`.
std::optional<double> time_of(std::string_view text, bool signed_time, bool& odd) {
  if (text.empty() || text.find_first_not_of("+-0123456789.,") != std::string_view::npos) return std::nullopt;
  const bool has_sign = text.front() == '+' || text.front() == '-';
  const bool has_comma = text.find(',') != std::string_view::npos;
  if (has_sign != signed_time || has_comma) odd = true;
  const auto value = parse_number(text, has_comma ? ',' : '.');
  return value && std::abs(*value) < 1e12 ? value : std::nullopt;
}

std::optional<EdfAnnotationList> read_list(std::string_view bytes) {
  EdfAnnotationList list;
  const auto head_end = bytes.find(kTextEnd);
  std::string_view head = bytes.substr(0, head_end);
  if (const auto mark = head.find(kDurationMark); mark != std::string_view::npos) {
    const std::string_view duration = head.substr(mark + 1);
    if (!duration.empty()) {
      list.duration = time_of(duration, false, list.odd);
      if (!list.duration || *list.duration < 0.0) return std::nullopt;
    }
    head = head.substr(0, mark);
  }
  const auto onset = time_of(head, true, list.odd);
  if (!onset) return std::nullopt;
  list.onset = *onset;
  if (head_end == std::string_view::npos) return list;
  std::string_view rest = bytes.substr(head_end + 1);
  bool first = true;
  while (!rest.empty()) {
    const auto end = rest.find(kTextEnd);
    std::string text = readable(rest.substr(0, end));
    if (first && text.empty()) list.keeps_time = true;
    if (!text.empty()) list.texts.push_back(std::move(text));
    first = false;
    rest = end == std::string_view::npos ? std::string_view() : rest.substr(end + 1);
  }
  return list;
}

} // namespace

EdfAnnotationsRead read_annotation_lists(std::string_view bytes) {
  EdfAnnotationsRead read;
  while (!bytes.empty()) {
    const auto end = bytes.find('\0');
    const std::string_view part = bytes.substr(0, end);
    bytes = end == std::string_view::npos ? std::string_view() : bytes.substr(end + 1);
    if (trimmed(part).empty()) continue;
    auto list = read_list(part);
    if (list) {
      read.lists.push_back(*std::move(list));
    } else {
      read.unreadable.push_back(shortened(readable(part), 80));
    }
  }
  return read;
}

} // namespace chronodrome::intake
