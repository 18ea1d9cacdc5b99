// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <array>
#include <cstdio>
#include <cstdlib>
#include <stdexcept>
#include <string>
#include <vector>

#include "base/number_text.h"

namespace chronodrome::test_support {

/// Numbers that a Python script prints, one a line: signals of installed packages are read by the packages'
/// own readers at test time and never copied. Throws with the script's last words if it fails, so that a
/// missing package is named. `script` must not hold a single quote.
inline std::vector<double> python_numbers(const std::string& script) {
  const std::string command = "/usr/bin/python3 -c '" + script + "' 2>&1";
  FILE* pipe = popen(command.c_str(), "r");
  if (pipe == nullptr) throw std::runtime_error("cannot start /usr/bin/python3");
  std::string text;
  std::array<char, 65536> buffer{};
  for (std::size_t n = 0; (n = fread(buffer.data(), 1, buffer.size(), pipe)) > 0;)
    text.append(buffer.data(), n);
  const int status = pclose(pipe);
  std::vector<double> numbers;
  std::string last;
  for (std::size_t at = 0; at < text.size();) {
    const std::size_t end = std::min(text.find('\n', at), text.size());
    const std::string line = text.substr(at, end - at);
    at = end + 1;
    if (line.empty()) continue;
    last = line;
    if (const auto number = parse_number(line)) numbers.push_back(*number);
  }
  if (status != 0) {
    throw std::runtime_error(
        "the reference data could not be read (is the Debian package installed? the set-up "
        "installs it): " +
        last);
  }
  return numbers;
}

} // namespace chronodrome::test_support
