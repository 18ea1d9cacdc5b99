// Chronodrome, GPL-3.0-or-later.
#include "ui/steps/intake_pages.h"

#include <algorithm>
#include <set>

#include <QHBoxLayout>
#include <QLabel>
#include <QPushButton>
#include <QStringList>
#include <QStyle>
#include <QTableWidget>

#include "base/number_text.h"
#include "ui/look/number_text.h"
#include "ui/look/theme.h"

namespace chronodrome::ui::steps {
namespace {

/// A number that a file states, as exactly as it does.
QString statedText(double value) {
  return QString::fromStdString(number_text(value, 8)).replace(QLatin1Char('-'), QChar(0x2212));
}

QString kindText(const recording::Recording& recording) {
  if (recording.files.empty()) return {};
  const std::string& kind = recording.files.front().kind;
  if (kind == "csv") return QStringLiteral("table of text");
  if (kind == "edf+c") return QStringLiteral("EDF+, continuous");
  if (kind == "edf+d") return QStringLiteral("EDF+, with interruptions");
  return QStringLiteral("EDF");
}

QString ratesText(const recording::Recording& recording) {
  std::set<double> rates;
  for (const auto& signal : recording.signals)
    rates.insert(signal.time_base.rate().value());
  QStringList texts;
  for (const double rate : rates)
    texts << statedText(rate);
  return texts.join(QStringLiteral(", ")) + QStringLiteral(" Hz");
}

QString startText(const recording::Recording& recording) {
  if (!recording.clock_start) return QStringLiteral("start not stated");
  QString text = QString::fromStdString(*recording.clock_start);
  return QStringLiteral("started %1").arg(text.replace(QLatin1Char('T'), QLatin1Char(' ')));
}

} // namespace

QString factsText(const recording::Recording& recording) {
  const auto count = recording.signals.size();
  return QStringList{
      kindText(recording), look::durationText(recording.duration),
      QStringLiteral("%1 %2 at %3")
          .arg(count)
          .arg(count == 1 ? QStringLiteral("signal") : QStringLiteral("signals"), ratesText(recording)),
      startText(recording)}
      .join(QStringLiteral(" · "));
}

QString fileFactsText(const recording::Recording& recording) {
  QStringList lines{kindText(recording), startText(recording)};
  for (const auto& signal : recording.signals) {
    QString line =
        QStringLiteral("%1: %2 Hz")
            .arg(QString::fromStdString(signal.source), statedText(signal.time_base.rate().value()));
    if (signal.rails) {
      line +=
          QStringLiteral(", %1 to %2").arg(statedText((*signal.rails)[0]), statedText((*signal.rails)[1]));
      if (!signal.unit.empty()) line += QLatin1Char(' ') + look::unitText(signal.unit);
    }
    if (!signal.prefilter.empty())
      line += QStringLiteral(", %1").arg(QString::fromStdString(signal.prefilter));
    lines << line;
  }
  const auto notes = recording.annotations.size();
  lines << (notes == 0 ? QStringLiteral("no annotations") : QStringLiteral("%1 annotations").arg(notes));
  return lines.join(QLatin1Char('\n'));
}

QString remedyInWords(const std::string& remedy) {
  QString text = QString::fromStdString(remedy);
  const std::pair<const char*, const char*> words[] = {
      {"recording.csv.rate_hz", "the sampling rate"},
      {"recording.csv.delimiter", "what divides columns"},
      {"recording.csv.decimal", "the decimal mark"},
      {"recording.csv.time_column", "the time column"},
  };
  for (const auto& [key, word] : words)
    text.replace(QLatin1String(key), QLatin1String(word));
  return text.replace(QStringLiteral("to \"\""), QStringLiteral("to none"));
}

QString questionInWords(const std::vector<std::string>& keys) {
  const std::pair<const char*, const char*> questions[] = {
      {"rate_hz", "How many samples were taken each second?"},
      {"delimiter", "What divides the columns?"},
      {"decimal", "Which mark stands before the decimals?"},
      {"time_column", "Which column holds the times, if any does?"},
  };
  QStringList lines;
  for (const auto& key : keys) {
    for (const auto& [known, question] : questions) {
      if (key == known) lines << QString::fromLatin1(question);
    }
  }
  return lines.join(QLatin1Char('\n')) +
         QStringLiteral(
             "\n\nAnswer on the left, where it is marked with “?”; the file is read again at once.");
}

QWidget* doubtLine(const QString& text, QWidget* parent) {
  auto* line = new QWidget(parent);
  auto* row = new QHBoxLayout(line);
  row->setContentsMargins(0, 0, 0, 0);
  row->setSpacing(look::kUnit);
  auto* words = new QLabel(text, line);
  words->setWordWrap(true);
  setTone(*words, QStringLiteral("caution"));
  auto* button = new QPushButton(QStringLiteral("Use these roles"), line);
  button->setObjectName(QStringLiteral("useRolesPushButton"));
  button->setAccessibleName(QStringLiteral("Use these roles: %1").arg(text));
  button->setAutoDefault(false);
  row->addWidget(words, 1);
  row->addWidget(button);
  return line;
}

void fillEvents(QTableWidget& table, const protocol::Protocol& protocol) {
  table.setRowCount(static_cast<int>(protocol.events.size()));
  for (int row = 0; row < table.rowCount(); ++row) {
    const auto& event = protocol.events[static_cast<std::size_t>(row)];
    const QString cells[] = {
        look::timeText(event.time, 0),
        QString::fromStdString(protocol::name_of(event.kind)).replace(QLatin1Char('_'), QLatin1Char(' ')),
        QString::fromStdString(event.agent.empty() ? event.note : event.agent),
        event.concentration ? look::concentrationText(*event.concentration) : QString()};
    for (int column = 0; column < 4; ++column)
      table.setItem(row, column, new QTableWidgetItem(cells[column]));
  }
}

void setTone(QLabel& label, const QString& tone) {
  if (label.property("tone").toString() == tone) return;
  label.setProperty("tone", tone);
  label.style()->unpolish(&label);
  label.style()->polish(&label);
}

QLabel* headingLabel(const QString& text, QWidget* parent) {
  auto* label = new QLabel(text, parent);
  QFont font = label->font();
  font.setBold(true);
  label->setFont(font);
  return label;
}

} // namespace chronodrome::ui::steps
