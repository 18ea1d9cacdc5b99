// Chronodrome, GPL-3.0-or-later.
#include "ui/report/report.h"

#include <QRawFont>

#include "ui/look/theme.h"
#include "ui/report/html_writer.h"
#include "ui/report/pdf_writer.h"
#include "ui/report/sections.h"

namespace chronodrome::ui::report {
namespace {

/// Where no font is there Qt names some all the same, and draws boxes; only a real one has its tables.
bool hasFont() {
  const QFont font = look::Theme::of(look::Mode::paper).font(look::TextSize::normal);
  return !QRawFont::fromFont(font).fontTable("head").isEmpty();
}

std::string bytesOf(const QByteArray& bytes) {
  return {bytes.constData(), static_cast<std::size_t>(bytes.size())};
}

} // namespace

std::string reportHtml(const session::SessionResult& result, const std::string& version) {
  return bytesOf(htmlOf(contentOf(result, version)));
}

Result<std::string> reportPdf(const session::SessionResult& result, const std::string& version) {
  if (!hasFont()) {
    return Error{ErrorCode::cannot_write,
                 "report.pdf",
                 {},
                 "no font is installed, so a report would show boxes instead of text",
                 "install a font (fonts-liberation or fonts-dejavu-core)"};
  }
  const QByteArray pdf = pdfOf(contentOf(result, version));
  if (!pdf.startsWith("%PDF") || !pdf.trimmed().endsWith("%%EOF")) {
    return Error{ErrorCode::cannot_write,
                 "report.pdf",
                 {},
                 "the report could not be painted",
                 "please report it with the session; --no-report leaves it out"};
  }
  return bytesOf(pdf);
}

Result<std::vector<results::OutputFile>> reportFiles(const session::SessionResult& result,
                                                     const std::string& version) {
  auto pdf = reportPdf(result, version);
  if (!pdf) return pdf.error();
  std::vector<results::OutputFile> files;
  files.push_back({"report.pdf", *std::move(pdf)});
  files.push_back({"report.html", reportHtml(result, version)});
  return files;
}

} // namespace chronodrome::ui::report
