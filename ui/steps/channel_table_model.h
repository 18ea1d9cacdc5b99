// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <vector>

#include <QAbstractTableModel>

#include "ui/look/theme.h"
#include "ui/steps/session_draft.h"

namespace chronodrome::ui::steps {

/// Words to choose from in a cell, for ChoiceDelegate.
inline constexpr int kChoicesRole = Qt::UserRole + 1;

/// Signals of a recording and the meaning that the session gives them: one row a channel, and one for each
/// signal that is not taken.
class ChannelTableModel : public QAbstractTableModel {
  Q_OBJECT
public:
  enum Column { Source, Whole, Close, Label, Role, Lead, Unit, Invert, Guessed, kColumns };

  explicit ChannelTableModel(SessionDraft& draft, QObject* parent = nullptr);
  void setTheme(const look::Theme& theme);

  [[nodiscard]] int rowCount(const QModelIndex& parent = {}) const override;
  [[nodiscard]] int columnCount(const QModelIndex& parent = {}) const override;
  [[nodiscard]] QVariant data(const QModelIndex& index, int role = Qt::DisplayRole) const override;
  bool setData(const QModelIndex& index, const QVariant& value, int role = Qt::EditRole) override;
  [[nodiscard]] Qt::ItemFlags flags(const QModelIndex& index) const override;
  [[nodiscard]] QVariant headerData(int section, Qt::Orientation orientation,
                                    int role = Qt::DisplayRole) const override;

  [[nodiscard]] recording::Role roleOf(int row) const;
  [[nodiscard]] bool isTaken(int row) const;
  [[nodiscard]] bool isInverted(int row) const;
  /// Null: there is nothing to draw.
  [[nodiscard]] const session::PreviewTrace* traceOf(const QModelIndex& index) const;

private:
  struct Row {
    document::ChannelEntry entry;
    bool taken = false;
    std::size_t signal = 0;
  };
  void rebuild();
  [[nodiscard]] std::vector<Row> rowsNow() const;
  [[nodiscard]] const session::ChannelProposal* guessOf(const Row& row) const;
  [[nodiscard]] QString textOf(const Row& row, int column) const;
  [[nodiscard]] QString guessText(const Row& row) const;
  [[nodiscard]] QString reasonOf(const Row& row, int column) const;
  bool take(const Row& row, bool wanted);
  bool changeEntry(const Row& row, int column, const QString& text);

  SessionDraft& draft_;
  look::Theme theme_ = look::Theme::of(look::Mode::light);
  std::vector<Row> rows_;
};

} // namespace chronodrome::ui::steps
