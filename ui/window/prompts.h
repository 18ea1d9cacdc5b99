// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <QString>
#include <QWidget>

namespace chronodrome::ui::window {

/// Every question that stops the user. Tests answer in their own way.
class Prompts {
public:
  enum class Unsaved { save, discard, cancel };

  virtual ~Prompts() = default;
  /// A file to open; empty: none.
  virtual QString fileToOpen(QWidget* parent, const QString& title, const QString& folder,
                             const QString& filter);
  /// A file to write; empty: none.
  virtual QString fileToSave(QWidget* parent, const QString& title, const QString& proposed,
                             const QString& filter);
  /// A folder; empty: none.
  virtual QString folder(QWidget* parent, const QString& title, const QString& start);
  /// What to do with edits that are not saved.
  virtual Unsaved unsavedEdits(QWidget* parent, const QString& session);
};

} // namespace chronodrome::ui::window
