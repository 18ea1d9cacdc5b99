// Chronodrome, GPL-3.0-or-later.
#include "ui/steps/session_tables.h"

#include <algorithm>

#include <QCheckBox>
#include <QGridLayout>
#include <QHBoxLayout>
#include <QHeaderView>
#include <QLabel>
#include <QToolButton>
#include <QVBoxLayout>

#include "session/proposal.h"
#include "session/session_edits.h"
#include "ui/look/number_text.h"
#include "ui/steps/cell_delegates.h"
#include "ui/steps/channel_table_model.h"
#include "ui/steps/pathway_table_model.h"

namespace chronodrome::ui::steps {

void dressTable(QTableView& view) {
  view.setShowGrid(true);
  view.setAlternatingRowColors(false);
  view.setSelectionBehavior(QAbstractItemView::SelectRows);
  view.setSelectionMode(QAbstractItemView::SingleSelection);
  view.setEditTriggers(QAbstractItemView::DoubleClicked | QAbstractItemView::SelectedClicked |
                       QAbstractItemView::EditKeyPressed | QAbstractItemView::AnyKeyPressed);
  view.setTabKeyNavigation(false); // Tab goes on to the next widget, arrows move inside
  view.verticalHeader()->hide();
  view.verticalHeader()->setSectionResizeMode(QHeaderView::Fixed);
  view.verticalHeader()->setDefaultSectionSize(4 * look::kUnit);
  view.horizontalHeader()->setHighlightSections(false);
  view.horizontalHeader()->setDefaultAlignment(Qt::AlignLeft | Qt::AlignVCenter);
  view.horizontalHeader()->setMinimumSectionSize(5 * look::kUnit);
  view.setHorizontalScrollMode(QAbstractItemView::ScrollPerPixel);
  view.setWordWrap(false);
}

ChannelTable::ChannelTable(SessionDraft& draft, bool traces, QWidget* parent)
    : QTableView(parent), model_(new ChannelTableModel(draft, this)), traces_(new TraceDelegate(this)) {
  setObjectName(QStringLiteral("channelsTableView"));
  setAccessibleName(QStringLiteral("Channels"));
  dressTable(*this);
  setModel(model_);
  setItemDelegate(new ChoiceDelegate(this));
  setItemDelegateForColumn(ChannelTableModel::Whole, traces_);
  setItemDelegateForColumn(ChannelTableModel::Close, traces_);
  using Model = ChannelTableModel;
  if (traces) {
    verticalHeader()->setDefaultSectionSize(6 * look::kUnit);
    horizontalHeader()->setSectionResizeMode(Model::Whole, QHeaderView::Stretch);
  } else {
    for (const int column : {Model::Whole, Model::Close, Model::Guessed})
      setColumnHidden(column, true);
    horizontalHeader()->setStretchLastSection(true);
  }
}

/// Columns share what room there is; the traces of the whole recording take what is left.
void ChannelTable::resizeEvent(QResizeEvent* event) {
  QTableView::resizeEvent(event);
  using Model = ChannelTableModel;
  struct Width {
    int column, narrow, usual, wide;
  };
  constexpr Width kWidths[] = {{Model::Source, 13, 18, 26}, {Model::Label, 7, 9, 14},
                               {Model::Role, 12, 13, 18},   {Model::Lead, 9, 11, 14},
                               {Model::Unit, 6, 8, 12},     {Model::Invert, 7, 7, 9},
                               {Model::Guessed, 9, 11, 14}, {Model::Close, 9, 16, 52}};
  const int room = viewport()->width();
  for (const Width& width : kWidths) {
    const int units = room < 90 * look::kUnit    ? width.narrow
                      : room < 170 * look::kUnit ? width.usual
                                                 : width.wide;
    horizontalHeader()->resizeSection(width.column, units * look::kUnit);
  }
  if (!isColumnHidden(Model::Whole)) {
    // Few signals in a tall window are drawn taller.
    const int rows = std::max(1, model_->rowCount());
    verticalHeader()->setDefaultSectionSize(
        std::clamp(viewport()->height() / rows, 6 * look::kUnit, 12 * look::kUnit));
  } else {
    horizontalHeader()->resizeSection(Model::Source, 11 * look::kUnit);
    horizontalHeader()->resizeSection(Model::Role, 11 * look::kUnit);
  }
}

void ChannelTable::setTheme(const look::Theme& theme) {
  traces_->setTheme(theme);
  model_->setTheme(theme);
}

PathwayTable::PathwayTable(SessionDraft& draft, QWidget* parent)
    : QWidget(parent), model_(new PathwayTableModel(draft, this)), view_(new QTableView(this)) {
  view_->setObjectName(QStringLiteral("pathwaysTableView"));
  view_->setAccessibleName(QStringLiteral("Pathways"));
  dressTable(*view_);
  view_->setModel(model_);
  view_->setItemDelegate(new ChoiceDelegate(view_));
  view_->horizontalHeader()->setSectionResizeMode(QHeaderView::Stretch);
  view_->horizontalHeader()->setSectionResizeMode(PathwayTableModel::Distance, QHeaderView::ResizeToContents);

  auto* add = new QToolButton(this);
  add->setObjectName(QStringLiteral("addPathwayToolButton"));
  add->setText(QStringLiteral("Add"));
  add->setAccessibleName(QStringLiteral("Add a pathway"));
  remove_ = new QToolButton(this);
  remove_->setObjectName(QStringLiteral("removePathwayToolButton"));
  remove_->setText(QStringLiteral("Remove"));
  remove_->setAccessibleName(QStringLiteral("Remove the chosen pathway"));
  connect(add, &QToolButton::clicked, this, [this] {
    const int row = model_->add();
    if (row >= 0) view_->setCurrentIndex(model_->index(row, PathwayTableModel::Label));
  });
  connect(remove_, &QToolButton::clicked, this, [this] {
    const int row = view_->currentIndex().row();
    model_->remove(row);
    followSelection();
  });
  connect(view_->selectionModel(), &QItemSelectionModel::selectionChanged, this,
          &PathwayTable::followSelection);
  connect(model_, &QAbstractItemModel::modelReset, this, &PathwayTable::followSelection);
  followSelection();

  auto* buttons = new QHBoxLayout;
  buttons->setContentsMargins(0, 0, 0, 0);
  buttons->addWidget(add);
  buttons->addWidget(remove_);
  buttons->addStretch();
  auto* column = new QVBoxLayout(this);
  column->setContentsMargins(0, 0, 0, 0);
  column->setSpacing(look::kUnit / 2);
  column->addWidget(view_, 1);
  column->addLayout(buttons);
}

void PathwayTable::followSelection() {
  remove_->setEnabled(view_->selectionModel()->hasSelection());
}

MeasureChecks::MeasureChecks(SessionDraft& draft, int columns, QWidget* parent)
    : QWidget(parent), draft_(draft), columns_(columns), grid_(new QGridLayout(this)) {
  grid_->setContentsMargins(0, 0, 0, 0);
  grid_->setHorizontalSpacing(2 * look::kUnit);
  grid_->setVerticalSpacing(look::kUnit / 2);
  auto* hint =
      new QLabel(QStringLiteral("None yet: give a channel the role of an electrogram, tension, pressure "
                                "or flow."),
                 this);
  hint->setWordWrap(true);
  hint->setProperty("quiet", true);
  hint_ = hint;
  grid_->addWidget(hint_, 0, 0, 1, columns);
  connect(&draft_, &SessionDraft::changed, this, &MeasureChecks::show);
  show();
}

void MeasureChecks::show() {
  const auto possible = session::possible_measures(draft_.session());
  if (possible != shown_) {
    for (auto* box : boxes_)
      box->deleteLater();
    boxes_.clear();
    shown_ = possible;
    for (std::size_t i = 0; i < shown_.size(); ++i) {
      auto* box = new QCheckBox(look::measureText(shown_[i]), this);
      QString name = QString::fromStdString(shown_[i]);
      box->setObjectName(name.replace(QLatin1Char(':'), QLatin1Char('_')) + QStringLiteral("CheckBox"));
      box->setAccessibleName(box->text());
      const std::string measure = shown_[i];
      connect(box, &QCheckBox::clicked, this, [this, measure](bool wanted) {
        draft_.change(
            session::with_measure(draft_.session(), measure, wanted),
            QStringLiteral("%1 %2").arg(wanted ? QStringLiteral("measure") : QStringLiteral("leave out"),
                                        look::measureText(measure)));
      });
      const int place = static_cast<int>(i);
      grid_->addWidget(box, place / columns_, place % columns_);
      box->show();
      boxes_.push_back(box);
    }
  }
  hint_->setVisible(shown_.empty());
  const auto& chosen = draft_.session().measures;
  for (std::size_t i = 0; i < boxes_.size(); ++i) {
    boxes_[i]->setChecked(std::find(chosen.begin(), chosen.end(), shown_[i]) != chosen.end());
    boxes_[i]->setEnabled(!draft_.isReadOnly());
  }
}

} // namespace chronodrome::ui::steps
