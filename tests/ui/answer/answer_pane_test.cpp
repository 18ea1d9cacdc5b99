// Chronodrome, GPL-3.0-or-later.
#include "ui/answer/answer_desk.h"

#include <QClipboard>
#include <QComboBox>
#include <QGuiApplication>
#include <QLineEdit>
#include <QTableView>

#include "ui/answer/parameter_model.h"
#include "ui/look/number_text.h"

using namespace chronodrome;
using namespace chronodrome::ui;
using namespace chronodrome::ui::answer;
using Catch::Matchers::WithinAbs;

namespace {

const response::Response& rowOf(const SessionDocument& document, const std::string& measure,
                                double concentration) {
  for (const response::Response& row : document.result()->responses.rows) {
    if (row.measure == measure && row.concentration == Molar(concentration)) return row;
  }
  throw std::runtime_error("no such response");
}

} // namespace

TEST_CASE("a click on a point chooses its step and sends the evidence to its window", "[answer]") {
  AnswerDesk desk;
  desk.open("guinea-pig-heart", "rate:RA");
  AnswerFigure& figure = desk.figure();
  REQUIRE(figure.view()->chosen.points.size() == 10);
  QTest::mouseClick(&figure, Qt::LeftButton, {}, figure.pixelOf(5).toPoint());
  const response::Response& row = rowOf(desk.document, "rate:RA", 1e-6);
  REQUIRE(desk.focus.step());
  CHECK(*desk.focus.step() == StepRef{1, Molar(1e-6), "rate:RA"});
  CHECK(desk.focus.start() < row.window_start);
  CHECK(desk.focus.end() > row.window_end);
  CHECK((desk.focus.end() - desk.focus.start()).value() < 2.0 * (row.window_end - row.window_start).value());
  CHECK(desk.focus.canGoBack());
  CHECK(figure.chosen() == 5u);

  SECTION("beside every point nothing is chosen") {
    QTest::mouseClick(&figure, Qt::LeftButton, {}, figure.pixelOf(0).toPoint() + QPoint(0, 60));
    CHECK(*desk.focus.step() == StepRef{1, Molar(1e-6), "rate:RA"});
  }
}

TEST_CASE("keys go from point to point", "[answer]") {
  AnswerDesk desk;
  desk.open("guinea-pig-heart", "rate:RA");
  desk.figure().setFocus();
  QTest::keyClick(&desk.figure(), Qt::Key_Right);
  CHECK(desk.focus.step()->concentration == Molar(0.0));
  QTest::keyClick(&desk.figure(), Qt::Key_Right);
  CHECK(desk.focus.step()->concentration == Molar(1e-8));
  QTest::keyClick(&desk.figure(), Qt::Key_End);
  CHECK(desk.focus.step()->concentration == Molar(1e-4));
  QTest::keyClick(&desk.figure(), Qt::Key_Right);
  CHECK(desk.focus.step()->concentration == Molar(1e-4));
  QTest::keyClick(&desk.figure(), Qt::Key_Left);
  CHECK(desk.focus.step()->concentration == Molar(3e-5));
  // Going along the curve leaves no trail of places; Enter does.
  CHECK_FALSE(desk.focus.canGoBack());
  desk.focus.show(Seconds(0.0), Seconds(10.0));
  QTest::keyClick(&desk.figure(), Qt::Key_Return);
  CHECK(desk.focus.canGoBack());
  CHECK(desk.focus.start() < rowOf(desk.document, "rate:RA", 3e-5).window_start);
}

TEST_CASE("a step chosen elsewhere is marked, and its curve and measure shown", "[answer]") {
  AnswerDesk desk;
  desk.open("guinea-pig-heart", "rate:RA");
  desk.focus.chooseStep(StepRef{1, Molar(1e-6), ""});
  CHECK(desk.figure().chosen() == 5u);
  CHECK(desk.focus.measure() == "rate:RA");
  desk.focus.chooseStep(StepRef{1, Molar(1e-7), "delay:AV"});
  CHECK(desk.focus.measure() == "delay:AV");
  CHECK(desk.figure().view()->measure == "delay:AV");
  CHECK(desk.figure().chosen() == 3u);
  CHECK(desk.get<QComboBox>("measureComboBox").currentText() == look::measureText("delay:AV"));
  desk.focus.chooseStep(std::nullopt);
  CHECK_FALSE(desk.figure().chosen());
}

TEST_CASE("the chosen step is drawn in accent", "[answer][pixels]") {
  AnswerDesk desk;
  desk.open("guinea-pig-heart", "rate:RA");
  const QColor accent = look::Theme::of(look::Mode::light).accent;
  const auto count = [&] {
    const QImage image = desk.figure().toPixmap().toImage();
    const QPoint centre = desk.figure().pixelOf(5).toPoint();
    int found = 0;
    for (int y = centre.y() - 12; y <= centre.y() + 12; ++y) {
      for (int x = centre.x() - 12; x <= centre.x() + 12; ++x)
        found += image.pixelColor(x, y) == accent ? 1 : 0;
    }
    return found;
  };
  CHECK(count() == 0);
  desk.focus.chooseStep(StepRef{1, Molar(1e-6), "rate:RA"});
  CHECK(count() > 20);
}

TEST_CASE("flags lead to their places", "[answer]") {
  AnswerDesk desk;
  desk.open("guinea-pig-heart", "rate:RV");
  auto& lines = desk.get<QLabel>("weakPointsLabel");
  CHECK(lines.text().contains(QStringLiteral("the plateau at high concentration was not reached")));
  const auto& weak = desk.figure().view()->weak_points;
  REQUIRE(weak.front().flag == "selected_beats");
  REQUIRE(weak.front().places.size() == 2);
  // Tab stands on the first link, Enter follows it.
  lines.setFocus(Qt::TabFocusReason);
  QTest::keyClick(&lines, Qt::Key_Tab);
  QTest::keyClick(&lines, Qt::Key_Return);
  REQUIRE(desk.focus.step());
  CHECK(desk.focus.step()->measure == "rate:RV");
  const bool is_of_it = desk.focus.step()->concentration == *weak.front().places[0].concentration ||
                        desk.focus.step()->concentration == *weak.front().places[1].concentration;
  CHECK(is_of_it);
  CHECK(desk.focus.canGoBack());
  Q_EMIT lines.linkActivated(QStringLiteral("1/0"));
  REQUIRE(weak[1].flag == "upper_plateau_open");
  CHECK(desk.focus.step()->concentration == Molar(1e-4));
  const response::Response& row = rowOf(desk.document, "rate:RV", 1e-4);
  CHECK(desk.focus.start() < row.window_start);
  CHECK(desk.focus.end() >= row.window_end); // the last step ends with the recording
}

TEST_CASE("a number that the data leave open is told as its bound", "[answer]") {
  AnswerDesk desk;
  desk.open("guinea-pig-heart", "rate:RV");
  const QString answer = desk.label("answerLabel");
  CHECK(answer.startsWith(QStringLiteral("pEC50 at most 5.09")));
  // The search ended at 3.23: that number is nowhere to be read.
  CHECK_FALSE(answer.contains(QStringLiteral("3.2")));
  auto* model = desk.get<QTableView>("parameterTableView").model();
  CHECK(model->index(0, ParameterModel::kEstimate).data().toString() == QStringLiteral("bound only"));
  desk.focus.chooseCurve(1, "rate:RA");
  CHECK(desk.label("answerLabel").startsWith(QStringLiteral("pEC50 6.296 (")));
}

TEST_CASE("the table holds the parameters of the result", "[answer]") {
  AnswerDesk desk;
  desk.open("guinea-pig-heart", "rate:RA");
  const auto& fit = desk.document.result()->curves.front().fit;
  auto* model = desk.get<QTableView>("parameterTableView").model();
  REQUIRE(model->rowCount() == 6);
  for (int row = 0; row < model->rowCount(); ++row) {
    const auto raw = [&](int column) {
      return model->index(row, column).data(ParameterModel::kRawValueRole);
    };
    const auto* estimate = fit.find(raw(ParameterModel::kParameter).toString().toStdString());
    REQUIRE(estimate);
    CHECK(raw(ParameterModel::kEstimate).toDouble() == estimate->estimate.value());
    CHECK(raw(ParameterModel::kInterval).toList().at(0).toDouble() == estimate->ci_low.value());
    CHECK(raw(ParameterModel::kInterval).toList().at(1).toDouble() == estimate->ci_high.value());
    CHECK(raw(ParameterModel::kResponses).toInt() == 10);
  }
}

TEST_CASE("the response is shown as change or percentage, and the axis says so", "[answer]") {
  AnswerDesk desk;
  desk.open("guinea-pig-heart", "rate:RA");
  auto& form = desk.get<QComboBox>("responseFormComboBox");
  CHECK(desk.figure().yAxis->label() == QStringLiteral("rate RA (beats/min)"));
  form.setCurrentIndex(2);
  CHECK(desk.figure().yAxis->label() == QStringLiteral("rate RA (% of control)"));
  CHECK_THAT(desk.figure().view()->chosen.points[0].value.value(), WithinAbs(100.0, 1e-9));
  form.setCurrentIndex(1);
  CHECK(desk.figure().yAxis->label() == QStringLiteral("change of rate RA from control (beats/min)"));
  // The EC50 is that of the absolute response.
  CHECK(desk.label("answerLabel").startsWith(QStringLiteral("pEC50 6.296 (")));
}

TEST_CASE("a preview is shown while a plateau is dragged, and ends", "[answer]") {
  AnswerDesk desk;
  desk.open("guinea-pig-heart", "rate:RA");
  const double before = desk.figure().view()->chosen.points[5].value.value();
  document::WindowChoice choice;
  choice.curve = 1;
  choice.concentration = Molar(1e-6);
  choice.measure = "rate:RA";
  const response::Response& row = rowOf(desk.document, "rate:RA", 1e-6);
  choice.start = row.window_start - Seconds(60.0);
  choice.end = row.window_end - Seconds(60.0);
  const auto preview = desk.document.preview(choice);
  REQUIRE(preview);
  desk.pane.showPreview(preview);
  CHECK(desk.figure().view()->chosen.points[5].value.value() != before);
  CHECK(desk.figure().view()->chosen.points[5].is_placed);
  CHECK(desk.label("answerStateLabel").contains(QStringLiteral("Preview")));
  desk.pane.showPreview(nullptr);
  CHECK(desk.figure().view()->chosen.points[5].value.value() == before);
  CHECK_FALSE(desk.get<QLabel>("answerStateLabel").isVisible());
}

TEST_CASE("a step is left out with a reason, and taken in again", "[answer]") {
  AnswerDesk desk;
  desk.open("guinea-pig-heart", "rate:RA");
  desk.focus.chooseStep(StepRef{1, Molar(3e-6), "rate:RA"});
  desk.trigger("actionLeaveStepOut");
  auto& why = desk.get<QLineEdit>("leaveOutReasonLineEdit");
  REQUIRE(why.isVisible());
  QTest::keyClick(&why, Qt::Key_Return);
  CHECK(desk.document.session().review.empty()); // not without a reason
  CHECK(desk.label("leaveOutQuestionLabel").contains(QStringLiteral("reason")));
  QTest::keyClicks(&why, QStringLiteral("air bubble"));
  QTest::keyClick(&why, Qt::Key_Return);
  REQUIRE(desk.document.session().review.size() == 1);
  const auto& correction = desk.document.session().review.front();
  const response::Response row = rowOf(desk.document, "rate:RA", 3e-6);
  CHECK(correction.what == document::CorrectionKind::exclude);
  CHECK(correction.why == "air bubble");
  CHECK(correction.channel.empty());
  CHECK(correction.time == row.window_start);
  CHECK(correction.to_time == row.window_end);
  CHECK_FALSE(why.isVisible());
  desk.settle();
  REQUIRE(desk.figure().view()->chosen.points[6].status == response::Status::excluded);
  CHECK(desk.figure().view()->chosen.fit.n_points == 9);
  desk.trigger("actionTakeStepIn");
  desk.settle();
  CHECK(desk.figure().view()->chosen.points[6].value == row.value);

  SECTION("Escape leaves all as it is") {
    desk.trigger("actionLeaveStepOut");
    QTest::keyClicks(&why, QStringLiteral("x"));
    QTest::keyClick(&why, Qt::Key_Escape);
    CHECK_FALSE(why.isVisible());
    CHECK(desk.document.session().review.size() == 2);
  }
}

TEST_CASE("copying gives the table as text with units", "[answer]") {
  AnswerDesk desk;
  desk.open("guinea-pig-heart", "rate:RA");
  auto& table = desk.get<QTableView>("parameterTableView");
  table.setFocus();
  QTest::keyClick(&table, Qt::Key_C, Qt::ControlModifier);
  const QStringList lines = QGuiApplication::clipboard()->text().split(QLatin1Char('\n'));
  REQUIRE(lines.size() == 8);
  CHECK(lines[0] == QStringLiteral("parameter\testimate\t95 % interval\tmethod\tn"));
  CHECK(lines[1].startsWith(QStringLiteral("pEC50\t6.296\t6.255 to 6.337\tprofile\t10")));
  CHECK(lines[4].startsWith(QStringLiteral("basal, beats/min\t217.79\t")));
}

TEST_CASE("what is missing is said in words", "[answer]") {
  AnswerDesk desk;
  CHECK(desk.label("emptyAnswerLabel") == QStringLiteral("No session is open."));
  desk.open("guinea-pig-heart", "rate:RA");
  CHECK_FALSE(desk.get<QLabel>("emptyAnswerLabel").isVisible());
  auto session = desk.document.session();
  session.measures.clear();
  desk.document.setSession(session, QStringLiteral("no measures"));
  desk.settle();
  CHECK(desk.get<QLabel>("emptyAnswerLabel").isVisible());
  CHECK(desk.label("emptyAnswerLabel").contains(QStringLiteral("no measures")));
  desk.document.undoStack()->undo();
  protocol::Protocol none;
  desk.document.setProtocol(none, QStringLiteral("no additions"));
  desk.settle();
  CHECK(desk.label("emptyAnswerLabel").contains(QStringLiteral("No additions")));
  desk.document.close();
  CHECK(desk.label("emptyAnswerLabel") == QStringLiteral("No session is open."));
}

TEST_CASE("the pane fits 360 by 700 and is named for readers", "[answer]") {
  AnswerDesk desk;
  desk.open("guinea-pig-heart", "rate:RV");
  CHECK(desk.pane.minimumSizeHint().width() <= 360);
  CHECK(desk.pane.minimumSizeHint().height() <= 700);
  desk.pane.resize(360, 700);
  QTest::qWait(0);
  auto& table = desk.get<QTableView>("parameterTableView");
  int width = 0;
  for (int column = 0; column < ParameterModel::kColumnCount; ++column)
    width += table.columnWidth(column);
  CHECK(width <= table.viewport()->width());
  for (const QWidget* widget : desk.pane.findChildren<QWidget*>()) {
    if (widget->focusPolicy() == Qt::NoFocus || !widget->isVisible()) continue;
    CAPTURE(widget->objectName().toStdString(), widget->metaObject()->className());
    if (widget->objectName().startsWith(QLatin1String("qt_"))) continue;
    CHECK_FALSE(widget->accessibleName().isEmpty());
  }
}
