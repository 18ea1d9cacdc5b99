// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <memory>
#include <optional>
#include <vector>

#include <QObject>
#include <QString>
#include <QThreadPool>

#include "intake/recording_reader.h"
#include "intake/table_head.h"
#include "session/order_check.h"
#include "session/preview_traces.h"
#include "session/proposal.h"
#include "session/protocol_guess.h"

namespace chronodrome::ui::steps {

/// All that a form shows of a recording that was just read.
struct LoadedRecording {
  std::optional<Error> error; ///< then the rest is empty
  std::shared_ptr<const recording::Recording> recording;
  session::Proposal proposal;
  std::vector<session::SignalPreview> previews;
  std::vector<session::ProtocolSource> protocols;
};

/// Reads recordings on a worker, the last request only: an earlier one is stopped, and its answer dropped.
/// Signals arrive in the window's thread.
class RecordingLoader : public QObject {
  Q_OBJECT
public:
  explicit RecordingLoader(QObject* parent = nullptr);
  /// Stops the reading and waits for it: a few milliseconds.
  ~RecordingLoader() override;

  void read(const QString& path, const intake::ReadSettings& settings);
  /// Looks at the order of activation in the background; ordersChecked() follows.
  void checkOrders(const document::SessionFile& session,
                   const std::shared_ptr<const recording::Recording>& recording);
  void cancel();
  [[nodiscard]] bool isReading() const { return reading_; }

Q_SIGNALS:
  /// The first lines, long before the whole file is read.
  void headRead(std::shared_ptr<const chronodrome::intake::TableHead> head);
  void progressed(double share);
  void finished(std::shared_ptr<const chronodrome::ui::steps::LoadedRecording> loaded);
  void ordersChecked(std::vector<chronodrome::session::RoleDoubt> doubts);

private:
  struct Run;
  void work(const std::shared_ptr<Run>& run);
  template <class Function>
  void tell(const std::shared_ptr<Run>& run, Function function);

  QThreadPool pool_;
  std::shared_ptr<Run> run_; ///< the last one asked for
  int order_run_ = 0;
  bool reading_ = false;
};

} // namespace chronodrome::ui::steps
