// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <algorithm>
#include <cctype>
#include <string>
#include <vector>

#include "support/sample_sessions.h"
#include "ui/report/report.h"

namespace chronodrome::test_support {

/// The text of a PDF's pages as poppler reads it (package poppler-utils), page by page.
inline std::vector<std::string> pages_of(const std::string& pdf, const ScratchFolder& folder) {
  const std::string file = folder.write("report.pdf", pdf);
  std::string text = output_of("pdftotext -layout " + file + " -", folder);
  std::vector<std::string> pages;
  for (std::size_t at = 0; at < text.size();) {
    const auto end = std::min(text.find('\f', at), text.size());
    pages.push_back(text.substr(at, end - at));
    at = end + 1;
  }
  return pages;
}

/// As reading order gives it, all blanks and line ends out: a text that is set over lines is found again.
inline std::string squeezed(const std::string& text) {
  std::string out;
  for (const char c : text) {
    if (std::isspace(static_cast<unsigned char>(c)) == 0) out += c;
  }
  return out;
}

/// The same of a PDF, in the order in which it was painted; running heads and feet come first on each page.
inline std::string squeezed_pdf(const std::string& pdf, const ScratchFolder& folder) {
  const std::string file = folder.write("report.pdf", pdf);
  return squeezed(output_of("pdftotext -raw " + file + " -", folder));
}

inline std::string pdf_of(const session::SessionResult& result) {
  auto pdf = ui::report::reportPdf(result, "1.2.3");
  if (!pdf) throw std::runtime_error(describe(pdf.error()));
  return *std::move(pdf);
}

inline bool holds(const std::string& text, const std::string& part) {
  return text.find(part) != std::string::npos;
}

} // namespace chronodrome::test_support
