// Chronodrome, GPL-3.0-or-later.
#include "ui/answer/answer_desk.h"

#include <QAbstractItemModelTester>

#include "ui/answer/parameter_model.h"
#include "ui/answer/words.h"

using namespace chronodrome;
using namespace chronodrome::ui::answer;

namespace {

session::CurveView viewOf(const session::SessionResult& result) {
  return session::curve_view(result, 1, "rate:RA").value();
}

} // namespace

TEST_CASE("a declined fit gives its reason, not a number", "[answer][words]") {
  const auto view = viewOf(resultOf({{0, 200.0}, {1e-8, 190.0}, {1e-7, 150.0}}));
  CHECK(answerText(view) ==
        QStringLiteral("Not fitted: 3 distinct concentrations for 4 parameters: at least 5 are needed."));
}

TEST_CASE("no response is said with its mean", "[answer][words]") {
  const auto view = viewOf(
      resultOf({{0, 200.0}, {1e-9, 201.0}, {1e-8, 199.0}, {1e-7, 200.5}, {1e-6, 199.5}, {1e-5, 200.2}}));
  const QString words = answerText(view);
  CHECK(words.startsWith(QStringLiteral("No EC50: no concentration-related response detected")));
  CHECK(words.contains(QStringLiteral("mean 200.0")));
  CHECK_FALSE(words.contains(QStringLiteral("pEC50")));
}

TEST_CASE("an open plateau is said on its side", "[answer][words]") {
  const auto upper = viewOf(
      resultOf({{0, 200.0}, {1e-9, 199.5}, {1e-8, 199.0}, {1e-7, 197.1}, {1e-6, 192.5}, {1e-5, 180.3}}));
  CHECK(answerText(upper).startsWith(QStringLiteral("pEC50 at most ")));
  CHECK(answerText(upper).endsWith(QStringLiteral("the plateau at high concentration was not reached")));
  const auto lower = viewOf(
      resultOf({{1e-9, 180.3}, {1e-8, 192.5}, {1e-7, 197.1}, {1e-6, 199.0}, {1e-5, 199.5}, {1e-4, 199.7}}));
  CHECK(answerText(lower).startsWith(QStringLiteral("pEC50 at least ")));
  CHECK(answerText(lower).endsWith(QStringLiteral("the plateau at low concentration was not reached")));
}

TEST_CASE("the tooltip of a point says value, beats, status and window", "[answer][words]") {
  session::SessionResult result = slowing();
  result.responses.rows[3].is_selected = true;
  const auto view = viewOf(result);
  CHECK(
      pointText(view, view.chosen.points[3]) ==
      QStringLiteral(
          "100\u00A0nM: 150.60 ± 0.50\u00A0beats/min\nsteady, from selected beats, 40 beats\n6:10 to 6:40"));
  CHECK(stepText(view.chosen.points[0]) == QStringLiteral("control"));
}

TEST_CASE("the caption names what the bars are", "[answer][words]") {
  const QString caption = captionText(viewOf(slowing()));
  CHECK(caption.contains(QStringLiteral("SEM over beats")));
  CHECK(caption.contains(QStringLiteral("95 %")));
  CHECK(caption.contains(QStringLiteral("Dashed")));
}

TEST_CASE("the table model keeps the rules of models and gives raw values", "[answer][words]") {
  ParameterModel model;
  QAbstractItemModelTester tester(&model, QAbstractItemModelTester::FailureReportingMode::Fatal);
  const auto view = viewOf(slowing());
  model.setRows(view.parameters, view.unit);
  REQUIRE(model.rowCount() == 6);
  CHECK(model.columnCount() == ParameterModel::kColumnCount);
  CHECK(model.index(0, ParameterModel::kParameter).data().toString() == QStringLiteral("pEC50"));
  CHECK(model.index(3, ParameterModel::kParameter).data().toString() == QStringLiteral("basal"));
  CHECK(model.index(3, ParameterModel::kParameter).data(Qt::ToolTipRole).toString() ==
        QStringLiteral("basal, beats/min"));
  CHECK(model.index(0, ParameterModel::kEstimate).data(ParameterModel::kRawValueRole).toDouble() ==
        view.parameters[0].value.estimate.value());
  model.setTheme(chronodrome::ui::look::Theme::of(chronodrome::ui::look::Mode::dark));
  model.setRows({}, {});
  CHECK(model.rowCount() == 0);
}
