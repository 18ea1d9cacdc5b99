// Chronodrome, GPL-3.0-or-later.
#include "ui/steps/recording_loader.h"

#include <algorithm>
#include <atomic>
#include <new>

#include <QMetaObject>

#include "intake/watched_source.h"

namespace chronodrome::ui::steps {
namespace {

constexpr std::size_t kHeadLines = 40;
constexpr std::size_t kTraceColumns = 2048; // pixels of the widest column on a dense screen

/// A source that also says how far it is, in steps that are worth a repaint.
class ReportingSource : public intake::WatchedSource {
public:
  ReportingSource(const intake::ByteSource& source, std::atomic<std::uint64_t>& delivered,
                  const std::atomic<bool>& cancelled, std::function<void(double)> report)
      : WatchedSource(source, delivered, cancelled), delivered_so_far_(delivered),
        report_(std::move(report)) {}

  [[nodiscard]] Result<std::size_t> read_at(std::uint64_t offset, std::span<std::byte> out) const override {
    auto got = WatchedSource::read_at(offset, out);
    // Read twice: for the digest, and for the samples.
    const double all = 2.0 * static_cast<double>(std::max<std::uint64_t>(1, size()));
    const double share = std::min(1.0, static_cast<double>(delivered_so_far_.load()) / all);
    const int percent = static_cast<int>(100.0 * share);
    if (percent > last_percent_.exchange(percent)) report_(share);
    return got;
  }

private:
  std::atomic<std::uint64_t>& delivered_so_far_;
  mutable std::atomic<int> last_percent_{-1};
  std::function<void(double)> report_;
};

Error fault_in_work(const std::string& path, ErrorCode code, const std::string& what,
                    const std::string& remedy) {
  return {code, path, {}, what, remedy};
}

} // namespace

struct RecordingLoader::Run {
  QString path;
  intake::ReadSettings settings;
  std::atomic<bool> cancelled{false};
  std::atomic<std::uint64_t> delivered{0};
};

RecordingLoader::RecordingLoader(QObject* parent) : QObject(parent) {
  pool_.setMaxThreadCount(2); // a run that is just being stopped does not hold up the next one
}

RecordingLoader::~RecordingLoader() {
  cancel();
  pool_.waitForDone();
}

void RecordingLoader::cancel() {
  if (run_) run_->cancelled = true;
  run_.reset();
  reading_ = false;
  ++order_run_;
}

void RecordingLoader::read(const QString& path, const intake::ReadSettings& settings) {
  cancel();
  run_ = std::make_shared<Run>();
  run_->path = path;
  run_->settings = settings;
  reading_ = true;
  pool_.start([this, run = run_] { work(run); });
}

/// In the window's thread, and only while the run is still the one that is wanted.
template <class Function>
void RecordingLoader::tell(const std::shared_ptr<Run>& run, Function function) {
  QMetaObject::invokeMethod(
      this,
      [this, run, function = std::move(function)] {
        if (run == run_) function();
      },
      Qt::QueuedConnection);
}

void RecordingLoader::work(const std::shared_ptr<Run>& run) {
  auto loaded = std::make_shared<LoadedRecording>();
  const std::string path = run->path.toStdString();
  try {
    const auto file = intake::open_source_file(path);
    if (!file) {
      loaded->error = file.error();
    } else {
      const ReportingSource source(**file, run->delivered, run->cancelled, [this, run](double share) {
        tell(run, [this, share] { Q_EMIT progressed(share); });
      });
      if (auto head = intake::head_of(**file, run->settings, kHeadLines)) {
        auto shared = std::make_shared<const intake::TableHead>(std::move(head).value());
        tell(run, [this, shared] { Q_EMIT headRead(shared); });
      }
      auto read = intake::read_recording(source, run->settings);
      if (!read) {
        loaded->error = read.error();
      } else {
        loaded->recording = std::make_shared<const recording::Recording>(std::move(read).value());
        loaded->proposal = session::propose(*loaded->recording);
        loaded->previews = session::preview_traces(loaded->recording, kTraceColumns);
        loaded->protocols = session::protocols_for(*loaded->recording, path);
      }
    }
  } catch (const std::bad_alloc&) {
    loaded->error = fault_in_work(path, ErrorCode::over_limit, "there is not enough memory",
                                  "close other programs and try again");
  } catch (const std::exception& fault) {
    loaded->error =
        fault_in_work(path, ErrorCode::internal_fault, std::string("internal fault: ") + fault.what(),
                      "please report it with the file");
  }
  tell(run, [this, loaded] {
    reading_ = false;
    Q_EMIT finished(loaded);
  });
}

void RecordingLoader::checkOrders(const document::SessionFile& session,
                                  const std::shared_ptr<const recording::Recording>& recording) {
  const int number = ++order_run_;
  pool_.start([this, number, session, recording] {
    std::vector<session::RoleDoubt> doubts;
    try {
      doubts = session::check_order(session, recording);
    } catch (const std::bad_alloc&) {
      return; // a hint, not a result: none is given
    }
    QMetaObject::invokeMethod(
        this,
        [this, number, doubts] {
          if (number == order_run_) Q_EMIT ordersChecked(doubts);
        },
        Qt::QueuedConnection);
  });
}

} // namespace chronodrome::ui::steps
