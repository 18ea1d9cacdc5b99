// Chronodrome, GPL-3.0-or-later.
#include "results/sheet_writer.h"

#include <algorithm>
#include <cerrno>
#include <cstring>
#include <sys/mman.h>
#include <unistd.h>

#include "intake/csv_text.h"
#include "results/quiet_errors.h"

namespace chronodrome::results {
namespace {

/// 1 January 1980, which is also the date of the files inside a workbook: no clock, so the same bytes.
constexpr time_t kNoDate = 315532800;

/// Characters that one cell can hold.
constexpr std::size_t kCellCharacters = 32767;
constexpr std::string_view kCutNote = " [too long for a cell: the whole text stands in the CSV file]";

const char* format_of(NumberShow show) {
  switch (show) {
  case NumberShow::general:
    return "General";
  case NumberShow::whole:
    return "0";
  case NumberShow::seconds:
    return "0.0000";
  case NumberShow::milliseconds:
    return "0.000";
  case NumberShow::rate:
    return "0.00";
  case NumberShow::share:
    return "0.000";
  case NumberShow::concentration:
    return "0.00E+00";
  }
  return "General";
}

bool continues(char c) {
  return (static_cast<unsigned char>(c) & 0xc0U) == 0x80;
}

std::size_t characters_of(std::string_view text) {
  return static_cast<std::size_t>(
      std::count_if(text.begin(), text.end(), [](char c) { return !continues(c); }));
}

/// What XML can hold: UTF-8 without its two non-characters.
std::string xml_text(std::string_view text) {
  std::string clean = intake::as_utf8(text);
  for (const std::string_view odd : {"\xef\xbf\xbe", "\xef\xbf\xbf"}) {
    for (auto at = clean.find(odd); at != std::string::npos; at = clean.find(odd, at))
      clean.replace(at, odd.size(), "\xef\xbf\xbd");
  }
  return clean;
}

/// At most what a cell holds, with a note where something is missing. Counts bytes: never too few characters.
std::string fitting(const std::string& text) {
  if (text.size() <= kCellCharacters) return text;
  std::size_t end = kCellCharacters - kCutNote.size();
  while (end > 0 && continues(text[end]))
    --end;
  return text.substr(0, end) + std::string(kCutNote);
}

} // namespace

BookWriter::BookWriter(std::size_t sheet_rows)
    : sheet_rows_(std::clamp<std::size_t>(sheet_rows, 2, 1'048'576)) {
  // The library writes to a path only; this one is memory.
  file_ = memfd_create("workbook", MFD_CLOEXEC);
  if (file_ < 0) return;
  const std::string path = "/proc/self/fd/" + std::to_string(file_);
  lxw_workbook_options options{};
  options.constant_memory = LXW_TRUE;
  options.use_zip64 = LXW_FALSE;
  book_ = workbook_new_opt(path.c_str(), &options);
  if (book_ == nullptr) return;
  head_ = workbook_add_format(book_);
  format_set_bold(head_);
  format_set_bottom(head_, LXW_BORDER_THIN);
  for (const auto show : {NumberShow::whole, NumberShow::seconds, NumberShow::milliseconds, NumberShow::rate,
                          NumberShow::share, NumberShow::concentration}) {
    shows_[show] = workbook_add_format(book_);
    format_set_num_format(shows_[show], format_of(show));
  }
}

BookWriter::~BookWriter() {
  if (book_ != nullptr) lxw_workbook_free(book_);
  if (file_ >= 0) ::close(file_);
}

void BookWriter::describe(const std::string& title, const std::string& program) {
  if (book_ == nullptr) return;
  lxw_doc_properties properties{};
  std::string titled = title;
  std::string made = program;
  properties.title = titled.data();
  properties.comments = made.data();
  properties.created = kNoDate;
  workbook_set_properties(book_, &properties);
}

void BookWriter::open_sheet(const std::string& name, std::vector<SheetColumn> columns) {
  end_part();
  name_ = name;
  columns_ = std::move(columns);
  part_ = 0;
  begin_part();
}

void BookWriter::begin_part() {
  ++part_;
  const std::string name = part_ == 1 ? name_ : name_ + " (" + std::to_string(part_) + ")";
  {
    const QuietErrors quiet;
    sheet_ = book_ == nullptr ? nullptr : workbook_add_worksheet(book_, name.c_str());
  }
  widths_.assign(columns_.size(), 0);
  next_ = 1;
  if (sheet_ == nullptr) {
    failed_ = true;
    return;
  }
  worksheet_freeze_panes(sheet_, 1, 0);
  for (std::size_t i = 0; i < columns_.size(); ++i) {
    widths_[i] = characters_of(columns_[i].head) + 3; // room for the filter's button
    worksheet_write_string(sheet_, 0, static_cast<lxw_col_t>(i), columns_[i].head.c_str(), head_);
  }
}

void BookWriter::end_part() {
  if (sheet_ == nullptr) return;
  for (std::size_t i = 0; i < columns_.size(); ++i) {
    const auto column = static_cast<lxw_col_t>(i);
    const double width = static_cast<double>(std::clamp<std::size_t>(widths_[i] + 1, 8, 60));
    worksheet_set_column(sheet_, column, column, width, nullptr);
  }
  if (!columns_.empty())
    worksheet_autofilter(sheet_, 0, 0, next_ - 1, static_cast<lxw_col_t>(columns_.size() - 1));
  sheet_ = nullptr;
}

void BookWriter::row(const std::vector<SheetCell>& cells) {
  if (next_ >= sheet_rows_) {
    end_part();
    begin_part();
  }
  if (sheet_ == nullptr) return;
  errno = 0;
  for (std::size_t i = 0; i < cells.size() && i < columns_.size(); ++i) {
    const auto column = static_cast<lxw_col_t>(i);
    if (const auto* number = std::get_if<double>(&cells[i])) {
      const auto show = shows_.find(columns_[i].show);
      worksheet_write_number(sheet_, next_, column, *number, show == shows_.end() ? nullptr : show->second);
      widths_[i] = std::max<std::size_t>(widths_[i], 10);
    } else if (const auto* text = std::get_if<std::string>(&cells[i])) {
      write_text(column, *text);
    }
  }
  ++next_;
  note_fault();
}

/// The library does not look at what its temporary files answer; a full disk would cut a sheet silently.
void BookWriter::note_fault() {
  if (errno == ENOSPC || errno == EDQUOT || errno == EFBIG || errno == EIO) failed_ = true;
}

void BookWriter::write_text(lxw_col_t column, const std::string& text) {
  if (text.empty()) return;
  widths_[column] = std::max(widths_[column], characters_of(text));
  const auto written =
      worksheet_write_string(sheet_, next_, column, fitting(xml_text(text)).c_str(), nullptr);
  failed_ = failed_ || written != LXW_NO_ERROR;
}

Result<std::string> BookWriter::take() {
  end_part();
  const auto fault = [](const std::string& why) {
    return Error{ErrorCode::cannot_write,
                 "workbook.xlsx",
                 {},
                 "the workbook cannot be made: " + why,
                 "free some room for temporary files"};
  };
  if (book_ == nullptr || failed_) return fault("the system gives no temporary file");
  lxw_error closed = LXW_NO_ERROR;
  {
    const QuietErrors quiet;
    errno = 0;
    closed = workbook_close(book_);
    note_fault();
  }
  book_ = nullptr; // closing has freed it
  if (failed_) return fault("the disk for temporary files is full");
  if (closed != LXW_NO_ERROR) return fault(lxw_strerror(closed));
  const off_t size = ::lseek(file_, 0, SEEK_END);
  if (size < 0) return fault(std::strerror(errno));
  std::string bytes(static_cast<std::size_t>(size), '\0');
  std::size_t at = 0;
  while (at < bytes.size()) {
    const auto step = ::pread(file_, bytes.data() + at, bytes.size() - at, static_cast<off_t>(at));
    if (step < 0 && errno == EINTR) continue;
    if (step <= 0) return fault("it cannot be read back");
    at += static_cast<std::size_t>(step);
  }
  return bytes;
}

} // namespace chronodrome::results
