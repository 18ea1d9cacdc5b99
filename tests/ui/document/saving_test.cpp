// Chronodrome, GPL-3.0-or-later.
#include <QSignalSpy>

#include "base/digest.h"
#include "document_desk.h"

using namespace chronodrome;
using namespace chronodrome::ui;

TEST_CASE("what is saved is read back equal, with the recording's digest", "[ui][document]") {
  const Desk desk;
  const QString path = desk.sample("guinea-pig-heart");
  SessionDocument document;
  openAndSettle(document, path);
  CHECK_FALSE(document.session().files.front().sha256.has_value());
  document.addMark("RA", Seconds(60.05), "seen — µV");
  document.exclude("", Seconds(60.0), Seconds(62.0), "pump");
  const auto& row = document.result()->responses.rows.at(2);
  document.placeWindow({row.curve, row.concentration, row.measure, row.window_start - Seconds(3.0),
                        row.window_end - Seconds(3.0), "", "", "bubble"});
  settle(document);
  QSignalSpy modified(&document, &SessionDocument::modifiedChanged);
  REQUIRE(document.save().ok());
  CHECK_FALSE(document.isModified());
  CHECK(modified.size() == 1);
  CHECK(document.session().files.front().sha256 == document.recording()->files.front().sha256);
  checkSameOnDisk(document);
  CHECK_FALSE(document.isStale()); // saving changes no number

  SessionDocument again;
  document.close(); // gives up its lock
  openAndSettle(again, path);
  CHECK_FALSE(again.isReadOnly());
  CHECK(again.session().review.size() == 2);
  CHECK(again.session().windows.size() == 1);
}

TEST_CASE("results after saving are those of the saved file", "[ui][document]") {
  const Desk desk;
  const QString path = desk.sample("guinea-pig-heart");
  SessionDocument document, again;
  openAndSettle(document, path);
  document.exclude("RA", Seconds(60.0), Seconds(62.0), "pump");
  settle(document);
  REQUIRE(document.save().ok());
  const std::string text = resultText(document);
  document.close();
  openAndSettle(again, path);
  CHECK(resultText(again) == text);
}

TEST_CASE("a result that comes after the save is that of the saved file", "[ui][document]") {
  const Desk desk;
  const QString path = desk.sample("guinea-pig-heart");
  SessionDocument document;
  openAndSettle(document, path);
  document.exclude("RA", Seconds(60.0), Seconds(62.0), "pump");
  REQUIRE(waitUntil([&] { return document.workShare() > 0.0; })); // well under way
  REQUIRE(document.isStale());
  REQUIRE(document.saveAs(desk.path("guinea-pig-heart/../guinea-pig-heart/late.session.json")).ok());
  settle(document);
  CHECK(document.path() == desk.path("guinea-pig-heart/late.session.json"));
  CHECK(document.result()->session.path == document.path().toStdString());
  CHECK(document.result()->session_sha256 == sha256_of(contentOf(document.path())));
  CHECK(document.inputs()->session_sha256 == document.result()->session_sha256);
}

TEST_CASE("undo goes on behind a save", "[ui][document]") {
  const Desk desk;
  SessionDocument document;
  openAndSettle(document, desk.sample("guinea-pig-heart"));
  document.exclude("", Seconds(60.0), Seconds(62.0), "pump");
  REQUIRE(document.save().ok());
  document.undoStack()->undo();
  CHECK(document.isModified());
  CHECK(document.session().review.empty());
  CHECK(document.session().files.front().sha256.has_value()); // no edit, so not undone
  document.undoStack()->redo();
  CHECK_FALSE(document.isModified());
}

TEST_CASE("unknown keys survive a save", "[ui][document]") {
  const Desk desk;
  const QString path = desk.sample("guinea-pig-heart");
  std::string text = contentOf(path);
  text.insert(text.find("\"preparation\""), "\"bench\": {\"number\": 7},\n  ");
  QFile file(path);
  REQUIRE(file.open(QIODevice::WriteOnly));
  file.write(QByteArray::fromStdString(text));
  file.close();
  SessionDocument document;
  openAndSettle(document, path);
  document.exclude("", Seconds(60.0), Seconds(62.0), "pump");
  REQUIRE(document.save().ok());
  CHECK(contentOf(path).find("\"bench\"") != std::string::npos);
  CHECK(contentOf(path).find("\"number\": 7") != std::string::npos);
}

TEST_CASE("a session of a newer program is read, and never written", "[ui][document]") {
  const Desk desk;
  const QString path = desk.sample("guinea-pig-heart");
  std::string text = contentOf(path);
  text.replace(text.find("\"version\": 1"), 12, "\"version\": 9");
  QFile file(path);
  REQUIRE(file.open(QIODevice::WriteOnly));
  file.write(QByteArray::fromStdString(text));
  file.close();
  SessionDocument document;
  QSignalSpy refused(&document, &SessionDocument::refused);
  openAndSettle(document, path);
  CHECK(document.isReadOnly());
  CHECK(document.readOnlyReason().contains(QStringLiteral("newer program")));
  document.exclude("", Seconds(60.0), Seconds(62.0), "pump");
  CHECK(document.undoStack()->count() == 0);
  CHECK(refused.size() == 1);
  CHECK_FALSE(document.save().ok());
  CHECK_FALSE(document.saveAs(desk.path("guinea-pig-heart/copy.session.json")).ok());
  CHECK(contentOf(path) == text);
}

TEST_CASE("a save that fails is said and loses nothing", "[ui][document]") {
  const Desk desk;
  const QString path = desk.sample("guinea-pig-heart");
  const std::string before = contentOf(path);
  SessionDocument document;
  openAndSettle(document, path);
  document.exclude("", Seconds(60.0), Seconds(62.0), "pump");
  // A folder in the way of the temporary file: fails for every user, also for the one who may write
  // everywhere.
  REQUIRE(QDir().mkpath(path + ".part"));
  const Done saved = document.save();
  REQUIRE_FALSE(saved.ok());
  CHECK(saved.error().code == ErrorCode::cannot_write);
  CHECK(document.isModified());
  CHECK(contentOf(path) == before);
  REQUIRE(QDir().rmdir(path + ".part"));
  REQUIRE(document.save().ok());
}
