// Chronodrome, GPL-3.0-or-later.
#include "ui/window/results_writer.h"

#include <QCoreApplication>
#include <QDir>
#include <QFileInfo>

namespace chronodrome::ui::window {
namespace {

QString sessionName(const QString& session) {
  QString name = QFileInfo(session).fileName();
  name.chop(QStringLiteral(".session.json").size());
  return name;
}

/// The first error line, without its mark.
QString firstError(const QString& lines) {
  for (const QString& line : lines.split(QLatin1Char('\n'), Qt::SkipEmptyParts)) {
    const auto at = line.indexOf(QStringLiteral(": error: "));
    if (at >= 0) return line.mid(at + 9);
  }
  return lines.trimmed();
}

} // namespace

ResultsWriter::ResultsWriter(QObject* parent) : QObject(parent) {
  connect(&process_, &QProcess::finished, this,
          [this](int code, QProcess::ExitStatus status) { take(code, status == QProcess::CrashExit); });
  connect(&process_, &QProcess::errorOccurred, this, [this](QProcess::ProcessError error) {
    if (error != QProcess::FailedToStart) return;
    Q_EMIT runningChanged(false);
    Q_EMIT failed(QStringLiteral("chronodrome-cli was not found beside this program; install both together"));
  });
}

ResultsWriter::~ResultsWriter() {
  process_.disconnect(this);
  if (!isRunning()) return;
  process_.kill();
  process_.waitForFinished(2000);
}

bool ResultsWriter::isRunning() const {
  return process_.state() != QProcess::NotRunning;
}

void ResultsWriter::start(const QString& session, const QString& folder) {
  cancelled_ = false;
  folder_ = QDir(folder).filePath(sessionName(session));
  process_.setProgram(
      QDir(QCoreApplication::applicationDirPath()).filePath(QStringLiteral("chronodrome-cli")));
  process_.setArguments({QStringLiteral("analyse"), session, QStringLiteral("--out"), folder});
  process_.start(QIODevice::ReadOnly);
  Q_EMIT runningChanged(true);
}

void ResultsWriter::cancel() {
  cancelled_ = true;
  process_.kill();
}

void ResultsWriter::take(int exit_code, bool crashed) {
  Q_EMIT runningChanged(false);
  const QString said = QString::fromUtf8(process_.readAllStandardError());
  if (cancelled_) return;
  if (!crashed && exit_code == 0) {
    Q_EMIT finished(folder_);
    return;
  }
  const QString why = firstError(said);
  Q_EMIT failed(why.isEmpty() ? QStringLiteral("the results could not be written") : why);
}

} // namespace chronodrome::ui::window
