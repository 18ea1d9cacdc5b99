// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <functional>

#include <QWidget>

class QComboBox;
class QLabel;
class QLineEdit;

namespace chronodrome::ui::evidence {

/// One line within the pane that asks for a word: a time to go to, or why a stretch is left out. Return
/// answers, Escape closes; a wrong answer is told beside the field.
class InlineBar : public QWidget {
  Q_OBJECT
public:
  explicit InlineBar(QWidget* parent = nullptr);

  /// What to do with the answer: an empty text closes the bar, any other is the message to show.
  using Answer = std::function<QString(const QString& text, const QString& choice)>;

  /// `name` is that of the field: `goToTimeLineEdit`. `choices` may be empty: then there is nothing to
  /// choose.
  void ask(const QString& name, const QString& question, const QString& hint, const QStringList& choices,
           const QString& chosen, Answer answer);
  /// Says something without asking.
  void tell(const QString& message);
  void dismiss();

Q_SIGNALS:
  void dismissed();

protected:
  void keyPressEvent(QKeyEvent* event) override;

private:
  void accept();

  QLabel* question_;
  QComboBox* choices_;
  QLineEdit* field_;
  QLabel* message_;
  Answer answer_;
};

} // namespace chronodrome::ui::evidence
