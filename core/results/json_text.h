// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <cstddef>
#include <optional>
#include <string>
#include <string_view>
#include <vector>

namespace chronodrome::results {

/// Writes JSON in the order in which it is given, two blanks a level, numbers with at most twelve significant
/// digits and the same digits on every machine. A number that is not finite cannot be written: it becomes
/// null.
class JsonText {
public:
  JsonText& open_object(std::string_view key = {});
  JsonText& close_object() { return close('}'); }
  JsonText& open_list(std::string_view key = {});
  JsonText& close_list() { return close(']'); }

  JsonText& text(std::string_view key, std::string_view value);
  JsonText& number(std::string_view key, double value);
  JsonText& number(std::string_view key, std::optional<double> value);
  JsonText& count(std::string_view key, std::size_t value);
  JsonText& truth(std::string_view key, bool value);
  JsonText& null(std::string_view key);
  /// As text(), inside a list.
  JsonText& item(std::string_view value);

  [[nodiscard]] std::string take();

private:
  JsonText& begin(std::string_view key);
  JsonText& close(char bracket);
  void new_line();

  std::string text_;
  std::vector<bool> has_items_; // one a level
};

/// The text with JSON's escapes, in quotes. Bytes that are not UTF-8 are replaced.
std::string json_quoted(std::string_view text);

} // namespace chronodrome::results
