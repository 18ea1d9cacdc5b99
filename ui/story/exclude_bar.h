// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <optional>

#include <QFrame>

#include "base/quantity.h"

class QComboBox;
class QLineEdit;
class QPushButton;

namespace chronodrome::ui::story {

/// One line to leave a stretch out: from, to, of which channel, and why. A reason must be given.
class ExcludeBar : public QFrame {
  Q_OBJECT
public:
  explicit ExcludeBar(QWidget* parent = nullptr);

  void setChannels(const QStringList& labels);
  /// Shows the line with these times and puts the cursor where the reason is typed.
  void ask(Seconds start, Seconds end);

Q_SIGNALS:
  /// An empty channel: all.
  void accepted(const QString& channel, chronodrome::Seconds start, chronodrome::Seconds end,
                const QString& reason);
  void cancelled();

protected:
  void keyPressEvent(QKeyEvent* event) override;

private:
  void accept();
  void check();
  [[nodiscard]] std::optional<Seconds> time(const QLineEdit* edit) const;

  QLineEdit* from_;
  QLineEdit* to_;
  QComboBox* channel_;
  QLineEdit* reason_;
  QPushButton* leave_out_;
};

} // namespace chronodrome::ui::story
