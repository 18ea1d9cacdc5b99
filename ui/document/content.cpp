// Chronodrome, GPL-3.0-or-later.
#include "ui/document/content.h"

#include <algorithm>
#include <tuple>

#include "results/session_writer.h"

namespace chronodrome::ui {
namespace {

using document::Correction;
using document::SessionFile;
using document::WindowChoice;
using protocol::Event;
using protocol::Protocol;

bool same(const Correction& a, const Correction& b) {
  return std::tie(a.seq, a.when, a.who, a.channel, a.why, a.what, a.time, a.to_time) ==
         std::tie(b.seq, b.when, b.who, b.channel, b.why, b.what, b.time, b.to_time);
}

bool same(const WindowChoice& a, const WindowChoice& b) {
  return std::tie(a.curve, a.concentration, a.measure, a.start, a.end, a.when, a.who, a.why) ==
         std::tie(b.curve, b.concentration, b.measure, b.start, b.end, b.when, b.who, b.why);
}

/// `line` is where the event stood in its file and says nothing of the event.
bool same(const Event& a, const Event& b) {
  return std::tie(a.time, a.kind, a.agent, a.concentration, a.unit, a.note, a.stock, a.volume_ml, a.arrival,
                  a.curve) == std::tie(b.time, b.kind, b.agent, b.concentration, b.unit, b.note, b.stock,
                                       b.volume_ml, b.arrival, b.curve);
}

template <class T>
bool same(const std::vector<T>& a, const std::vector<T>& b) {
  return std::equal(a.begin(), a.end(), b.begin(), b.end(),
                    [](const T& left, const T& right) { return same(left, right); });
}

SessionFile bodyOf(const SessionFile& session) {
  SessionFile body;
  body.version = session.version;
  body.preparation = session.preparation;
  body.channels = session.channels;
  body.pathways = session.pathways;
  body.measures = session.measures;
  body.analysis = session.analysis;
  return body;
}

void putBody(SessionFile& session, const SessionFile& body) {
  session.preparation = body.preparation;
  session.channels = body.channels;
  session.pathways = body.pathways;
  session.measures = body.measures;
  session.analysis = body.analysis;
}

void put(Content& content, const ContentParts& parts) {
  if (parts.body) putBody(content.session, *parts.body);
  if (parts.review) content.session.review = *parts.review;
  if (parts.windows) content.session.windows = *parts.windows;
  if (parts.log) content.log = parts.log;
}

} // namespace

bool ContentChange::isNothing() const {
  return !after.body && !after.review && !after.windows && !after.log && !appended;
}

void applyChange(Content& content, const ContentChange& change) {
  put(content, change.after);
  if (change.appended) content.session.review.push_back(*change.appended);
}

void revertChange(Content& content, const ContentChange& change) {
  if (change.appended) content.session.review.pop_back();
  put(content, change.before);
}

ContentChange sessionChange(const SessionFile& before, const SessionFile& after) {
  ContentChange change = windowsChange(before, after.windows);
  auto old_body = std::make_shared<const SessionFile>(bodyOf(before));
  auto new_body = std::make_shared<const SessionFile>(bodyOf(after));
  // The text of the file says all that a body can say.
  if (results::session_text(*old_body) != results::session_text(*new_body)) {
    change.before.body = std::move(old_body);
    change.after.body = std::move(new_body);
  }
  if (!same(before.review, after.review)) {
    change.before.review = std::make_shared<const std::vector<Correction>>(before.review);
    change.after.review = std::make_shared<const std::vector<Correction>>(after.review);
  }
  return change;
}

ContentChange logChange(const std::shared_ptr<const Protocol>& before, const Protocol& after) {
  ContentChange change;
  if (same(before->events, after.events)) return change;
  change.before.log = before;
  change.after.log = std::make_shared<const Protocol>(after);
  return change;
}

ContentChange windowsChange(const SessionFile& before, std::vector<WindowChoice> after) {
  ContentChange change;
  if (same(before.windows, after)) return change;
  change.before.windows = std::make_shared<const std::vector<WindowChoice>>(before.windows);
  change.after.windows = std::make_shared<const std::vector<WindowChoice>>(std::move(after));
  return change;
}

void keepPlace(SessionFile& session, const SessionFile& place) {
  session.path = place.path;
  session.folder = place.folder;
  session.name = place.name;
  session.version = place.version;
  session.files = place.files;
  session.csv = place.csv;
  session.protocol_file = place.protocol_file;
  session.as_read = place.as_read;
  session.warnings = place.warnings;
}

} // namespace chronodrome::ui
