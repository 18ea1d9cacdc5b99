// Chronodrome, GPL-3.0-or-later.
#include "ui/steps/intake_form.h"

#include <fstream>

#include <QAbstractItemModelTester>
#include <QCheckBox>
#include <QLabel>
#include <QLineEdit>
#include <QPlainTextEdit>
#include <QPushButton>
#include <QSignalSpy>
#include <QStackedWidget>
#include <QTableView>
#include <QTableWidget>
#include <QToolButton>

#include "forms.h"
#include "session/analysis.h"
#include "ui/steps/channel_table_model.h"
#include "ui/steps/pathway_table_model.h"

using namespace chronodrome;
using namespace chronodrome::ui;
using namespace chronodrome::ui_test;
using steps::ChannelTableModel;

namespace {

/// A shown form, and what it gave.
struct Form {
  steps::IntakeForm form;
  std::optional<document::SessionFile> session;
  protocol::Protocol protocol;
  std::shared_ptr<const recording::Recording> recording;

  Form() {
    form.resize(1280, 720);
    form.show();
    REQUIRE(QTest::qWaitForWindowExposed(&form));
    QObject::connect(&form, &steps::IntakeForm::accepted, &form,
                     [this](const document::SessionFile& taken, const protocol::Protocol& log,
                            std::shared_ptr<const recording::Recording> read) {
                       session = taken;
                       protocol = log;
                       recording = std::move(read);
                     });
  }

  void start(const QString& file) {
    form.start(file);
    REQUIRE(wait_until([this] { return !form.isReading(); }));
  }
  QTableView& channels() { return *child<QTableView>(form, "channelsTableView"); }
  QPushButton& take_in() { return *child<QPushButton>(form, "takeInPushButton"); }
  void click_take_in() { QTest::mouseClick(&take_in(), Qt::LeftButton); }
  void type(const char* field, const QString& text) {
    auto* edit = child<QLineEdit>(form, field);
    edit->setFocus();
    edit->selectAll();
    QTest::keyClicks(edit, text);
    QTest::keyClick(edit, Qt::Key_Return);
  }
  QString cell(int row, int column) { return channels().model()->index(row, column).data().toString(); }
};

void write(const std::string& path, const std::string& text) {
  std::ofstream(path) << text;
}

} // namespace

TEST_CASE("an EDF recording is taken in as the form shows it", "[ui][steps]") {
  const SampleCopy copy("rabbit-heart");
  Form shown;
  shown.start(copy.file("recording.edf"));
  REQUIRE(shown.form.isComplete());
  CHECK(child<QWidget>(shown.form, "delimiterComboBox")->isVisible() == false);
  CHECK(child<QLabel>(shown.form, "fileFactsLabel")->text().contains("LVP: 250 Hz"));
  CHECK(shown.cell(0, ChannelTableModel::Role) == "atrial");
  CHECK(shown.cell(0, ChannelTableModel::Guessed) == "sure");
  CHECK(shown.cell(1, ChannelTableModel::Guessed) == "guessed");
  CHECK(shown.channels()
            .model()
            ->index(1, ChannelTableModel::Role)
            .data(Qt::ToolTipRole)
            .toString()
            .contains("ventr"));
  shown.type("preparationLabelLineEdit", "SMR-R05");
  shown.type("speciesLineEdit", "rabbit");
  shown.type("arrivalDelayLineEdit", "15,5");
  shown.click_take_in();
  REQUIRE(shown.session.has_value());
  CHECK(shown.session->preparation.label == "SMR-R05");
  CHECK(shown.session->preparation.arrival_delay == Seconds(15.5));
  REQUIRE(shown.session->files.size() == 1);
  CHECK(shown.session->files.front().path == "recording.edf");
  CHECK(shown.session->files.front().sha256 == shown.recording->files.front().sha256);
  CHECK(shown.session->protocol_file == "protocol.csv");
  CHECK(shown.protocol.events.size() == 9);
  CHECK(shown.session->measures == std::vector<std::string>{"rate:RA", "rate:LV", "delay:AV", "conducted:AV",
                                                            "pressure:LVP", "dpdt_max:LVP"});
  const auto inputs = session::inputs_of(*shown.session, shown.protocol, shown.recording);
  CHECK(inputs.ok());
}

TEST_CASE("roles chosen in the table bring pathways and measures with them", "[ui][steps]") {
  const SampleCopy copy("guinea-pig-heart");
  Form shown;
  shown.start(copy.file("recording.edf"));
  auto& table = shown.channels();
  CHECK(shown.cell(0, ChannelTableModel::Role) == "other");
  CHECK(shown.cell(0, ChannelTableModel::Guessed) == "unknown");
  choose_in_cell(table, 0, ChannelTableModel::Role, "atrial");
  choose_in_cell(table, 1, ChannelTableModel::Role, "ventricular");
  choose_in_cell(table, 0, ChannelTableModel::Lead, "bipolar");
  CHECK(shown.cell(0, ChannelTableModel::Guessed) == "set by you");
  type_in_cell(table, 0, ChannelTableModel::Label, "RA");
  auto* rate = child<QCheckBox>(shown.form, "rate_EG2CheckBox");
  CHECK(rate->isChecked());
  QTest::mouseClick(rate, Qt::LeftButton, {}, QPoint(8, rate->height() / 2));
  CHECK_FALSE(rate->isChecked());
  table.setCurrentIndex(table.model()->index(1, ChannelTableModel::Invert));
  table.setFocus();
  QTest::keyClick(&table, Qt::Key_Space);
  shown.click_take_in();
  REQUIRE(shown.session.has_value());
  const auto& channels = shown.session->channels;
  REQUIRE(channels.size() == 2);
  CHECK(channels[0].source == "EG1");
  CHECK(channels[0].label == "RA");
  CHECK(channels[0].role == "atrial");
  CHECK(channels[0].lead == "bipolar");
  CHECK(channels[1].lead == "unipolar");
  CHECK(channels[1].invert);
  REQUIRE(shown.session->pathways.size() == 1);
  CHECK(shown.session->pathways[0].from == "RA");
  CHECK(shown.session->pathways[0].to == "EG2");
  CHECK(shown.session->measures == std::vector<std::string>{"rate:RA", "delay:AV", "conducted:AV"});
  // Annotations of the file carry the log: the session names no other.
  CHECK_FALSE(shown.session->protocol_file.has_value());
  CHECK(shown.protocol.events.size() == 9);
}

TEST_CASE("the order of the beats is proposed in words and taken with one click", "[ui][steps]") {
  const SampleCopy copy("guinea-pig-heart");
  Form shown;
  shown.start(copy.file("recording.edf"));
  const auto button = [&] {
    return shown.form.findChild<QPushButton*>(QStringLiteral("useRolesPushButton"));
  };
  REQUIRE(wait_until([&] { return button() != nullptr && button()->isVisible(); }));
  CHECK(button()->accessibleName().contains("EG1 fires"));
  QTest::mouseClick(button(), Qt::LeftButton);
  CHECK(shown.cell(0, ChannelTableModel::Role) == "atrial");
  CHECK(shown.cell(1, ChannelTableModel::Role) == "ventricular");
  REQUIRE(wait_until([&] { return button() == nullptr || !button()->isVisible(); }));
}

TEST_CASE("a decimal comma is found, a rate that the file does not state is asked", "[ui][steps]") {
  const SampleCopy copy("atrial-strip");
  Form shown;
  shown.start(copy.file("recording.csv"));
  CHECK_FALSE(shown.form.isComplete());
  CHECK_FALSE(shown.take_in().isEnabled());
  CHECK(child<QComboBox>(shown.form, "decimalComboBox")->currentText() == "comma (found)");
  CHECK(child<QComboBox>(shown.form, "delimiterComboBox")->currentText() == "semicolon (found)");
  CHECK(
      child<QPlainTextEdit>(shown.form, "fileLinesPlainTextEdit")->toPlainText().startsWith("Saltmarsh Row"));
  CHECK(child<QLabel>(shown.form, "questionLabel")->text().contains("no time column"));
  CHECK(child<QLineEdit>(shown.form, "rateLineEdit")->hasFocus());
  shown.type("rateLineEdit", "fast");
  CHECK_FALSE(shown.form.isReading());
  shown.type("rateLineEdit", "500");
  REQUIRE(wait_until([&] { return shown.form.isComplete(); }));
  CHECK(shown.cell(0, ChannelTableModel::Role) == "other");
  CHECK(shown.cell(1, ChannelTableModel::Role) == "tension");
  shown.click_take_in();
  REQUIRE(shown.session.has_value());
  CHECK(shown.session->csv.rate_hz == 500.0);
  CHECK_FALSE(shown.session->csv.decimal.has_value());
  CHECK(shown.session->channels[1].unit == "mN");
  CHECK(shown.recording->duration == Seconds(1000.0)); // 500 000 rows
}

TEST_CASE("an ambiguous table is not read before the user has chosen", "[ui][steps]") {
  const SampleCopy copy("atrial-strip");
  std::string text = "RA (mV);T (mN)\n";
  for (int i = 0; i < 2000; ++i)
    text += "1,23" + std::to_string(i % 10) + ";2,34" + std::to_string(i % 7) + "\n";
  write(copy.path("doubt.csv"), text);
  Form shown;
  shown.start(copy.file("doubt.csv"));
  CHECK_FALSE(shown.form.isComplete());
  auto* decimal = child<QComboBox>(shown.form, "decimalComboBox");
  CHECK(decimal->currentText() == "choose");
  CHECK(decimal->hasFocus());
  CHECK(child<QLabel>(shown.form, "questionLabel")->text().contains("decimal mark or as thousands mark"));
  shown.click_take_in();
  CHECK_FALSE(shown.session.has_value());
  choose(*decimal, "comma");
  REQUIRE(wait_until([&] { return !shown.form.isReading(); }));
  CHECK_FALSE(shown.form.isComplete()); // now the rate is missing
  shown.type("rateLineEdit", "1000");
  REQUIRE(wait_until([&] { return shown.form.isComplete(); }));
  shown.click_take_in();
  REQUIRE(shown.session.has_value());
  CHECK(shown.session->csv.decimal == ',');
  double first = 0.0;
  shown.recording->signals[0].samples->read(0, std::span(&first, 1));
  CHECK(first == 1.23);
}

TEST_CASE("a file that cannot be read says what and what to do, and Escape leaves", "[ui][steps]") {
  const SampleCopy copy("atrial-strip");
  write(copy.path("picture.csv"), "\x89PNG\r\n");
  Form shown;
  QSignalSpy cancelled(&shown.form, &steps::IntakeForm::cancelled);
  shown.start(copy.file("picture.csv"));
  CHECK(child<QLabel>(shown.form, "questionLabel")->text().contains("PNG"));
  CHECK(child<QLabel>(shown.form, "questionHintLabel")->text().contains("export"));
  CHECK_FALSE(shown.take_in().isEnabled());
  shown.start(copy.file("nowhere.edf"));
  CHECK_FALSE(child<QLabel>(shown.form, "questionLabel")->text().isEmpty());
  QTest::keyClick(&shown.form, Qt::Key_Escape);
  CHECK(cancelled.count() == 1);
  CHECK_FALSE(shown.session.has_value());
}

TEST_CASE("reading can be cancelled at once, and another file read after it", "[ui][steps]") {
  const SampleCopy copy("rabbit-heart");
  Form shown;
  QSignalSpy ended(&shown.form, &steps::IntakeForm::shown);
  shown.form.start(copy.file("recording.edf"));
  CHECK(shown.form.isReading());
  QTest::mouseClick(child<QPushButton>(shown.form, "cancelPushButton"), Qt::LeftButton);
  CHECK_FALSE(shown.form.isReading());
  shown.start(copy.file("recording.edf"));
  CHECK(shown.form.isComplete());
  CHECK(ended.count() == 1); // the first reading gave nothing
}

TEST_CASE("a signal that is left out is not in the session", "[ui][steps]") {
  const SampleCopy copy("rabbit-heart");
  Form shown;
  shown.start(copy.file("recording.edf"));
  auto& table = shown.channels();
  table.setCurrentIndex(table.model()->index(1, ChannelTableModel::Source));
  table.setFocus();
  QTest::keyClick(&table, Qt::Key_Space);
  CHECK(shown.cell(1, ChannelTableModel::Guessed) == "left out");
  shown.click_take_in();
  REQUIRE(shown.session.has_value());
  CHECK(shown.session->channels.size() == 2);
  CHECK(shown.session->pathways.empty());
}

TEST_CASE("a label that is taken is refused in words, and nothing changes", "[ui][steps]") {
  const SampleCopy copy("rabbit-heart");
  Form shown;
  shown.start(copy.file("recording.edf"));
  type_in_cell(shown.channels(), 0, ChannelTableModel::Label, "LVP");
  CHECK(child<QLabel>(shown.form, "intakeMessageLabel")->text().contains("another channel LVP"));
  CHECK(shown.cell(0, ChannelTableModel::Label) == "RA");
}

TEST_CASE("another session gives its channels and the way its table is read", "[ui][steps]") {
  const SampleCopy copy("atrial-strip");
  Form shown;
  shown.start(copy.file("recording.csv"));
  CHECK_FALSE(shown.form.isComplete());
  shown.form.useLayout(copy.file("atrial-strip.session.json"));
  REQUIRE(wait_until([&] { return shown.form.isComplete(); }));
  CHECK(shown.cell(0, ChannelTableModel::Role) == "atrial");
  CHECK(child<QLabel>(shown.form, "intakeMessageLabel")->text().contains("atrial-strip"));
  shown.click_take_in();
  REQUIRE(shown.session.has_value());
  CHECK(shown.session->csv.rate_hz == 500.0);
  CHECK(shown.session->csv.delimiter == ';');
  CHECK(shown.session->preparation.species == "rat");
  CHECK(shown.session->preparation.label.empty());
  CHECK(shown.session->measures == std::vector<std::string>{"rate:RA", "force:T"});
}

TEST_CASE("the models of the form keep the rules of item models", "[ui][steps]") {
  const SampleCopy copy("guinea-pig-heart");
  Form shown;
  QAbstractItemModelTester channels(shown.channels().model(),
                                    QAbstractItemModelTester::FailureReportingMode::Fatal);
  auto& pathway_view = *child<QTableView>(shown.form, "pathwaysTableView");
  QAbstractItemModelTester pathways(pathway_view.model(),
                                    QAbstractItemModelTester::FailureReportingMode::Fatal);
  shown.start(copy.file("recording.edf"));
  choose_in_cell(shown.channels(), 0, ChannelTableModel::Role, "atrial");
  choose_in_cell(shown.channels(), 1, ChannelTableModel::Role, "atrial");
  QTest::mouseClick(child<QToolButton>(shown.form, "addPathwayToolButton"), Qt::LeftButton);
  REQUIRE(pathway_view.model()->rowCount() == 1);
  type_in_cell(pathway_view, 0, steps::PathwayTableModel::Distance, "7,5");
  CHECK(pathway_view.model()->index(0, steps::PathwayTableModel::Distance).data().toString() == "7.5");
  QTest::mouseClick(child<QToolButton>(shown.form, "removePathwayToolButton"), Qt::LeftButton);
  CHECK(pathway_view.model()->rowCount() == 0);
}

TEST_CASE("everything on the form has a name for a screen reader", "[ui][steps]") {
  Form shown;
  for (const char* name : {"delimiterComboBox", "decimalComboBox", "timeColumnComboBox", "rateLineEdit",
                           "channelsTableView", "pathwaysTableView", "drugLogComboBox", "takeInPushButton",
                           "cancelPushButton", "layoutPushButton", "speciesLineEdit"}) {
    CAPTURE(name);
    CHECK_FALSE(child<QWidget>(shown.form, name)->accessibleName().isEmpty());
  }
}
