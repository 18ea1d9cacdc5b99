// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <QFrame>

#include "ui/look/theme.h"

class QComboBox;
class QLabel;
class QLineEdit;
class QPushButton;

namespace chronodrome::ui::answer {

/// One line inside the pane that asks why a step is left out, and of which channels. Enter leaves it out,
/// Escape closes; a missing reason is asked for beside the field.
class LeaveOutBar : public QFrame {
  Q_OBJECT
public:
  explicit LeaveOutBar(QWidget* parent = nullptr);

  /// `step`: in words. `channels`: those that the measure reads.
  void ask(const QString& step, const QStringList& channels);
  void setTheme(const look::Theme& theme);

Q_SIGNALS:
  /// An empty channel: all.
  void leftOut(const QString& channel, const QString& why);
  void closed();

protected:
  void keyPressEvent(QKeyEvent* event) override;

private:
  void accept();

  QLabel* question_;
  QComboBox* channel_;
  QLineEdit* why_;
  QPushButton* button_;
};

} // namespace chronodrome::ui::answer
