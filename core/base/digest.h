// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <cstddef>
#include <memory>
#include <span>
#include <string>

namespace chronodrome {

/// SHA-256 of bytes given in pieces (FIPS 180-4; the computing is OpenSSL's).
class Sha256 {
public:
  Sha256();
  ~Sha256();
  Sha256(const Sha256&) = delete;
  Sha256& operator=(const Sha256&) = delete;

  void add(std::span<const std::byte> bytes);
  /// 64 lower-case hex digits. Call once, last.
  std::string hex();

private:
  struct State;
  std::unique_ptr<State> state_;
};

std::string sha256_of(std::span<const std::byte> bytes);
std::string sha256_of(const std::string& text);

} // namespace chronodrome
