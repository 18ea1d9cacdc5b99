// Chronodrome, GPL-3.0-or-later.
#include "ui/steps/preparation_fields.h"

#include <functional>

#include <QCompleter>
#include <QFormLayout>
#include <QLineEdit>

#include "base/number_text.h"
#include "ui/look/number_text.h"
#include "ui/look/theme.h"

namespace chronodrome::ui::steps {

using document::Preparation;

struct PreparationFields::Field {
  const char* name;  ///< of the widget
  const char* label; ///< as shown
  const char* hint;
  bool always; ///< needed to analyse: shown when a recording is taken in
  std::string Preparation::*text = nullptr;
  std::optional<double> Preparation::*number = nullptr; ///< text and number null: the arrival delay
  bool above_zero = false;
};

namespace {

std::string shownNumber(double value) {
  return exact_text(value);
}

} // namespace

PreparationFields::PreparationFields(SessionDraft& draft, bool everything, QWidget* parent)
    : QWidget(parent), draft_(draft) {
  static const std::vector<Field> fields = {
      {"preparationLabelLineEdit", "Label", "the preparation, as in your notebook", true,
       &Preparation::label},
      {"speciesLineEdit", "Species", "guinea pig, rat, rabbit, mouse ...", true, &Preparation::species},
      {"tissueLineEdit", "Tissue", "perfused heart, atrial strip ...", true, &Preparation::tissue},
      {"temperatureLineEdit", "Temperature, °C", "", true, nullptr, &Preparation::temperature_c},
      {"bathVolumeLineEdit", "Bath volume, mL", "empty for a perfused heart", true, nullptr,
       &Preparation::bath_volume_ml, true},
      {"arrivalDelayLineEdit", "Arrival delay, s", "from the tap to the tissue", true},
      {"operatorLineEdit", "Operator", "signs corrections", true, &Preparation::operator_name},
      {"animalLineEdit", "Animal", "", false, &Preparation::animal},
      {"sexLineEdit", "Sex", "", false, &Preparation::sex},
      {"massLineEdit", "Body mass, g", "", false, nullptr, &Preparation::mass_g, true},
      {"dateLineEdit", "Date", "2026-03-04", false, &Preparation::date},
      {"groupLineEdit", "Group", "control, treated ...", false, &Preparation::group},
      {"notesLineEdit", "Notes", "", false, &Preparation::notes},
  };
  auto* form = new QFormLayout(this);
  form->setContentsMargins(0, 0, 0, 0);
  form->setHorizontalSpacing(look::kUnit);
  form->setVerticalSpacing(look::kUnit / 2);
  form->setFieldGrowthPolicy(QFormLayout::AllNonFixedFieldsGrow);
  form->setLabelAlignment(Qt::AlignLeft);
  for (const Field& field : fields) {
    if (!everything && !field.always) continue;
    auto* edit = new QLineEdit(this);
    edit->setObjectName(QString::fromLatin1(field.name));
    edit->setAccessibleName(QString::fromUtf8(field.label));
    edit->setPlaceholderText(QString::fromUtf8(field.hint));
    form->addRow(QString::fromUtf8(field.label), edit);
    const std::size_t place = edits_.size();
    edits_.emplace_back(&field, edit);
    connect(edit, &QLineEdit::editingFinished, this, [this, place] { take(place); });
  }
  auto* species = new QCompleter(
      {QStringLiteral("guinea pig"), QStringLiteral("rat"), QStringLiteral("rabbit"), QStringLiteral("mouse"),
       QStringLiteral("zebrafish"), QStringLiteral("frog"), QStringLiteral("human"), QStringLiteral("dog")},
      this);
  species->setCaseSensitivity(Qt::CaseInsensitive);
  findChild<QLineEdit*>(QStringLiteral("speciesLineEdit"))->setCompleter(species);
  connect(&draft_, &SessionDraft::changed, this, &PreparationFields::show);
  show();
}

void PreparationFields::show() {
  const auto& preparation = draft_.session().preparation;
  for (const auto& [field, edit] : edits_) {
    std::string text;
    if (field->text != nullptr)
      text = preparation.*(field->text);
    else if (field->number != nullptr)
      text = preparation.*(field->number) ? shownNumber(*(preparation.*(field->number))) : "";
    else
      text = shownNumber(preparation.arrival_delay.value());
    // What is being typed is left alone.
    if (!(edit->hasFocus() && edit->isModified())) edit->setText(QString::fromStdString(text));
    edit->setReadOnly(draft_.isReadOnly());
    edit->setCursorPosition(edit->hasFocus() ? edit->cursorPosition() : 0);
  }
}

void PreparationFields::take(std::size_t place) {
  const auto [field, edit] = edits_[place];
  if (!edit->isModified()) return;
  edit->setModified(false);
  auto session = draft_.session();
  auto& preparation = session.preparation;
  const QString typed = edit->text().trimmed();
  if (field->text != nullptr) {
    if (preparation.*(field->text) == typed.toStdString()) return;
    preparation.*(field->text) = typed.toStdString();
  } else {
    const auto number = look::typedNumber(typed);
    const bool may_be_empty = field->number != nullptr;
    const double least = field->number == nullptr || field->above_zero ? 0.0 : -273.15;
    const bool good =
        typed.isEmpty() ? may_be_empty : number && *number >= least && !(field->above_zero && *number == 0.0);
    if (!good) {
      draft_.refuse(QStringLiteral("\"%1\" cannot be %2; give a number%3")
                        .arg(typed, QString::fromUtf8(field->label),
                             field->above_zero ? QStringLiteral(" above 0, or leave it empty") : QString()));
      show();
      return;
    }
    if (field->number != nullptr)
      preparation.*(field->number) = typed.isEmpty() ? std::nullopt : number;
    else
      preparation.arrival_delay = Seconds(*number);
  }
  draft_.change(std::move(session),
                QString::fromUtf8(field->label).section(QLatin1Char(','), 0, 0).toLower());
}

} // namespace chronodrome::ui::steps
