// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <condition_variable>
#include <functional>
#include <mutex>
#include <optional>
#include <thread>

#include <QString>

#include "ui/document/journal_entry.h"

namespace chronodrome::ui {

/// The file that keeps the unsaved edits of one document. It is written by a thread of its own, so that a
/// slow disk never stops the window, and replaced as a whole, so that a crash leaves the old one or the new
/// one. A folder that cannot be written only means that there is no journal: fault() says so.
class Journal {
public:
  /// Makes the entry; called on the other thread.
  using Maker = std::function<JournalEntry()>;

  /// `told` is called after every order, on the other thread.
  explicit Journal(const QString& folder, std::function<void()> told = {});
  /// Removes the file: whoever ends in good order has saved, or chosen not to.
  ~Journal();
  Journal(const Journal&) = delete;
  Journal& operator=(const Journal&) = delete;

  /// Writes soon; of several orders in a row the last counts. `then_remove`: journal of a process that has
  /// ended, whose edits this one now holds.
  void write(Maker make, const QString& then_remove = {});
  /// Removes the file soon: a program that is killed before has saved, and says so in Recovery.
  void remove();
  /// Waits until all orders are carried out.
  void flush();
  [[nodiscard]] const QString& file() const { return file_; }
  /// Why the last writing failed; nothing: it did not.
  [[nodiscard]] std::optional<Error> fault() const;

private:
  struct Order {
    Maker make; ///< none: remove
    QString then_remove;
  };
  void run();
  void carryOut(const Order& order);
  void give(Order order);

  QString folder_, file_;
  std::function<void()> told_;
  mutable std::mutex mutex_; ///< guards all below
  std::condition_variable changed_;
  std::optional<Order> order_;
  bool busy_ = false, ending_ = false;
  std::optional<Error> fault_;
  std::thread thread_; ///< started by the first order: most windows close without an edit
};

} // namespace chronodrome::ui
