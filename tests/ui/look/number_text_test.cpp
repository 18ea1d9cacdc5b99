// Chronodrome, GPL-3.0-or-later.
#include "ui/look/number_text.h"

#include <catch2/catch.hpp>

using namespace chronodrome;
using namespace chronodrome::ui::look;

namespace {

std::string text(const QString& t) {
  return t.toStdString();
}

} // namespace

TEST_CASE("numbers carry as many digits as their error allows", "[ui][look]") {
  CHECK(text(plainText(218.173042, 0.138)) == "218.17");
  CHECK(text(plainText(218.173042, 4.33)) == "218.2");
  CHECK(text(plainText(218.173042, 43.0)) == "218");
  CHECK(text(plainText(217.3042)) == "217.3");
  CHECK(text(plainText(0.5)) == "0.5000");
  CHECK(text(plainText(-3.25)) == "−3.250");
  CHECK(text(plainText(-0.00000001, 1.0)) == "0.0");
  CHECK(text(plainText(3.2e-7)) == "3.200 × 10⁻⁷");
}

TEST_CASE("concentrations take the prefix that leaves 1 to 999", "[ui][look]") {
  CHECK(text(concentrationText(Molar(3e-7))) == "300\u00A0nM");
  CHECK(text(concentrationText(Molar(1e-6))) == "1\u00A0µM");
  CHECK(text(concentrationText(Molar(1e-9))) == "1\u00A0nM");
  CHECK(text(concentrationText(Molar(1e-4))) == "100\u00A0µM");
  CHECK(text(concentrationText(Molar(0.0))) == "0");
}

TEST_CASE("times read as a clock of the recording", "[ui][look]") {
  CHECK(text(timeText(Seconds(0.0))) == "0:00.0");
  CHECK(text(timeText(Seconds(754.26))) == "12:34.3");
  CHECK(text(timeText(Seconds(59.97))) == "1:00.0");
  CHECK(text(timeText(Seconds(3725.0), 0)) == "1:02:05");
  CHECK(text(timeText(Seconds(-3.5))) == "−0:03.5");
  CHECK(text(timeText(Seconds(12.3456), 4)) == "0:12.3456");
}

TEST_CASE("a bound that is not there is said, never made up", "[ui][look]") {
  pharmacology::Estimate estimate;
  estimate.estimate = 3.23;
  estimate.ci_high = 5.09;
  estimate.ci_method = "profile";
  CHECK(text(intervalText(estimate)) == "at most 5.090");
  estimate.ci_low = 3.0;
  estimate.se = 0.021;
  CHECK(text(intervalText(estimate)) == "3.000 to 5.090");
  CHECK(text(intervalText({})).empty());
  CHECK(text(estimateText({})) == "not estimated");
}

TEST_CASE("a typed number takes either decimal mark and never both", "[ui][look]") {
  CHECK(typedNumber(QStringLiteral("9,8e-2")) == 9.8e-2);
  CHECK(typedNumber(QStringLiteral(" 9.8e-2 ")) == 9.8e-2);
  CHECK_FALSE(typedNumber(QStringLiteral("1,000.5")));
  CHECK_FALSE(typedNumber(QStringLiteral("1,000,5")));
  CHECK_FALSE(typedNumber(QStringLiteral("ten")));
}

TEST_CASE("a typed time is understood in the forms that people write", "[ui][look]") {
  CHECK(typedTime(QStringLiteral("1:12:30"))->value() == 4350.0);
  CHECK(typedTime(QStringLiteral("12:30,5"))->value() == 750.5);
  CHECK(typedTime(QStringLiteral("4350 s"))->value() == 4350.0);
  CHECK(typedTime(QStringLiteral("4350"))->value() == 4350.0);
  CHECK(typedTime(QStringLiteral("72.5 min"))->value() == 4350.0);
  CHECK(typedTime(QStringLiteral("250 ms"))->value() == 0.25);
  CHECK_FALSE(typedTime(QStringLiteral("12:75")));
  CHECK_FALSE(typedTime(QStringLiteral("soon")));
}
