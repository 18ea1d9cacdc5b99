// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <atomic>
#include <memory>
#include <optional>
#include <vector>

#include <QObject>
#include <QThreadPool>

#include "conditioning/conditioning.h"
#include "recording/recording.h"

namespace chronodrome::ui::evidence {

/// Filters the stretch on show on a worker, one run at a time. What comes back belongs to the newest channels
/// and settings, or is dropped.
class FilteredWork : public QObject {
  Q_OBJECT
public:
  explicit FilteredWork(QObject* parent = nullptr);
  ~FilteredWork() override;

  /// Channels and settings of the analysis; what was filtered before is shown until it is made
  /// again.
  void setChannels(std::vector<recording::Channel> channels,
                   const conditioning::ConditioningSettings& settings);
  /// Makes sure that a stretch is filtered, with as much on either side, so that panning finds it ready.
  /// done() follows if it was not. Requires: to - from <= conditioning::kLongestStretch.
  void want(Seconds from, Seconds to);
  [[nodiscard]] bool covers(Seconds from, Seconds to) const;
  /// What covers() speaks of.
  [[nodiscard]] const std::vector<recording::Channel>& stretches() const { return stretches_; }

Q_SIGNALS:
  void done();

private:
  struct Task; ///< channels and settings, shared with the worker
  void start();

  QThreadPool pool_;
  std::shared_ptr<Task> task_;
  std::shared_ptr<std::atomic<unsigned>> newest_ = std::make_shared<std::atomic<unsigned>>(0);
  bool is_running_ = false;
  std::optional<recording::Span> wanted_;
  std::optional<recording::Span> span_; ///< nothing: none is filtered yet
  std::vector<recording::Channel> stretches_;
};

} // namespace chronodrome::ui::evidence
