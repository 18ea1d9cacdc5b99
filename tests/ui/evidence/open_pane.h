// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <QAction>
#include <QApplication>
#include <QDir>
#include <QFile>
#include <QTemporaryDir>
#include <QTest>
#include <QWheelEvent>
#include <stdexcept>

#include "ui/evidence/evidence_pane.h"

namespace chronodrome::test_support {

/// A sample session, open in a pane on no screen. The session lies in a folder of its own.
class OpenPane {
public:
  explicit OpenPane(const QString& name = QStringLiteral("guinea-pig-heart"), QSize size = {900, 420})
      : pane(document, focus) {
    const QDir from(QStringLiteral(CHRONODROME_SOURCE_DIR "/sample-sessions/") + name);
    for (const QString& file : from.entryList(QDir::Files))
      QFile::copy(from.filePath(file), folder.filePath(file));
    QObject::connect(&document, &ui::SessionDocument::opened, &focus,
                     [this] { focus.reset(document.recording()->duration); });
    pane.resize(size);
    pane.show();
    document.open(folder.filePath(name + QStringLiteral(".session.json")));
    if (!QTest::qWaitFor([&] { return isCurrent(); }, 60000)) throw std::runtime_error("no result came");
    pane.activateWindow();
    figure().setFocus();
  }

  [[nodiscard]] bool isCurrent() const {
    return document.result() != nullptr && !document.isStale() &&
           document.work() == ui::SessionDocument::Work::none;
  }
  /// Waits for the analysis that an edit brought.
  bool settle() {
    return QTest::qWaitFor([&] { return isCurrent(); }, 60000);
  }
  ui::evidence::EvidenceFigure& figure() {
    return *pane.findChild<ui::evidence::EvidenceFigure*>(QStringLiteral("evidenceFigure"));
  }
  /// Shows a stretch, drawn.
  void show(double start, double end) {
    focus.show(Seconds(start), Seconds(end));
    figure().replot();
  }
  QPoint at(int row, double time, double share = 0.7) {
    const auto frame = figure().rowFrame(row);
    return {static_cast<int>(std::lround(frame.time.xOf(Seconds(time)))),
            static_cast<int>(std::lround(frame.rect.top() + share * frame.rect.height()))};
  }
  void point(QPoint to) { QTest::mouseMove(&figure(), to); }
  void click(QPoint to, Qt::KeyboardModifiers keys = Qt::NoModifier) {
    point(to);
    QTest::mouseClick(&figure(), Qt::LeftButton, keys, to);
  }
  void doubleClick(QPoint to) {
    QTest::mouseDClick(&figure(), Qt::LeftButton, {}, to);
    QTest::mouseRelease(&figure(), Qt::LeftButton, {}, to);
  }
  void drag(QPoint from, QPoint to, Qt::KeyboardModifiers keys = Qt::NoModifier) {
    press(from, keys);
    for (int step = 1; step <= 4; ++step)
      moveHeld(from + (to - from) * step / 4, keys);
    QTest::mouseRelease(&figure(), Qt::LeftButton, keys, to);
  }
  void press(QPoint from, Qt::KeyboardModifiers keys = Qt::NoModifier) {
    QTest::mousePress(&figure(), Qt::LeftButton, keys, from);
  }
  void moveHeld(QPoint to, Qt::KeyboardModifiers keys = Qt::NoModifier) {
    QMouseEvent event(QEvent::MouseMove, to, figure().mapToGlobal(to), Qt::NoButton, Qt::LeftButton, keys);
    QApplication::sendEvent(&figure(), &event);
  }
  void wheel(QPoint at, int notches, Qt::KeyboardModifiers keys = Qt::NoModifier) {
    QWheelEvent event(at, figure().mapToGlobal(at), QPoint(), QPoint(0, 120 * notches), Qt::NoButton, keys,
                      Qt::NoScrollPhase, false);
    QApplication::sendEvent(&figure(), &event);
  }
  void key(Qt::Key key, Qt::KeyboardModifiers keys = Qt::NoModifier) {
    QTest::keyClick(&figure(), key, keys);
  }

  QTemporaryDir folder;
  ui::SessionDocument document;
  ui::Focus focus;
  ui::evidence::EvidencePane pane;
};

} // namespace chronodrome::test_support
