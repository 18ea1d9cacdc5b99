// Chronodrome, GPL-3.0-or-later.
// Which files a save writes, where they lie, and which it leaves alone.
#include <QSignalSpy>

#include "document_desk.h"
#include "intake/protocol_reader.h"
#include "session/proposal.h"

using namespace chronodrome;
using namespace chronodrome::ui;

namespace {

std::shared_ptr<const recording::Recording> recordingOf(const QString& session) {
  const auto inputs = session::load_session(session.toStdString(), {});
  REQUIRE(inputs.ok());
  return inputs->recording;
}

void shiftLog(SessionDocument& document, double seconds) {
  auto log = document.protocol();
  log.events.at(1).time += Seconds(seconds);
  log.events.at(1).note = "moved, \"by hand\"; checked";
  document.setProtocol(log, "edit additions");
}

} // namespace

TEST_CASE("an edited drug log is written to its file, an unedited one is not touched", "[ui][document]") {
  const Desk desk;
  const QString path = desk.sample("atrial-strip");
  const QString log = desk.path("atrial-strip/protocol.csv");
  const std::string before = contentOf(log);
  SessionDocument document;
  openAndSettle(document, path);
  document.exclude("", Seconds(60.0), Seconds(62.0), "pump");
  REQUIRE(document.save().ok());
  CHECK(contentOf(log) == before);

  shiftLog(document, 2.5);
  const Seconds time = document.protocol().events.at(1).time;
  REQUIRE(document.save().ok());
  CHECK(document.session().protocol_file == "protocol.csv");
  CHECK(contentOf(log) != before);
  const auto read = intake::read_protocol(log.toStdString());
  REQUIRE(read.ok());
  REQUIRE(read->events.size() == document.protocol().events.size());
  CHECK(read->events.at(1).time == time);
  CHECK(read->events.at(1).note == "moved, \"by hand\"; checked");

  // The file may spell a unit in another way than the log did; that is nobody else's change.
  shiftLog(document, 0.0);
  auto spelled = document.protocol();
  spelled.events.front().unit = "M";
  document.setProtocol(spelled, "edit additions");
  REQUIRE(document.save().ok());
  document.undoStack()->undo();
  REQUIRE(document.save().ok());

  document.undoStack()->undo();
  REQUIRE(document.save().ok());
  const auto back = intake::read_protocol(log.toStdString());
  REQUIRE(back.ok());
  CHECK(back->events.at(1).time == time - Seconds(2.5));
}

TEST_CASE("an edit turns a log of annotations into a file of its own", "[ui][document]") {
  const Desk desk;
  const QString path = desk.sample("guinea-pig-heart");
  // A file that happens to bear the name is left alone.
  QFile stranger(desk.path("guinea-pig-heart/guinea-pig-heart.protocol.csv"));
  REQUIRE(stranger.open(QIODevice::WriteOnly));
  stranger.write("mine");
  stranger.close();
  SessionDocument document;
  openAndSettle(document, path);
  REQUIRE_FALSE(document.session().protocol_file.has_value());
  shiftLog(document, 1.5);
  settle(document);
  const std::string edited = resultText(document);
  REQUIRE(document.save().ok());
  CHECK(document.session().protocol_file == "guinea-pig-heart.protocol-2.csv");
  CHECK(contentOf(stranger.fileName()) == "mine");
  checkSameOnDisk(document);
  document.close();
  openAndSettle(document, path);
  CHECK(document.protocol().events.at(1).note == "moved, \"by hand\"; checked");
  CHECK(results::responses_csv(*document.result()).size() > 100);
  CHECK(edited.find(results::responses_csv(*document.result())) != std::string::npos);

  shiftLog(document, 1.0);
  REQUIRE(document.save().ok()); // into its own file from now on
  CHECK(document.session().protocol_file == "guinea-pig-heart.protocol-2.csv");
}

TEST_CASE("a log that another session of the folder names is not changed under it", "[ui][document]") {
  const Desk desk;
  const QString path = desk.sample("atrial-strip");
  REQUIRE(QFile::copy(path, desk.path("atrial-strip/second.session.json")));
  const std::string before = contentOf(desk.path("atrial-strip/protocol.csv"));
  SessionDocument document;
  openAndSettle(document, path);
  shiftLog(document, 2.0);
  REQUIRE(document.save().ok());
  CHECK(contentOf(desk.path("atrial-strip/protocol.csv")) == before);
  CHECK(document.session().protocol_file == "atrial-strip.protocol.csv");
}

TEST_CASE("a copy under another name leaves the first session as it was", "[ui][document]") {
  const Desk desk;
  const QString path = desk.sample("atrial-strip", "lab/day 1");
  const std::string session_before = contentOf(path);
  const std::string log_before = contentOf(desk.path("lab/day 1/protocol.csv"));
  SessionDocument document;
  openAndSettle(document, path);
  QSignalSpy moved(&document, &SessionDocument::pathChanged);

  SECTION("in the same folder, with an edited log") {
    shiftLog(document, 2.0);
    REQUIRE(document.saveAs(desk.path("lab/day 1/second.session.json")).ok());
    CHECK(document.session().protocol_file == "second.protocol.csv");
    CHECK(document.session().files.front().path == "recording.csv");
    CHECK(document.title() == QString::fromStdString(document.session().preparation.label));
  }
  SECTION("in a folder above") {
    REQUIRE(document.saveAs(desk.path("lab/second.session.json")).ok());
    CHECK(document.session().files.front().path == "day 1/recording.csv");
    CHECK(document.session().protocol_file == "day 1/protocol.csv");
  }
  CHECK(moved.size() == 1);
  CHECK_FALSE(document.isModified());
  checkSameOnDisk(document);
  CHECK(contentOf(path) == session_before);
  CHECK(contentOf(desk.path("lab/day 1/protocol.csv")) == log_before);
  const QString second = document.path();
  document.close();
  openAndSettle(document, second);
}

TEST_CASE("a session file must lie above its recording", "[ui][document]") {
  const Desk desk;
  const QString path = desk.sample("atrial-strip", "lab/day1");
  REQUIRE(QDir().mkpath(desk.path("lab/day2")));
  REQUIRE(QDir().mkpath(desk.path("lab/day1/inner")));
  SessionDocument document;
  openAndSettle(document, path);
  for (const QString& folder : {desk.path("lab/day2"), desk.path("lab/day1/inner")}) {
    const Done saved = document.saveAs(folder + "/copy.session.json");
    REQUIRE_FALSE(saved.ok());
    CHECK(saved.error().code == ErrorCode::cannot_write);
    CHECK(saved.error().what.find("recording.csv") != std::string::npos);
    CHECK(saved.error().remedy.find(desk.path("lab/day1").toStdString()) != std::string::npos);
    CHECK_FALSE(QFile::exists(folder + "/copy.session.json"));
  }
  CHECK(document.path() == path);
}

TEST_CASE("a recording taken in is a session of its folder", "[ui][document]") {
  const Desk desk;
  const QString from = desk.sample("guinea-pig-heart");
  const auto recording = recordingOf(from);
  auto proposed = session::propose(*recording).session;
  SessionDocument document;
  QSignalSpy opened(&document, &SessionDocument::opened);
  const auto log = session::load_session(from.toStdString(), {})->protocol;
  document.adopt(proposed, log, recording);
  CHECK(opened.size() == 1);
  CHECK(document.isOpen());
  CHECK(document.isModified());
  CHECK(document.path().isEmpty());
  CHECK(document.title() == QStringLiteral("new session"));
  settle(document);

  CHECK_FALSE(document.save().ok()); // it has no name
  REQUIRE(QDir().mkpath(desk.path("other")));
  const Done refused = document.saveAs(desk.path("other/new.session.json"));
  REQUIRE_FALSE(refused.ok());
  CHECK(refused.error().remedy.find(desk.path("guinea-pig-heart").toStdString()) != std::string::npos);

  REQUIRE(document.saveAs(desk.path("new.session.json")).ok());
  CHECK(document.session().files.front().path == "guinea-pig-heart/recording.edf");
  CHECK(document.session().files.front().sha256 == recording->files.front().sha256);
  CHECK_FALSE(document.session().protocol_file.has_value()); // the annotations say the same
  CHECK_FALSE(document.isModified());
  CHECK(document.title() == QStringLiteral("new"));
  checkSameOnDisk(document);
}

TEST_CASE("a drug log that was typed for a new session gets a file", "[ui][document]") {
  const Desk desk;
  const QString from = desk.sample("atrial-strip");
  const auto inputs = session::load_session(from.toStdString(), {});
  REQUIRE(inputs.ok());
  const auto recording = inputs->recording;
  auto log = inputs->protocol;
  auto proposed = session::propose(*recording).session;
  proposed.csv = inputs->session.csv;
  SessionDocument document;
  SECTION("typed") {
    log.file.clear();
    document.adopt(proposed, log, recording);
    REQUIRE(document.saveAs(desk.path("atrial-strip/new.session.json")).ok());
    CHECK(document.session().protocol_file == "new.protocol.csv");
  }
  SECTION("the one beside the recording") {
    proposed.protocol_file = desk.path("atrial-strip/protocol.csv").toStdString();
    document.adopt(proposed, log, recording);
    REQUIRE(document.saveAs(desk.path("atrial-strip/new.session.json")).ok());
    CHECK(document.session().protocol_file == "protocol.csv");
  }
  SECTION("the one beside the recording, changed in the form") {
    proposed.protocol_file = "protocol.csv";
    log.events.at(1).time += Seconds(1.0);
    document.adopt(proposed, log, recording);
    REQUIRE(document.saveAs(desk.path("atrial-strip/new.session.json")).ok());
    CHECK(document.session().protocol_file == "new.protocol.csv");
  }
  checkSameOnDisk(document);
  settle(document);
  const auto events = document.protocol().events.size();
  document.close();
  openAndSettle(document, desk.path("atrial-strip/new.session.json"));
  CHECK(document.protocol().events.size() == events);
  CHECK(document.protocol().events.at(1).time == log.events.at(1).time);
}

TEST_CASE("what another program wrote meanwhile is not written over", "[ui][document]") {
  const Desk desk;
  const QString path = desk.sample("atrial-strip");
  const auto append = [](const QString& file, const char* text) {
    QFile changed(file);
    REQUIRE(changed.open(QIODevice::Append));
    changed.write(text);
  };
  SessionDocument document;
  openAndSettle(document, path);
  SECTION("the session") {
    append(path, "\n");
    const std::string theirs = contentOf(path);
    document.exclude("", Seconds(60.0), Seconds(62.0), "pump");
    CHECK_FALSE(document.save().ok());
    CHECK(contentOf(path) == theirs);
    CHECK(document.isModified());
    REQUIRE(document.saveAs(path).ok()); // said twice is meant
    document.exclude("", Seconds(70.0), Seconds(72.0), "pump");
    REQUIRE(document.save().ok());
  }
  SECTION("the drug log") {
    const QString log = desk.path("atrial-strip/protocol.csv");
    append(log, "9000,note,,,,theirs\n");
    const std::string theirs = contentOf(log);
    document.exclude("", Seconds(60.0), Seconds(62.0), "pump");
    REQUIRE(document.save().ok()); // does not concern it
    shiftLog(document, 2.0);
    CHECK_FALSE(document.save().ok());
    CHECK(contentOf(log) == theirs);
    REQUIRE(document.saveAs(desk.path("atrial-strip/copy.session.json")).ok());
    CHECK(contentOf(log) == theirs);
    CHECK(document.session().protocol_file == "copy.protocol.csv");
  }
}
