// Chronodrome, GPL-3.0-or-later.
#include "ui/evidence/filtered_work.h"

#include <algorithm>
#include <utility>

#include "conditioning/stretch.h"
#include "session/stretches.h"

namespace chronodrome::ui::evidence {

/// Only the worker writes to a task, and the pool has one.
struct FilteredWork::Task {
  std::vector<recording::Channel> channels;
  conditioning::ConditioningSettings plain;
  std::optional<conditioning::ConditioningSettings>
      blanking; ///< reading stimuli takes time: on the worker, once

  std::vector<recording::Channel> filter(recording::Span span, const std::function<bool()>& is_wanted) {
    std::vector<recording::Channel> stretches;
    if (!blanking) blanking = session::with_stimuli_blanked(channels, plain);
    for (const auto& channel : channels) {
      if (!is_wanted()) break;
      const bool electrical = recording::is_electrogram(channel.role);
      if (!electrical && !recording::is_mechanical(channel.role)) continue;
      auto stretch =
          conditioning::condition_stretch(channel, electrical ? *blanking : plain, span.start, span.end);
      if (stretch.ok()) stretches.push_back(std::move(stretch).value());
    }
    return stretches;
  }
};

FilteredWork::FilteredWork(QObject* parent) : QObject(parent) {
  pool_.setMaxThreadCount(1);
}

FilteredWork::~FilteredWork() {
  ++*newest_;
  pool_.waitForDone();
}

void FilteredWork::setChannels(std::vector<recording::Channel> channels,
                               const conditioning::ConditioningSettings& settings) {
  // After an edit of marks the signal is still the same: it stays on show until it has been filtered again.
  const auto holder = [](const std::vector<recording::Channel>& list) {
    return list.empty() ? nullptr : list.front().recording;
  };
  if (!task_ || holder(channels) != holder(task_->channels)) stretches_.clear();
  task_ = std::make_shared<Task>();
  task_->channels = std::move(channels);
  task_->plain = settings;
  ++*newest_;
  span_.reset();
  wanted_.reset();
}

bool FilteredWork::covers(Seconds from, Seconds to) const {
  return span_ && span_->start <= from && to <= span_->end;
}

void FilteredWork::want(Seconds from, Seconds to) {
  if (!task_ || covers(from, to)) return;
  const Seconds width = to - from;
  const Seconds air = std::min(width, (conditioning::kLongestStretch - width) * 0.5);
  wanted_ = recording::Span{from - air, to + air};
  if (!is_running_) start();
}

void FilteredWork::start() {
  is_running_ = true;
  const recording::Span span = *std::exchange(wanted_, std::nullopt);
  const unsigned run = newest_->load();
  pool_.start([this, task = task_, newest = newest_, span, run] {
    auto stretches = task->filter(span, [&] { return newest->load() == run; });
    QMetaObject::invokeMethod(
        this,
        [this, run, span, stretches = std::move(stretches)]() mutable {
          is_running_ = false;
          const bool is_of_now = run == newest_->load();
          if (is_of_now) {
            span_ = span;
            stretches_ = std::move(stretches);
          }
          if (wanted_) start();
          if (is_of_now) Q_EMIT done();
        },
        Qt::QueuedConnection);
  });
}

} // namespace chronodrome::ui::evidence
