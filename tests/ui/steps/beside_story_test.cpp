// Chronodrome, GPL-3.0-or-later.
// The forms beside the story: additions, and what the session says.
#include <QAbstractItemModelTester>
#include <QApplication>
#include <QCheckBox>
#include <QClipboard>
#include <QLabel>
#include <QLineEdit>
#include <QListWidget>
#include <QPushButton>
#include <QSignalSpy>
#include <QTableView>
#include <QTableWidget>
#include <QToolButton>

#include "forms.h"
#include "session/analysis_settings.h"
#include "ui/look/number_text.h"
#include "ui/steps/additions_form.h"
#include "ui/steps/channel_table_model.h"
#include "ui/steps/event_cells.h"
#include "ui/steps/session_form.h"
#include "ui/steps/setting_table_model.h"

using namespace chronodrome;
using namespace chronodrome::ui;
using namespace chronodrome::ui_test;

namespace {

struct Open {
  SampleCopy copy;
  SessionDocument document;
  Focus focus;

  explicit Open(const std::string& sample) : copy(sample) {
    QSignalSpy opened(&document, &SessionDocument::opened);
    document.open(copy.file(sample + ".session.json"));
    REQUIRE(opened.wait(30'000));
    focus.reset(document.recording()->duration);
  }
};

template <class Form>
void put_up(Form& form) {
  form.resize(400, 700);
  form.show();
  REQUIRE(QTest::qWaitForWindowExposed(&form));
}

void click(QWidget& form, const char* name) {
  QTest::mouseClick(child<QWidget>(form, name), Qt::LeftButton);
}

} // namespace

TEST_CASE("an addition is typed, enters the log when it is complete, and is undone in one step",
          "[ui][steps]") {
  Open open("atrial-strip");
  steps::AdditionsForm form(open.document, open.focus);
  put_up(form);
  auto& table = *child<QTableView>(form, "eventsTableView");
  QAbstractItemModelTester tester(table.model(), QAbstractItemModelTester::FailureReportingMode::Fatal);
  const int before = table.model()->rowCount();
  const auto events = open.document.protocol().events.size();
  REQUIRE(static_cast<std::size_t>(before) == events);
  open.focus.show(Seconds(400.0), Seconds(410.0));
  click(form, "addRowToolButton");
  REQUIRE(table.model()->rowCount() == before + 1);
  CHECK(form.halfTypedRows() == 1);
  CHECK(open.document.protocol().events.size() == events); // nothing half typed is in the log
  CHECK(child<QLabel>(form, "additionsHintLabel")->text().contains("not complete"));
  auto* editor = table.findChild<QLineEdit*>(QStringLiteral("cellLineEdit"));
  REQUIRE(editor != nullptr); // ready to be typed on
  QTest::keyClicks(editor, "30 uM");
  QTest::keyClick(editor, Qt::Key_Return);
  REQUIRE(wait_until([&] { return open.document.protocol().events.size() == events + 1; }));
  CHECK(form.halfTypedRows() == 0);
  const auto& protocol = open.document.protocol();
  const auto added = std::find_if(protocol.events.begin(), protocol.events.end(),
                                  [](const auto& event) { return event.time == Seconds(405.0); });
  REQUIRE(added != protocol.events.end());
  CHECK(added->agent == "carbachol");
  CHECK(added->concentration->value() == Approx(3e-5));
  CHECK(open.document.undoStack()->undoText().contains("carbachol"));
  open.document.undoStack()->undo();
  CHECK(open.document.protocol().events.size() == events);
  CHECK(table.model()->rowCount() == before);
  open.document.undoStack()->redo();
  CHECK(table.model()->rowCount() == before + 1);
}

TEST_CASE("a row whose new text cannot be read keeps its event, and says why", "[ui][steps]") {
  Open open("atrial-strip");
  steps::AdditionsForm form(open.document, open.focus);
  put_up(form);
  auto& table = *child<QTableView>(form, "eventsTableView");
  const auto before = open.document.protocol().events;
  type_in_cell(table, 0, steps::kConcentration, "-7");
  REQUIRE(wait_until([&] { return form.halfTypedRows() == 1; }));
  CHECK(open.document.protocol().events.size() == before.size());
  CHECK(open.document.protocol().events.front().concentration == before.front().concentration);
  auto& checks = *child<QListWidget>(form, "checksListWidget");
  REQUIRE(wait_until([&] { return checks.count() >= 1; }));
  CHECK(checks.item(0)->text().contains("logarithm"));
  CHECK_FALSE(open.document.isModified());
  type_in_cell(table, 0, steps::kConcentration, "3x10-8");
  REQUIRE(wait_until([&] { return form.halfTypedRows() == 0; }));
  REQUIRE(wait_until([&] { return open.document.isModified(); }));
  CHECK(open.document.protocol().events.front().concentration->value() == Approx(3e-8));
}

TEST_CASE("rows pasted from a spreadsheet are shown first, and only ticked ones are taken, as one step",
          "[ui][steps]") {
  Open open("atrial-strip");
  steps::AdditionsForm form(open.document, open.focus);
  put_up(form);
  const auto events = open.document.protocol().events.size();
  QApplication::clipboard()->setText(
      "time\tagent\tconcentration\tunit\r\n6:10\tISO\t1,00E-07\tM\r\n6:40\tISO\t300 nM\t\r\n"
      "6:50\tISO\tlots\tM\r\n");
  auto& table = *child<QTableView>(form, "eventsTableView");
  table.setFocus();
  QTest::keyClick(&table, Qt::Key_V, Qt::ControlModifier);
  auto& proposed = *child<QTableWidget>(form, "proposedEventsTableWidget");
  REQUIRE(proposed.isVisible());
  REQUIRE(proposed.rowCount() == 3);
  CHECK(proposed.item(0, 3)->text() ==
        look::concentrationText(nanomolar(100.0))); // in one unit before it is accepted
  CHECK(proposed.item(2, 3)->text().startsWith("?"));
  CHECK_FALSE(child<QPushButton>(form, "addTickedPushButton")->isEnabled());
  CHECK(open.document.protocol().events.size() == events);
  proposed.setCurrentCell(0, 0);
  proposed.setFocus();
  QTest::keyClick(&proposed, Qt::Key_Space);
  proposed.setCurrentCell(1, 0);
  QTest::keyClick(&proposed, Qt::Key_Space);
  click(form, "addTickedPushButton");
  REQUIRE(wait_until([&] { return open.document.protocol().events.size() == events + 2; }));
  CHECK(open.document.undoStack()->count() == 1);
  open.document.undoStack()->undo();
  CHECK(open.document.protocol().events.size() == events);
}

TEST_CASE("annotations are proposed where the log lacks them", "[ui][steps]") {
  Open open("guinea-pig-heart");
  steps::AdditionsForm form(open.document, open.focus);
  put_up(form);
  auto& table = *child<QTableView>(form, "eventsTableView");
  auto& proposed = *child<QTableWidget>(form, "proposedEventsTableWidget");
  click(form, "annotationsToolButton");
  CHECK_FALSE(proposed.isVisible()); // all are in the log
  const int rows = table.model()->rowCount();
  table.setCurrentIndex(table.model()->index(0, 0));
  table.setFocus();
  QTest::keyClick(&table, Qt::Key_Delete);
  REQUIRE(wait_until(
      [&] { return open.document.protocol().events.size() + 1 == static_cast<std::size_t>(rows); }));
  click(form, "annotationsToolButton");
  REQUIRE(proposed.isVisible());
  CHECK(proposed.rowCount() == 1);
  click(form, "tickAllPushButton");
  click(form, "addTickedPushButton");
  REQUIRE(
      wait_until([&] { return open.document.protocol().events.size() == static_cast<std::size_t>(rows); }));
}

TEST_CASE("times are typed by the clock of the day, and checks and steps follow", "[ui][steps]") {
  Open open("rabbit-heart"); // started 14:20:00
  steps::AdditionsForm form(open.document, open.focus);
  put_up(form);
  auto& table = *child<QTableView>(form, "eventsTableView");
  auto& steps_table = *child<QTableWidget>(form, "stepsTableWidget");
  CHECK(table.model()->index(0, steps::kTime).data().toString() == "2:30");
  CHECK(steps_table.item(0, 1)->text() == "control");
  const int steps_before = steps_table.rowCount();
  auto* clock = child<QComboBox>(form, "clockComboBox");
  clock->setFocus();
  QTest::keyClick(clock, Qt::Key_Down);
  CHECK(table.model()->index(0, steps::kTime).data().toString() == "14:22:30");
  type_in_cell(table, 0, steps::kTime, "14:22:00");
  REQUIRE(wait_until([&] { return open.document.protocol().events.front().time == Seconds(120.0); }));
  CHECK(steps_table.rowCount() == steps_before);
  // A slip of the unit: 0.1 nM becomes 100 nM, followed by 0.3 nM.
  type_in_cell(table, 0, steps::kConcentration, "100 nM");
  auto& checks = *child<QListWidget>(form, "checksListWidget");
  REQUIRE(wait_until([&] { return checks.count() > 0; }));
  CHECK(checks.item(0)->text().startsWith("Row "));
}

TEST_CASE("a repeated row takes the place that the traces show", "[ui][steps]") {
  Open open("rabbit-heart");
  steps::AdditionsForm form(open.document, open.focus);
  put_up(form);
  auto& table = *child<QTableView>(form, "eventsTableView");
  const auto events = open.document.protocol().events.size();
  open.focus.show(Seconds(1200.0), Seconds(1210.0));
  table.setCurrentIndex(table.model()->index(2, 0));
  click(form, "duplicateRowToolButton");
  REQUIRE(wait_until([&] { return open.document.protocol().events.size() == events + 1; }));
  const auto& log = open.document.protocol().events;
  CHECK(log.back().time == Seconds(1205.0));
  CHECK(log.back().concentration == log[2].concentration);
}

TEST_CASE("a session's channels are edited through the document, one step each", "[ui][steps]") {
  Open open("guinea-pig-heart");
  steps::SessionForm form(open.document);
  put_up(form);
  auto& table = *child<QTableView>(form, "channelsTableView");
  QAbstractItemModelTester tester(table.model(), QAbstractItemModelTester::FailureReportingMode::Fatal);
  type_in_cell(table, 0, steps::ChannelTableModel::Label, "atrium");
  CHECK(open.document.session().channels[0].label == "atrium");
  CHECK(open.document.session().pathways[0].from == "atrium");
  CHECK(open.document.session().measures.front() == "rate:atrium");
  choose_in_cell(table, 1, steps::ChannelTableModel::Lead, "bipolar");
  CHECK(open.document.session().channels[1].lead == "bipolar");
  CHECK(open.document.undoStack()->count() == 2);
  open.document.undoStack()->undo();
  open.document.undoStack()->undo();
  CHECK(table.model()->index(0, steps::ChannelTableModel::Label).data().toString() == "RA");
  CHECK(open.document.session().measures.front() == "rate:RA");
  auto* delay = child<QCheckBox>(form, "delay_AVCheckBox");
  QTest::mouseClick(delay, Qt::LeftButton, {}, QPoint(8, delay->height() / 2));
  const auto& measures = open.document.session().measures;
  CHECK(std::find(measures.begin(), measures.end(), "delay:AV") == measures.end());
}

TEST_CASE("the last channel stays, with a word about it", "[ui][steps]") {
  Open open("guinea-pig-heart");
  steps::SessionForm form(open.document);
  put_up(form);
  auto& table = *child<QTableView>(form, "channelsTableView");
  for (const int row : {0, 1}) {
    table.setCurrentIndex(table.model()->index(row, steps::ChannelTableModel::Source));
    table.setFocus();
    QTest::keyClick(&table, Qt::Key_Space);
  }
  CHECK(open.document.session().channels.size() == 1);
  CHECK(child<QLabel>(form, "sessionMessageLabel")->text().contains("last channel"));
}

TEST_CASE("preparation fields are edits, and numbers that cannot be are refused", "[ui][steps]") {
  Open open("guinea-pig-heart");
  steps::SessionForm form(open.document);
  put_up(form);
  click(form, "preparationPageToolButton");
  auto* mass = child<QLineEdit>(form, "massLineEdit");
  REQUIRE(mass->isVisible());
  mass->setFocus();
  mass->selectAll();
  QTest::keyClicks(mass, "-3");
  QTest::keyClick(mass, Qt::Key_Return);
  CHECK(open.document.session().preparation.mass_g == 410.0);
  CHECK(mass->text() == "410");
  CHECK(child<QLabel>(form, "sessionMessageLabel")->text().contains("above 0"));
  mass->selectAll();
  QTest::keyClicks(mass, "415,5");
  QTest::keyClick(mass, Qt::Key_Return);
  CHECK(open.document.session().preparation.mass_g == 415.5);
  open.document.undoStack()->undo();
  CHECK(mass->text() == "410");
}

TEST_CASE("settings keep only what differs, say what they mean, and go back to the default", "[ui][steps]") {
  Open open("guinea-pig-heart");
  steps::SessionForm form(open.document);
  put_up(form);
  click(form, "settingsPageToolButton");
  auto& table = *child<QTableView>(form, "settingsTableView");
  QAbstractItemModelTester tester(table.model(), QAbstractItemModelTester::FailureReportingMode::Fatal);
  auto* filter = child<QLineEdit>(form, "settingsFilterLineEdit");
  QTest::keyClicks(filter, "response.window_s");
  REQUIRE(table.model()->rowCount() == 1);
  using Model = steps::SettingTableModel;
  CHECK(table.model()->index(0, Model::Value).data().toString() == "30");
  type_in_cell(table, 0, Model::Value, "45");
  CHECK(open.document.session().analysis.at("response.window_s") == document::SettingValue(45.0));
  CHECK(table.model()->index(0, Model::Key).data().toString().endsWith("(changed)"));
  CHECK(child<QLabel>(form, "settingMeaningLabel")->text().contains("response.window_s"));
  type_in_cell(table, 0, Model::Value, "-1");
  CHECK(open.document.session().analysis.at("response.window_s") == document::SettingValue(45.0));
  CHECK_FALSE(child<QLabel>(form, "sessionMessageLabel")->text().isEmpty());
  click(form, "resetSettingToolButton");
  CHECK(open.document.session().analysis.empty());
  filter->clear();
  QTest::keyClicks(filter, "mains");
  choose_in_cell(table, 0, Model::Value, "off");
  CHECK(open.document.session().analysis.at("conditioning.mains") ==
        document::SettingValue(std::string("off")));
}

TEST_CASE("Escape and Done go back to the curves", "[ui][steps]") {
  Open open("guinea-pig-heart");
  steps::AdditionsForm additions(open.document, open.focus);
  steps::SessionForm session(open.document);
  put_up(additions);
  put_up(session);
  QSignalSpy done(&additions, &steps::AdditionsForm::finished);
  QSignalSpy back(&session, &steps::SessionForm::finished);
  QTest::keyClick(&additions, Qt::Key_Escape);
  click(additions, "donePushButton");
  QTest::keyClick(&session, Qt::Key_Escape);
  click(session, "donePushButton");
  CHECK(done.count() == 2);
  CHECK(back.count() == 2);
}

TEST_CASE("without a session the forms say so and change nothing", "[ui][steps]") {
  SessionDocument document;
  Focus focus;
  steps::AdditionsForm additions(document, focus);
  steps::SessionForm session(document);
  put_up(additions);
  put_up(session);
  CHECK(child<QLabel>(additions, "additionsHintLabel")->text().contains("No session"));
  CHECK(child<QLabel>(session, "sessionMessageLabel")->text().contains("No session"));
  CHECK_FALSE(child<QToolButton>(additions, "addRowToolButton")->isEnabled());
  additions.addRow();
  CHECK(additions.halfTypedRows() == 0);
}
