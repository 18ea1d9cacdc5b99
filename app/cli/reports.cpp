// Chronodrome, GPL-3.0-or-later.
#include "reports.h"

#ifdef CHRONODROME_HAS_REPORTS

#include <array>
#include <clocale>
#include <cstdio>

#include <QApplication>
#include <QHashSeed>

#include "ui/report/report.h"

namespace chronodrome::cli {
namespace {

/// Standard error holds our own lines only; what Qt has to say of folders and plugins is no message to a
/// user.
void pass_over(QtMsgType kind, const QMessageLogContext&, const QString& message) {
  if (kind == QtFatalMsg) std::fprintf(stderr, "chronodrome-cli: error: %s\n", qPrintable(message));
}

} // namespace

class Reports::Painting {
public:
  Painting() : before_((prepare(), qInstallMessageHandler(pass_over))), application_(count_, words_.data()) {
    // The application takes the user's locale; numbers of C functions stay plain.
    std::setlocale(LC_NUMERIC, "C");
  }
  ~Painting() { qInstallMessageHandler(before_); }
  Painting(const Painting&) = delete;
  Painting& operator=(const Painting&) = delete;

private:
  /// The same pages on every desk: no display, no scaling, no order that changes from run to run.
  static void prepare() {
    qputenv("QT_QPA_PLATFORM", "offscreen");
    for (const char* name :
         {"QT_SCALE_FACTOR", "QT_SCREEN_SCALE_FACTORS", "QT_FONT_DPI", "QT_USE_PHYSICAL_DPI",
          "QT_ENABLE_HIGHDPI_SCALING", "QT_QPA_PLATFORMTHEME", "QT_STYLE_OVERRIDE"})
      qunsetenv(name);
    QHashSeed::setDeterministicGlobalSeed();
    QApplication::setDesktopSettingsAware(false);
  }

  std::array<char, 16> name_{"chronodrome-cli"};
  std::array<char*, 2> words_{name_.data(), nullptr};
  int count_ = 1;
  QtMessageHandler before_;
  QApplication application_;
};

Reports::Reports() = default;
Reports::~Reports() = default;

Result<std::vector<results::OutputFile>> Reports::make(const session::SessionResult& result,
                                                       const std::string& version) {
  if (!painting_) painting_ = std::make_unique<Painting>();
  return ui::report::reportFiles(result, version);
}

} // namespace chronodrome::cli

#else

namespace chronodrome::cli {

class Reports::Painting {};

Reports::Reports() = default;
Reports::~Reports() = default;

Result<std::vector<results::OutputFile>> Reports::make(const session::SessionResult& /*result*/,
                                                       const std::string& /*version*/) {
  return Error{ErrorCode::bad_usage,
               "report.pdf",
               {},
               "this build of the program makes no reports",
               "build it with CHRONODROME_UI on, or say --no-report"};
}

} // namespace chronodrome::cli

#endif
