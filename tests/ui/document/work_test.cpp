// Chronodrome, GPL-3.0-or-later.
// Reading and analysing in the background: progress, cancelling, bursts, failures.
#include <QElapsedTimer>
#include <QSignalSpy>
#include <QThread>
#include <memory>

#include "document_desk.h"
#include "ui/look/number_text.h"

using namespace chronodrome;
using namespace chronodrome::ui;
using Work = SessionDocument::Work;

TEST_CASE("an empty document says so", "[ui][document]") {
  const Desk desk;
  SessionDocument document;
  CHECK_FALSE(document.isOpen());
  CHECK_FALSE(document.isModified());
  CHECK_FALSE(document.isStale());
  CHECK_FALSE(document.isReadOnly());
  CHECK(document.path().isEmpty());
  CHECK(document.title() == QStringLiteral("new session"));
  CHECK(document.result() == nullptr);
  CHECK(document.inputs() == nullptr);
  CHECK(document.recording() == nullptr);
  CHECK(document.protocol().events.empty());
  CHECK(document.preview({}) == nullptr);
  CHECK_FALSE(document.save().ok());
  document.addMark("RA", Seconds(1.0));
  document.analyseAgain();
  document.close();
  CHECK(document.undoStack()->count() == 0);
  CHECK(document.work() == Work::none);
}

TEST_CASE("opening reads, then analyses, and gives what the engine gives", "[ui][document]") {
  const Desk desk;
  const QString path = desk.sample("guinea-pig-heart");
  SessionDocument document;
  QSignalSpy opened(&document, &SessionDocument::opened), changed(&document, &SessionDocument::resultChanged);
  bool on_window_thread = true;
  double highest = 0.0;
  bool falls = false;
  QObject::connect(&document, &SessionDocument::workChanged, [&] {
    on_window_thread = on_window_thread && QThread::currentThread() == document.thread();
    if (document.work() != Work::analysing) return;
    falls = falls || document.workShare() < highest;
    highest = std::max(highest, document.workShare());
  });
  document.open(path);
  CHECK(document.work() == Work::reading);
  CHECK(document.workText().contains(QStringLiteral("guinea-pig-heart.session.json")));
  REQUIRE(waitUntil([&] { return !opened.isEmpty(); }));
  CHECK(document.isOpen());
  CHECK(document.result() == nullptr);
  CHECK(document.work() == Work::analysing);
  REQUIRE(waitUntil([&] { return !changed.isEmpty(); }));
  settle(document);
  CHECK(document.path() == path);
  CHECK(document.title() == QStringLiteral("SMR-G12"));
  CHECK(on_window_thread);
  CHECK_FALSE(falls);
  CHECK(highest > 0.5);

  const auto inputs = session::load_session(path.toStdString(), {});
  REQUIRE(inputs.ok());
  const auto expected = session::analyse(*inputs, 1);
  REQUIRE(expected.ok());
  std::string text;
  for (const auto& file : results::result_files(*expected, "test"))
    text += file.name + "\n" + file.content;
  CHECK(resultText(document) == text);
}

TEST_CASE("a burst of edits is one analysis", "[ui][document]") {
  const Desk desk;
  SessionDocument document;
  openAndSettle(document, desk.sample("guinea-pig-heart"));
  QSignalSpy changed(&document, &SessionDocument::resultChanged), edited(&document, &SessionDocument::edited);
  for (int i = 0; i < 30; ++i)
    document.exclude("RA", Seconds(60.0 + i), Seconds(60.5 + i), "noise");
  CHECK(document.isStale());
  settle(document);
  CHECK(edited.size() == 30);
  CHECK(changed.size() == 1);
  CHECK(document.result()->session.review.size() == 30);
}

TEST_CASE("edits that arrive while an analysis runs start it anew", "[ui][document]") {
  const Desk desk;
  SessionDocument document;
  openAndSettle(document, desk.sample("guinea-pig-heart"));
  QSignalSpy changed(&document, &SessionDocument::resultChanged);
  std::vector<std::size_t> seen; // corrections in each result
  QObject::connect(&document, &SessionDocument::resultChanged,
                   [&] { seen.push_back(document.result()->session.review.size()); });
  for (int i = 0; i < 10; ++i) {
    document.exclude("RA", Seconds(60.0 + i), Seconds(60.5 + i), "noise");
    // The first run of each pass is well under way, or just done.
    waitUntil([&] { return document.workShare() > 0.0 && document.work() == Work::analysing; }, 1000);
  }
  settle(document);
  REQUIRE_FALSE(seen.empty());
  CHECK(seen.back() == 10);
  CHECK(std::is_sorted(seen.begin(), seen.end()));
  CHECK(document.result()->session.review.size() == 10);
}

TEST_CASE("an analysis that fails is said and leaves the last result", "[ui][document]") {
  const Desk desk;
  SessionDocument document;
  openAndSettle(document, desk.sample("guinea-pig-heart"));
  const auto result = document.result();
  QSignalSpy failed(&document, &SessionDocument::failed);
  auto session = document.session();
  SECTION("in a stage") {
    session.channels.front().source = "no such signal";
  }
  SECTION("in the settings") {
    session.analysis["response.window_s"] = -1.0;
  }
  document.setSession(session, "spoil the session");
  REQUIRE(waitUntil([&] { return !failed.isEmpty(); }));
  REQUIRE(waitUntil([&] { return document.work() == Work::none; }));
  CHECK(failed.size() == 1);
  CHECK_FALSE(failed.front().front().toString().isEmpty());
  REQUIRE(document.lastError().has_value());
  CHECK(look::messageText(*document.lastError()) == failed.front().front().toString());
  CHECK(document.result() == result);
  CHECK(document.isStale());
  CHECK(document.inputs() != nullptr);
  document.undoStack()->undo();
  settle(document);
  CHECK_FALSE(document.lastError().has_value());
}

TEST_CASE("a file that cannot be read is said and leaves the open session", "[ui][document]") {
  const Desk desk;
  const QString path = desk.sample("guinea-pig-heart");
  SessionDocument document;
  QSignalSpy failed(&document, &SessionDocument::failed);
  document.open(desk.path("missing.session.json"));
  REQUIRE(waitUntil([&] { return !failed.isEmpty(); }));
  CHECK(failed.front().back().toString() == desk.path("missing.session.json"));
  CHECK_FALSE(document.isOpen());

  openAndSettle(document, path);
  const auto result = document.result();
  document.open(desk.path("missing.session.json"));
  REQUIRE(waitUntil([&] { return failed.size() == 2; }));
  CHECK(document.isOpen());
  CHECK(document.path() == path);
  CHECK(document.result() == result);
}

TEST_CASE("cancelled work leaves the last result, and can be taken up again", "[ui][document]") {
  const Desk desk;
  const QString path = desk.sample("guinea-pig-heart");
  SessionDocument document;
  QSignalSpy failed(&document, &SessionDocument::failed), opened(&document, &SessionDocument::opened);
  document.open(path);
  document.cancelWork();
  CHECK(document.work() == Work::none);
  document.open(path); // waits for the one that is still ending
  CHECK(document.work() == Work::reading);
  REQUIRE(waitUntil([&] { return !opened.isEmpty(); }));
  REQUIRE(waitUntil([&] { return document.work() == Work::analysing && document.workShare() > 0.0; }));
  document.cancelWork();
  CHECK(document.work() == Work::none);
  QTest::qWait(300); // for a result that must not come
  CHECK(opened.size() == 1);
  CHECK(document.result() == nullptr);
  CHECK(failed.isEmpty());
  document.analyseAgain();
  settle(document);

  const auto result = document.result();
  document.exclude("", Seconds(60.0), Seconds(70.0), "pump");
  document.cancelWork();
  CHECK(document.isStale());
  CHECK(document.result() == result);
  document.analyseAgain();
  settle(document);
  CHECK(document.result() != result);
  CHECK(failed.isEmpty());
}

TEST_CASE("reading tells how far it is and stops soon", "[ui][document]") {
  const Desk desk;
  const QString path = desk.sample("atrial-strip");
  const QByteArray cache = qgetenv("XDG_CACHE_HOME");
  qputenv("XDG_CACHE_HOME", desk.path("cache").toUtf8()); // so that the table is read and not only its cache
  SessionDocument document;
  double highest = 0.0;
  QString text;
  QObject::connect(&document, &SessionDocument::workChanged, [&] {
    if (document.work() != Work::reading) return;
    highest = std::max(highest, document.workShare());
    text = document.workText();
  });
  document.open(path);
  REQUIRE(waitUntil([&] { return highest > 0.2; }));
  CHECK(text == QStringLiteral("reading recording.csv"));
  document.cancelWork();
  QElapsedTimer since;
  since.start();
  document.open(desk.path("missing.session.json"));
  QSignalSpy failed(&document, &SessionDocument::failed);
  REQUIRE(waitUntil([&] { return !failed.isEmpty(); }));
  CHECK(failed.size() == 1);
  CHECK(since.elapsed() < 2000); // a user waits half a second at most; the machine may be busy
  CHECK_FALSE(document.isOpen());
  openAndSettle(document, path);
  CHECK(highest > 0.8);
  qputenv("XDG_CACHE_HOME", cache);
}

TEST_CASE("several files are read as one recording", "[ui][document]") {
  const Desk desk;
  const QString path = desk.sample("guinea-pig-heart");
  std::string text = contentOf(path);
  const std::string one = "{\"path\": \"recording.edf\"}";
  text.replace(text.find(one), one.size(), one + ", {\"path\": \"second.edf\"}");
  QFile file(path);
  REQUIRE(file.open(QIODevice::WriteOnly));
  file.write(QByteArray::fromStdString(text));
  file.close();
  // The same hours again, as the recorder would have called them: the engine says that they overlap.
  REQUIRE(QFile::copy(desk.path("guinea-pig-heart/recording.edf"), desk.path("guinea-pig-heart/second.edf")));
  SessionDocument document;
  QSignalSpy failed(&document, &SessionDocument::failed);
  document.open(path);
  REQUIRE(waitUntil([&] { return !failed.isEmpty(); }));
  const auto expected = session::load_session(path.toStdString(), {});
  REQUIRE_FALSE(expected.ok());
  CHECK(failed.front().front().toString() == look::messageText(expected.error()));
}

TEST_CASE("a session takes the place of another, and none at all", "[ui][document]") {
  const Desk desk;
  const QString heart = desk.sample("guinea-pig-heart"), strip = desk.sample("atrial-strip");
  SessionDocument document;
  openAndSettle(document, heart);
  document.exclude("", Seconds(60.0), Seconds(70.0), "pump");
  QSignalSpy closed(&document, &SessionDocument::closed),
      modified(&document, &SessionDocument::modifiedChanged);
  openAndSettle(document, strip);
  CHECK(closed.isEmpty());
  CHECK(document.path() == strip);
  CHECK_FALSE(document.isModified());
  CHECK(modified.size() == 1);
  CHECK(document.undoStack()->count() == 0);
  document.close();
  CHECK(closed.size() == 1);
  CHECK_FALSE(document.isOpen());
  CHECK(document.result() == nullptr);
  CHECK(document.session().channels.empty());
  CHECK(document.title() == QStringLiteral("new session"));
}

TEST_CASE("the document may go at any moment of a run", "[ui][document]") {
  const Desk desk;
  const QString path = desk.sample("guinea-pig-heart");
  for (const double share : {-1.0, 0.0, 0.05, 0.3, 0.6, 0.9}) {
    auto document = std::make_unique<SessionDocument>();
    document->open(path);
    // -1: while it reads. The rest: an analysis that has come so far.
    if (share >= 0.0) {
      waitUntil([&] {
        return document->result() || (document->work() == Work::analysing && document->workShare() >= share);
      });
    }
    document.reset();
    QCoreApplication::processEvents();
  }
  SUCCEED("no crash, no hang");
}
