// Chronodrome, GPL-3.0-or-later.
// The window never freezes: the longest gap between two turns of the event loop while a session is opened,
// analysed, edited and kept.
#include <cstdlib>
#include <ctime>
#include <utility>

#include <QElapsedTimer>
#include <QThread>
#include <QTimer>

#include "document_desk.h"

using namespace chronodrome;
using namespace chronodrome::ui;

namespace {

/// CPU time of this thread, in ms: what the window itself spends, however busy the machine is.
double threadMs() {
  timespec spent{};
  ::clock_gettime(CLOCK_THREAD_CPUTIME_ID, &spent);
  return 1e3 * static_cast<double>(spent.tv_sec) + 1e-6 * static_cast<double>(spent.tv_nsec);
}

/// The longest time between two turns of the event loop, in ms.
struct Gap {
  double wall = 0.0;
  double own = 0.0; ///< CPU time of the window's thread
};

class LoopWatch {
public:
  LoopWatch() {
    since_.start();
    spent_ = threadMs();
    timer_.setTimerType(Qt::PreciseTimer);
    QObject::connect(&timer_, &QTimer::timeout, [this] { turn(); });
    timer_.start(1);
  }
  /// Since the last call.
  Gap longest() {
    turn();
    return std::exchange(longest_, Gap());
  }

private:
  void turn() {
    const double spent = threadMs();
    longest_.wall = std::max(longest_.wall, static_cast<double>(since_.nsecsElapsed()) * 1e-6);
    longest_.own = std::max(longest_.own, spent - spent_);
    spent_ = spent;
    since_.restart();
  }

  QTimer timer_;
  QElapsedTimer since_;
  double spent_ = 0.0;
  Gap longest_;
};

std::string text(const Gap& gap) {
  return std::to_string(gap.wall) + " ms (" + std::to_string(gap.own) + " ms its own)";
}

/// On a busy machine a thread waits for its turn, which says nothing of the program.
bool isBusy() {
  double load = 0.0;
  return ::getloadavg(&load, 1) == 1 && load > QThread::idealThreadCount();
}

void checkShort(const Gap& gap) {
  CHECK(gap.own < 100.0);
  if (!isBusy()) CHECK(gap.wall < 100.0);
}

/// A session whose review is long, without changing what is found.
void giveLongReview(const QString& path, int corrections) {
  auto session = intake::read_session(path.toStdString());
  REQUIRE(session.ok());
  for (int i = 1; i <= corrections; ++i) {
    document::Correction correction;
    correction.seq = i;
    correction.when = "2026-03-04T09:30:00Z";
    correction.who = "A. Marsh";
    correction.channel = session->channels.front().label;
    correction.why = "seen twice";
    correction.what = document::CorrectionKind::retype;
    correction.time = Seconds(0.1 * i);
    session->review.push_back(correction);
  }
  REQUIRE(results::write_session(*session, path.toStdString()).ok());
}

} // namespace

TEST_CASE("opening and editing never stop the event loop for 100 ms", "[.long]") {
  const Desk desk;
  for (const QString name : {"guinea-pig-heart", "atrial-strip", "rabbit-heart"}) {
    const QString path = desk.sample(name);
    SessionDocument document;
    LoopWatch watch;
    openAndSettle(document, path);
    const Gap opening = watch.longest();
    const std::string channel = document.session().channels.front().label;
    for (int i = 0; i < 200; ++i) {
      document.exclude(channel, Seconds(20.0 + i), Seconds(20.5 + i), "noise");
      QTest::qWait(5);
    }
    settle(document);
    const Gap editing = watch.longest();
    for (int i = 0; i < 50; ++i) {
      document.undoStack()->undo();
      QTest::qWait(5);
    }
    settle(document);
    const Gap undoing = watch.longest();
    QElapsedTimer one;
    one.start();
    document.exclude(channel, Seconds(300.0), Seconds(300.5), "noise");
    settle(document);
    WARN(name.toStdString() << ": longest gap opening " << text(opening) << ", 200 edits " << text(editing)
                            << ", 50 undos " << text(undoing) << "; an edit is analysed in " << one.elapsed()
                            << " ms");
    checkShort(opening);
    checkShort(editing);
    checkShort(undoing);
  }
}

TEST_CASE("a long review does not make edits slow", "[.long]") {
  const Desk desk;
  const QString path = desk.sample("guinea-pig-heart");
  giveLongReview(path, 20'000);
  SessionDocument document;
  LoopWatch watch;
  openAndSettle(document, path);
  const Gap opening = watch.longest();
  for (int i = 0; i < 60; ++i) {
    document.exclude("RA", Seconds(20.0 + i), Seconds(20.5 + i), "noise");
    QTest::qWait(20);
  }
  settle(document);
  const Gap editing = watch.longest();
  QElapsedTimer one;
  one.start();
  const auto& row = document.result()->responses.rows.at(3);
  for (int i = 0; i < 20; ++i) {
    const Seconds shift(0.5 * i);
    REQUIRE(document.preview({row.curve, row.concentration, row.measure, row.window_start - shift,
                              row.window_end - shift, "", "", ""}));
  }
  const double preview = static_cast<double>(one.nsecsElapsed()) * 1e-6 / 20.0;
  one.restart();
  REQUIRE(document.save().ok());
  WARN("20 000 corrections: longest gap opening " << text(opening) << ", 60 edits " << text(editing)
                                                  << "; a preview " << preview << " ms, saving "
                                                  << one.elapsed() << " ms");
  checkShort(opening);
  checkShort(editing);
}
