// Chronodrome, GPL-3.0-or-later.
#include "ui/steps/table_choices.h"

#include <algorithm>

#include <QComboBox>
#include <QFontDatabase>
#include <QGridLayout>
#include <QLabel>
#include <QLineEdit>
#include <QPlainTextEdit>
#include <QSignalBlocker>
#include <QStyle>

#include "base/number_text.h"
#include "ui/look/number_text.h"

namespace chronodrome::ui::steps {
namespace {

struct Mark {
  char character;
  const char* word;
};
constexpr Mark kDelimiters[] = {
    {',', "comma"}, {';', "semicolon"}, {'\t', "tab"}, {' ', "blanks"}, {'|', "bar"}};
constexpr Mark kDecimals[] = {{'.', "point"}, {',', "comma"}};

template <std::size_t N>
QString wordOf(const Mark (&marks)[N], char character) {
  for (const Mark& mark : marks) {
    if (mark.character == character) return QString::fromLatin1(mark.word);
  }
  return QString(QLatin1Char(character));
}

/// First the way that finds out by itself, then what can be chosen.
template <std::size_t N>
void fill(QComboBox& box, const Mark (&marks)[N], const std::optional<char>& found,
          const std::optional<char>& chosen) {
  const QSignalBlocker quiet(box);
  box.clear();
  box.addItem(found && !chosen ? wordOf(marks, *found) + QStringLiteral(" (found)")
              : chosen         ? QStringLiteral("find out")
                               : QStringLiteral("choose"));
  for (const Mark& mark : marks)
    box.addItem(QString::fromLatin1(mark.word), QString(QLatin1Char(mark.character)));
  box.setCurrentIndex(chosen ? box.findData(QString(QLatin1Char(*chosen))) : 0);
}

std::optional<char> charOf(const QComboBox& box) {
  const QString data = box.currentData().toString();
  return data.isEmpty() ? std::nullopt : std::optional(data.front().toLatin1());
}

} // namespace

TableChoices::TableChoices(QWidget* parent) : QWidget(parent) {
  auto* grid = new QGridLayout(this);
  grid->setContentsMargins(0, 0, 0, 0);
  grid->setHorizontalSpacing(look::kUnit);
  grid->setVerticalSpacing(look::kUnit / 2);
  delimiter_ = addChoice(*grid, 0, QStringLiteral("delimiter"), QStringLiteral("Columns divided by"));
  decimal_ = addChoice(*grid, 1, QStringLiteral("decimal"), QStringLiteral("Decimal mark"));
  time_column_ = addChoice(*grid, 2, QStringLiteral("time_column"), QStringLiteral("Time column"));
  delimiter_->setObjectName(QStringLiteral("delimiterComboBox"));
  decimal_->setObjectName(QStringLiteral("decimalComboBox"));
  time_column_->setObjectName(QStringLiteral("timeColumnComboBox"));

  auto* rate_label = new QLabel(QStringLiteral("Sampling rate, Hz"), this);
  rate_edit_ = new QLineEdit(this);
  rate_edit_->setObjectName(QStringLiteral("rateLineEdit"));
  rate_edit_->setAccessibleName(rate_label->text());
  rate_label->setBuddy(rate_edit_);
  labels_.emplace_back("rate_hz", rate_label);
  grid->addWidget(rate_label, 3, 0);
  grid->addWidget(rate_edit_, 3, 1);
  rate_hint_ = new QLabel(this);
  rate_hint_->setProperty("quiet", true);
  rate_hint_->setWordWrap(true);
  rate_hint_->hide();
  grid->addWidget(rate_hint_, 4, 0, 1, 2);

  lines_ = new QPlainTextEdit(this);
  lines_->setObjectName(QStringLiteral("fileLinesPlainTextEdit"));
  lines_->setAccessibleName(QStringLiteral("First lines of the file"));
  lines_->setReadOnly(true);
  lines_->setLineWrapMode(QPlainTextEdit::NoWrap);
  lines_->setTabChangesFocus(true);
  lines_->setFixedHeight(18 * look::kUnit);
  grid->addWidget(lines_, 5, 0, 1, 2);
  grid->setColumnStretch(1, 1);

  connect(delimiter_, &QComboBox::activated, this, [this] {
    choices_.delimiter = charOf(*delimiter_);
    Q_EMIT changed();
  });
  connect(decimal_, &QComboBox::activated, this, [this] {
    choices_.decimal = charOf(*decimal_);
    Q_EMIT changed();
  });
  connect(time_column_, &QComboBox::activated, this, [this](int index) {
    choices_.time_column =
        index == 0 ? std::nullopt : std::optional(time_column_->currentData().toString().toStdString());
    Q_EMIT changed();
  });
  connect(rate_edit_, &QLineEdit::editingFinished, this, &TableChoices::takeRate);
}

QComboBox* TableChoices::addChoice(QGridLayout& grid, int row, const QString& name, const QString& label) {
  auto* text = new QLabel(label, this);
  auto* box = new QComboBox(this);
  box->setAccessibleName(label);
  box->setSizeAdjustPolicy(QComboBox::AdjustToMinimumContentsLengthWithIcon);
  text->setBuddy(box);
  grid.addWidget(text, row, 0);
  grid.addWidget(box, row, 1);
  labels_.emplace_back(name.toStdString(), text);
  return box;
}

void TableChoices::setTheme(const look::Theme& theme) {
  lines_->document()->setDocumentMargin(look::kUnit / 2);
  // A style sheet of the window would win over a font that is set.
  lines_->setStyleSheet(QStringLiteral("QPlainTextEdit { font-family: \"%1\"; font-size: %2px; }")
                            .arg(QFontDatabase::systemFont(QFontDatabase::FixedFont).family())
                            .arg(theme.font(look::TextSize::small).pixelSize()));
}

void TableChoices::clear() {
  choices_ = {};
  head_ = {};
  asked_.clear();
  rate_.reset();
  rate_edit_->clear();
  lines_->clear();
  fillMarks();
  fillTimeColumns();
  markAsked();
}

void TableChoices::choose(const document::CsvChoices& choices) {
  choices_ = choices;
  rate_edit_->setText(choices.rate_hz ? QString::fromStdString(number_text(*choices.rate_hz)) : QString());
  fillMarks();
  fillTimeColumns();
}

void TableChoices::showHead(const intake::TableHead& head) {
  head_ = head;
  QStringList lines;
  for (const auto& line : head.lines)
    lines << QString::fromStdString(line);
  if (const QString text = lines.join(QLatin1Char('\n')); text != lines_->toPlainText())
    lines_->setPlainText(text);
  fillMarks();
  fillTimeColumns();
}

void TableChoices::showRate(std::optional<double> hertz) {
  rate_ = hertz;
  rate_edit_->setPlaceholderText(
      hertz ? QString::fromStdString(number_text(*hertz, 8)) + QStringLiteral(" (found)") : QString());
}

void TableChoices::fillMarks() {
  fill(*delimiter_, kDelimiters, head_.delimiter, choices_.delimiter);
  fill(*decimal_, kDecimals, head_.decimal, choices_.decimal);
}

void TableChoices::fillTimeColumns() {
  const QSignalBlocker quiet(time_column_);
  time_column_->clear();
  const QString found =
      head_.time_column ? QString::fromStdString(*head_.time_column) : QStringLiteral("none");
  time_column_->addItem(choices_.time_column ? QStringLiteral("find out")
                                             : found + QStringLiteral(" (found)"));
  time_column_->addItem(QStringLiteral("none: rows are evenly spaced"), QString());
  for (const auto& column : head_.columns)
    time_column_->addItem(QString::fromStdString(column), QString::fromStdString(column));
  if (!choices_.time_column) return time_column_->setCurrentIndex(0);
  const QString chosen = QString::fromStdString(*choices_.time_column);
  for (int i = 1; i < time_column_->count(); ++i) {
    if (time_column_->itemData(i).toString() == chosen) time_column_->setCurrentIndex(i);
  }
}

void TableChoices::takeRate() {
  const QString text = rate_edit_->text().trimmed();
  const auto number = look::typedNumber(text);
  const bool good = text.isEmpty() || (number && *number >= intake::kSlowestRate.value() &&
                                       *number <= intake::kFastestRate.value());
  rate_hint_->setVisible(!good);
  if (!good) {
    rate_hint_->setText(
        QStringLiteral("\"%1\" is no rate; give samples a second, from 0.01 to 10 000 000").arg(text));
    return;
  }
  const std::optional<double> rate = text.isEmpty() ? std::nullopt : number;
  if (rate == choices_.rate_hz) return;
  choices_.rate_hz = rate;
  Q_EMIT changed();
}

void TableChoices::ask(const std::vector<std::string>& keys) {
  asked_ = keys;
  markAsked();
  if (keys.empty()) return;
  if (keys.front() == "delimiter") delimiter_->setFocus();
  if (keys.front() == "decimal") decimal_->setFocus();
  if (keys.front() == "time_column") time_column_->setFocus();
  if (keys.front() == "rate_hz") rate_edit_->setFocus();
}

/// What must be chosen is marked by a word and a tone.
void TableChoices::markAsked() {
  for (const auto& [key, label] : labels_) {
    const bool asked = std::find(asked_.begin(), asked_.end(), key) != asked_.end();
    QString text = label->text();
    const QString mark = QStringLiteral(" ?");
    if (text.endsWith(mark)) text.chop(mark.size());
    label->setText(asked ? text + mark : text);
    label->setProperty("tone", asked ? QStringLiteral("caution") : QString());
    label->style()->unpolish(label);
    label->style()->polish(label);
  }
  rate_edit_->setPlaceholderText(
      rate_               ? rate_edit_->placeholderText()
      : head_.stated_rate ? QStringLiteral("the header says %1").arg(look::plainText(*head_.stated_rate))
                          : QString());
}

} // namespace chronodrome::ui::steps
