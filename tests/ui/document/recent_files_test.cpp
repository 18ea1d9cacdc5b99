// Chronodrome, GPL-3.0-or-later.
#include "ui/document/recent_files.h"

#include <QSignalSpy>

#include "document_desk.h"

using namespace chronodrome::ui;

namespace {

QString touched(const Desk& desk, const QString& name) {
  QFile file(desk.path(name));
  REQUIRE(file.open(QIODevice::WriteOnly));
  return file.fileName();
}

} // namespace

TEST_CASE("the latest file stands first, once, also in the next program", "[ui][document]") {
  const Desk desk;
  const QString a = touched(desk, "a, with comma.session.json"), b = touched(desk, "b µ.session.json");
  {
    RecentFiles recent;
    QSignalSpy changed(&recent, &RecentFiles::changed);
    CHECK(recent.files().empty());
    recent.add(a);
    recent.add(b);
    recent.add(a);
    CHECK(changed.size() == 3);
    recent.add({});
    CHECK(changed.size() == 3);
  }
  REQUIRE(QFile::exists(desk.path("config/chronodrome/recent.ini")));
  RecentFiles recent;
  REQUIRE(recent.files().size() == 2);
  CHECK(recent.files().at(0).path == a);
  CHECK(recent.files().at(0).name == QStringLiteral("a, with comma.session.json"));
  CHECK(recent.files().at(1).path == b);
  CHECK(recent.files().at(1).isThere);
  REQUIRE(QFile::remove(b));
  CHECK_FALSE(recent.files().at(1).isThere);

  RecentFiles other_window;
  other_window.add(desk.path("c.session.json"));
  recent.add(b);
  CHECK(recent.files().size() == 3); // what the other window opened is not lost
  recent.remove(a);
  CHECK(RecentFiles().files().size() == 2);
  recent.clear();
  CHECK(RecentFiles().files().empty());
}

TEST_CASE("no more files are kept than fit a menu", "[ui][document]") {
  const Desk desk;
  RecentFiles recent;
  for (int i = 0; i < 40; ++i)
    recent.add(desk.path(QStringLiteral("%1.session.json").arg(i)));
  REQUIRE(recent.files().size() == std::size_t(RecentFiles::kMost));
  CHECK(recent.files().front().name == QStringLiteral("39.session.json"));
}

TEST_CASE("where nothing can be written the list lasts as long as the program", "[ui][document]") {
  const Desk desk;
  const QString obstacle = touched(desk, "obstacle");
  RecentFiles recent(nullptr, obstacle + QStringLiteral("/config"));
  recent.add(obstacle);
  REQUIRE(recent.files().size() == 1);
  recent.add(desk.path("b"));
  CHECK(recent.files().size() == 2);
}

TEST_CASE("folders follow the XDG variables, absolute ones only", "[ui][document]") {
  const Desk desk;
  CHECK(stateFolder() == desk.path("state/chronodrome"));
  CHECK(configFolder() == desk.path("config/chronodrome"));
  qputenv("XDG_STATE_HOME", "relative/state");
  CHECK(stateFolder() == QDir::homePath() + QStringLiteral("/.local/state/chronodrome"));
}
