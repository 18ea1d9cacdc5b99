// Chronodrome, GPL-3.0-or-later.
#include <catch2/catch.hpp>

#include "document/measure.h"
#include "document/session_file.h"

using namespace chronodrome;
using document::CorrectionKind;
using document::MeasureKind;

TEST_CASE("every kind of correction reads back from its word, and the user's word for removal is delete",
          "[document]") {
  for (const auto kind :
       {CorrectionKind::add, CorrectionKind::remove, CorrectionKind::move, CorrectionKind::retype,
        CorrectionKind::exclude, CorrectionKind::include, CorrectionKind::redetect}) {
    CHECK(document::correction_named(document::name_of(kind)) == kind);
  }
  CHECK(document::name_of(CorrectionKind::remove) == "delete");
  CHECK_FALSE(document::correction_named("remove").has_value());
  CHECK(document::correction_names() == "add, delete, move, retype, exclude, include, redetect");
}

TEST_CASE("a measure is its kind, a colon and the label of a channel or pathway", "[document]") {
  const auto rate = document::measure_named("rate:RA");
  REQUIRE(rate.has_value());
  CHECK(rate->kind == MeasureKind::rate);
  CHECK(rate->label == "RA");
  const auto rise = document::measure_named("dpdt_max:LV: apex");
  REQUIRE(rise.has_value());
  CHECK(rise->kind == MeasureKind::dpdt_max);
  CHECK(rise->label == "LV: apex"); // only the first colon divides
  for (const std::string bad : {"", "rate", "rate:", ":RA", "Rate:RA", "speed:RA", "rat:RA"}) {
    INFO(bad);
    CHECK_FALSE(document::measure_named(bad).has_value());
  }
}

TEST_CASE("delay, conducted and velocity belong to pathways, all other measures to channels", "[document]") {
  CHECK(document::measure_forms() ==
        "rate:CHANNEL, delay:PATHWAY, conducted:PATHWAY, velocity:PATHWAY, force:CHANNEL, pressure:CHANNEL, "
        "dpdt_max:CHANNEL, flow:CHANNEL");
  for (const auto kind :
       {MeasureKind::rate, MeasureKind::delay, MeasureKind::conducted, MeasureKind::velocity,
        MeasureKind::force, MeasureKind::pressure, MeasureKind::dpdt_max, MeasureKind::flow}) {
    const auto back = document::measure_named(document::name_of(kind) + ":X");
    REQUIRE(back.has_value());
    CHECK(back->kind == kind);
  }
}
