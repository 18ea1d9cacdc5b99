// Chronodrome, GPL-3.0-or-later.
#include "ui/steps/additions_form.h"

#include <QApplication>
#include <QClipboard>
#include <QComboBox>
#include <QKeyEvent>
#include <QLabel>
#include <QListWidget>
#include <QTableView>
#include <QTableWidget>
#include <QTimer>
#include <QToolButton>

#include "protocol/bath_timeline.h"
#include "ui/look/number_text.h"
#include "ui/steps/event_table_model.h"
#include "ui/steps/intake_pages.h"
#include "ui/steps/proposed_events.h"

namespace chronodrome::ui::steps {

AdditionsForm::AdditionsForm(SessionDocument& document, Focus& focus, QWidget* parent)
    : QWidget(parent), document_(document), focus_(focus), model_(new EventTableModel(this)) {
  setObjectName(QStringLiteral("additionsForm"));
  setAccessibleName(QStringLiteral("Additions"));
  build();
  connect(model_, &EventTableModel::logChanged, this, &AdditionsForm::noteChange);
  connect(&document_, &SessionDocument::opened, this, &AdditionsForm::begin);
  connect(&document_, &SessionDocument::closed, this, &AdditionsForm::begin);
  connect(&document_, &SessionDocument::edited, this, &AdditionsForm::showLog);
  connect(proposed_, &ProposedEvents::taken, this, &AdditionsForm::takeProposed);
  begin();
}

AdditionsForm::~AdditionsForm() = default;

int AdditionsForm::halfTypedRows() const {
  return model_->halfTyped();
}

/// Another session, or none.
void AdditionsForm::begin() {
  pending_ = false;
  const auto recording = document_.recording();
  EventClock clock;
  if (recording && recording->clock_start) clock.start = *recording->clock_start;
  clock_->setCurrentIndex(0);
  clock_->setEnabled(!clock.start.empty());
  clock_->setToolTip(clock.start.empty() ? QStringLiteral("The recording does not say when it started")
                                         : QStringLiteral("How times are shown and typed"));
  model_->setClock(clock);
  model_->setReadOnly(document_.isReadOnly());
  model_->begin(document_.isOpen() ? document_.protocol().events : std::vector<protocol::Event>{});
  proposed_->clear();
  check();
  followState();
}

void AdditionsForm::showLog() {
  const int row = currentRow();
  const auto event = row >= 0 ? model_->eventOf(row) : std::nullopt;
  const int column = table_->currentIndex().column();
  model_->show(document_.protocol().events);
  // Rows are sorted by time: the chosen one may stand elsewhere now.
  const int now = event ? model_->rowOf(*event) : row;
  if (now >= 0 && now < model_->rowCount() && column >= 0)
    table_->setCurrentIndex(model_->index(now, column));
  check();
  followState();
}

/// The edit is made once the cell's editor is closed: rows may change place.
void AdditionsForm::noteChange(const QString& step) {
  if (!step.isEmpty()) pending_step_ = step;
  if (!pending_) {
    pending_ = true;
    QMetaObject::invokeMethod(this, &AdditionsForm::commit, Qt::QueuedConnection);
  }
}

void AdditionsForm::commit() {
  if (!pending_) return;
  pending_ = false;
  if (document_.isOpen() && !pending_step_.isEmpty()) {
    auto protocol = document_.protocol();
    protocol.events = model_->events();
    const int row = currentRow();
    const int column = std::max(0, table_->currentIndex().column());
    std::optional<protocol::Event> chosen;
    if (row >= 0) chosen = readCells(model_->cells(row), model_->clock()).event;
    const QString step = std::exchange(pending_step_, {});
    model_->adopt();
    document_.setProtocol(protocol, step);
    const int now = chosen ? model_->rowOf(*chosen) : row;
    if (now >= 0 && now < model_->rowCount()) table_->setCurrentIndex(model_->index(now, column));
  }
  check();
  followState();
}

int AdditionsForm::currentRow() const {
  return table_->currentIndex().isValid() ? table_->currentIndex().row() : -1;
}

EventCells AdditionsForm::freshCells() const {
  protocol::Event event;
  event.kind = protocol::EventKind::addition;
  // To a tenth of a second: nobody adds more exactly than that.
  const double middle = 0.5 * (focus_.start() + focus_.end()).value();
  event.time = Seconds(static_cast<double>(static_cast<long>(10.0 * middle + 0.5)) / 10.0);
  EventCells cells = cellsOf(event, model_->clock());
  for (int row = model_->rowCount(); row-- > 0;) {
    const auto& last = model_->cells(row);
    if (last[kEvent] != cells[kEvent] || last[kAgent].isEmpty()) continue;
    cells[kAgent] = last[kAgent];
    cells[kUnitOf] = last[kUnitOf];
    break;
  }
  return cells;
}

void AdditionsForm::addRow() {
  if (!add_->isEnabled()) return;
  const int row = model_->addRow(freshCells());
  const auto& cells = model_->cells(row);
  const QModelIndex index = model_->index(row, cells[kAgent].isEmpty() ? kAgent : kConcentration);
  table_->setFocus();
  table_->setCurrentIndex(index);
  table_->scrollTo(index);
  table_->edit(index);
  check();
  followState();
}

void AdditionsForm::duplicateRow() {
  if (!duplicate_->isEnabled() || currentRow() < 0) return;
  EventCells cells = model_->cells(currentRow());
  cells[kTime] = freshCells()[kTime];
  const int row = model_->addRow(cells);
  table_->setCurrentIndex(model_->index(row, kTime));
}

void AdditionsForm::deleteRow() {
  if (!delete_->isEnabled()) return;
  model_->removeRow(currentRow());
  check();
  followState();
}

void AdditionsForm::paste() {
  if (!paste_->isEnabled()) return;
  const auto rows = pastedRows(QApplication::clipboard()->text());
  if (rows.empty()) {
    return say(QStringLiteral("The clipboard holds no rows; copy them in the spreadsheet first."));
  }
  proposed_->propose(QStringLiteral("the clipboard"), rows, model_->clock());
}

/// Until the next edit.
void AdditionsForm::say(const QString& text) {
  hint_->setText(text);
  setTone(*hint_, QStringLiteral("caution"));
  hint_->show();
}

void AdditionsForm::proposeAnnotations() {
  if (!document_.recording()) return;
  std::vector<EventCells> rows;
  for (const auto& event : session::proposed_events(*document_.recording(), document_.protocol()))
    rows.push_back(cellsOf(event, model_->clock()));
  proposed_->propose(QStringLiteral("annotations"), rows, model_->clock());
  if (rows.empty()) say(QStringLiteral("All annotations of the recording are in the log already."));
}

/// All at once: one step of the history. Rows that cannot be read yet come as half-typed ones.
void AdditionsForm::takeProposed(const std::vector<EventCells>& rows) {
  int complete = 0;
  for (const auto& cells : rows) {
    complete += readCells(cells, model_->clock()).event ? 1 : 0;
    model_->addRow(cells);
  }
  if (complete > 1) pending_step_ = QStringLiteral("add %1 events").arg(complete);
  check();
  followState();
}

void AdditionsForm::check() {
  session::ProtocolCheck found;
  if (document_.isOpen()) {
    protocol::BathConditions bath;
    bath.volume_ml = document_.session().preparation.bath_volume_ml;
    bath.arrival_delay = document_.session().preparation.arrival_delay;
    protocol::Protocol log;
    log.events = model_->events();
    found = session::check_protocol(log, bath, document_.recording()->duration);
  }
  showProblems(found);
  showSteps(found.plan);
}

void AdditionsForm::showProblems(const session::ProtocolCheck& found) {
  checks_->clear();
  const auto add = [this](int row, const QString& text) {
    auto* item =
        new QListWidgetItem(row < 0 ? text : QStringLiteral("Row %1: %2").arg(row + 1).arg(text), checks_);
    item->setData(Qt::UserRole, row);
    item->setToolTip(text);
  };
  for (int row = 0; row < model_->rowCount(); ++row) {
    if (!model_->problem(row).isEmpty())
      add(row, QStringLiteral("not in the log: %1").arg(model_->problem(row)));
  }
  // Lines of the check count the log's events; rows of the table that are in the log come first, in order.
  const auto events = model_->events();
  const auto rowOfLine = [&](const Place& place) {
    return place.line && *place.line >= 1 && *place.line <= events.size()
               ? model_->rowOf(events[*place.line - 1])
               : -1;
  };
  if (found.error) add(rowOfLine(found.error->place), look::messageText(*found.error));
  for (const auto& warning : found.warnings)
    add(rowOfLine(warning.place), look::messageText(warning));
  const int count = checks_->count();
  checks_title_->setText(count == 0   ? QStringLiteral("Nothing speaks against the log")
                         : count == 1 ? QStringLiteral("1 thing to look at")
                                      : QStringLiteral("%1 things to look at").arg(count));
  setTone(*checks_title_, count == 0 ? QString() : QStringLiteral("caution"));
  checks_->setVisible(count > 0);
  fitChecks();
}

void AdditionsForm::showSteps(const protocol::CurvePlan& plan) {
  int rows = 0;
  for (const auto& curve : plan.curves)
    rows += static_cast<int>(curve.steps.size());
  steps_->setRowCount(rows);
  int row = 0;
  for (const auto& curve : plan.curves) {
    QString name = QStringLiteral("%1 %2").arg(curve.number).arg(QString::fromStdString(curve.agent));
    if (!curve.background.empty())
      name += QStringLiteral(", with %1").arg(QString::fromStdString(curve.background));
    for (const auto& step : curve.steps) {
      const bool empty = !(step.end > step.start);
      const QString texts[] = {name,
                               step.concentration.value() == 0.0
                                   ? QStringLiteral("control")
                                   : look::concentrationText(step.concentration),
                               look::timeText(step.start, 0),
                               empty ? QStringLiteral("no time") : look::durationText(step.end - step.start)};
      for (int column = 0; column < 4; ++column) {
        auto* item = new QTableWidgetItem(texts[column]);
        item->setToolTip(texts[column]);
        item->setData(Qt::UserRole, QPointF(step.start.value(), step.end.value()));
        steps_->setItem(row, column, item);
      }
      name.clear(); // the curve is named once
      ++row;
    }
  }
}

void AdditionsForm::goToRow(int row) {
  if (row < 0 || row >= model_->rowCount()) return;
  const auto reading = readCells(model_->cells(row), model_->clock());
  table_->setCurrentIndex(model_->index(row, reading.event ? int(kTime) : reading.column));
  if (const auto event = model_->eventOf(row)) focus_.goToTime(event->time);
}

void AdditionsForm::followState() {
  const bool open = document_.isOpen() && !document_.isReadOnly();
  add_->setEnabled(open);
  paste_->setEnabled(open);
  duplicate_->setEnabled(open && currentRow() >= 0);
  delete_->setEnabled(open && currentRow() >= 0);
  const auto recording = document_.recording();
  annotations_->setVisible(recording && !recording->annotations.empty());
  const int half = model_->halfTyped();
  hint_->setText(
      !document_.isOpen()      ? QStringLiteral("No session is open.")
      : document_.isReadOnly() ? QStringLiteral("The session is open for reading only.")
      : half == 1 ? QStringLiteral("1 row is not complete; it stays here, and is not in the log yet.")
      : half > 1
          ? QStringLiteral("%1 rows are not complete; they stay here, and are not in the log yet.").arg(half)
          : QString());
  setTone(*hint_, half > 0 ? QStringLiteral("caution") : QString());
  hint_->setVisible(!hint_->text().isEmpty());
}

void AdditionsForm::keyPressEvent(QKeyEvent* event) {
  if (event->key() == Qt::Key_Escape) {
    if (proposed_->isVisible()) return proposed_->clear();
    Q_EMIT finished();
    return;
  }
  QWidget::keyPressEvent(event);
}

/// Keys of the table: paste and delete, as in any table.
bool AdditionsForm::eventFilter(QObject* watched, QEvent* event) {
  if (watched == table_ && event->type() == QEvent::KeyPress) {
    const auto* key = static_cast<QKeyEvent*>(event);
    if (key->matches(QKeySequence::Paste)) return paste(), true;
    if (key->key() == Qt::Key_Delete) return deleteRow(), true;
    if (key->key() == Qt::Key_Insert) return addRow(), true;
  }
  return QWidget::eventFilter(watched, event);
}

} // namespace chronodrome::ui::steps
