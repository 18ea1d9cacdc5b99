// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <QStyledItemDelegate>

#include "ui/look/theme.h"

namespace chronodrome::ui::steps {

/// A list to choose from where the model offers one (kChoicesRole), a line to type in else. A choice is taken
/// as soon as it is made.
class ChoiceDelegate : public QStyledItemDelegate {
  Q_OBJECT
public:
  using QStyledItemDelegate::QStyledItemDelegate;

  QWidget* createEditor(QWidget* parent, const QStyleOptionViewItem& option,
                        const QModelIndex& index) const override;
  void setEditorData(QWidget* editor, const QModelIndex& index) const override;
  void setModelData(QWidget* editor, QAbstractItemModel* model, const QModelIndex& index) const override;
  void updateEditorGeometry(QWidget* editor, const QStyleOptionViewItem& option,
                            const QModelIndex& index) const override;
  /// Boxes to tick get a frame in the colour of quiet text: the style's own is lost on a dark ground.
  void paint(QPainter* painter, const QStyleOptionViewItem& option, const QModelIndex& index) const override;
};

/// Draws the small trace of a signal, in the colour of its role: only with a ChannelTableModel.
class TraceDelegate : public QStyledItemDelegate {
  Q_OBJECT
public:
  using QStyledItemDelegate::QStyledItemDelegate;
  void setTheme(const look::Theme& theme) { theme_ = theme; }
  void paint(QPainter* painter, const QStyleOptionViewItem& option, const QModelIndex& index) const override;

private:
  look::Theme theme_ = look::Theme::of(look::Mode::light);
};

} // namespace chronodrome::ui::steps
