// Chronodrome, GPL-3.0-or-later.
#include "ui/report/sections.h"

#include "ui/report/words.h"

namespace chronodrome::ui::report {
namespace {

/// A digest's beginning, to tell reports apart at a glance.
QString shortDigest(const std::string& sha256) {
  return plain(sha256.substr(0, 12));
}

} // namespace

Content contentOf(const session::SessionResult& result, const std::string& version) {
  Content content;
  const auto& preparation = result.session.preparation;
  const QString name = preparation.label.empty() ? plain(result.session.name) : plain(preparation.label);
  content.title = QStringLiteral("Report on ") + name;
  content.subtitle =
      QStringLiteral("Beats, conduction delays and concentration-response curves of one recording");
  content.running_head =
      name + (preparation.date.empty() ? QString() : QStringLiteral(" · ") + plain(preparation.date));
  content.running_foot = QStringLiteral("session ") + shortDigest(result.session_sha256) +
                         QStringLiteral(" · research use only, not for diagnosis");
  content.program = QStringLiteral("Chronodrome ") + plain(version);
  addIdentity(content, result);
  addMainResult(content, result);
  addProtocol(content, result);
  addStory(content, result);
  addTypicalBeats(content, result);
  addResponses(content, result);
  addCurves(content, result);
  addFlags(content, result);
  addRhythm(content, result);
  addEdits(content, result);
  addQuality(content, result);
  addWarnings(content, result);
  addSettings(content, result);
  addDefinitions(content, result);
  addProvenance(content, result, version);
  addCautions(content);
  return content;
}

} // namespace chronodrome::ui::report
