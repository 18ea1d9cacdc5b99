// Chronodrome, GPL-3.0-or-later.
#include "ui/steps/session_form.h"

#include <QButtonGroup>
#include <QHBoxLayout>
#include <QHeaderView>
#include <QKeyEvent>
#include <QLabel>
#include <QLineEdit>
#include <QPushButton>
#include <QScrollArea>
#include <QSortFilterProxyModel>
#include <QStackedWidget>
#include <QTableView>
#include <QToolButton>
#include <QVBoxLayout>

#include "ui/steps/cell_delegates.h"
#include "ui/steps/intake_pages.h"
#include "ui/steps/preparation_fields.h"
#include "ui/steps/session_draft.h"
#include "ui/steps/session_tables.h"
#include "ui/steps/setting_table_model.h"

namespace chronodrome::ui::steps {
namespace {

using look::kUnit;

QVBoxLayout* columnIn(QWidget* widget) {
  auto* column = new QVBoxLayout(widget);
  column->setContentsMargins(0, 0, 0, 0);
  column->setSpacing(kUnit);
  return column;
}

} // namespace

SessionForm::SessionForm(SessionDocument& document, QWidget* parent)
    : QWidget(parent), document_(document), draft_(new SessionDraft(this)),
      settings_(new SettingTableModel(*draft_, this)) {
  setObjectName(QStringLiteral("sessionForm"));
  setAccessibleName(QStringLiteral("Channels, preparation, settings"));
  setMinimumWidth(380);
  pages_ = new QStackedWidget(this);
  pages_->insertWidget(kChannels, buildChannels());
  pages_->insertWidget(kPreparation, buildPreparation());
  pages_->insertWidget(kSettings, buildSettings());
  message_ = new QLabel(this);
  message_->setObjectName(QStringLiteral("sessionMessageLabel"));
  message_->setWordWrap(true);
  message_->hide();
  auto* all = new QVBoxLayout(this);
  all->setContentsMargins(2 * kUnit, 2 * kUnit, 2 * kUnit, 2 * kUnit);
  all->setSpacing(kUnit);
  all->addWidget(buildHead());
  all->addWidget(message_);
  all->addWidget(pages_, 1);
  connect(draft_, &SessionDraft::refused, this,
          [this](const QString& text) { say(text, QStringLiteral("fault")); });
  connect(draft_, &SessionDraft::edited, this, [this](const QString& step) {
    say({}, {});
    document_.setSession(draft_->session(), step);
  });
  connect(&document_, &SessionDocument::edited, this, [this] { draft_->show(document_.session()); });
  connect(&document_, &SessionDocument::opened, this, &SessionForm::begin);
  connect(&document_, &SessionDocument::closed, this, &SessionForm::begin);
  begin();
}

SessionForm::~SessionForm() = default;

void SessionForm::begin() {
  const bool open = document_.isOpen();
  draft_->setReadOnly(!open || document_.isReadOnly());
  draft_->begin(open ? document_.session() : document::SessionFile{}, open ? document_.recording() : nullptr,
                {}, {});
  pages_->setEnabled(open);
  if (!open)
    say(QStringLiteral("No session is open."), {});
  else
    say(document_.isReadOnly() ? QStringLiteral("The session is open for reading only.") : QString(), {});
}

void SessionForm::say(const QString& text, const QString& tone) {
  message_->setText(text);
  setTone(*message_, tone);
  message_->setVisible(!text.isEmpty());
}

QWidget* SessionForm::buildHead() {
  auto* head = new QWidget(this);
  auto* row = new QHBoxLayout(head);
  row->setContentsMargins(0, 0, 0, 0);
  row->setSpacing(kUnit / 2);
  auto* group = new QButtonGroup(head);
  const std::pair<const char*, const char*> names[] = {{"channelsPageToolButton", "Channels"},
                                                       {"preparationPageToolButton", "Preparation"},
                                                       {"settingsPageToolButton", "Settings"}};
  for (const auto& [name, text] : names) {
    auto* tab = new QToolButton(head);
    tab->setObjectName(QString::fromLatin1(name));
    tab->setText(QString::fromLatin1(text));
    tab->setAccessibleName(tab->text());
    tab->setCheckable(true);
    tab->setFocusPolicy(Qt::StrongFocus);
    group->addButton(tab, static_cast<int>(tabs_.size()));
    tabs_.push_back(tab);
    row->addWidget(tab);
  }
  tabs_.front()->setChecked(true);
  connect(group, &QButtonGroup::idClicked, pages_, &QStackedWidget::setCurrentIndex);
  auto* done = new QPushButton(QStringLiteral("Done"), head);
  done->setObjectName(QStringLiteral("donePushButton"));
  done->setAccessibleName(QStringLiteral("Back to the curves"));
  done->setToolTip(QStringLiteral("Back to the curves (Escape)"));
  done->setAutoDefault(false);
  connect(done, &QPushButton::clicked, this, &SessionForm::finished);
  row->addStretch();
  row->addWidget(done);
  return head;
}

QWidget* SessionForm::buildChannels() {
  auto* page = new QWidget(pages_);
  auto* column = columnIn(page);
  column->addWidget(headingLabel(QStringLiteral("Signals and channels"), page));
  channels_ = new ChannelTable(*draft_, false, page);
  column->addWidget(channels_, 3);
  column->addSpacing(kUnit);
  column->addWidget(headingLabel(QStringLiteral("Pathways"), page));
  column->addWidget(new PathwayTable(*draft_, page), 2);
  column->addSpacing(kUnit);
  column->addWidget(headingLabel(QStringLiteral("Measures"), page));
  column->addWidget(new MeasureChecks(*draft_, 2, page));
  return page;
}

QWidget* SessionForm::buildPreparation() {
  auto* content = new QWidget(pages_);
  auto* column = columnIn(content);
  column->addWidget(headingLabel(QStringLiteral("Preparation"), content));
  column->addWidget(new PreparationFields(*draft_, true, content));
  column->addStretch();
  auto* scroll = new QScrollArea(pages_);
  scroll->setObjectName(QStringLiteral("preparationScrollArea"));
  scroll->setFrameShape(QFrame::NoFrame);
  scroll->setWidgetResizable(true);
  scroll->setWidget(content);
  return scroll;
}

QWidget* SessionForm::buildSettings() {
  auto* page = new QWidget(pages_);
  auto* column = columnIn(page);
  auto* search = new QLineEdit(page);
  search->setObjectName(QStringLiteral("settingsFilterLineEdit"));
  search->setAccessibleName(QStringLiteral("Show settings with these words"));
  search->setPlaceholderText(QStringLiteral("show settings with ..."));
  search->setClearButtonEnabled(true);
  settings_filter_ = new QSortFilterProxyModel(page);
  settings_filter_->setSourceModel(settings_);
  settings_filter_->setFilterKeyColumn(-1);
  settings_filter_->setFilterCaseSensitivity(Qt::CaseInsensitive);
  connect(search, &QLineEdit::textChanged, settings_filter_, &QSortFilterProxyModel::setFilterFixedString);
  settings_view_ = new QTableView(page);
  settings_view_->setObjectName(QStringLiteral("settingsTableView"));
  settings_view_->setAccessibleName(QStringLiteral("Settings of the analysis"));
  dressTable(*settings_view_);
  settings_view_->setModel(settings_filter_);
  settings_view_->setItemDelegate(new ChoiceDelegate(settings_view_));
  const std::pair<int, int> widths[] = {{SettingTableModel::Key, 27},
                                        {SettingTableModel::Value, 9},
                                        {SettingTableModel::Unit, 6},
                                        {SettingTableModel::Default, 9},
                                        {SettingTableModel::Meaning, 40}};
  for (const auto& [section, units] : widths)
    settings_view_->setColumnWidth(section, units * kUnit);
  settings_view_->verticalHeader()->setDefaultSectionSize(4 * kUnit - 4);
  connect(settings_view_->selectionModel(), &QItemSelectionModel::currentChanged, this,
          &SessionForm::followSetting);
  connect(settings_, &QAbstractItemModel::dataChanged, this, &SessionForm::followSetting);
  setting_text_ = new QLabel(page);
  setting_text_->setObjectName(QStringLiteral("settingMeaningLabel"));
  setting_text_->setWordWrap(true);
  setting_text_->setMinimumHeight(6 * kUnit);
  setting_text_->setAlignment(Qt::AlignTop);
  reset_ = new QToolButton(page);
  reset_->setObjectName(QStringLiteral("resetSettingToolButton"));
  reset_->setText(QStringLiteral("Back to default"));
  reset_->setAccessibleName(QStringLiteral("Give the chosen setting its default back"));
  connect(reset_, &QToolButton::clicked, this,
          [this] { settings_->reset(settings_filter_->mapToSource(settings_view_->currentIndex()).row()); });
  column->addWidget(search);
  column->addWidget(settings_view_, 1);
  column->addWidget(setting_text_);
  column->addWidget(reset_, 0, Qt::AlignLeft);
  followSetting();
  return page;
}

void SessionForm::followSetting() {
  const QModelIndex index = settings_filter_->mapToSource(settings_view_->currentIndex());
  setting_text_->setText(index.isValid() ? settings_->description(index.row())
                                         : QStringLiteral("Choose a setting to see what it means."));
  reset_->setEnabled(index.isValid() && settings_->isChanged(index.row()) && !draft_->isReadOnly());
}

void SessionForm::showPage(Page page) {
  tabs_[static_cast<std::size_t>(page)]->setChecked(true);
  pages_->setCurrentIndex(page);
}

void SessionForm::setTheme(const look::Theme& theme) {
  channels_->setTheme(theme);
  settings_->setTheme(theme);
}

void SessionForm::keyPressEvent(QKeyEvent* event) {
  if (event->key() == Qt::Key_Escape) {
    Q_EMIT finished();
    return;
  }
  QWidget::keyPressEvent(event);
}

} // namespace chronodrome::ui::steps
