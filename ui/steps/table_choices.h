// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <optional>
#include <string>
#include <vector>

#include <QWidget>

#include "document/session_file.h"
#include "intake/table_head.h"
#include "ui/look/theme.h"

class QComboBox;
class QGridLayout;
class QLabel;
class QLineEdit;
class QPlainTextEdit;

namespace chronodrome::ui::steps {

/// How a table of numbers is read: what was found, what was chosen, and what is still to be chosen, above the
/// file's first lines.
class TableChoices : public QWidget {
  Q_OBJECT
public:
  explicit TableChoices(QWidget* parent = nullptr);
  void setTheme(const look::Theme& theme);

  /// Forgets all choices.
  void clear();
  /// Choices that are not the user's: of a saved layout.
  void choose(const document::CsvChoices& choices);
  void showHead(const intake::TableHead& head);
  /// The rate that the table was read with.
  void showRate(std::optional<double> hertz);
  /// Keys (`decimal`, `rate_hz` ...) that must be chosen before the file can be read; the first takes the
  /// focus.
  void ask(const std::vector<std::string>& keys);
  [[nodiscard]] document::CsvChoices choices() const { return choices_; }

Q_SIGNALS:
  void changed();

private:
  QComboBox* addChoice(QGridLayout& grid, int row, const QString& name, const QString& label);
  void fillMarks();
  void fillTimeColumns();
  void takeRate();
  void markAsked();

  document::CsvChoices choices_;
  intake::TableHead head_;
  std::vector<std::string> asked_;
  std::optional<double> rate_;
  QComboBox* delimiter_ = nullptr;
  QComboBox* decimal_ = nullptr;
  QComboBox* time_column_ = nullptr;
  QLineEdit* rate_edit_ = nullptr;
  QLabel* rate_hint_ = nullptr;
  std::vector<std::pair<std::string, QLabel*>> labels_;
  QPlainTextEdit* lines_ = nullptr;
};

} // namespace chronodrome::ui::steps
