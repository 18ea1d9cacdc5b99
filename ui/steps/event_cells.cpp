// Chronodrome, GPL-3.0-or-later.
#include "ui/steps/event_cells.h"

#include <QStringList>

#include "base/number_text.h"
#include "protocol/concentration.h"
#include "protocol/typed_concentration.h"
#include "session/notebook_clock.h"
#include "ui/look/number_text.h"

namespace chronodrome::ui::steps {
namespace {

using protocol::Event;
using protocol::EventKind;

QString numberText(double value) {
  return QString::fromStdString(exact_text(value));
}

/// The number in the unit that was written, or in mol/L.
QString concentrationCell(const Event& event) {
  if (!event.concentration) return {};
  const auto one = protocol::concentration_in(1.0, event.unit);
  // Twelve digits: dividing by the unit leaves the last one uncertain.
  return QString::fromStdString(
      number_text(one ? event.concentration->value() / one->value() : event.concentration->value()));
}

QString timeCell(Seconds time, const EventClock& clock) {
  if (clock.of_day) {
    if (const auto text = session::clock_at(clock.start, time)) return QString::fromStdString(*text);
  }
  // Text that reads back to the same time: as minutes and seconds where tenths say it all.
  const QString text = look::timeText(time, 1);
  const auto back = look::typedTime(text);
  return back && *back == time
             ? look::timeText(time, look::typedTime(look::timeText(time, 0)) == time ? 0 : 1)
             : numberText(time.value());
}

std::optional<Seconds> readTime(const QString& text, const EventClock& clock) {
  if (clock.of_day && text.contains(QLatin1Char(':')))
    return session::time_of_clock(clock.start, text.toStdString());
  return look::typedTime(text);
}

/// Fills one cell after the other and keeps the first problem.
class CellReader {
public:
  CellReader(const EventCells& cells, const EventClock& clock) : cells_(cells), clock_(clock) {}

  EventReading read() {
    Event event;
    const auto time = readTime(cell(kTime), clock_);
    if (cell(kTime).isEmpty())
      fail(kTime, QStringLiteral("no time"));
    else if (!time)
      fail(kTime, QStringLiteral("\"%1\" is no time; write 12:30, 750 or 12.5 min").arg(cell(kTime)));
    if (time) event.time = *time;
    readKind(event);
    event.agent = cell(kAgent).toStdString();
    event.note = cell(kNote).toStdString();
    readConcentration(event);
    readNumbers(event);
    checkWhole(event);
    if (reading_.problem.isEmpty()) reading_.event = std::move(event);
    return reading_;
  }

private:
  [[nodiscard]] QString cell(int column) const { return cells_[static_cast<std::size_t>(column)].trimmed(); }

  void fail(int column, const QString& problem) {
    if (!reading_.problem.isEmpty()) return;
    reading_.problem = problem;
    reading_.column = column;
  }

  void readKind(Event& event) {
    const QString word = cell(kEvent).toLower().replace(QLatin1Char(' '), QLatin1Char('_'));
    const auto kind = protocol::event_named(word.toStdString());
    if (!kind)
      fail(kEvent, word.isEmpty() ? QStringLiteral("no event")
                                  : QStringLiteral("\"%1\" is no event").arg(cell(kEvent)));
    event.kind = kind.value_or(EventKind::note);
  }

  void readConcentration(Event& event) {
    event.unit = cell(kUnitOf).toStdString();
    if (cell(kConcentration).isEmpty()) return;
    const auto typed = protocol::typed_concentration(cell(kConcentration).toStdString(), event.unit);
    if (!typed) return fail(kConcentration, look::messageText(typed.error()));
    event.concentration = typed->value;
    event.unit = typed->unit;
  }

  /// Nothing for an empty cell; a problem for anything but a number from `least` on.
  std::optional<double> number(int column, double least, bool may_equal) {
    if (cell(column).isEmpty()) return std::nullopt;
    const auto value = look::typedNumber(cell(column));
    if (value && (*value > least || (may_equal && *value == least))) return value;
    fail(column, QStringLiteral("%1 cannot be \"%2\"").arg(eventHeading(column), cell(column)));
    return std::nullopt;
  }

  void readNumbers(Event& event) {
    if (const auto stock = number(kStock, 0.0, false)) event.stock = Molar(*stock);
    event.volume_ml = number(kVolume, 0.0, false);
    if (const auto arrival = number(kArrival, 0.0, true)) event.arrival = Seconds(*arrival);
    if (event.stock && !event.volume_ml)
      fail(kVolume, QStringLiteral("a stock needs the volume that was added"));
    if (const auto curve = number(kCurve, 1.0, true)) {
      if (*curve != static_cast<double>(static_cast<int>(*curve)) || *curve > 10'000.0)
        fail(kCurve, QStringLiteral("curves are counted 1, 2, 3"));
      event.curve = static_cast<int>(*curve);
    }
  }

  void checkWhole(const Event& event) {
    if (event.kind != EventKind::addition && event.kind != EventKind::antagonist) return;
    if (event.agent.empty()) fail(kAgent, QStringLiteral("no agent"));
    if (!event.concentration && !event.stock)
      fail(kConcentration, QStringLiteral("no concentration, and no stock with a volume"));
  }

  const EventCells& cells_;
  const EventClock& clock_;
  EventReading reading_;
};

/// Which column a heading of a spreadsheet names; -1: none.
int columnNamed(const QString& heading) {
  QString name = heading.trimmed().toLower();
  name = name.section(QLatin1Char('('), 0, 0).section(QLatin1Char('['), 0, 0).trimmed();
  const std::pair<const char*, int> names[] = {{"time_s", kTime},
                                               {"time", kTime},
                                               {"zeit", kTime},
                                               {"clock", kTime},
                                               {"event", kEvent},
                                               {"what", kEvent},
                                               {"agent", kAgent},
                                               {"drug", kAgent},
                                               {"substance", kAgent},
                                               {"concentration", kConcentration},
                                               {"conc", kConcentration},
                                               {"conc.", kConcentration},
                                               {"unit", kUnitOf},
                                               {"note", kNote},
                                               {"notes", kNote},
                                               {"comment", kNote},
                                               {"stock_mol_per_l", kStock},
                                               {"stock", kStock},
                                               {"volume_ml", kVolume},
                                               {"volume", kVolume},
                                               {"arrival_s", kArrival},
                                               {"curve", kCurve}};
  for (const auto& [known, column] : names) {
    if (name == QLatin1String(known)) return column;
  }
  return -1;
}

} // namespace

QString eventHeading(int column) {
  static const QStringList headings = {QStringLiteral("Time"),         QStringLiteral("Event"),
                                       QStringLiteral("Agent"),        QStringLiteral("Bath"),
                                       QStringLiteral("Unit"),         QStringLiteral("Note"),
                                       QStringLiteral("Stock, mol/L"), QStringLiteral("Volume, mL"),
                                       QStringLiteral("Arrival, s"),   QStringLiteral("Curve")};
  return headings.value(column);
}

QString eventWord(EventKind kind) {
  return QString::fromStdString(protocol::name_of(kind)).replace(QLatin1Char('_'), QLatin1Char(' '));
}

EventCells cellsOf(const Event& event, const EventClock& clock) {
  EventCells cells;
  cells[kTime] = timeCell(event.time, clock);
  cells[kEvent] = eventWord(event.kind);
  cells[kAgent] = QString::fromStdString(event.agent);
  cells[kConcentration] = concentrationCell(event);
  const bool known = protocol::concentration_in(1.0, event.unit).has_value();
  cells[kUnitOf] = QString::fromStdString(event.concentration && !known ? "M" : event.unit);
  cells[kNote] = QString::fromStdString(event.note);
  if (event.stock) cells[kStock] = numberText(event.stock->value());
  if (event.volume_ml) cells[kVolume] = numberText(*event.volume_ml);
  if (event.arrival) cells[kArrival] = numberText(event.arrival->value());
  if (event.curve) cells[kCurve] = QString::number(*event.curve);
  return cells;
}

EventReading readCells(const EventCells& cells, const EventClock& clock) {
  return CellReader(cells, clock).read();
}

bool sameEvent(const Event& a, const Event& b) {
  return a.time == b.time && a.kind == b.kind && a.agent == b.agent && a.concentration == b.concentration &&
         a.unit == b.unit && a.note == b.note && a.stock == b.stock && a.volume_ml == b.volume_ml &&
         a.arrival == b.arrival && a.curve == b.curve;
}

QString eventText(const Event& event) {
  QString text = eventWord(event.kind);
  if (!event.agent.empty()) text += QLatin1Char(' ') + QString::fromStdString(event.agent);
  if (event.concentration) text += QLatin1Char(' ') + look::concentrationText(*event.concentration);
  return text;
}

std::vector<EventCells> pastedRows(const QString& text) {
  std::vector<EventCells> rows;
  const QChar divider = text.contains(QLatin1Char('\t'))  ? QLatin1Char('\t')
                        : text.contains(QLatin1Char(';')) ? QLatin1Char(';')
                                                          : QLatin1Char(',');
  std::vector<int> columns;
  for (int i = 0; i < kEventColumns; ++i)
    columns.push_back(i);
  bool first = true;
  for (const QString& line :
       QString(text).replace(QLatin1Char('\r'), QLatin1Char('\n')).split(QLatin1Char('\n'))) {
    if (line.trimmed().isEmpty()) continue;
    const QStringList parts = line.split(divider);
    if (first && columnNamed(parts.front()) >= 0) {
      columns.clear();
      for (const QString& part : parts)
        columns.push_back(columnNamed(part));
      first = false;
      continue;
    }
    first = false;
    EventCells cells;
    for (std::size_t i = 0; i < columns.size() && static_cast<qsizetype>(i) < parts.size(); ++i) {
      QString part = parts[static_cast<qsizetype>(i)].trimmed();
      if (part.size() > 1 && part.startsWith(QLatin1Char('"')) && part.endsWith(QLatin1Char('"')))
        part = part.mid(1, part.size() - 2);
      if (columns[i] >= 0) cells[static_cast<std::size_t>(columns[i])] = part;
    }
    if (cells[kEvent].isEmpty() && !cells[kAgent].isEmpty() && !cells[kConcentration].isEmpty())
      cells[kEvent] = eventWord(EventKind::addition); // shown for review before anything is taken
    rows.push_back(std::move(cells));
  }
  return rows;
}

} // namespace chronodrome::ui::steps
