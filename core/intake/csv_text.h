// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <cstdint>
#include <string>
#include <string_view>

#include "base/result.h"
#include "intake/source_file.h"

namespace chronodrome::intake {

enum class Encoding { utf8, latin1, utf16_le, utf16_be };
std::string name_of(Encoding encoding);

struct EncodingFound {
  Encoding encoding = Encoding::utf8;
  std::size_t mark_bytes = 0; ///< of the byte-order mark
};

/// From the first bytes: a byte-order mark, zero bytes in every other place, or bytes that are no UTF-8.
EncodingFound encoding_of(std::string_view head);

/// What kind of file the first bytes betray, in words, if it is not text; empty if it may be text.
std::string not_text(std::string_view head);

/// `text` as UTF-8: as it is if it is valid, else read as code page 1252, which holds Latin-1.
std::string as_utf8(std::string_view text);

/// At most `most` bytes of UTF-8 text, cut between characters, for messages.
std::string shortened(const std::string& text, std::size_t most);

/// A text file from beginning to end, in blocks. Latin-1 passes as it is (texts are converted when they are
/// kept: numbers need no conversion), UTF-16 is converted to UTF-8.
class TextBlocks {
public:
  explicit TextBlocks(const ByteSource& source);
  /// Appends about `bytes` bytes to `text`; nothing at the end of the file. Errors: read_failed.
  Result<std::size_t> add_to(std::string& text, std::size_t bytes);
  [[nodiscard]] bool at_end() const { return at_ >= source_.size(); }
  /// Errors: read_failed. Call once, first.
  Result<EncodingFound> find_encoding();

private:
  const ByteSource& source_;
  std::uint64_t at_ = 0;
  EncodingFound found_;
  unsigned high_surrogate_ = 0;
  std::string raw_;
};

} // namespace chronodrome::intake
