// Chronodrome, GPL-3.0-or-later.
#include "ui/window/prompts.h"

#include <QFileDialog>
#include <QMessageBox>

namespace chronodrome::ui::window {

QString Prompts::fileToOpen(QWidget* parent, const QString& title, const QString& folder,
                            const QString& filter) {
  return QFileDialog::getOpenFileName(parent, title, folder, filter);
}

QString Prompts::fileToSave(QWidget* parent, const QString& title, const QString& proposed,
                            const QString& filter) {
  return QFileDialog::getSaveFileName(parent, title, proposed, filter);
}

QString Prompts::folder(QWidget* parent, const QString& title, const QString& start) {
  return QFileDialog::getExistingDirectory(parent, title, start);
}

Prompts::Unsaved Prompts::unsavedEdits(QWidget* parent, const QString& session) {
  QMessageBox box(parent);
  box.setObjectName(QStringLiteral("unsavedMessageBox"));
  box.setWindowTitle(QStringLiteral("Unsaved edits"));
  box.setText(QStringLiteral("%1 has edits that are not saved.").arg(session));
  box.setInformativeText(QStringLiteral("The recording itself is never changed."));
  box.setStandardButtons(QMessageBox::Save | QMessageBox::Discard | QMessageBox::Cancel);
  box.setDefaultButton(QMessageBox::Save);
  switch (box.exec()) {
  case QMessageBox::Save:
    return Unsaved::save;
  case QMessageBox::Discard:
    return Unsaved::discard;
  default:
    return Unsaved::cancel;
  }
}

} // namespace chronodrome::ui::window
