// Chronodrome, GPL-3.0-or-later.
#pragma once

#include "ui/look/custom_plot.h"

#include <QApplication>
#include <QMouseEvent>
#include <QSignalSpy>
#include <QTest>
#include <QWheelEvent>
#include <catch2/catch.hpp>

#include "made_sessions.h"
#include "ui/story/story_figure.h"
#include "ui/story/story_pane.h"

namespace chronodrome::test_support {

/// A sample session in a pane on the (offscreen) screen, with the hands of a user.
class OpenStory {
public:
  explicit OpenStory(const std::string& sample = "guinea-pig-heart", QSize size = {900, 420})
      : pane(document, focus) {
    pane.resize(size);
    pane.show();
    document.open(QString::fromStdString(sampleFile(sample)));
    REQUIRE(QTest::qWaitFor([&] { return document.result() && !document.isStale(); }, 60000));
    focus.reset(document.recording()->duration);
    REQUIRE(QTest::qWaitForWindowExposed(&pane));
    settle();
    plot = pane.findChild<QCustomPlot*>(QStringLiteral("storyPlot"));
    REQUIRE(plot != nullptr);
  }

  static void settle() {
    for (int i = 0; i < 4; ++i)
      QApplication::processEvents();
  }

  [[nodiscard]] const ui::story::StoryFigure& figure() const { return pane.figure(); }
  [[nodiscard]] QAction* action(const char* name) {
    for (auto* candidate : pane.actions()) {
      if (candidate->objectName() == QLatin1String(name)) return candidate;
    }
    return nullptr;
  }

  /// Index of a response: the n-th of a measure.
  [[nodiscard]] std::size_t responseOf(const std::string& measure, int n) const {
    const auto& rows = document.result()->responses.rows;
    for (std::size_t i = 0; i < rows.size(); ++i) {
      if (rows[i].measure == measure && n-- == 0) return i;
    }
    FAIL("no such response");
    return 0;
  }

  /// How much time one pixel shows.
  [[nodiscard]] double pixel() const { return (figure().timeAt(301.0) - figure().timeAt(300.0)).value(); }

  void press(QPoint at, Qt::KeyboardModifiers keys = {}) const {
    QTest::mousePress(plot, Qt::LeftButton, keys, at);
  }
  void move(QPoint to) const {
    QMouseEvent event(QEvent::MouseMove, QPointF(to), plot->mapToGlobal(QPointF(to)), Qt::NoButton,
                      Qt::LeftButton, Qt::NoModifier);
    QApplication::sendEvent(plot, &event);
    settle();
  }
  void release(QPoint at, Qt::KeyboardModifiers keys = {}) const {
    QTest::mouseRelease(plot, Qt::LeftButton, keys, at);
    settle();
  }
  void drag(QPoint from, QPoint to, Qt::KeyboardModifiers keys = {}) const {
    press(from, keys);
    move(from + (to - from) / 2);
    move(to);
    release(to, keys);
  }
  void click(QPoint at) const {
    QTest::mouseClick(plot, Qt::LeftButton, {}, at);
    settle();
  }
  void wheel(QPoint at, int notches, Qt::KeyboardModifiers keys = {}) const {
    QWheelEvent event(QPointF(at), plot->mapToGlobal(QPointF(at)), QPoint(), QPoint(0, 120 * notches),
                      Qt::NoButton, keys, Qt::NoScrollPhase, false);
    QApplication::sendEvent(plot, &event);
    settle();
  }
  void key(Qt::Key key, Qt::KeyboardModifiers keys = {}) const {
    plot->setFocus();
    QTest::keyClick(plot, key, keys);
    settle();
  }

  ui::SessionDocument document;
  ui::Focus focus;
  ui::story::StoryPane pane;
  QCustomPlot* plot = nullptr;
};

} // namespace chronodrome::test_support
