// Chronodrome, GPL-3.0-or-later.
#include "ui/document/journal.h"

#include <atomic>
#include <utility>

#include <QDir>
#include <QFile>

#include "results/output_folder.h"

namespace chronodrome::ui {
namespace {

/// Unlike that of any other document of any process of this user.
QString nameOfNext() {
  static std::atomic<int> count{0};
  const ProcessIdentity here = thisProcess();
  return QStringLiteral("%1-%2-%3.journal").arg(here.pid).arg(here.start).arg(++count);
}

} // namespace

Journal::Journal(const QString& folder, std::function<void()> told)
    : folder_(folder), file_(folder + u'/' + nameOfNext()), told_(std::move(told)) {}

Journal::~Journal() {
  if (!thread_.joinable()) return;
  remove();
  flush();
  {
    const std::lock_guard lock(mutex_);
    ending_ = true;
  }
  changed_.notify_all();
  thread_.join();
}

void Journal::write(Maker make, const QString& then_remove) {
  give({std::move(make), then_remove});
}

void Journal::remove() {
  if (!thread_.joinable()) return; // nothing was ever written
  give({});
}

void Journal::give(Order order) {
  {
    const std::lock_guard lock(mutex_);
    // An order that was not yet carried out is replaced; the file that it was to remove is not forgotten.
    if (order_ && order.then_remove.isEmpty()) order.then_remove = order_->then_remove;
    order_ = std::move(order);
    if (!thread_.joinable()) thread_ = std::thread([this] { run(); });
  }
  changed_.notify_all();
}

void Journal::flush() {
  std::unique_lock lock(mutex_);
  changed_.wait(lock, [this] { return !order_ && !busy_; });
}

std::optional<Error> Journal::fault() const {
  const std::lock_guard lock(mutex_);
  return fault_;
}

void Journal::run() {
  std::unique_lock lock(mutex_);
  for (;;) {
    changed_.wait(lock, [this] { return order_ || ending_; });
    if (!order_) return;
    const Order order = std::move(*std::exchange(order_, std::nullopt));
    busy_ = true;
    lock.unlock();
    carryOut(order);
    lock.lock();
    busy_ = false;
    changed_.notify_all();
  }
}

void Journal::carryOut(const Order& order) {
  Done written = done();
  if (order.make) {
    const QByteArray text = textOf(order.make());
    // The journal holds what may concern people: it is the user's alone.
    if (!QFile::exists(folder_) && QDir().mkpath(folder_))
      QFile::setPermissions(folder_,
                            QFileDevice::ReadOwner | QFileDevice::WriteOwner | QFileDevice::ExeOwner);
    written = results::write_whole_file(file_.toStdString(), text.toStdString());
  } else {
    QFile::remove(file_);
  }
  if (written && !order.then_remove.isEmpty()) QFile::remove(order.then_remove);
  {
    const std::lock_guard lock(mutex_);
    fault_ = written ? std::nullopt : std::optional(written.error());
  }
  if (told_) told_();
}

} // namespace chronodrome::ui
