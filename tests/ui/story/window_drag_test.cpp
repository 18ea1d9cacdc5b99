// Chronodrome, GPL-3.0-or-later.
#include <catch2/catch.hpp>

#include "ui/story/window_drag.h"

using namespace chronodrome;
using ui::story::Grip;
using ui::story::WindowDrag;

namespace {

response::Response plateau() {
  response::Response row;
  row.curve = 2;
  row.measure = "rate:RA";
  row.concentration = Molar(1e-7);
  row.window_start = Seconds(170.0);
  row.window_end = Seconds(200.0);
  return row;
}

const recording::Span kStep{Seconds(100.0), Seconds(200.0)};

} // namespace

TEST_CASE("a window that is dragged keeps its length and stays in its step", "[story]") {
  WindowDrag drag(plateau(), kStep, Grip::body, false);
  CHECK_FALSE(drag.isMoved());
  drag.moveTo(Seconds(-20.0));
  CHECK(drag.window().start == Seconds(150.0));
  CHECK(drag.window().end == Seconds(180.0));
  drag.moveTo(Seconds(-500.0));
  CHECK(drag.window().start == Seconds(100.0));
  CHECK(drag.window().end == Seconds(130.0));
  drag.moveTo(Seconds(500.0));
  CHECK(drag.window().end == Seconds(200.0));
  CHECK_FALSE(drag.isMoved());
}

TEST_CASE("an edge stops at the step's end and a second before the other edge", "[story]") {
  WindowDrag start(plateau(), kStep, Grip::start, false);
  start.moveTo(Seconds(-300.0));
  CHECK(start.window().start == Seconds(100.0));
  start.moveTo(Seconds(300.0));
  CHECK(start.window().start == Seconds(199.0));
  CHECK(start.window().end == Seconds(200.0));
  WindowDrag end(plateau(), kStep, Grip::end, false);
  end.moveTo(Seconds(-300.0));
  CHECK(end.window().end == Seconds(171.0));
  end.moveTo(Seconds(10.0));
  CHECK(end.window().end == Seconds(200.0));
}

TEST_CASE("what is placed names the step; for all measures none in particular", "[story]") {
  WindowDrag one(plateau(), kStep, Grip::end, false);
  CHECK(one.choice().curve == 2);
  CHECK(one.choice().concentration == Molar(1e-7));
  CHECK(one.choice().measure == "rate:RA");
  CHECK(WindowDrag(plateau(), kStep, Grip::end, true).choice().measure.empty());
}

TEST_CASE("another grip goes on from the place reached", "[story]") {
  WindowDrag drag(plateau(), kStep, Grip::body, false);
  drag.moveTo(Seconds(-10.0));
  drag.hold(Grip::start);
  drag.moveTo(Seconds(-5.0));
  CHECK(drag.window().start == Seconds(155.0));
  CHECK(drag.window().end == Seconds(190.0));
}
