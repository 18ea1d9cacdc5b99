// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <functional>
#include <string>

#include <QDir>
#include <QFile>
#include <QTemporaryDir>
#include <QTest>
#include <catch2/catch.hpp>

#include "intake/session_reader.h"
#include "results/session_writer.h"
#include "results/tables.h"
#include "ui/document/session_document.h"

namespace chronodrome::ui {

/// State, configuration and sessions of one test, gone when it ends.
class Desk {
public:
  Desk() {
    REQUIRE(folder_.isValid());
    qputenv("XDG_STATE_HOME", path("state").toUtf8());
    qputenv("XDG_CONFIG_HOME", path("config").toUtf8());
  }
  ~Desk() {
    qunsetenv("XDG_STATE_HOME");
    qunsetenv("XDG_CONFIG_HOME");
  }
  Desk(const Desk&) = delete;
  Desk& operator=(const Desk&) = delete;

  [[nodiscard]] QString path(const QString& inner) const { return folder_.filePath(inner); }
  [[nodiscard]] QString recovery() const { return path("state/chronodrome/recovery"); }

  /// A copy of a sample session (invented data) in a folder of its own; returns the session file.
  [[nodiscard]] QString sample(const QString& name, const QString& into = {}) const {
    const QDir from(QStringLiteral(CHRONODROME_SOURCE_DIR "/sample-sessions/") + name);
    const QString to = path(into.isEmpty() ? name : into);
    REQUIRE(QDir().mkpath(to));
    for (const QString& file : from.entryList(QDir::Files)) {
      if (file.endsWith(QStringLiteral("truth.json")) || file.endsWith(QStringLiteral(".md"))) continue;
      REQUIRE(QFile::copy(from.filePath(file), QDir(to).filePath(file)));
    }
    return QDir(to).filePath(name + QStringLiteral(".session.json"));
  }

private:
  QTemporaryDir folder_;
};

inline bool waitUntil(const std::function<bool()>& holds, int ms = 120'000) {
  return QTest::qWaitFor(holds, ms);
}

/// Waits for the result of the edits as they are.
inline void settle(const SessionDocument& document) {
  REQUIRE(waitUntil([&] { return document.work() == SessionDocument::Work::none; }));
  INFO((document.lastError() ? describe(*document.lastError()) : std::string("no error")));
  REQUIRE(document.result() != nullptr);
  REQUIRE_FALSE(document.isStale());
}

inline void openAndSettle(SessionDocument& document, const QString& path) {
  document.open(path);
  settle(document);
}

/// Every file of the results folder, one after the other.
inline std::string resultText(const SessionDocument& document) {
  std::string text;
  for (const auto& file : results::result_files(*document.result(), "test"))
    text += file.name + "\n" + file.content;
  return text;
}

inline std::string contentOf(const QString& path) {
  QFile file(path);
  REQUIRE(file.open(QIODevice::ReadOnly));
  return file.readAll().toStdString();
}

/// The session on the disk says what the document says.
inline void checkSameOnDisk(const SessionDocument& document) {
  const auto read = intake::read_session(document.path().toStdString());
  REQUIRE(read.ok());
  CHECK(read->warnings.empty());
  CHECK(results::session_text(*read) == results::session_text(document.session()));
  CHECK(read->as_read == document.session().as_read);
}

inline QStringList journalsIn(const QString& folder) {
  return QDir(folder).entryList({QStringLiteral("*.journal")}, QDir::Files);
}

/// Marks of a channel in the last result.
inline const std::vector<activation::Activation>& marksOf(const SessionDocument& document,
                                                          const std::string& channel) {
  const auto result = document.result();
  REQUIRE(result != nullptr);
  for (const auto& found : result->activations) {
    if (found.channel == channel) return found.marks;
  }
  FAIL("no channel " << channel);
  return result->activations.front().marks;
}

} // namespace chronodrome::ui
