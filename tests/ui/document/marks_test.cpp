// Chronodrome, GPL-3.0-or-later.
// Corrections of corrections: what is appended must give what the user meant. Told by analysing.
#include <QSignalSpy>
#include <algorithm>
#include <cmath>

#include "document_desk.h"
#include "ui/document/session_document.h"

using namespace chronodrome;
using namespace chronodrome::ui;
using activation::Origin;

namespace {

std::vector<double> timesOf(const SessionDocument& document) {
  std::vector<double> times;
  for (const auto& mark : marksOf(document, "RA"))
    times.push_back(mark.time.value());
  return times;
}

const activation::Activation* markAt(const SessionDocument& document, Seconds time) {
  for (const auto& mark : marksOf(document, "RA")) {
    if (std::abs((mark.time - time).value()) < 1e-6) return &mark;
  }
  return nullptr;
}

/// No correction was left out.
void checkNoComplaint(const SessionDocument& document) {
  for (const auto& warning : document.result()->warnings) {
    INFO(warning.what);
    CHECK(warning.what.find("not applied") == std::string::npos);
  }
}

struct OpenHeart {
  Desk desk;
  SessionDocument document;
  std::vector<double> before;
  Seconds beat;  ///< a detected one
  Seconds empty; ///< a place between two beats

  OpenHeart() {
    openAndSettle(document, desk.sample("guinea-pig-heart"));
    before = timesOf(document);
    const auto& marks = marksOf(document, "RA");
    beat = marks.at(50).time;
    empty = 0.5 * (marks.at(50).time + marks.at(51).time);
  }
};

} // namespace

TEST_CASE("a mark that a correction added can be deleted", "[ui][document]") {
  OpenHeart heart;
  auto& document = heart.document;
  document.addMark("RA", heart.empty);
  settle(document);
  REQUIRE(markAt(document, heart.empty) != nullptr);
  CHECK(markAt(document, heart.empty)->origin == Origin::added);
  document.deleteMark("RA", markAt(document, heart.empty)->time);
  settle(document);
  CHECK(timesOf(document) == heart.before);
  checkNoComplaint(document);
  CHECK(document.session().review.size() == 2);
}

TEST_CASE("a mark that was moved can be moved on, and back", "[ui][document]") {
  OpenHeart heart;
  auto& document = heart.document;
  const Seconds first = heart.beat + Seconds(0.003); // within the reach of a correction
  const Seconds second = heart.beat + Seconds(0.020);
  document.moveMark("RA", heart.beat, first);
  settle(document);
  document.moveMark("RA", markAt(document, first)->time, second);
  settle(document);
  REQUIRE(markAt(document, second) != nullptr);
  CHECK(markAt(document, second)->origin == Origin::moved);
  CHECK(markAt(document, first) == nullptr);
  CHECK(markAt(document, heart.beat) == nullptr);
  CHECK(timesOf(document).size() == heart.before.size());

  document.moveMark("RA", second, heart.beat);
  settle(document);
  CHECK(timesOf(document) == heart.before);
  checkNoComplaint(document);
}

TEST_CASE("a moved mark can be deleted, and a deleted one added again", "[ui][document]") {
  OpenHeart heart;
  auto& document = heart.document;
  const Seconds there = heart.beat + Seconds(0.015);
  document.moveMark("RA", heart.beat, there);
  settle(document);
  document.deleteMark("RA", there);
  settle(document);
  auto expected = heart.before;
  expected.erase(std::find(expected.begin(), expected.end(), heart.beat.value()));
  CHECK(timesOf(document) == expected);

  document.addMark("RA", heart.beat);
  settle(document);
  CHECK(timesOf(document) == heart.before);
  document.deleteMark("RA", heart.beat);
  settle(document);
  CHECK(timesOf(document) == expected);
  checkNoComplaint(document);
}

TEST_CASE("edits that follow each other before the result is there do what they say", "[ui][document]") {
  OpenHeart heart;
  auto& document = heart.document;
  const Seconds there = heart.empty + Seconds(0.010);
  document.addMark("RA", heart.empty);
  document.moveMark("RA", heart.empty, there);
  document.deleteMark("RA", there);
  document.deleteMark("RA", heart.beat);
  settle(document);
  auto expected = heart.before;
  expected.erase(std::find(expected.begin(), expected.end(), heart.beat.value()));
  CHECK(timesOf(document) == expected);
  checkNoComplaint(document);
}

TEST_CASE("an edit that could not be applied is refused and makes no step", "[ui][document]") {
  OpenHeart heart;
  auto& document = heart.document;
  QSignalSpy refused(&document, &SessionDocument::refused);
  document.addMark("RA", heart.beat + Seconds(0.002));
  document.deleteMark("RA", heart.empty);
  document.moveMark("RA", heart.empty, heart.empty + Seconds(0.02));
  document.moveMark("RA", heart.beat, Seconds(heart.before.at(51)));
  CHECK(refused.size() == 4);
  CHECK(document.undoStack()->count() == 0);

  document.deleteMark("RA", heart.beat);
  document.deleteMark("RA", heart.beat); // the key was pressed twice
  CHECK(document.undoStack()->count() == 1);
  document.moveMark("RA", heart.beat, heart.empty);
  CHECK(document.undoStack()->count() == 1);
  document.addMark("RA", heart.empty);
  document.addMark("RA", heart.empty);
  CHECK(document.undoStack()->count() == 2);
  settle(document);
  checkNoComplaint(document);
}

TEST_CASE("a preview shows what the edit will give, without an edit", "[ui][document]") {
  OpenHeart heart;
  auto& document = heart.document;
  const auto before = document.result();
  for (const bool all : {false, true}) {
    const auto& row = before->responses.rows.at(3);
    document::WindowChoice choice;
    choice.curve = row.curve;
    choice.concentration = row.concentration;
    choice.measure = all ? std::string() : row.measure;
    choice.start = row.window_start - Seconds(10.0);
    choice.end = row.window_end - Seconds(4.0);
    const auto shown = document.result();
    const auto preview = document.preview(choice);
    REQUIRE(preview != nullptr);
    CHECK(document.result() == shown);
    CHECK(document.undoStack()->index() == 0);
    document.placeWindow(choice);
    settle(document);
    CHECK(results::responses_csv(*preview) == results::responses_csv(*document.result()));
    document.undoStack()->undo();
    settle(document);
  }
}
