// Chronodrome, GPL-3.0-or-later.
#include <QDesktopServices>
#include <QDir>
#include <QDragEnterEvent>
#include <QDropEvent>
#include <QFileInfo>
#include <QMimeData>
#include <QUrl>

#include "ui/look/number_text.h"
#include "ui/window/main_window.h"
#include "ui/window/sample_sessions.h"

namespace chronodrome::ui::window {
namespace {

const QString kSessionEnding = QStringLiteral(".session.json");

bool isSession(const QString& path) {
  return path.endsWith(kSessionEnding, Qt::CaseInsensitive);
}

QString folderOf(const QString& path) {
  return path.isEmpty() ? QDir::homePath() : QFileInfo(path).absolutePath();
}

QStringList localFiles(const QMimeData& data) {
  QStringList files;
  for (const QUrl& url : data.urls()) {
    if (url.isLocalFile()) files << url.toLocalFile();
  }
  return files;
}

} // namespace

void MainWindow::report(const Error& error) {
  QString text = look::messageText(error);
  if (!error.file.empty())
    text.prepend(QFileInfo(QString::fromStdString(error.file)).fileName() + QStringLiteral(": "));
  message_->show(MessageBar::Tone::fault, text);
}

bool MainWindow::mayLeave() {
  if (!document_.isOpen() || !document_.isModified() || document_.isReadOnly()) return true;
  switch (prompts_.unsavedEdits(this, document_.title())) {
  case Prompts::Unsaved::save:
    return save();
  case Prompts::Unsaved::discard:
    return true;
  case Prompts::Unsaved::cancel:
    break;
  }
  return false;
}

void MainWindow::openPath(const QString& path) {
  if (isSession(path)) {
    if (mayLeave()) openSessionFile(path);
  } else if (mayLeave()) {
    startTakingIn(path);
  }
}

void MainWindow::openSession() {
  const QString path = prompts_.fileToOpen(this, QStringLiteral("Open a session"), folderOf(document_.path()),
                                           QStringLiteral("Sessions (*.session.json)"));
  if (!path.isEmpty() && mayLeave()) openSessionFile(path);
}

void MainWindow::openSessionFile(const QString& path) {
  message_->dismiss();
  document_.open(path);
}

void MainWindow::openSample(const QString& name) {
  for (const auto& sample : sampleSessions()) {
    if (sample.name != name || !mayLeave()) continue;
    const auto own = ownCopyOf(sample);
    if (own)
      openSessionFile(*own);
    else
      report(own.error());
  }
}

/// The latest of what was left behind; the next one is offered at the next start.
void MainWindow::offerRecovery() {
  const Recovery recovery;
  const auto left = recovery.leftOver();
  if (left.empty()) return;
  const LeftOver& last = left.front();
  QString text =
      QStringLiteral("The program ended at %1 with %2 unsaved in %3")
          .arg(last.written.toLocalTime().toString(QStringLiteral("yyyy-MM-dd hh:mm")),
               last.edits == 1 ? QStringLiteral("an edit") : QStringLiteral("%1 edits").arg(last.edits),
               last.title);
  if (!last.is_recording_there) {
    message_->show(MessageBar::Tone::caution,
                   text + QStringLiteral("; bring its recording back to %1 to recover them")
                              .arg(last.recording_paths.join(QStringLiteral(", "))));
    return;
  }
  message_->show(MessageBar::Tone::caution,
                 text + QStringLiteral("; recovering keeps them as one edit that can be undone"),
                 QStringLiteral("Recover"), [this, last] {
                   if (mayLeave()) Recovery().restore(last, document_);
                 });
}

void MainWindow::takeIn() {
  const QString path = prompts_.fileToOpen(
      this, QStringLiteral("Take in a recording"), folderOf(document_.path()),
      QStringLiteral("Recordings (*.csv *.txt *.tsv *.edf *.CSV *.TXT *.TSV *.EDF);;All files (*)"));
  if (!path.isEmpty() && mayLeave()) startTakingIn(path);
}

void MainWindow::startTakingIn(const QString& recording) {
  message_->dismiss();
  taking_in_ = true;
  intake_->start(recording);
  showPage();
  updateActions();
}

bool MainWindow::save() {
  if (document_.path().isEmpty()) return saveAs();
  const Done saved = document_.save();
  if (!saved) report(saved.error());
  updateActions();
  return saved.ok();
}

bool MainWindow::saveAs() {
  QString proposed = document_.path();
  if (proposed.isEmpty()) {
    // Beside the recording, which must lie in the session's folder.
    const auto recording = document_.recording();
    const QString file = recording && !recording->files.empty()
                             ? QString::fromStdString(recording->files.front().path)
                             : QString();
    const QFileInfo info(file);
    proposed = QDir(folderOf(file)).filePath(info.completeBaseName() + kSessionEnding);
  }
  QString path = prompts_.fileToSave(this, QStringLiteral("Save the session"), proposed,
                                     QStringLiteral("Sessions (*.session.json)"));
  if (path.isEmpty()) return false;
  if (!isSession(path)) path += kSessionEnding;
  const Done saved = document_.saveAs(path);
  if (!saved)
    report(saved.error());
  else
    recent_.add(path);
  fillRecentMenu();
  updateActions();
  return saved.ok();
}

void MainWindow::closeSession() {
  if (taking_in_) {
    taking_in_ = false;
    intake_->cancel();
    showPage();
    updateActions();
    return;
  }
  if (mayLeave()) document_.close();
}

void MainWindow::writeResults() {
  // Results lead back to a session file: it must hold what they are made from.
  if ((document_.isModified() || document_.path().isEmpty()) && !save()) {
    message_->show(
        MessageBar::Tone::caution,
        QStringLiteral(
            "Results are written from the saved session; it was not saved, so nothing was written"));
    return;
  }
  const QString folder =
      prompts_.folder(this, QStringLiteral("Folder for the results"), folderOf(document_.path()));
  if (folder.isEmpty()) return;
  disconnect(&writer_, &ResultsWriter::finished, this, nullptr);
  connect(&writer_, &ResultsWriter::finished, this, [this](const QString& written) {
    message_->show(MessageBar::Tone::news,
                   QStringLiteral("Results and report are in ") + QDir::toNativeSeparators(written),
                   QStringLiteral("Show the report"), [written] {
                     QDesktopServices::openUrl(
                         QUrl::fromLocalFile(QDir(written).filePath(QStringLiteral("report.pdf"))));
                   });
  });
  message_->dismiss();
  writer_.start(document_.path(), folder);
}

void MainWindow::dragEnterEvent(QDragEnterEvent* event) {
  if (!localFiles(*event->mimeData()).isEmpty()) event->acceptProposedAction();
}

/// A session before a recording before anything else; the rest of a mixed drop is named, not lost in silence.
void MainWindow::dropEvent(QDropEvent* event) {
  const QStringList files = localFiles(*event->mimeData());
  if (files.isEmpty()) return;
  event->acceptProposedAction();
  QString first = files.front();
  for (const QString& file : files) {
    if (!isSession(file)) continue;
    first = file;
    break;
  }
  if (!isSession(first)) {
    for (const QString& file : files) {
      if (file.endsWith(QStringLiteral(".edf"), Qt::CaseInsensitive)) first = file;
    }
  }
  openPath(first);
  if (files.size() > 1) {
    message_->show(MessageBar::Tone::caution, QStringLiteral("%1 files were dropped; only %2 was taken")
                                                  .arg(files.size())
                                                  .arg(QFileInfo(first).fileName()));
  }
}

} // namespace chronodrome::ui::window
