// Chronodrome, GPL-3.0-or-later.
#include "ui/document/focus.h"

#include <QSignalSpy>
#include <catch2/catch.hpp>

using namespace chronodrome;
using namespace chronodrome::ui;

TEST_CASE("the focus stays in the recording and is at least 1 ms wide", "[ui][document]") {
  Focus focus;
  focus.reset(Seconds(100.0));
  CHECK(focus.start() == Seconds(0.0));
  CHECK(focus.end() == Seconds(100.0));

  focus.show(Seconds(90.0), Seconds(110.0)); // moved back, not cut
  CHECK(focus.start() == Seconds(80.0));
  CHECK(focus.end() == Seconds(100.0));
  focus.show(Seconds(-5.0), Seconds(5.0));
  CHECK(focus.start() == Seconds(0.0));
  CHECK(focus.end() == Seconds(10.0));
  focus.show(Seconds(-50.0), Seconds(500.0));
  CHECK(focus.start() == Seconds(0.0));
  CHECK(focus.end() == Seconds(100.0));

  focus.show(Seconds(50.0), Seconds(50.0));
  CHECK((focus.end() - focus.start()).value() == Approx(1e-3));
  CHECK((focus.start() + focus.end()).value() == Approx(100.0));
  focus.show(Seconds(60.0), Seconds(40.0)); // ends given the other way round
  CHECK(focus.start() == Seconds(40.0));
  CHECK(focus.end() == Seconds(60.0));
}

TEST_CASE("the same stretch again tells nobody", "[ui][document]") {
  Focus focus;
  focus.reset(Seconds(100.0));
  focus.show(Seconds(10.0), Seconds(20.0));
  QSignalSpy moved(&focus, &Focus::rangeChanged), places(&focus, &Focus::placesChanged);
  focus.show(Seconds(10.0), Seconds(20.0));
  focus.goTo(Seconds(10.0), Seconds(20.0));
  CHECK(moved.isEmpty());
  CHECK(places.isEmpty());
  CHECK_FALSE(focus.canGoBack());
}

TEST_CASE("jumps are remembered, zooming is not, and one comes back to where one had zoomed",
          "[ui][document]") {
  Focus focus;
  focus.reset(Seconds(100.0));
  focus.goTo(Seconds(10.0), Seconds(20.0));
  focus.show(Seconds(11.0), Seconds(13.0));
  focus.goToTime(Seconds(50.0));
  CHECK(focus.start() == Seconds(49.0));
  CHECK(focus.end() == Seconds(51.0));

  focus.goBack();
  CHECK(focus.start() == Seconds(11.0));
  CHECK(focus.end() == Seconds(13.0));
  focus.goBack();
  CHECK(focus.end() == Seconds(100.0));
  CHECK_FALSE(focus.canGoBack());
  focus.goBack();
  focus.goForward();
  focus.goForward();
  CHECK(focus.start() == Seconds(49.0));
  CHECK_FALSE(focus.canGoForward());

  focus.goBack();
  focus.goTo(Seconds(70.0), Seconds(71.0)); // forgets what lay ahead
  CHECK_FALSE(focus.canGoForward());
  focus.goBack();
  CHECK(focus.start() == Seconds(11.0));
}

TEST_CASE("the chosen step and curve are told once", "[ui][document]") {
  Focus focus;
  focus.reset(Seconds(10.0));
  QSignalSpy step(&focus, &Focus::stepChanged), curve(&focus, &Focus::curveChanged);
  focus.chooseStep(StepRef{1, Molar(3e-7), "rate:RA"});
  focus.chooseStep(StepRef{1, Molar(3e-7), "rate:RA"});
  focus.chooseCurve(1, "rate:RA");
  focus.chooseCurve(1, "rate:RA");
  CHECK(step.size() == 1);
  CHECK(curve.size() == 1);
  focus.reset(Seconds(10.0));
  CHECK_FALSE(focus.step().has_value());
  CHECK(focus.curve() == 0);
}
