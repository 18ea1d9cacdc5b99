// Chronodrome, GPL-3.0-or-later.
#include "base/digest.h"

#include <array>
#include <openssl/evp.h>
#include <stdexcept>

namespace chronodrome {

struct Sha256::State {
  EVP_MD_CTX* context = EVP_MD_CTX_new();
  State() {
    if (context == nullptr || EVP_DigestInit_ex(context, EVP_sha256(), nullptr) != 1) {
      throw std::runtime_error("SHA-256 is not available from libcrypto");
    }
  }
  ~State() { EVP_MD_CTX_free(context); }
  State(const State&) = delete;
  State& operator=(const State&) = delete;
};

Sha256::Sha256() : state_(std::make_unique<State>()) {}
Sha256::~Sha256() = default;

void Sha256::add(std::span<const std::byte> bytes) {
  EVP_DigestUpdate(state_->context, bytes.data(), bytes.size());
}

std::string Sha256::hex() {
  std::array<unsigned char, EVP_MAX_MD_SIZE> digest{};
  unsigned int length = 0;
  EVP_DigestFinal_ex(state_->context, digest.data(), &length);
  static constexpr char kHex[] = "0123456789abcdef";
  std::string text;
  for (unsigned int i = 0; i < length; ++i) {
    text += kHex[digest[i] >> 4U];
    text += kHex[digest[i] & 15U];
  }
  return text;
}

std::string sha256_of(std::span<const std::byte> bytes) {
  Sha256 digest;
  digest.add(bytes);
  return digest.hex();
}

std::string sha256_of(const std::string& text) {
  return sha256_of(std::as_bytes(std::span(text)));
}

} // namespace chronodrome
