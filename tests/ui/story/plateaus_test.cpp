// Chronodrome, GPL-3.0-or-later.
// Plateaus moved by a user's hands.
#include "open_story.h"

#include <QLineEdit>
#include <QMenu>
#include <QTimer>

#include "ui/look/number_text.h"

using namespace chronodrome;
using namespace chronodrome::ui;
using test_support::OpenStory;

namespace {

using Preview = std::shared_ptr<const session::SessionResult>;

struct Previews {
  explicit Previews(story::StoryPane& pane) {
    QObject::connect(&pane, &story::StoryPane::previewChanged, &pane,
                     [this](const Preview& result) { all.push_back(result); });
  }
  std::vector<Preview> all;
};

} // namespace

TEST_CASE("dragging a plateau's edge previews and then places the window to the pixel", "[story]") {
  OpenStory open;
  Previews previews(open.pane);
  const auto index = open.responseOf("rate:RA", 4);
  const auto before = open.document.result()->responses.rows[index];
  const QRectF band = open.figure().bandRect(index);
  const QPoint edge(int(std::lround(band.left())), int(band.center().y()));
  const QPoint there = edge - QPoint(14, 0);
  open.press(edge);
  open.move(edge - QPoint(7, 0));
  open.move(there);
  REQUIRE_FALSE(previews.all.empty());
  REQUIRE(previews.all.back());
  const auto& shown = previews.all.back()->responses.rows[index];
  const double wanted = before.window_start.value() - 14.0 * open.pixel();
  CHECK_THAT(shown.window_start.value(), Catch::Matchers::WithinAbs(wanted, open.pixel()));
  CHECK(shown.window_end == before.window_end);
  CHECK(shown.n_beats > before.n_beats);
  CHECK(open.figure().bandRect(index).left() < band.left() - 10.0); // the band follows
  CHECK(open.document.session().windows.empty());                   // nothing is edited yet
  open.release(there);
  REQUIRE(open.document.session().windows.size() == 1);
  const auto& placed = open.document.session().windows.front();
  CHECK(placed.measure == "rate:RA");
  CHECK(placed.concentration == before.concentration);
  CHECK_THAT(placed.start.value(), Catch::Matchers::WithinAbs(wanted, open.pixel()));
  CHECK(placed.end == before.window_end);
  REQUIRE(QTest::qWaitFor([&] { return !open.document.isStale(); }, 60000));
  CHECK(open.document.result()->responses.rows[index].window_start == placed.start);
  open.document.undoStack()->undo();
  CHECK(open.document.session().windows.empty());
}

TEST_CASE("Escape puts a dragged plateau back, and the answer with it", "[story]") {
  OpenStory open;
  Previews previews(open.pane);
  const auto index = open.responseOf("delay:AV", 3);
  const QRectF band = open.figure().bandRect(index);
  const QPoint middle = band.center().toPoint();
  open.press(middle);
  open.move(middle - QPoint(20, 0));
  REQUIRE_FALSE(previews.all.empty());
  CHECK(open.figure().bandRect(index).left() < band.left() - 15.0);
  open.key(Qt::Key_Escape);
  CHECK_FALSE(previews.all.back());
  CHECK_THAT(open.figure().bandRect(index).left(), Catch::Matchers::WithinAbs(band.left(), 1e-9));
  open.move(middle - QPoint(40, 0));
  open.release(middle - QPoint(40, 0));
  CHECK(open.document.session().windows.empty());
  CHECK_FALSE(open.document.isModified());
}

TEST_CASE("Shift moves the windows of all measures of the step", "[story]") {
  OpenStory open;
  const auto index = open.responseOf("rate:RA", 2);
  const auto other = open.responseOf("delay:AV", 2);
  const QRectF band = open.figure().bandRect(index);
  const QRectF otherBand = open.figure().bandRect(other);
  open.press(band.center().toPoint(), Qt::ShiftModifier);
  open.move(band.center().toPoint() - QPoint(12, 0));
  CHECK_THAT(open.figure().bandRect(other).left(), Catch::Matchers::WithinAbs(otherBand.left() - 12.0, 1.0));
  open.release(band.center().toPoint() - QPoint(12, 0), Qt::ShiftModifier);
  REQUIRE(open.document.session().windows.size() == 1);
  CHECK(open.document.session().windows.front().measure.empty());
}

TEST_CASE("a click on a plateau chooses its step and shows its beats", "[story]") {
  OpenStory open;
  const auto index = open.responseOf("rate:RV", 5);
  const auto row = open.document.result()->responses.rows[index];
  open.click(open.figure().bandRect(index).center().toPoint());
  REQUIRE(open.focus.step().has_value());
  CHECK(open.focus.step() == std::optional(StepRef{row.curve, row.concentration, row.measure}));
  CHECK(open.focus.measure() == "rate:RV");
  CHECK(open.focus.start() < row.window_start);
  CHECK(open.focus.end() > row.window_end);
  CHECK(open.focus.end() - open.focus.start() < 1.5 * (row.window_end - row.window_start));
  CHECK(open.document.session().windows.empty());
  // It is marked: the row has the accent's colour at the band's edge.
  const QImage image = open.plot->grab().toImage();
  const QRectF band = open.figure().bandRect(index);
  const QColor accent = open.figure().state().theme.accent;
  int inked = 0;
  for (int y = int(band.top()) + 2; y < int(band.bottom()) - 2; ++y) {
    for (int dx = -2; dx <= 2; ++dx) {
      if (image.pixelColor(int(std::lround(band.left())) + dx, y) == accent) {
        ++inked;
        break;
      }
    }
  }
  CHECK(inked > int(band.height()) - 8);
}

TEST_CASE("keys choose, move and place a plateau; Delete gives it back to the rule", "[story]") {
  OpenStory open;
  open.key(Qt::Key_P);
  REQUIRE(open.focus.step().has_value());
  const auto first = *open.focus.step();
  open.key(Qt::Key_P);
  REQUIRE(open.focus.step().has_value());
  CHECK(open.focus.step()->concentration > first.concentration);
  open.key(Qt::Key_P, Qt::ShiftModifier);
  CHECK(open.focus.step() == std::optional(first));
  open.key(Qt::Key_P);
  const auto index = open.responseOf(first.measure, 1);
  const auto before = open.document.result()->responses.rows[index];
  open.key(Qt::Key_Left, Qt::ControlModifier);
  open.key(Qt::Key_Left, Qt::ControlModifier);
  open.key(Qt::Key_Left, Qt::ControlModifier | Qt::ShiftModifier);
  CHECK(open.document.session().windows.empty());
  open.key(Qt::Key_Return);
  REQUIRE(open.document.session().windows.size() == 1);
  const auto placed = open.document.session().windows.front();
  CHECK_THAT(placed.start.value(), Catch::Matchers::WithinAbs(before.window_start.value() - 3.0, 1e-9));
  CHECK_THAT(placed.end.value(), Catch::Matchers::WithinAbs(before.window_end.value() - 2.0, 1e-9));
  REQUIRE(QTest::qWaitFor([&] { return !open.document.isStale(); }, 60000));
  REQUIRE(open.action("actionReleaseWindow")->isEnabled());
  open.key(Qt::Key_Delete);
  REQUIRE(QTest::qWaitFor([&] { return !open.document.isStale(); }, 60000));
  CHECK(open.document.result()->responses.rows[index].window_start == before.window_start);
  CHECK_FALSE(open.action("actionReleaseWindow")->isEnabled());
}

TEST_CASE("the menu of a plateau gives it back to the rule, or asks why its step is left out", "[story]") {
  OpenStory open;
  const auto index = open.responseOf("rate:RA", 3);
  const QRectF band = open.figure().bandRect(index);
  const auto row = open.document.result()->responses.rows[index];
  open.drag(band.center().toPoint(), band.center().toPoint() - QPoint(15, 0));
  REQUIRE(open.document.session().windows.size() == 1);
  REQUIRE(QTest::qWaitFor([&] { return !open.document.isStale(); }, 60000));
  OpenStory::settle();
  const auto choose = [&](const char* name) {
    bool isFound = false;
    QTimer::singleShot(0, &open.pane, [&] {
      auto* menu = qobject_cast<QMenu*>(QApplication::activePopupWidget());
      if (menu == nullptr) return;
      for (auto* action : menu->actions()) {
        if (action->objectName() != QLatin1String(name) || !action->isEnabled()) continue;
        isFound = true;
        action->trigger();
      }
      menu->close();
    });
    const QPoint place = open.figure().bandRect(index).center().toPoint();
    QContextMenuEvent event(QContextMenuEvent::Mouse, place, open.plot->mapToGlobal(place));
    QApplication::sendEvent(open.plot, &event);
    OpenStory::settle();
    return isFound;
  };
  REQUIRE(choose("actionReleaseWindow"));
  REQUIRE(QTest::qWaitFor([&] { return !open.document.isStale(); }, 60000));
  CHECK(open.document.session().windows.empty());
  CHECK(open.document.result()->responses.rows[index].window_start == row.window_start);
  REQUIRE(choose("actionLeaveStepOut"));
  auto* from = open.pane.findChild<QLineEdit*>(QStringLiteral("excludeFromLineEdit"));
  REQUIRE(from->isVisible());
  const auto typed = look::typedTime(from->text());
  REQUIRE(typed.has_value());
  CHECK(*typed < row.window_start);
}

TEST_CASE("a stale result says so", "[story]") {
  OpenStory open;
  auto* word = open.pane.findChild<QWidget*>(QStringLiteral("storyStaleLabel"));
  REQUIRE(word != nullptr);
  CHECK_FALSE(word->isVisible());
  const QImage fresh = open.plot->grab().toImage();
  open.document.exclude("", Seconds(700.0), Seconds(710.0), QStringLiteral("test"));
  REQUIRE(open.document.isStale());
  OpenStory::settle();
  CHECK(word->isVisible());
  const QColor ink = open.figure().state().theme.of(recording::Role::atrial);
  const auto inked = [&](const QImage& image) {
    const QRect row = open.figure().rowRect(0);
    int count = 0;
    for (int x = row.left(); x < row.right(); ++x) {
      for (int y = row.top(); y < row.bottom(); ++y)
        count += image.pixelColor(x, y) == ink ? 1 : 0;
    }
    return count;
  };
  CHECK(inked(fresh) > 200);
  CHECK(inked(open.plot->grab().toImage()) == 0);
  REQUIRE(QTest::qWaitFor([&] { return !open.document.isStale(); }, 60000));
  OpenStory::settle();
  CHECK_FALSE(word->isVisible());
}
