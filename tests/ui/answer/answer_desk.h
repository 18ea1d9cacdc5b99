// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <functional>
#include <string>

#include "ui/look/custom_plot.h"

#include <QAction>
#include <QDir>
#include <QFile>
#include <QLabel>
#include <QTemporaryDir>
#include <QTest>
#include <catch2/catch.hpp>

#include "session/curves.h"
#include "ui/answer/answer_pane.h"

namespace chronodrome::ui::answer {

inline bool waitUntil(const std::function<bool()>& holds) {
  return QTest::qWaitFor(holds, 120'000);
}

/// A pane with its document and focus, and a folder of its own for the session and the program's state.
struct AnswerDesk {
  AnswerDesk() {
    REQUIRE(folder.isValid());
    qputenv("XDG_STATE_HOME", folder.filePath("state").toUtf8());
    qputenv("XDG_CONFIG_HOME", folder.filePath("config").toUtf8());
    pane.resize(400, 720);
    pane.show();
    REQUIRE(QTest::qWaitForWindowExposed(&pane));
  }
  ~AnswerDesk() {
    qunsetenv("XDG_STATE_HOME");
    qunsetenv("XDG_CONFIG_HOME");
  }
  AnswerDesk(const AnswerDesk&) = delete;
  AnswerDesk& operator=(const AnswerDesk&) = delete;

  /// Opens a copy of a sample session (invented data) and waits for its result.
  void open(const QString& name, const std::string& measure) {
    const QDir from(QStringLiteral(CHRONODROME_SOURCE_DIR "/sample-sessions/") + name);
    const QString to = folder.filePath(name);
    REQUIRE(QDir().mkpath(to));
    for (const QString& file : from.entryList(QDir::Files)) {
      if (file.endsWith(QStringLiteral("truth.json")) || file.endsWith(QStringLiteral(".md"))) continue;
      REQUIRE(QFile::copy(from.filePath(file), QDir(to).filePath(file)));
    }
    document.open(QDir(to).filePath(name + QStringLiteral(".session.json")));
    settle();
    focus.reset(document.recording()->duration);
    focus.chooseCurve(1, measure);
    QTest::qWait(0); // the queued replot
  }
  void settle() {
    REQUIRE(waitUntil([&] { return document.work() == SessionDocument::Work::none && !document.isStale(); }));
    REQUIRE(document.result() != nullptr);
  }

  template <class Widget>
  Widget& get(const char* name) {
    auto* found = pane.findChild<Widget*>(QLatin1String(name));
    REQUIRE(found != nullptr);
    return *found;
  }
  AnswerFigure& figure() { return get<AnswerFigure>("curveAnswerFigure"); }
  QString label(const char* name) { return get<QLabel>(name).text(); }
  /// Asserts that the action is there and enabled.
  void trigger(const char* name) {
    for (QAction* action : pane.actions()) {
      if (action->objectName() != QLatin1String(name)) continue;
      REQUIRE(action->isEnabled());
      action->trigger();
      return;
    }
    FAIL("no action " << name);
  }

  QTemporaryDir folder;
  SessionDocument document;
  Focus focus;
  AnswerPane pane{document, focus};
};

/// A result made of responses alone, in order, a window of 30 s every 100 s.
inline session::SessionResult resultOf(std::vector<std::pair<double, double>> responses, int curve = 1) {
  session::SessionResult result;
  double time = 100.0;
  for (const auto& [concentration, value] : responses) {
    response::Response row;
    row.curve = curve;
    row.agent = "carbachol";
    row.concentration = Molar(concentration);
    row.measure = "rate:RA";
    row.unit = "bpm";
    row.value = value;
    row.sem = 0.5;
    row.n_beats = 40;
    row.window_start = Seconds(time - 30.0);
    row.window_end = Seconds(time);
    time += 100.0;
    result.responses.rows.push_back(row);
  }
  result.session.measures = {"rate:RA"};
  result.curves = session::fit_curves(result.responses, "P", pharmacology::Model::hill, {}, 1);
  return result;
}

inline session::SessionResult slowing() {
  return resultOf(
      {{0, 200.0}, {1e-9, 199.1}, {1e-8, 191.0}, {1e-7, 150.6}, {1e-6, 108.3}, {1e-5, 101.5}, {1e-4, 99.8}});
}

} // namespace chronodrome::ui::answer
