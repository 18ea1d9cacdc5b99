// Chronodrome, GPL-3.0-or-later.
#include "ui/document/background.h"

#include <atomic>
#include <utility>

namespace chronodrome::ui {
namespace {

/// Steps of progress that a reader sees; finer ones would only wake the window.
constexpr double kShareStep = 0.01;

} // namespace

struct Background::Run {
  std::atomic<bool> cancelled{false};
  std::mutex mutex; ///< guards the rest
  double share = 0.0;
  double told_share = -1.0; ///< as last sent to the window
  std::string doing, told_doing;
};

Background::Background(QObject* parent) : QObject(parent) {}

Background::~Background() {
  cancel();
  if (thread_.joinable()) thread_.join();
}

void Background::start(Job job, const QString& text) {
  Q_ASSERT(isIdle());
  run_ = std::make_shared<Run>();
  share_ = 0.0;
  text_ = text;
  const int number = ++number_;
  thread_ = std::thread([this, number, run = run_, job = std::move(job)]() mutable {
    session::Watch watch;
    watch.cancelled = &run->cancelled;
    watch.progress = [this, number, run](double share, const std::string& doing) {
      const std::lock_guard lock(run->mutex);
      run->share = share;
      run->doing = doing;
      if (share < run->told_share + kShareStep && doing == run->told_doing) return;
      run->told_share = share;
      run->told_doing = doing;
      QMetaObject::invokeMethod(
          this, [this, number] { takeProgress(number); }, Qt::QueuedConnection);
    };
    Delivery delivery = job(watch);
    job = nullptr; // what the job holds goes here and not on the window's thread
    QMetaObject::invokeMethod(
        this, [this, number, delivery = std::move(delivery)] { finish(number, delivery); },
        Qt::QueuedConnection);
  });
  Q_EMIT progressed();
}

void Background::cancel() {
  if (!run_) return;
  run_->cancelled = true;
}

bool Background::isWanted() const {
  return run_ && !run_->cancelled;
}

void Background::takeProgress(int number) {
  if (number != number_ || !isWanted()) return;
  {
    const std::lock_guard lock(run_->mutex);
    share_ = run_->share;
    if (!run_->doing.empty()) text_ = QString::fromStdString(run_->doing);
  }
  Q_EMIT progressed();
}

void Background::finish(int number, const Delivery& delivery) {
  if (number != number_) return;
  thread_.join(); // it has nothing left to do
  const bool wanted = isWanted();
  run_.reset();
  if (delivery) delivery(wanted);
  // The delivery may have started the next run.
  if (isIdle()) Q_EMIT becameIdle();
}

} // namespace chronodrome::ui
