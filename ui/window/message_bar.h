// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <functional>

#include <QFrame>
#include <QLabel>
#include <QToolButton>

#include "ui/look/theme.h"

namespace chronodrome::ui::window {

/// One line above the panes that says what went wrong or what can be done, beside its cause instead of over
/// it. A new message takes the place of the last.
class MessageBar : public QFrame {
  Q_OBJECT
public:
  enum class Tone { news, caution, fault };

  explicit MessageBar(QWidget* parent = nullptr);
  void setTheme(const look::Theme& theme);
  void show(Tone tone, const QString& text);
  /// With one thing to do about it.
  void show(Tone tone, const QString& text, const QString& offer, std::function<void()> take);
  [[nodiscard]] QString text() const { return text_->text(); }

public Q_SLOTS:
  void dismiss();

private:
  void paintTone();

  const look::Theme* theme_;
  Tone tone_ = Tone::news;
  QLabel* sign_;
  QLabel* text_;
  QToolButton* offer_;
  std::function<void()> take_;
};

} // namespace chronodrome::ui::window
