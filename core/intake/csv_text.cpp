// Chronodrome, GPL-3.0-or-later.
#include "intake/csv_text.h"

#include <algorithm>
#include <array>
#include <cstring>

namespace chronodrome::intake {
namespace {

constexpr std::size_t kHead = 65536;
constexpr std::size_t kFewStrange = 2; // stray bytes that even a short table may hold

unsigned char byte_at(std::string_view text, std::size_t i) {
  return static_cast<unsigned char>(text[i]);
}

void add_code_point(std::string& text, unsigned code) {
  const auto add = [&](unsigned byte) { text += static_cast<char>(byte); };
  if (code < 0x80U) {
    add(code);
  } else if (code < 0x800U) {
    add(0xC0U | code >> 6U);
    add(0x80U | (code & 0x3FU));
  } else if (code < 0x10000U) {
    add(0xE0U | code >> 12U);
    add(0x80U | (code >> 6U & 0x3FU));
    add(0x80U | (code & 0x3FU));
  } else {
    add(0xF0U | code >> 18U);
    add(0x80U | (code >> 12U & 0x3FU));
    add(0x80U | (code >> 6U & 0x3FU));
    add(0x80U | (code & 0x3FU));
  }
}

/// Length of the valid UTF-8 sequence at `i`, 0 if there is none, -1 if the text ends inside it.
int sequence_at(std::string_view text, std::size_t i) {
  const unsigned char lead = byte_at(text, i);
  if (lead < 0x80U) return 1;
  const int length = lead >= 0xC2U && lead < 0xE0U   ? 2
                     : lead >= 0xE0U && lead < 0xF0U ? 3
                     : lead >= 0xF0U && lead < 0xF5U ? 4
                                                     : 0;
  for (int k = 1; k < length; ++k) {
    if (i + static_cast<std::size_t>(k) >= text.size()) return -1;
    if ((byte_at(text, i + static_cast<std::size_t>(k)) & 0xC0U) != 0x80U) return 0;
  }
  if (length < 3) return length;
  const unsigned char second = byte_at(text, i + 1);
  const bool bad = (lead == 0xE0U && second < 0xA0U) || (lead == 0xEDU && second >= 0xA0U) ||
                   (lead == 0xF0U && second < 0x90U) || (lead == 0xF4U && second >= 0x90U);
  return bad ? 0 : length;
}

/// A cut in the last character is forgiven if `may_be_cut`.
bool is_utf8(std::string_view text, bool may_be_cut) {
  for (std::size_t i = 0; i < text.size();) {
    const int length = sequence_at(text, i);
    if (length == 0 || (length < 0 && !may_be_cut)) return false;
    if (length < 0) return true;
    i += static_cast<std::size_t>(length);
  }
  return true;
}

/// Code page 1252 where it differs from Latin-1 (0x80 to 0x9F).
constexpr std::array<unsigned, 32> kPage1252 = {
    0x20AC, 0xFFFD, 0x201A, 0x0192, 0x201E, 0x2026, 0x2020, 0x2021, 0x02C6, 0x2030, 0x0160,
    0x2039, 0x0152, 0xFFFD, 0x017D, 0xFFFD, 0xFFFD, 0x2018, 0x2019, 0x201C, 0x201D, 0x2022,
    0x2013, 0x2014, 0x02DC, 0x2122, 0x0161, 0x203A, 0x0153, 0xFFFD, 0x017E, 0x0178};

} // namespace

std::string name_of(Encoding encoding) {
  switch (encoding) {
  case Encoding::utf8:
    return "UTF-8";
  case Encoding::latin1:
    return "Latin-1";
  case Encoding::utf16_le:
  case Encoding::utf16_be:
    return "UTF-16";
  }
  return "UTF-8";
}

EncodingFound encoding_of(std::string_view head) {
  if (head.substr(0, 3) == "\xEF\xBB\xBF") return {Encoding::utf8, 3};
  if (head.substr(0, 2) == "\xFF\xFE") return {Encoding::utf16_le, 2};
  if (head.substr(0, 2) == "\xFE\xFF") return {Encoding::utf16_be, 2};
  std::array<std::size_t, 2> zeros{};
  for (std::size_t i = 0; i < head.size(); ++i) {
    if (head[i] == '\0') ++zeros[i % 2];
  }
  // ASCII text in UTF-16 has a zero in every other place and nowhere else.
  const std::size_t most = head.size() / 4;
  if (head.size() >= 4 && zeros[1] > most && zeros[0] == 0) return {Encoding::utf16_le, 0};
  if (head.size() >= 4 && zeros[0] > most && zeros[1] == 0) return {Encoding::utf16_be, 0};
  return {is_utf8(head, true) ? Encoding::utf8 : Encoding::latin1, 0};
}

std::string not_text(std::string_view head) {
  struct Signature {
    std::string_view bytes;
    const char* name;
  };
  using namespace std::string_view_literals;
  static constexpr std::array<Signature, 17> kSignatures = {
      {{"PK\x03\x04"sv, "a zip archive, as spreadsheet programs write it (xlsx, ods)"},
       {"\xD0\xCF\x11\xE0"sv, "a binary spreadsheet or document (xls)"},
       {"\x89PNG"sv, "a PNG picture"},
       {"\xFF\xD8\xFF"sv, "a JPEG picture"},
       {"GIF8"sv, "a GIF picture"},
       {"BM"sv, "a bitmap picture"},
       {"II*\0"sv, "a TIFF picture"},
       {"MM\0*"sv, "a TIFF picture"},
       {"%PDF"sv, "a PDF document"},
       {"\x1F\x8B"sv, "a gzip archive"},
       {"7z\xBC\xAF"sv, "a 7z archive"},
       {"BZh"sv, "a bzip2 archive"},
       {"\x89HDF"sv, "an HDF5 file"},
       {"MATLAB 5.0"sv, "a binary matrix file"},
       {"RIFF"sv, "a sound or video file"},
       {"\x7F"
        "ELF"sv,
        "a program"},
       {"<?xml"sv, "an XML document"}}};
  for (const Signature& signature : kSignatures) {
    if (head.substr(0, signature.bytes.size()) != signature.bytes) continue;
    // "BM" may begin a name; a bitmap has zeros in its header.
    if (signature.bytes.size() <= 2 && head.find('\0') == std::string_view::npos) continue;
    return signature.name;
  }
  const Encoding encoding = encoding_of(head).encoding;
  if (encoding == Encoding::utf16_le || encoding == Encoding::utf16_be) return "";
  std::size_t strange = 0;
  for (const char c : head) {
    const auto byte = static_cast<unsigned char>(c);
    if (byte < 32 && c != '\n' && c != '\r' && c != '\t' && c != '\f' && c != '\v' && c != '\x1A') ++strange;
  }
  return strange > std::max(kFewStrange, head.size() / 100) ? "a binary file" : "";
}

std::string as_utf8(std::string_view text) {
  if (is_utf8(text, false)) return std::string(text);
  std::string converted;
  for (const char c : text) {
    const auto byte = static_cast<unsigned char>(c);
    add_code_point(converted, byte >= 0x80U && byte < 0xA0U ? kPage1252[byte - 0x80U] : byte);
  }
  return converted;
}

std::string shortened(const std::string& text, std::size_t most) {
  if (text.size() <= most) return text;
  while (most > 0 && (byte_at(text, most) & 0xC0U) == 0x80U)
    --most;
  return text.substr(0, most) + "...";
}

TextBlocks::TextBlocks(const ByteSource& source) : source_(source) {}

Result<EncodingFound> TextBlocks::find_encoding() {
  raw_.resize(std::min<std::uint64_t>(kHead, source_.size()));
  const auto got = source_.read_at(0, std::as_writable_bytes(std::span(raw_)));
  if (!got) return got.error();
  found_ = encoding_of(std::string_view(raw_).substr(0, *got));
  at_ = found_.mark_bytes;
  return found_;
}

Result<std::size_t> TextBlocks::add_to(std::string& text, std::size_t bytes) {
  const std::size_t before = text.size();
  const bool wide = found_.encoding == Encoding::utf16_le || found_.encoding == Encoding::utf16_be;
  bytes = std::max<std::size_t>(2, bytes / 2 * 2); // whole 16-bit units
  std::string& into = wide ? raw_ : text;
  const std::size_t start = wide ? 0 : before;
  into.resize(start + std::min<std::uint64_t>(bytes, at_end() ? 0 : source_.size() - at_));
  const auto got = source_.read_at(at_, std::as_writable_bytes(std::span(into)).subspan(start));
  if (!got) return got.error();
  if (start + *got < into.size())
    return Error{ErrorCode::read_failed, source_.path(), Place::at_byte(at_ + *got),
                 "the file ends before its size", "wait until the recorder has closed the file"};
  at_ += *got;
  if (!wide) return *got;
  const std::size_t high = found_.encoding == Encoding::utf16_le ? 1 : 0;
  for (std::size_t i = 0; i + 2 <= raw_.size(); i += 2) {
    const unsigned unit = static_cast<unsigned>(byte_at(raw_, i + high)) << 8U | byte_at(raw_, i + 1 - high);
    if (unit >= 0xD800U && unit < 0xDC00U) {
      high_surrogate_ = unit;
    } else if (unit >= 0xDC00U && unit < 0xE000U) {
      add_code_point(text, high_surrogate_ == 0
                               ? 0xFFFDU
                               : 0x10000U + ((high_surrogate_ - 0xD800U) << 10U) + (unit - 0xDC00U));
      high_surrogate_ = 0;
    } else {
      add_code_point(text, unit);
    }
  }
  return text.size() - before;
}

} // namespace chronodrome::intake
