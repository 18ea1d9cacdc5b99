// Chronodrome, GPL-3.0-or-later.
// One application object for all tests of a binary, on no screen, in folders of its own.
#define CATCH_CONFIG_RUNNER
#include <QApplication>
#include <QStandardPaths>
#include <catch2/catch.hpp>

int main(int argc, char** argv) {
  if (!qEnvironmentVariableIsSet("QT_QPA_PLATFORM")) qputenv("QT_QPA_PLATFORM", "offscreen");
  QStandardPaths::setTestModeEnabled(true);
  QApplication::setApplicationName(QStringLiteral("chronodrome-test"));
  QApplication application(argc, argv);
  QApplication::setStyle(QStringLiteral("Fusion"));
  return Catch::Session().run(argc, argv);
}
