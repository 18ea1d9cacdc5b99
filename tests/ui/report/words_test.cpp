// Chronodrome, GPL-3.0-or-later.
#include <catch2/catch.hpp>

#include "pharmacology/flags.h"
#include "support/sample_sessions.h"
#include "ui/report/words.h"

using namespace chronodrome;
using ui::report::fitSentence;

namespace {

session::FittedCurve hill(pharmacology::Estimate pec50, pharmacology::Estimate emax) {
  session::FittedCurve curve;
  curve.curve = 1;
  curve.measure = "rate:RA";
  curve.fit.model = "hill";
  curve.fit.likelihood = "gaussian";
  curve.fit.n_points = 9;
  curve.fit.parameters = {{"basal", {220.0, 1.0, 218.0, 222.0, "profile"}}, {"emax", emax}, {"pec50", pec50}};
  return curve;
}

std::string sentence(const session::FittedCurve& curve) {
  static const auto result = test_support::sample_session("atrial-strip");
  QString text = fitSentence(result, curve);
  return text.replace(QChar(0x00A0), QLatin1Char(' ')).toStdString();
}

} // namespace

TEST_CASE("a bounded estimate is a value with its interval", "[report]") {
  CHECK(sentence(hill({6.3, 0.02, 6.26, 6.34, "profile"}, {157.4, 0.6, 156.2, 158.5, "profile"})) ==
        "pEC50 6.300 (95 % interval 6.260 to 6.340); Emax 157.40 beats/min (95 % interval 156.20 to 158.50); "
        "basal "
        "220.0 beats/min (95 % interval 218.0 to 222.0); n = 9 concentrations.");
}

TEST_CASE("where one side is open the bound stands, and never the optimum", "[report]") {
  auto curve = hill({3.23, 2.0, {}, 5.09, "profile"}, {-200.6, 90.0, {}, 66.1, "profile"});
  curve.fit.flags = {"upper_plateau_open", "extrapolated"};
  const std::string text = sentence(curve);
  CHECK(text.find("pEC50 at most 5.1 (95 % limit; open below)") == 0);
  CHECK(text.find("Emax at most 66 beats/min") != std::string::npos);
  CHECK(text.find("3.2") == std::string::npos);
  CHECK(text.find("200") == std::string::npos);
  CHECK(text.find("Weakened by: upper plateau open, extrapolated.") != std::string::npos);
}

TEST_CASE("a fit without an answer says why instead of numbers", "[report]") {
  auto curve = hill({}, {});
  curve.fit.flags = {std::string(pharmacology::flags::kDeclined)};
  curve.fit.reason = "3 distinct concentrations cannot carry 4 parameters.";
  CHECK(sentence(curve) == "no pEC50 and no Emax: 3 distinct concentrations cannot carry 4 parameters.");
  curve.fit.flags = {std::string(pharmacology::flags::kNoResponse)};
  curve.fit.reason.clear();
  CHECK(sentence(curve) == "no pEC50 and no Emax: no response.");
}

TEST_CASE("text of users is made fit for a page", "[report]") {
  CHECK(ui::report::plain(std::string("a\tb\nc")) == QStringLiteral("a b c"));
  CHECK(ui::report::plain(std::string("x\x01y\x7f")) == QStringLiteral("x\uFFFDy\uFFFD"));
  CHECK(ui::report::plain(std::string("\xff")) == QStringLiteral("\uFFFD"));
  CHECK(ui::report::plain(std::string("µ é <")) == QStringLiteral("µ é <"));
}
