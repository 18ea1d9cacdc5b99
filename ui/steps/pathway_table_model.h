// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <QAbstractTableModel>

#include "ui/steps/session_draft.h"

namespace chronodrome::ui::steps {

/// Pathways of a session: label, from, to, distance in mm.
class PathwayTableModel : public QAbstractTableModel {
  Q_OBJECT
public:
  enum Column { Label, From, To, Distance, kColumns };

  explicit PathwayTableModel(SessionDraft& draft, QObject* parent = nullptr);

  [[nodiscard]] int rowCount(const QModelIndex& parent = {}) const override;
  [[nodiscard]] int columnCount(const QModelIndex& parent = {}) const override;
  [[nodiscard]] QVariant data(const QModelIndex& index, int role = Qt::DisplayRole) const override;
  bool setData(const QModelIndex& index, const QVariant& value, int role = Qt::EditRole) override;
  [[nodiscard]] Qt::ItemFlags flags(const QModelIndex& index) const override;
  [[nodiscard]] QVariant headerData(int section, Qt::Orientation orientation,
                                    int role = Qt::DisplayRole) const override;

  /// One more pathway: between the first two electrograms that have none yet. Its row, or -1 if there are
  /// not two.
  int add();
  void remove(int row);

private:
  void rebuild();
  [[nodiscard]] QStringList electrograms() const;

  SessionDraft& draft_;
  int rows_ = 0; ///< as the views know it
};

} // namespace chronodrome::ui::steps
