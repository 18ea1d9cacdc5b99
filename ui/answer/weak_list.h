// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <vector>

#include <QFrame>

#include "session/curve_view.h"
#include "ui/look/theme.h"

class QLabel;
class QScrollArea;
class QVBoxLayout;

namespace chronodrome::ui::answer {

/// What weakens the number: one line each, in words, its places as links that Tab reaches and Enter follows.
class WeakList : public QFrame {
  Q_OBJECT
public:
  explicit WeakList(QWidget* parent = nullptr);

  void setPoints(const std::vector<session::WeakPoint>& points);
  void setTheme(const look::Theme& theme);
  [[nodiscard]] QSize sizeHint() const override;

Q_SIGNALS:
  void placeChosen(const chronodrome::session::CurvePlace& place);

protected:
  void resizeEvent(QResizeEvent* event) override;

private:
  void follow(const QString& link);
  void write();

  QLabel* heading_;
  QLabel* lines_;
  std::vector<session::WeakPoint> points_;
  look::Theme theme_;
};

} // namespace chronodrome::ui::answer
