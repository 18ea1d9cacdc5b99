// Chronodrome, GPL-3.0-or-later.
// Every edit is one named step, and undo leads back to the same results.
#include <QDateTime>
#include <QSignalSpy>

#include "document_desk.h"
#include "results/session_writer.h"

using namespace chronodrome;
using namespace chronodrome::ui;
using document::CorrectionKind;
using document::WindowChoice;

namespace {

WindowChoice someWindow(const SessionDocument& document) {
  const auto& row = document.result()->responses.rows.at(2);
  WindowChoice choice;
  choice.curve = row.curve;
  choice.concentration = row.concentration;
  choice.measure = row.measure;
  choice.start = row.window_start - Seconds(8.0);
  choice.end = row.window_end - Seconds(5.0);
  choice.why = "bubble";
  return choice;
}

std::string nameOfLast(SessionDocument& document) {
  return document.undoStack()->undoText().toStdString();
}

/// Makes the edit, undoes and redoes it; each state must give the results that it gave before.
void checkThereAndBack(const std::string& name, const std::function<void(SessionDocument&)>& edit) {
  INFO(name);
  const Desk desk;
  SessionDocument document;
  openAndSettle(document, desk.sample("guinea-pig-heart"));
  const std::string before = resultText(document);
  const std::string session_before = results::session_text(document.session());
  edit(document);
  REQUIRE(document.undoStack()->count() == 1);
  CHECK(nameOfLast(document) == name);
  CHECK(document.isModified());
  CHECK(document.isStale());
  settle(document);
  const std::string after = resultText(document);
  const std::string session_after = results::session_text(document.session());
  CHECK(after != before);

  document.undoStack()->undo();
  CHECK_FALSE(document.isModified());
  settle(document);
  CHECK(resultText(document) == before);
  CHECK(results::session_text(document.session()) == session_before);

  document.undoStack()->redo();
  settle(document);
  CHECK(resultText(document) == after);
  CHECK(results::session_text(document.session()) == session_after);
}

} // namespace

TEST_CASE("each kind of edit can be undone and made again", "[ui][document]") {
  SECTION("add") {
    checkThereAndBack("add activation on RA at 1:00.050",
                      [](SessionDocument& d) { d.addMark("RA", Seconds(60.05), "seen on the trace"); });
  }
  SECTION("exclude") {
    checkThereAndBack("exclude 1:00.000 to 1:10.000 on RA",
                      [](SessionDocument& d) { d.exclude("RA", Seconds(70.0), Seconds(60.0), "noise"); });
  }
  SECTION("exclude everywhere") {
    checkThereAndBack("exclude 1:00.000 to 1:10.000 on all channels",
                      [](SessionDocument& d) { d.exclude("", Seconds(60.0), Seconds(70.0), "pump"); });
  }
  SECTION("additions") {
    checkThereAndBack("edit additions", [](SessionDocument& d) {
      auto log = d.protocol();
      log.events.at(2).time += Seconds(30.0);
      d.setProtocol(log, "edit additions");
    });
  }
  SECTION("settings") {
    checkThereAndBack("change settings", [](SessionDocument& d) {
      auto session = d.session();
      session.analysis["response.window_s"] = 45.0;
      d.setSession(session, "change settings");
    });
  }
}

TEST_CASE("marks that stand can be deleted and moved, and that undone", "[ui][document]") {
  const Desk desk;
  SessionDocument document;
  openAndSettle(document, desk.sample("guinea-pig-heart"));
  const std::string before = resultText(document);
  const Seconds time = marksOf(document, "RA").at(100).time;
  SECTION("delete") {
    document.deleteMark("RA", time, "far field");
    CHECK(nameOfLast(document).rfind("delete activation on RA at ", 0) == 0);
  }
  SECTION("move") {
    document.moveMark("RA", time, time + Seconds(0.012));
    CHECK(nameOfLast(document).rfind("move activation on RA from ", 0) == 0);
  }
  settle(document);
  const std::string after = resultText(document);
  CHECK(after != before);
  document.undoStack()->undo();
  settle(document);
  CHECK(resultText(document) == before);
  document.undoStack()->redo();
  settle(document);
  CHECK(resultText(document) == after);
}

TEST_CASE("an include takes back an exclusion", "[ui][document]") {
  const Desk desk;
  SessionDocument document;
  openAndSettle(document, desk.sample("guinea-pig-heart"));
  const auto rows_before = results::intervals_csv(*document.result());
  document.exclude("RA", Seconds(60.0), Seconds(70.0), "noise");
  settle(document);
  CHECK(results::intervals_csv(*document.result()) != rows_before);
  document.include("RA", Seconds(60.0), Seconds(70.0));
  settle(document);
  CHECK(results::intervals_csv(*document.result()) == rows_before);
  CHECK(document.session().review.size() == 2);
}

TEST_CASE("a window is placed, placed again, and given back to the rule", "[ui][document]") {
  const Desk desk;
  SessionDocument document;
  openAndSettle(document, desk.sample("guinea-pig-heart"));
  const std::string before = resultText(document);
  const WindowChoice choice = someWindow(document);
  document.placeWindow(choice);
  CHECK(nameOfLast(document).rfind("place window, ", 0) == 0);
  CHECK(nameOfLast(document).find(", rate RA") != std::string::npos);
  settle(document);
  CHECK(resultText(document) != before);
  const auto& row = document.result()->responses.rows.at(2);
  CHECK(row.window_start == choice.start);
  CHECK(row.window_end == choice.end);
  REQUIRE(document.session().windows.size() == 1);
  CHECK(document.session().windows.front().who == document.author().toStdString());
  CHECK(QDateTime::fromString(QString::fromStdString(document.session().windows.front().when), Qt::ISODate)
            .isValid());

  document.placeWindow(choice); // the same again
  CHECK(document.undoStack()->count() == 1);
  auto other = choice;
  other.end += Seconds(1.0);
  document.placeWindow(other);
  CHECK(document.session().windows.size() == 1);

  document.releaseWindow(choice.curve, choice.concentration, choice.measure);
  CHECK(nameOfLast(document).rfind("release window, ", 0) == 0);
  settle(document);
  CHECK(resultText(document) == before);
  document.releaseWindow(choice.curve, choice.concentration, choice.measure);
  CHECK(document.undoStack()->count() == 3);
  document.undoStack()->setIndex(0);
  settle(document);
  CHECK(resultText(document) == before);
}

TEST_CASE("a window that is dragged out of the recording ends with it", "[ui][document]") {
  const Desk desk;
  SessionDocument document;
  openAndSettle(document, desk.sample("guinea-pig-heart"));
  WindowChoice choice = someWindow(document);
  choice.start = document.recording()->duration + Seconds(5.0); // dragged past the other edge, too
  choice.end = Seconds(-3.0);
  document.placeWindow(choice);
  REQUIRE(document.session().windows.size() == 1);
  CHECK(document.session().windows.front().start == Seconds(0.0));
  CHECK(document.session().windows.front().end == document.recording()->duration);
  choice.start = Seconds(-3.0);
  choice.end = Seconds(-2.0);
  document.placeWindow(choice);
  CHECK(document.undoStack()->count() == 1);
}

TEST_CASE("releasing one measure leaves the window of the others", "[ui][document]") {
  const Desk desk;
  SessionDocument document;
  openAndSettle(document, desk.sample("guinea-pig-heart"));
  WindowChoice choice = someWindow(document);
  const std::string measure = choice.measure;
  choice.measure.clear();
  document.placeWindow(choice);
  document.releaseWindow(choice.curve, choice.concentration, measure);
  settle(document);
  for (const auto& row : document.result()->responses.rows) {
    if (row.curve != choice.curve || row.concentration != choice.concentration) continue;
    INFO(row.measure);
    CHECK((row.window_start == choice.start) == (row.measure != measure));
  }
  document.placeWindow(choice); // for all again: one choice is left
  CHECK(document.session().windows.size() == 1);
}

TEST_CASE("every correction says its number, when, who, what and why", "[ui][document]") {
  const Desk desk;
  SessionDocument document;
  openAndSettle(document, desk.sample("guinea-pig-heart"));
  auto session = document.session();
  session.preparation.operator_name = "A. Marsh";
  document.setSession(session, "name the operator");
  CHECK(document.author() == QStringLiteral("A. Marsh"));
  const Seconds time = marksOf(document, "RA").at(10).time;
  document.deleteMark("RA", time, " far field ");
  document.addMark("RV", Seconds(60.07));
  const auto& review = document.session().review;
  REQUIRE(review.size() == 2);
  CHECK(review[0].seq == 1);
  CHECK(review[1].seq == 2);
  CHECK(review[0].who == "A. Marsh");
  CHECK(review[0].why == "far field");
  CHECK(review[0].what == CorrectionKind::remove);
  CHECK(review[0].time == time);
  const QString when = QString::fromStdString(review[0].when);
  CHECK(when.endsWith(u'Z'));
  CHECK(QDateTime::fromString(when, Qt::ISODate).secsTo(QDateTime::currentDateTimeUtc()) < 60);
  document.undoStack()->undo();
  CHECK(document.session().review.size() == 1);
}

TEST_CASE("what changes nothing is no step", "[ui][document]") {
  const Desk desk;
  SessionDocument document;
  openAndSettle(document, desk.sample("atrial-strip"));
  QSignalSpy edited(&document, &SessionDocument::edited);
  document.setSession(document.session(), "nothing");
  auto log = document.protocol();
  for (auto& event : log.events)
    event.line += 7; // where it stood says nothing of it
  document.setProtocol(log, "nothing");
  auto moved = document.session();
  moved.files.front().path = "elsewhere.csv"; // the place of the files is no edit
  document.setSession(moved, "nothing");
  document.exclude("", Seconds(5.0), Seconds(5.0), "nothing");
  document.moveMark("RA", Seconds(5.0), Seconds(5.0));
  CHECK(document.undoStack()->count() == 0);
  CHECK(edited.isEmpty());
  CHECK_FALSE(document.isModified());
  CHECK(document.work() == SessionDocument::Work::none);
}

TEST_CASE("undo of a change that was not analysed yet needs no analysis", "[ui][document]") {
  const Desk desk;
  SessionDocument document;
  openAndSettle(document, desk.sample("guinea-pig-heart"));
  const auto result = document.result();
  document.exclude("", Seconds(60.0), Seconds(70.0), "noise");
  CHECK(document.isStale());
  document.undoStack()->undo();
  CHECK_FALSE(document.isStale());
  settle(document);
  CHECK(document.result() == result);
}
