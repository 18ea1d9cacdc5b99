// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <cstddef>
#include <optional>
#include <string>
#include <string_view>
#include <vector>

namespace chronodrome {

/// How many digits a number gets.
enum class JsonDigits {
  twelve, ///< at most, significant: what every results file holds
  exact   ///< the fewest that read back to the same double
};

/// Writes JSON in the order in which it is given, two blanks a level, with the same digits on every machine.
/// A number that is not finite cannot be written: it becomes null.
class JsonText {
public:
  static constexpr int kAllLevels = 1'000'000;

  /// Members down to level `open_levels` (the outermost object's are level 1) take a line each; deeper ones
  /// follow each other in one line.
  explicit JsonText(JsonDigits digits = JsonDigits::twelve, int open_levels = kAllLevels)
      : digits_(digits), open_levels_(open_levels) {}

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
  /// Inside a list.
  JsonText& item(std::string_view value) { return text({}, value); }
  JsonText& item(double value) { return number({}, value); }

  [[nodiscard]] std::string take();

private:
  JsonText& begin(std::string_view key);
  JsonText& close(char bracket);
  [[nodiscard]] bool is_open() const;
  void new_line();

  JsonDigits digits_;
  int open_levels_;
  std::string text_;
  std::vector<bool> has_items_; // one a level
};

/// The text with JSON's escapes, in quotes. Bytes that are not UTF-8 are replaced.
std::string json_quoted(std::string_view text);

} // namespace chronodrome
