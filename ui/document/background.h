// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <functional>
#include <memory>
#include <mutex>
#include <thread>

#include <QObject>
#include <QString>

#include "session/analysis.h"

namespace chronodrome::ui {

/// One piece of work at a time on a thread of its own. Lives on the window's thread: its functions are called
/// and its signals come there.
class Background : public QObject {
  Q_OBJECT
public:
  /// What the window does with the work's outcome. `wanted` is false where the run was cancelled or a later
  /// one was asked for: then only what belongs to the run is given back.
  using Delivery = std::function<void(bool wanted)>;
  /// The work itself, on the other thread. It ends soon after `watch.cancelled` becomes true.
  using Job = std::function<Delivery(const session::Watch& watch)>;

  explicit Background(QObject* parent = nullptr);
  /// Cancels and waits; what was found is dropped without a delivery.
  ~Background() override;

  /// Requires: isIdle().
  void start(Job job, const QString& text);
  /// The run that is going, if any, is not wanted any more. It still takes a moment to end.
  void cancel();
  [[nodiscard]] bool isIdle() const { return run_ == nullptr; }
  [[nodiscard]] bool isWanted() const; ///< something runs and was not cancelled
  [[nodiscard]] double share() const { return share_; }
  [[nodiscard]] const QString& text() const { return text_; }

Q_SIGNALS:
  void progressed();
  void becameIdle(); ///< after the delivery

private:
  struct Run;
  void finish(int number, const Delivery& delivery);
  void takeProgress(int number);

  std::shared_ptr<Run> run_; ///< what the other thread may touch; null: idle
  std::thread thread_;
  int number_ = 0; ///< of the latest run; what comes from an earlier one is dropped
  double share_ = 0.0;
  QString text_;
};

} // namespace chronodrome::ui
