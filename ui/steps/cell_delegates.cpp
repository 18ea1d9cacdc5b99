// Chronodrome, GPL-3.0-or-later.
#include "ui/steps/cell_delegates.h"

#include <QApplication>
#include <QComboBox>
#include <QLineEdit>
#include <QPainter>
#include <QTimer>

#include "ui/look/plot_style.h"
#include "ui/steps/channel_table_model.h"

namespace chronodrome::ui::steps {

QWidget* ChoiceDelegate::createEditor(QWidget* parent, const QStyleOptionViewItem& option,
                                      const QModelIndex& index) const {
  const QStringList choices = index.data(kChoicesRole).toStringList();
  const QString name = index.model()->headerData(index.column(), Qt::Horizontal).toString();
  if (choices.isEmpty()) {
    QWidget* editor = QStyledItemDelegate::createEditor(parent, option, index);
    editor->setObjectName(QStringLiteral("cellLineEdit"));
    editor->setAccessibleName(name);
    return editor;
  }
  auto* box = new QComboBox(parent);
  box->setObjectName(QStringLiteral("cellComboBox"));
  box->setAccessibleName(name);
  for (const QString& choice : choices)
    box->addItem(choice.isEmpty() ? QStringLiteral("not stated") : choice, choice);
  auto* self = const_cast<ChoiceDelegate*>(this); // signals of a delegate are no change of it
  connect(box, &QComboBox::activated, box, [self, box] {
    Q_EMIT self->commitData(box);
    Q_EMIT self->closeEditor(box);
  });
  QTimer::singleShot(0, box, [box] { box->showPopup(); });
  return box;
}

void ChoiceDelegate::setEditorData(QWidget* editor, const QModelIndex& index) const {
  auto* box = qobject_cast<QComboBox*>(editor);
  if (box == nullptr) return QStyledItemDelegate::setEditorData(editor, index);
  box->setCurrentIndex(box->findData(index.data(Qt::EditRole)));
}

void ChoiceDelegate::setModelData(QWidget* editor, QAbstractItemModel* model,
                                  const QModelIndex& index) const {
  const auto* box = qobject_cast<QComboBox*>(editor);
  if (box == nullptr) return QStyledItemDelegate::setModelData(editor, model, index);
  model->setData(index, box->currentData());
}

void ChoiceDelegate::updateEditorGeometry(QWidget* editor, const QStyleOptionViewItem& option,
                                          const QModelIndex& /*index*/) const {
  editor->setGeometry(option.rect);
}

void ChoiceDelegate::paint(QPainter* painter, const QStyleOptionViewItem& option,
                           const QModelIndex& index) const {
  QStyledItemDelegate::paint(painter, option, index);
  if (!index.data(Qt::CheckStateRole).isValid()) return;
  QStyleOptionViewItem full = option;
  initStyleOption(&full, index);
  const QStyle* style = full.widget == nullptr ? QApplication::style() : full.widget->style();
  const QRect box = style->subElementRect(QStyle::SE_ItemViewItemCheckIndicator, &full, full.widget);
  painter->save();
  painter->setPen(look::thinPen(option.palette.color(QPalette::PlaceholderText)));
  painter->setBrush(Qt::NoBrush);
  painter->drawRoundedRect(QRectF(box).adjusted(0.5, 0.5, -0.5, -0.5), 2, 2);
  painter->restore();
}

namespace {

/// One run of a trace as a line through the lowest and the highest value of each column.
void drawPiece(QPainter& painter, const recording::TracePiece& piece, const session::PreviewTrace& trace,
               const QRectF& box, bool inverted) {
  const double length = (trace.span.end - trace.span.start).value();
  const double height = trace.range.max - trace.range.min;
  if (!(length > 0.0)) return;
  const auto place = [&](std::size_t i, double value) {
    const double share = height > 0.0 ? (value - trace.range.min) / height : 0.5;
    const double x = (piece.time_of(i) - trace.span.start).value() / length;
    return QPointF(box.left() + x * box.width(),
                   inverted ? box.top() + share * box.height() : box.bottom() - share * box.height());
  };
  QPolygonF line;
  for (std::size_t i = 0; i < piece.points.size(); ++i) {
    line << place(i, piece.points[i].min);
    if (!piece.is_samples) line << place(i, piece.points[i].max);
  }
  painter.drawPolyline(line);
}

} // namespace

void TraceDelegate::paint(QPainter* painter, const QStyleOptionViewItem& option,
                          const QModelIndex& index) const {
  QStyledItemDelegate::paint(painter, option, index); // the ground of a chosen row
  const auto* model = qobject_cast<const ChannelTableModel*>(index.model());
  const auto* trace = model == nullptr ? nullptr : model->traceOf(index);
  if (trace == nullptr) return;
  painter->save();
  const QRectF box = QRectF(option.rect).adjusted(look::kUnit, 6, -look::kUnit, -6);
  painter->setClipRect(option.rect);
  painter->setRenderHint(QPainter::Antialiasing, false);
  painter->setPen(
      look::thinPen(model->isTaken(index.row()) ? theme_.of(model->roleOf(index.row())) : theme_.excluded));
  for (const auto& piece : trace->pieces)
    drawPiece(*painter, piece, *trace, box, model->isInverted(index.row()));
  painter->restore();
}

} // namespace chronodrome::ui::steps
