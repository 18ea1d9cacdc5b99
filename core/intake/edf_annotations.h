// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <optional>
#include <string>
#include <string_view>
#include <vector>

namespace chronodrome::intake {

/// One time-stamped annotation list: an onset, and the texts that stand there.
struct EdfAnnotationList {
  double onset = 0.0; ///< seconds since the start time of the header
  std::optional<double> duration;
  bool keeps_time =
      false;        ///< its first text is empty: the onset of its record, if it is the record's first list
  bool odd = false; ///< a sign was missing or a decimal comma stood in its times
  std::vector<std::string> texts; ///< without empty ones, as UTF-8
};

struct EdfAnnotationsRead {
  std::vector<EdfAnnotationList> lists;
  std::vector<std::string> unreadable; ///< lists whose onset or duration is no number, as texts
};

/// The lists of one annotation signal in one record: `+12.5<21>3<20>text<20><0>`, padded with zeros.
/// Source: Kemp & Olivan 2003, section 2.2.
EdfAnnotationsRead read_annotation_lists(std::string_view bytes);

} // namespace chronodrome::intake
