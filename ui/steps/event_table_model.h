// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <vector>

#include <QAbstractTableModel>

#include "ui/look/theme.h"
#include "ui/steps/event_cells.h"

namespace chronodrome::ui::steps {

/// The drug log as rows to type in. A row that is complete is in the log; one that is half typed stays in the
/// table alone, and says what it lacks. Nothing typed is ever lost: a row of the log whose new text cannot be
/// read keeps its event until the text can.
class EventTableModel : public QAbstractTableModel {
  Q_OBJECT
public:
  explicit EventTableModel(QObject* parent = nullptr);
  void setTheme(const look::Theme& theme) { theme_ = theme; }

  [[nodiscard]] int rowCount(const QModelIndex& parent = {}) const override;
  [[nodiscard]] int columnCount(const QModelIndex& parent = {}) const override;
  [[nodiscard]] QVariant data(const QModelIndex& index, int role = Qt::DisplayRole) const override;
  bool setData(const QModelIndex& index, const QVariant& value, int role = Qt::EditRole) override;
  [[nodiscard]] Qt::ItemFlags flags(const QModelIndex& index) const override;
  [[nodiscard]] QVariant headerData(int section, Qt::Orientation orientation,
                                    int role = Qt::DisplayRole) const override;

  /// The log as it now is. Half-typed rows stay, behind those of the log.
  void show(const std::vector<protocol::Event>& events);
  /// Forgets half-typed rows too: another session is there.
  void begin(const std::vector<protocol::Event>& events);
  void setClock(const EventClock& clock);
  void setReadOnly(bool readOnly) { read_only_ = readOnly; }
  [[nodiscard]] const EventClock& clock() const { return clock_; }

  /// A row at the end; its number.
  int addRow(const EventCells& cells);
  void removeRow(int row);
  [[nodiscard]] const EventCells& cells(int row) const { return rows_[static_cast<std::size_t>(row)].cells; }
  /// What keeps the row out of the log (or its new text); empty: nothing.
  [[nodiscard]] QString problem(int row) const;
  [[nodiscard]] int halfTyped() const;
  /// The event of the row in the log; nothing: half typed.
  [[nodiscard]] std::optional<protocol::Event> eventOf(int row) const;
  [[nodiscard]] int rowOf(const protocol::Event& event) const;

  /// Complete rows count as part of the log: called just before events() becomes the log.
  void adopt();
  /// The log that the rows say: complete rows as typed, others as they were.
  [[nodiscard]] std::vector<protocol::Event> events() const;

Q_SIGNALS:
  /// The rows say another log now; `step` names the change.
  void logChanged(const QString& step);

private:
  struct Row {
    EventCells cells;
    std::optional<protocol::Event> in_log;
    EventReading reading;
  };
  [[nodiscard]] Row rowFor(const protocol::Event& event) const;
  void readAgain(int row);

  std::vector<Row> rows_;
  EventClock clock_;
  look::Theme theme_ = look::Theme::of(look::Mode::light);
  bool read_only_ = false;
};

} // namespace chronodrome::ui::steps
