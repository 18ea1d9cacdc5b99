// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <optional>
#include <string>
#include <string_view>

namespace chronodrome::simulation {

/// Builds JSON text member by member; numbers are the shortest that read back to the same value. Members of
/// the outer levels stand on lines of their own, deeper ones follow each other on one line.
class JsonText {
public:
  /// Levels 1 ... `open_levels` take a line for each member.
  explicit JsonText(int open_levels) : open_levels_(open_levels) {}

  JsonText& open(char bracket, std::string_view key = {});
  JsonText& close();
  JsonText& text(std::string_view key, std::string_view value);
  JsonText& number(std::string_view key, double value);
  JsonText& number(std::string_view key, std::optional<double> value);
  JsonText& truth(std::string_view key, bool value);
  JsonText& null(std::string_view key);
  /// Elements of a list have no key.
  JsonText& element(double value) { return number({}, value); }
  JsonText& element(std::string_view value) { return text({}, value); }

  [[nodiscard]] std::string take();

private:
  void begin(std::string_view key);

  int open_levels_;
  std::string out_, brackets_;
  bool first_ = true;
};

} // namespace chronodrome::simulation
