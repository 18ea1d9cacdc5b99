// Chronodrome, GPL-3.0-or-later.
#include "intake/csv_reader.h"

#include <algorithm>
#include <cmath>
#include <thread>

#include "base/parallel.h"
#include "intake/csv_content.h"
#include "intake/csv_dialect.h"
#include "intake/csv_footer.h"
#include "intake/csv_layout.h"
#include "intake/csv_merge.h"
#include "intake/csv_rows.h"
#include "intake/csv_text.h"

namespace chronodrome::intake {
namespace {

constexpr std::size_t kHeadBytes = std::size_t{1} << 20U;
constexpr std::size_t kChunkBytes = std::size_t{1} << 21U; // a thread's share of a batch

/// Behind the last line end of text[from, to) that is sure to be whole; 0 if there is none.
std::size_t behind_line_end(std::string_view text, std::size_t from, std::size_t to) {
  for (std::size_t i = to; i-- > from;) {
    if (text[i] == '\n') return i + 1;
    if (text[i] == '\r' && i + 1 < text.size() && text[i + 1] != '\n') return i + 1;
  }
  return 0;
}

/// Pieces of whole rows. Quotes may hide line ends, so that text with quotes stays in one piece, whose last
/// row may be cut.
std::vector<std::string_view> pieces_of(std::string_view text, bool final, bool quoted) {
  if (quoted) return {text};
  std::vector<std::string_view> pieces;
  std::size_t at = 0;
  while (text.size() - at > kChunkBytes) {
    const std::size_t end = behind_line_end(text, at, at + kChunkBytes);
    if (end == 0) break;
    pieces.push_back(text.substr(at, end - at));
    at = end;
  }
  const std::size_t end = final ? text.size() : behind_line_end(text, at, text.size());
  if (end > at) pieces.push_back(text.substr(at, end - at));
  return pieces;
}

class TableReader {
public:
  TableReader(const ByteSource& source, const ReadSettings& settings, recording::StoreFolder& folder)
      : source_(source), settings_(settings), folder_(folder), blocks_(source) {}

  Result<ReadContent> read() {
    if (auto fault = read_head()) return *std::move(fault);
    TableMerge merge(layout_, settings_, source_.path(), folder_);
    text_.erase(0, layout_.data_at);
    if (auto fault = read_body(merge)) return *std::move(fault);
    return table_content(layout_, encoding_, merge, settings_, source_.path());
  }

private:
  std::optional<Error> read_head() {
    std::string raw(std::min<std::uint64_t>(kHeadBytes / 16, source_.size()), '\0');
    const auto got = source_.read_at(0, std::as_writable_bytes(std::span(raw)));
    if (!got) return got.error();
    const std::string other = not_text(std::string_view(raw).substr(0, *got));
    if (!other.empty())
      return Error{ErrorCode::wrong_format, source_.path(), Place::at_line(1),
                   "this is " + other + ", not a table of text", "export the recording as CSV or EDF"};
    const auto encoding = blocks_.find_encoding();
    if (!encoding) return encoding.error();
    encoding_ = encoding->encoding;
    if (const auto added = blocks_.add_to(text_, kHeadBytes); !added) return added.error();
    const auto reading = find_dialect(text_, blocks_.at_end(), source_.path(), settings_);
    if (!reading) return with_long_line(reading.error());
    auto layout = find_layout(*reading, text_, source_.path(), settings_);
    if (!layout) return layout.error();
    layout_ = *std::move(layout);
    return std::nullopt;
  }

  /// A line that does not end inside the head is what keeps the table from being found.
  [[nodiscard]] Error with_long_line(Error fault) const {
    const std::size_t behind = text_.find_last_of("\r\n") + 1; // 0 if there is none
    const std::size_t bytes = text_.size() - behind;
    if (fault.code != ErrorCode::not_enough_data || blocks_.at_end() || bytes < text_.size() / 2)
      return fault;
    std::size_t line = 1;
    for (std::size_t i = 0; i < behind; ++i)
      line += text_[i] == '\n' || (text_[i] == '\r' && text_[i + 1] != '\n') ? 1U : 0U;
    return too_long(line, std::min(bytes - 1, settings_.limits.line_bytes));
  }

  [[nodiscard]] Error too_long(std::size_t line, std::size_t bytes) const {
    return {ErrorCode::over_limit, source_.path(), Place::at_line(line),
            "the line is longer than " + std::to_string(bytes) + " bytes",
            "check that the file is a table with line ends"};
  }

  std::optional<Error> read_body(TableMerge& merge) {
    const unsigned machine = std::max(1U, std::thread::hardware_concurrency());
    const unsigned threads = settings_.threads == 0 ? machine : settings_.threads;
    const std::size_t batch = kChunkBytes * std::min(threads, 64U);
    while (true) {
      if (text_.size() < batch) {
        if (const auto added = blocks_.add_to(text_, batch - text_.size()); !added) return added.error();
      }
      const bool final = blocks_.at_end();
      std::size_t consumed = 0;
      std::optional<std::size_t> open_quote;
      if (auto fault = read_batch(merge, final, threads, consumed, open_quote)) return fault;
      if (folder_.failed()) return std::nullopt; // the caller reads again, into memory
      if (final && consumed < text_.size()) return unfinished(merge, open_quote);
      if (final) return std::nullopt;
      if (consumed == 0 && text_.size() > settings_.limits.line_bytes) return unfinished(merge, open_quote);
      text_.erase(0, consumed);
      if (consumed == 0) {
        if (const auto added = blocks_.add_to(text_, settings_.limits.line_bytes); !added)
          return added.error();
      }
    }
  }

  std::optional<Error> read_batch(TableMerge& merge, bool final, unsigned threads, std::size_t& consumed,
                                  std::optional<std::size_t>& open_quote) {
    // What may be the foot of the table waits until the end of the file is seen.
    std::string_view text = text_;
    const std::size_t body =
        final ? footer_of(text, layout_) : text.size() - std::min(text.size(), kLargestFooter);
    const std::string_view footer = text.substr(final ? body : text.size());
    text = text.substr(0, body);
    const bool quoted = text.find('"') != std::string_view::npos;
    const std::vector<std::string_view> pieces = pieces_of(text, final, quoted);
    std::vector<RowBlock> blocks(pieces.size());
    parallel_for(pieces.size(), threads,
                 [&](std::size_t i) { blocks[i] = read_rows(pieces[i], layout_, final || !quoted); });
    for (RowBlock& block : blocks) {
      consumed += block.bytes;
      open_quote = block.open_quote_line;
      if (auto fault = merge.add(std::move(block))) return fault;
    }
    if (!footer.empty() && consumed == body) {
      RowBlock block = read_footer(footer, layout_);
      consumed += block.bytes;
      if (auto fault = merge.add(std::move(block))) return fault;
    }
    return std::nullopt;
  }

  Error unfinished(const TableMerge& merge, const std::optional<std::size_t>& open_quote) const {
    const std::size_t line = merge.next_line();
    if (open_quote)
      return {ErrorCode::damaged, source_.path(), Place::at_line(line),
              "a quote opened on line " + std::to_string(line) + " is not closed",
              "close it or take it out, and check that the file is whole"};
    return too_long(line, settings_.limits.line_bytes);
  }

  const ByteSource& source_;
  const ReadSettings& settings_;
  recording::StoreFolder& folder_;
  TextBlocks blocks_;
  Encoding encoding_ = Encoding::utf8;
  TableLayout layout_;
  std::string text_;
};

} // namespace

Result<ReadContent> read_csv(const ByteSource& source, const ReadSettings& settings,
                             recording::StoreFolder& folder) {
  return TableReader(source, settings, folder).read();
}

} // namespace chronodrome::intake
