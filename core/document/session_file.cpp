// Chronodrome, GPL-3.0-or-later.
#include "document/session_file.h"

namespace chronodrome::document {
namespace {

struct NamedKind {
  CorrectionKind kind;
  const char* name;
};

constexpr std::array<NamedKind, 7> kKinds = {{{CorrectionKind::add, "add"},
                                              {CorrectionKind::remove, "delete"},
                                              {CorrectionKind::move, "move"},
                                              {CorrectionKind::retype, "retype"},
                                              {CorrectionKind::exclude, "exclude"},
                                              {CorrectionKind::include, "include"},
                                              {CorrectionKind::redetect, "redetect"}}};

} // namespace

std::string name_of(CorrectionKind kind) {
  for (const auto& known : kKinds) {
    if (known.kind == kind) return known.name;
  }
  return "";
}

std::optional<CorrectionKind> correction_named(const std::string& name) {
  for (const auto& known : kKinds) {
    if (name == known.name) return known.kind;
  }
  return std::nullopt;
}

std::string correction_names() {
  std::string names;
  for (const auto& known : kKinds)
    names += (names.empty() ? "" : ", ") + std::string(known.name);
  return names;
}

} // namespace chronodrome::document
