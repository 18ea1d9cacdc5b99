// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <QObject>
#include <QProcess>
#include <QString>

namespace chronodrome::ui::window {

/// Writes the results folder of a saved session: tables, workbook, report. It runs the command-line program
/// that stands beside this one, so that the window never waits and both give the same files, byte for byte.
class ResultsWriter : public QObject {
  Q_OBJECT
public:
  explicit ResultsWriter(QObject* parent = nullptr);
  ~ResultsWriter() override;

  [[nodiscard]] bool isRunning() const;
  /// Starts; finished() or failed() follows. Requires: not running.
  void start(const QString& session, const QString& folder);

public Q_SLOTS:
  void cancel();

Q_SIGNALS:
  void finished(const QString& folder); ///< of the session within the chosen folder
  void failed(const QString& message);
  void runningChanged(bool running);

private:
  void take(int exit_code, bool crashed);

  QProcess process_;
  QString folder_;
  bool cancelled_ = false;
};

} // namespace chronodrome::ui::window
