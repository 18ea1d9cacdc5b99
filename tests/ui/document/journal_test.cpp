// Chronodrome, GPL-3.0-or-later.
// When there is a journal of unsaved edits, and which journals are left over.
#include <QSignalSpy>

#include "document_desk.h"
#include "ui/document/journal_entry.h"
#include "ui/document/process_identity.h"
#include "ui/document/recovery.h"

using namespace chronodrome;
using namespace chronodrome::ui;

TEST_CASE("a journal is there while edits are unsaved, and only then", "[ui][document]") {
  const Desk desk;
  const QString path = desk.sample("guinea-pig-heart");
  {
    SessionDocument document;
    openAndSettle(document, path);
    CHECK(journalsIn(desk.recovery()).isEmpty());
    document.exclude("", Seconds(60.0), Seconds(62.0), "pump");
    REQUIRE(waitUntil([&] { return !journalsIn(desk.recovery()).isEmpty(); }, 6000));
    const auto entry = readJournal(QDir(desk.recovery()).filePath(journalsIn(desk.recovery()).front()));
    REQUIRE(entry.ok());
    CHECK(entry->writer == thisProcess());
    CHECK(entry->session.find("pump") != std::string::npos);
    CHECK_FALSE(entry->log.has_value()); // not edited
    document.undoStack()->undo();
    CHECK(waitUntil([&] { return journalsIn(desk.recovery()).isEmpty(); }, 5000));
    document.undoStack()->redo();
    REQUIRE(waitUntil([&] { return !journalsIn(desk.recovery()).isEmpty(); }, 6000));
    document.close();
    CHECK(waitUntil([&] { return journalsIn(desk.recovery()).isEmpty(); }, 5000));
    openAndSettle(document, path);
    for (int i = 0; i < 25; ++i)
      document.exclude("", Seconds(60.0 + i), Seconds(60.5 + i), "pump");
  }
  CHECK(journalsIn(desk.recovery()).isEmpty()); // the window closed in good order
}

TEST_CASE("a home that cannot be written costs the journal and nothing else", "[ui][document]") {
  const Desk desk;
  // A file where the folder should be: fails for every user.
  QFile obstacle(desk.path("obstacle"));
  REQUIRE(obstacle.open(QIODevice::WriteOnly));
  obstacle.close();
  qputenv("XDG_STATE_HOME", desk.path("obstacle/state").toUtf8());
  SessionDocument document;
  QSignalSpy failed(&document, &SessionDocument::autosaveFailed);
  openAndSettle(document, desk.sample("guinea-pig-heart"));
  for (int i = 0; i < 45; ++i)
    document.exclude("", Seconds(60.0 + i), Seconds(60.5 + i), "pump");
  REQUIRE(waitUntil([&] { return !failed.isEmpty(); }));
  REQUIRE(document.autosaveFault().has_value());
  settle(document);
  CHECK(failed.size() == 1);
  CHECK(Recovery().leftOver().empty());
  REQUIRE(document.save().ok());
}

TEST_CASE("a journal that a crash left behind a finished save is no left-over", "[ui][document]") {
  const Desk desk;
  const QString path = desk.sample("guinea-pig-heart");
  REQUIRE(QDir().mkpath(desk.recovery()));
  JournalEntry entry;
  entry.writer = thisProcess();
  entry.writer.start += 1; // the number was given again
  entry.session_path = path;
  entry.session = contentOf(path);
  const auto write = [&](const QString& name) {
    QFile file(QDir(desk.recovery()).filePath(name));
    REQUIRE(file.open(QIODevice::WriteOnly));
    file.write(textOf(entry));
  };
  write("1.journal");
  CHECK(Recovery().leftOver().empty());
  CHECK(journalsIn(desk.recovery()).isEmpty());

  entry.session += " ";
  write("2.journal");
  entry.writer.host = "another-machine";
  write("3.journal");
  QFile rubbish(QDir(desk.recovery()).filePath("4.journal"));
  REQUIRE(rubbish.open(QIODevice::WriteOnly));
  rubbish.write("{\"format\": \"chron");
  rubbish.close();
  const auto left = Recovery().leftOver();
  REQUIRE(left.size() == 1);
  CHECK(left.front().journal.endsWith(QStringLiteral("2.journal")));
  CHECK(journalsIn(desk.recovery()).size() == 3); // what is not understood is not removed
}

TEST_CASE("processes are told apart", "[ui][document]") {
  const ProcessIdentity here = thisProcess();
  CHECK(here.pid == QCoreApplication::applicationPid());
  CHECK(here.start > 0);
  CHECK(lifeOf(here) == Life::alive);
  auto other = here;
  other.start += 1;
  CHECK(lifeOf(other) == Life::dead);
  other = here;
  other.boot = "another start";
  CHECK(lifeOf(other) == Life::dead);
  other = here;
  other.host = "another-machine";
  CHECK(lifeOf(other) == Life::elsewhere);
  other = here;
  other.pid = 0x7fffffff;
  CHECK(lifeOf(other) == Life::dead);
}
