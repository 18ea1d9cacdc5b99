// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <memory>
#include <stdexcept>
#include <string>

#include "session/analysis.h"

namespace chronodrome::test_support {

inline session::SessionInputs sample_inputs(const std::string& name = "guinea-pig-heart") {
  const std::string folder = std::string(CHRONODROME_SOURCE_DIR) + "/sample-sessions/" + name + "/";
  auto inputs = session::load_session(folder + name + ".session.json", {});
  if (!inputs.ok()) throw std::runtime_error(inputs.error().what);
  return std::move(inputs).value();
}

/// The guinea-pig heart, analysed once for all tests of a binary.
inline std::shared_ptr<const session::SessionResult> sample_result() {
  static const auto result = [] {
    auto found = session::analyse(sample_inputs(), 0);
    if (!found.ok()) throw std::runtime_error(found.error().what);
    return std::make_shared<const session::SessionResult>(std::move(found).value());
  }();
  return result;
}

} // namespace chronodrome::test_support
