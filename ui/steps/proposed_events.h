// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <vector>

#include <QWidget>

#include "ui/steps/event_cells.h"

class QLabel;
class QPushButton;
class QTableWidget;

namespace chronodrome::ui::steps {

/// Rows from elsewhere (the clipboard, annotations), shown for review: the user ticks what is to be taken,
/// and nothing is taken unseen. A row that cannot be read says why, and is taken half typed.
class ProposedEvents : public QWidget {
  Q_OBJECT
public:
  explicit ProposedEvents(QWidget* parent = nullptr);

  void propose(const QString& from, const std::vector<EventCells>& rows, const EventClock& clock);
  void clear();
  [[nodiscard]] int count() const { return static_cast<int>(rows_.size()); }

Q_SIGNALS:
  void taken(const std::vector<chronodrome::ui::steps::EventCells>& rows);

private:
  void take();
  void tickAll();
  void followTicks();

  std::vector<EventCells> rows_;
  QLabel* title_ = nullptr;
  QTableWidget* table_ = nullptr;
  QPushButton* take_ = nullptr;
};

} // namespace chronodrome::ui::steps
