// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <string>
#include <vector>

#include <QWidget>

#include "ui/steps/session_draft.h"

class QFormLayout;
class QLineEdit;

namespace chronodrome::ui::steps {

/// What a session says about the preparation, one line a fact. An entry counts when the field is left or
/// Return is pressed.
class PreparationFields : public QWidget {
  Q_OBJECT
public:
  /// `everything`: with what belongs to the animal and the day.
  PreparationFields(SessionDraft& draft, bool everything, QWidget* parent = nullptr);

private:
  struct Field;
  void show();
  void take(std::size_t field);

  SessionDraft& draft_;
  std::vector<std::pair<const Field*, QLineEdit*>> edits_;
};

} // namespace chronodrome::ui::steps
