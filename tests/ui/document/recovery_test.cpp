// Chronodrome, GPL-3.0-or-later.
// Unsaved edits outlive a program that is killed. The killed program is this test binary, started again.
#include "ui/document/recovery.h"

#include <QElapsedTimer>
#include <QProcess>
#include <QSignalSpy>

#include "document_desk.h"
#include "session/proposal.h"

using namespace chronodrome;
using namespace chronodrome::ui;

namespace {

constexpr const char* kJob = "CHRONODROME_TEST_JOB";

/// This binary as another program, until it is killed.
class OtherProgram {
public:
  OtherProgram(const QString& job, const QString& session) {
    auto environment = QProcessEnvironment::systemEnvironment();
    environment.insert(QString::fromLatin1(kJob), job);
    environment.insert(QStringLiteral("CHRONODROME_TEST_SESSION"), session);
    process_.setProcessEnvironment(environment);
    process_.start(QCoreApplication::applicationFilePath(), {QStringLiteral("the other program")});
    REQUIRE(process_.waitForStarted());
  }
  ~OtherProgram() { kill(); }
  OtherProgram(const OtherProgram&) = delete;
  OtherProgram& operator=(const OtherProgram&) = delete;

  void waitForWord(const QByteArray& word) {
    REQUIRE(waitUntil([&] {
      process_.waitForReadyRead(10);
      said_ += process_.readAllStandardOutput();
      return said_.contains(word) || process_.state() == QProcess::NotRunning;
    }));
    INFO(said_.toStdString());
    REQUIRE(said_.contains(word));
  }
  void kill() {
    if (process_.state() == QProcess::NotRunning) return;
    process_.kill(); // SIGKILL
    process_.waitForFinished();
  }
  [[nodiscard]] qint64 pid() const { return process_.processId(); }

private:
  QProcess process_;
  QByteArray said_;
};

void say(const char* word) {
  std::printf("%s\n", word);
  std::fflush(stdout);
}

} // namespace

TEST_CASE("the other program", "[.child]") {
  const QString job = qEnvironmentVariable(kJob);
  const QString path = qEnvironmentVariable("CHRONODROME_TEST_SESSION");
  if (job.isEmpty()) return;
  SessionDocument document;
  if (job == QStringLiteral("take in")) {
    const auto inputs = session::load_session(path.toStdString(), {});
    REQUIRE(inputs.ok());
    auto proposed = session::propose(*inputs->recording).session;
    proposed.csv = inputs->session.csv;
    document.adopt(proposed, inputs->protocol, inputs->recording);
  } else {
    openAndSettle(document, path);
  }
  if (job == QStringLiteral("edit")) {
    auto log = document.protocol();
    log.events.at(1).note = "late";
    document.setProtocol(log, "edit additions");
    document.exclude("", Seconds(60.0), Seconds(62.0), "pump");
  } else if (job == QStringLiteral("edit much")) {
    for (int i = 0; i < 20; ++i)
      document.exclude("", Seconds(60.0 + i), Seconds(60.5 + i), "pump");
  }
  say("ready");
  QTest::qWait(120'000); // until it is killed
}

TEST_CASE("unsaved edits survive a kill, and can be compared with the file", "[ui][document]") {
  const Desk desk;
  const QString path = desk.sample("atrial-strip");
  const std::string on_disk = contentOf(path),
                    log_on_disk = contentOf(desk.path("atrial-strip/protocol.csv"));
  {
    OtherProgram other("edit", path);
    other.waitForWord("ready");
    QElapsedTimer since;
    since.start();
    REQUIRE(waitUntil([&] { return !journalsIn(desk.recovery()).isEmpty(); }, 20'000));
    const auto took = since.elapsed();
    WARN("edits were on the disk after " << took << " ms");
    CHECK(took <= 5000);
    CHECK(Recovery().leftOver().empty()); // it lives
    other.kill();
  }
  CHECK(contentOf(path) == on_disk);
  const auto left = Recovery().leftOver();
  REQUIRE(left.size() == 1);
  CHECK(left.front().session_path == path);
  CHECK(left.front().edits == 2);
  CHECK(left.front().is_recording_there);
  CHECK(left.front().recording_paths == QStringList{desk.path("atrial-strip/recording.csv")});
  CHECK(left.front().written.secsTo(QDateTime::currentDateTimeUtc()) < 120);

  SessionDocument document;
  Recovery().restore(left.front(), document);
  settle(document);
  CHECK(document.path() == path);
  CHECK_FALSE(document.isReadOnly()); // the dead program's lock is gone
  CHECK(document.isModified());
  CHECK(document.undoStack()->undoText() == QStringLiteral("recover unsaved edits"));
  CHECK(document.session().review.size() == 1);
  CHECK(document.session().review.front().why == "pump");
  CHECK(document.protocol().events.at(1).note == "late");
  CHECK(document.result()->session.review.size() == 1);
  // This program keeps the edits now, the dead one's journal is gone.
  REQUIRE(waitUntil([&] { return !QFile::exists(left.front().journal); }));
  CHECK(journalsIn(desk.recovery()).size() == 1);

  document.undoStack()->undo();
  CHECK_FALSE(document.isModified());
  CHECK(document.session().review.empty());
  document.undoStack()->redo();
  REQUIRE(document.save().ok());
  CHECK(waitUntil([&] { return journalsIn(desk.recovery()).isEmpty(); }, 5000));
  CHECK(contentOf(path).find("pump") != std::string::npos);
  CHECK(contentOf(desk.path("atrial-strip/protocol.csv")) != log_on_disk);
  CHECK(Recovery().leftOver().empty());
}

TEST_CASE("many edits are kept at once", "[ui][document]") {
  const Desk desk;
  OtherProgram other("edit much", desk.sample("atrial-strip"));
  other.waitForWord("ready");
  REQUIRE(waitUntil([&] { return !journalsIn(desk.recovery()).isEmpty(); }, 1500)); // the timer waits longer
  other.kill();
  const auto left = Recovery().leftOver();
  REQUIRE(left.size() == 1);
  CHECK(left.front().edits == 20);
}

TEST_CASE("a recording taken in and never saved survives a kill", "[ui][document]") {
  const Desk desk;
  const QString from = desk.sample("atrial-strip");
  OtherProgram other("take in", from);
  other.waitForWord("ready");
  REQUIRE(waitUntil([&] { return !journalsIn(desk.recovery()).isEmpty(); }));
  other.kill();
  const auto left = Recovery().leftOver();
  REQUIRE(left.size() == 1);
  CHECK(left.front().session_path.isEmpty());
  CHECK(left.front().edits == 1);
  SessionDocument document;
  QSignalSpy failed(&document, &SessionDocument::failed);
  Recovery().restore(left.front(), document);
  settle(document);
  CHECK(failed.isEmpty());
  CHECK(document.isModified());
  CHECK(document.path().isEmpty());
  CHECK(document.protocol().events.size() > 3);
  REQUIRE(document.saveAs(desk.path("atrial-strip/taken-in.session.json")).ok());
  CHECK(waitUntil([&] { return journalsIn(desk.recovery()).isEmpty(); }, 5000));
}

TEST_CASE("a journal that cannot be restored stays", "[ui][document]") {
  const Desk desk;
  const QString path = desk.sample("atrial-strip");
  {
    OtherProgram other("edit", path);
    other.waitForWord("ready");
    REQUIRE(waitUntil([&] { return !journalsIn(desk.recovery()).isEmpty(); }));
  }
  REQUIRE(QFile::rename(desk.path("atrial-strip/recording.csv"), desk.path("away.csv")));
  const auto left = Recovery().leftOver();
  REQUIRE(left.size() == 1);
  CHECK_FALSE(left.front().is_recording_there);
  SessionDocument document;
  QSignalSpy failed(&document, &SessionDocument::failed);
  Recovery().restore(left.front(), document);
  REQUIRE(waitUntil([&] { return !failed.isEmpty(); }));
  CHECK(Recovery().leftOver().size() == 1);
  REQUIRE(Recovery().discard(left.front()).ok());
  CHECK(Recovery().leftOver().empty());
  CHECK(Recovery().discard(left.front()).ok()); // gone already
}

TEST_CASE("a session file that is gone or spoilt is recovered as a new one", "[ui][document]") {
  const Desk desk;
  const QString path = desk.sample("atrial-strip");
  {
    OtherProgram other("edit", path);
    other.waitForWord("ready");
    REQUIRE(waitUntil([&] { return !journalsIn(desk.recovery()).isEmpty(); }));
  }
  REQUIRE(QFile::remove(path));
  SessionDocument document;
  Recovery().restore(Recovery().leftOver().at(0), document);
  settle(document);
  CHECK(document.path().isEmpty());
  CHECK(document.isModified());
  CHECK(document.session().review.size() == 1);
  CHECK(document.protocol().events.at(1).note == "late");
}
