// Chronodrome, GPL-3.0-or-later.
// Whole flows through the window, by the events that a user's hands make.
#include <QDropEvent>
#include <QLineEdit>
#include <QMimeData>
#include <QPushButton>
#include <QSignalSpy>

#include "intake/session_reader.h"
#include "open_window.h"
#include "ui/look/number_text.h"

using namespace chronodrome;
using test_support::Home;
using test_support::OpenWindow;
using test_support::waitUntil;
using ui::window::Prompts;

namespace {

void drop(QWidget& window, const QStringList& files) {
  QMimeData data;
  QList<QUrl> urls;
  for (const QString& file : files)
    urls << QUrl::fromLocalFile(file);
  data.setUrls(urls);
  QDragEnterEvent enter(QPoint(100, 100), Qt::CopyAction, &data, Qt::LeftButton, Qt::NoModifier);
  QApplication::sendEvent(&window, &enter);
  REQUIRE(enter.isAccepted());
  QDropEvent dropped(QPointF(100, 100), Qt::CopyAction, &data, Qt::LeftButton, Qt::NoModifier);
  QApplication::sendEvent(&window, &dropped);
}

} // namespace

TEST_CASE("the empty window leads to a sample session in one click, on a copy of it", "[ui][window]") {
  const Home home;
  OpenWindow open;
  CHECK_FALSE(open.action("actionSave")->isEnabled());
  CHECK_FALSE(open.action("actionWriteResults")->isEnabled());
  QTest::mouseClick(open.find<QPushButton>("guinea-pig-heartPushButton"), Qt::LeftButton);
  open.settle();
  CHECK(open.window.windowTitle().startsWith(QStringLiteral("SMR-G12")));
  // A copy in the user's data folder, never the one that comes with the program.
  CHECK_FALSE(open.document().path().startsWith(QStringLiteral(CHRONODROME_SOURCE_DIR)));
  CHECK(open.document().path().contains(QStringLiteral("/chronodrome/sample-sessions/guinea-pig-heart/")));
  CHECK(open.document().result()->curves.size() == 4);
  CHECK(open.window.focus().measure() == "rate:RA");
  CHECK(open.message().isEmpty());
}

TEST_CASE("an edit is undone, redone and saved by key, and the file holds it", "[ui][window]") {
  const Home home;
  OpenWindow open;
  open.open(home.session(QStringLiteral("guinea-pig-heart")));
  const auto marks = open.document().result()->activations.front().marks;
  open.document().deleteMark("RA", marks[100].time);
  open.settle();
  CHECK(open.window.isWindowModified());
  CHECK(open.document().result()->activations.front().marks.size() == marks.size() - 1);
  QTest::keyClick(&open.window, Qt::Key_Z, Qt::ControlModifier);
  open.settle();
  CHECK(open.document().result()->activations.front().marks.size() == marks.size());
  CHECK_FALSE(open.window.isWindowModified());
  QTest::keyClick(&open.window, Qt::Key_Z, Qt::ControlModifier | Qt::ShiftModifier);
  open.settle();
  CHECK(open.document().result()->activations.front().marks.size() == marks.size() - 1);
  QTest::keyClick(&open.window, Qt::Key_S, Qt::ControlModifier);
  CHECK_FALSE(open.window.isWindowModified());
  const auto saved = intake::read_session(open.document().path().toStdString());
  REQUIRE(saved);
  REQUIRE(saved->review.size() == 1);
  CHECK(saved->review.front().channel == "RA");
}

TEST_CASE("unsaved edits are asked about once, and staying keeps them", "[ui][window]") {
  const Home home;
  OpenWindow open;
  open.open(home.session(QStringLiteral("guinea-pig-heart")));
  open.trigger("actionClose");
  CHECK(open.answers.asked == 0);
  CHECK_FALSE(open.document().isOpen());
  open.open(home.session(QStringLiteral("guinea-pig-heart")));
  open.document().exclude("", Seconds(10.0), Seconds(20.0), QStringLiteral("tap opened"));
  open.answers.unsaved = Prompts::Unsaved::cancel;
  open.trigger("actionClose");
  CHECK(open.answers.asked == 1);
  CHECK(open.document().isOpen());
  open.answers.unsaved = Prompts::Unsaved::save;
  open.trigger("actionClose");
  CHECK_FALSE(open.document().isOpen());
  const auto saved = intake::read_session(
      home.path(QStringLiteral("guinea-pig-heart/guinea-pig-heart.session.json")).toStdString());
  REQUIRE(saved);
  CHECK(saved->review.size() == 1);
}

TEST_CASE("a dropped recording is shown before it is taken in, and saved beside itself", "[ui][window]") {
  const Home home;
  OpenWindow open;
  const QString recording = home.sample(QStringLiteral("rabbit-heart"), QStringLiteral("recording.edf"));
  QFile::remove(home.path(QStringLiteral("rabbit-heart/rabbit-heart.session.json")));
  drop(open.window, {recording});
  auto* form = open.window.findChild<ui::steps::IntakeForm*>();
  REQUIRE(form != nullptr);
  REQUIRE(waitUntil([&] { return form->isComplete(); }));
  CHECK_FALSE(open.document().isOpen());
  QTest::mouseClick(form->findChild<QPushButton*>(QStringLiteral("takeInPushButton")), Qt::LeftButton);
  open.settle();
  CHECK(open.document().path().isEmpty());
  QTest::keyClick(&open.window, Qt::Key_S, Qt::ControlModifier);
  INFO(open.message().toStdString());
  CHECK(open.document().path() == home.path(QStringLiteral("rabbit-heart/recording.session.json")));
  REQUIRE(QFile::exists(open.document().path()));
  const auto saved = intake::read_session(open.document().path().toStdString());
  REQUIRE(saved);
  CHECK(saved->files.front().path == "recording.edf");
  CHECK(saved->channels.size() == open.document().session().channels.size());
}

TEST_CASE("of a mixed drop the session is opened, and the rest is named", "[ui][window]") {
  const Home home;
  OpenWindow open;
  const QString session = home.session(QStringLiteral("guinea-pig-heart"));
  drop(open.window, {home.path(QStringLiteral("guinea-pig-heart/recording.edf")), session});
  CHECK(open.message().contains(QStringLiteral("2 files were dropped")));
  open.settle();
  CHECK(open.document().path() == session);
}

TEST_CASE("a file that is no recording is told where it happens, and the window goes on", "[ui][window]") {
  const Home home;
  OpenWindow open;
  const QString broken = home.path(QStringLiteral("broken.session.json"));
  QFile file(broken);
  REQUIRE(file.open(QIODevice::WriteOnly));
  file.write("{\"format\": \"chronodrome-session\", \"version\": 1, \"channels\": 7}");
  file.close();
  open.window.openPath(broken);
  REQUIRE(waitUntil([&] { return !open.message().isEmpty(); }));
  CHECK(open.message().contains(QStringLiteral("broken.session.json")));
  CHECK_FALSE(open.document().isOpen());
  open.open(home.session(QStringLiteral("guinea-pig-heart")));
  CHECK(open.message().isEmpty());
}

TEST_CASE("results and report are written from the saved session", "[ui][window]") {
  const Home home;
  OpenWindow open;
  open.open(home.session(QStringLiteral("guinea-pig-heart")));
  open.document().exclude("", Seconds(10.0), Seconds(20.0), QStringLiteral("tap opened"));
  open.settle();
  open.answers.into = home.path(QStringLiteral("results"));
  open.trigger("actionWriteResults");
  CHECK_FALSE(open.window.isWindowModified());
  REQUIRE(waitUntil([&] { return !open.message().isEmpty(); }));
  INFO(open.message().toStdString());
  for (const char* name : {"report.pdf", "report.html", "workbook.xlsx", "responses.csv", "summary.json"})
    CHECK(QFile::exists(home.path(QStringLiteral("results/guinea-pig-heart/") + QLatin1String(name))));
}

TEST_CASE("forms open beside the story, and the curve comes back", "[ui][window]") {
  const Home home;
  OpenWindow open;
  open.open(home.session(QStringLiteral("guinea-pig-heart")));
  const std::pair<const char*, const char*> forms[] = {{"actionAdditions", "additionsForm"},
                                                       {"actionChannels", "sessionForm"},
                                                       {"actionEdits", "editsWidget"}};
  for (const auto& [action, form] : forms) {
    open.trigger(action);
    CHECK(open.find<QWidget>(form)->isVisible());
    CHECK(open.window.findChild<ui::story::StoryPane*>()->isVisible());
  }
  open.trigger("actionAnswer");
  CHECK(open.window.findChild<ui::answer::AnswerPane*>()->isVisible());
}

TEST_CASE("every action that a menu shows is named, and no two share a key", "[ui][window]") {
  const Home home;
  OpenWindow open;
  open.open(home.session(QStringLiteral("guinea-pig-heart")));
  std::map<QString, QString> owner;
  int with_key = 0;
  for (const QAction* one : open.window.findChildren<QAction*>()) {
    if (one->isSeparator() || one->menu() != nullptr || one->text().isEmpty()) continue;
    // Single keys count only in the pane that has the keyboard.
    if (one->shortcutContext() == Qt::WidgetShortcut ||
        one->shortcutContext() == Qt::WidgetWithChildrenShortcut)
      continue;
    for (const QKeySequence& key : one->shortcuts()) {
      const QString text = key.toString();
      INFO(text.toStdString() << ": " << one->text().toStdString() << " and " << owner[text].toStdString());
      CHECK(owner[text].isEmpty());
      owner[text] = one->text();
      ++with_key;
    }
  }
  CHECK(with_key >= 12);
}
