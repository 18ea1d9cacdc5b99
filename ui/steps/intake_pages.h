// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <string>
#include <vector>

#include <QString>

#include "protocol/protocol.h"
#include "recording/recording.h"

class QLabel;
class QTableWidget;
class QWidget;

// What the form of taking in shows, apart from what it does.
namespace chronodrome::ui::steps {

enum IntakePage { kProgressPage, kQuestionPage, kTablesPage };

/// One line: kind, length, signals, rates, start.
QString factsText(const recording::Recording& recording);
/// Of a file that is no table: what its header says, one fact a line.
QString fileFactsText(const recording::Recording& recording);
/// The readers' remedies name keys of a session file; here they are choices with a name on the screen.
QString remedyInWords(const std::string& remedy);

/// What must be chosen before a table can be read: the keys of choices_asked() as questions.
QString questionInWords(const std::vector<std::string>& keys);

/// A doubt in words, and the button `useRolesPushButton` that settles it.
QWidget* doubtLine(const QString& text, QWidget* parent);
/// Events of a drug log: time, event, agent, concentration.
void fillEvents(QTableWidget& table, const protocol::Protocol& protocol);

/// `caution`, `fault` or nothing.
void setTone(QLabel& label, const QString& tone);
/// A heading inside a form.
QLabel* headingLabel(const QString& text, QWidget* parent);

} // namespace chronodrome::ui::steps
