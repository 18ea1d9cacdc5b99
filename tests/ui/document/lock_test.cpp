// Chronodrome, GPL-3.0-or-later.
// Two programs on one session: the second one reads only, and says who has it.
#include "ui/document/session_lock.h"

#include <QFileInfo>
#include <QProcess>
#include <QStandardPaths>

#include "document_desk.h"

using namespace chronodrome;
using namespace chronodrome::ui;

namespace {

/// Outside Qt's test mode the lock lies beside the session, as for a user.
class AsUser {
public:
  AsUser() { QStandardPaths::setTestModeEnabled(false); }
  ~AsUser() { QStandardPaths::setTestModeEnabled(true); }
  AsUser(const AsUser&) = delete;
  AsUser& operator=(const AsUser&) = delete;
};

} // namespace

TEST_CASE("the program that holds a lock", "[.child]") {
  const QString session = qEnvironmentVariable("CHRONODROME_TEST_LOCK");
  if (session.isEmpty()) return;
  QStandardPaths::setTestModeEnabled(false);
  SessionLock lock;
  REQUIRE(lock.take(session));
  std::printf("held\n");
  std::fflush(stdout);
  QTest::qWait(120'000);
}

TEST_CASE("the second opener reads only until the first has gone", "[ui][document]") {
  const Desk desk;
  const AsUser as_user;
  const QString path = desk.sample("guinea-pig-heart");
  const QString lock_file = desk.path("guinea-pig-heart/.guinea-pig-heart.session.json.lock");
  QProcess other;
  auto environment = QProcessEnvironment::systemEnvironment();
  environment.insert(QStringLiteral("CHRONODROME_TEST_LOCK"), path);
  other.setProcessEnvironment(environment);
  other.start(QCoreApplication::applicationFilePath(), {QStringLiteral("the program that holds a lock")});
  REQUIRE(waitUntil([&] {
    other.waitForReadyRead(10);
    return other.readAllStandardOutput().contains("held");
  }));

  SessionDocument document;
  openAndSettle(document, path);
  CHECK(document.isReadOnly());
  INFO(document.readOnlyReason().toStdString());
  CHECK(document.readOnlyReason().contains(QStringLiteral("process %1").arg(other.processId())));
  CHECK(document.readOnlyReason().contains(QSysInfo::machineHostName()));
  document.exclude("", Seconds(60.0), Seconds(62.0), "pump");
  CHECK(document.undoStack()->count() == 0);
  CHECK_FALSE(document.save().ok());

  // A copy under another name may be edited.
  REQUIRE(document.saveAs(desk.path("guinea-pig-heart/copy.session.json")).ok());
  CHECK_FALSE(document.isReadOnly());
  document.exclude("", Seconds(60.0), Seconds(62.0), "pump");
  CHECK(document.undoStack()->count() == 1);
  CHECK_FALSE(document.saveAs(path).ok()); // not over the other's

  other.kill();
  other.waitForFinished();
  REQUIRE(QFile::exists(lock_file)); // nobody removed it
  openAndSettle(document, path);
  CHECK_FALSE(document.isReadOnly());
  document.close();
  CHECK_FALSE(QFile::exists(lock_file));
}

TEST_CASE("two windows of one program are two openers", "[ui][document]") {
  const Desk desk;
  const QString path = desk.sample("guinea-pig-heart");
  SessionDocument first, second;
  openAndSettle(first, path);
  openAndSettle(second, path);
  CHECK_FALSE(first.isReadOnly());
  CHECK(second.isReadOnly());
  openAndSettle(first, path); // one's own lock is no obstacle
  CHECK_FALSE(first.isReadOnly());
  first.close();
  openAndSettle(second, path);
  CHECK_FALSE(second.isReadOnly());
}

TEST_CASE("two names of one session are one session", "[ui][document]") {
  const Desk desk;
  const AsUser as_user;
  const QString path = desk.sample("guinea-pig-heart");
  REQUIRE(QFile::link(path, desk.path("link.session.json")));
  SessionLock first, second;
  REQUIRE(first.take(path));
  CHECK_FALSE(second.take(desk.path("link.session.json")));
  CHECK_FALSE(second.holder().isEmpty());
  first.release();
  CHECK(second.take(desk.path("link.session.json")));
}

TEST_CASE("a folder that cannot be written gives no lock and no holder", "[ui][document]") {
  const Desk desk;
  const AsUser as_user;
  SessionLock lock;
  CHECK_FALSE(lock.take(desk.path("no such folder/a.session.json")));
  CHECK(lock.holder().isEmpty());
  CHECK_FALSE(lock.isHeld());
}
