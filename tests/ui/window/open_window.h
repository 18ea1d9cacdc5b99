// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <QAction>
#include <QDir>
#include <QFile>
#include <QTemporaryDir>
#include <QTest>
#include <catch2/catch.hpp>
#include <functional>

#include "ui/window/main_window.h"

namespace chronodrome::test_support {

/// Answers what the window would ask.
class ReadyAnswers : public ui::window::Prompts {
public:
  QString fileToOpen(QWidget*, const QString&, const QString&, const QString&) override { return open; }
  QString fileToSave(QWidget*, const QString&, const QString& proposed, const QString&) override {
    return save.isEmpty() ? proposed : save;
  }
  QString folder(QWidget*, const QString&, const QString&) override { return into; }
  Unsaved unsavedEdits(QWidget*, const QString&) override {
    ++asked;
    return unsaved;
  }

  QString open, save, into;
  Unsaved unsaved = Unsaved::discard;
  int asked = 0;
};

/// The user's folders of one test, gone when it ends.
class Home {
public:
  Home() {
    REQUIRE(folder_.isValid());
    for (const char* name : {"XDG_STATE_HOME", "XDG_CONFIG_HOME", "XDG_DATA_HOME"})
      qputenv(name, path(QString::fromLatin1(name).toLower()).toUtf8());
  }
  [[nodiscard]] QString path(const QString& inner) const { return folder_.filePath(inner); }
  /// A copy of a sample session; returns the path of `file` in it.
  [[nodiscard]] QString sample(const QString& name, const QString& file) const {
    const QDir from(QStringLiteral(CHRONODROME_SOURCE_DIR "/sample-sessions/") + name);
    REQUIRE(QDir().mkpath(path(name)));
    for (const QString& one : from.entryList(QDir::Files))
      QFile::copy(from.filePath(one), QDir(path(name)).filePath(one));
    return QDir(path(name)).filePath(file);
  }
  [[nodiscard]] QString session(const QString& name) const {
    return sample(name, name + QStringLiteral(".session.json"));
  }

private:
  QTemporaryDir folder_;
};

inline bool waitUntil(const std::function<bool()>& holds) {
  return QTest::qWaitFor(holds, 120'000);
}

/// The window on a screen that nobody sees.
class OpenWindow {
public:
  explicit OpenWindow(QSize size = {1280, 800}) : window(answers) {
    window.resize(size);
    window.show();
    REQUIRE(QTest::qWaitForWindowExposed(&window));
    window.activateWindow();
  }
  [[nodiscard]] ui::SessionDocument& document() { return window.document(); }
  [[nodiscard]] bool isCurrent() {
    return document().result() != nullptr && !document().isStale() &&
           document().work() == ui::SessionDocument::Work::none;
  }
  void settle() {
    REQUIRE(waitUntil([&] { return isCurrent(); }));
  }
  void open(const QString& session) {
    window.openPath(session);
    settle();
  }
  QAction* action(const char* name) {
    auto* found = window.findChild<QAction*>(QLatin1String(name));
    INFO("action " << name);
    REQUIRE(found != nullptr);
    return found;
  }
  /// As a user would: only what is enabled can be done.
  void trigger(const char* name) {
    auto* found = action(name);
    INFO("action " << name);
    REQUIRE(found->isEnabled());
    found->trigger();
  }
  template <class Widget>
  Widget* find(const char* name) {
    auto* found = window.findChild<Widget*>(QLatin1String(name));
    INFO("widget " << name);
    REQUIRE(found != nullptr);
    return found;
  }
  [[nodiscard]] QString message() {
    auto* bar = window.findChild<ui::window::MessageBar*>();
    return bar->isVisible() ? bar->text() : QString();
  }

  ReadyAnswers answers;
  ui::window::MainWindow window;
};

} // namespace chronodrome::test_support
