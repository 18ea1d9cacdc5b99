// Chronodrome, GPL-3.0-or-later.
#include <clocale>

#include <QApplication>
#include <QCommandLineParser>
#include <QTimer>

#include "ui/window/main_window.h"

int main(int argc, char** argv) {
  QApplication application(argc, argv);
  // Qt takes over the user's locale; numbers are read and written in one form everywhere.
  std::setlocale(LC_NUMERIC, "C");
  QApplication::setApplicationName(QStringLiteral("chronodrome"));
  QApplication::setApplicationDisplayName(QStringLiteral("Chronodrome"));
  QApplication::setApplicationVersion(QStringLiteral(CHRONODROME_VERSION));
  QApplication::setDesktopFileName(QStringLiteral("chronodrome"));
  QApplication::setWindowIcon(QIcon(QStringLiteral(":/chronodrome.svg")));
  QApplication::setStyle(QStringLiteral("Fusion"));

  QCommandLineParser words;
  words.setApplicationDescription(QStringLiteral(
      "Beats, conduction delays and concentration-response curves from isolated-heart recordings.\n"
      "Research use only; not for diagnosis. Animal work under local licence."));
  words.addHelpOption();
  words.addVersionOption();
  words.addPositionalArgument(QStringLiteral("FILE"),
                              QStringLiteral("a session (NAME.session.json) or a recording (CSV, EDF, EDF+)"),
                              QStringLiteral("[FILE]"));
  words.process(application);

  chronodrome::ui::window::Prompts prompts;
  chronodrome::ui::window::MainWindow window(prompts);
  window.show();
  const QStringList files = words.positionalArguments();
  // The window stands before the first file is read.
  QTimer::singleShot(0, &window, [&] {
    if (files.isEmpty())
      window.offerRecovery();
    else
      window.openPath(files.front());
  });
  return QApplication::exec();
}
