// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <QWidget>

#include "ui/evidence/read_out.h"
#include "ui/look/theme.h"

namespace chronodrome::ui::evidence {

/// The read-out under the traces: always the same height, so that nothing jumps when a cursor comes.
class ReadOutStrip : public QWidget {
  Q_OBJECT
public:
  explicit ReadOutStrip(QWidget* parent = nullptr);
  void setTheme(const look::Theme& theme);
  void show(const ReadOut& readOut);
  [[nodiscard]] const ReadOut& readOut() const { return read_out_; }
  [[nodiscard]] QSize sizeHint() const override;

protected:
  void paintEvent(QPaintEvent* event) override;

private:
  const look::Theme* theme_ = &look::Theme::of(look::Mode::light);
  ReadOut read_out_;
};

} // namespace chronodrome::ui::evidence
