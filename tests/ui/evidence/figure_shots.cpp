// Chronodrome, GPL-3.0-or-later.
// Pictures to look at, not to test: test_ui_evidence "[.shot]" writes them to $CHRONODROME_SHOTS.
#include "ui/evidence/evidence_figure.h"

#include <QDir>
#include <QPdfWriter>
#include <catch2/catch.hpp>

#include "conditioning/stretch.h"
#include "session/stretches.h"
#include "ui/evidence/open_pane.h"
#include "ui/evidence/paint.h"
#include "ui/evidence/sample_session.h"

using namespace chronodrome;
using namespace chronodrome::ui;

namespace {

QString place(const QString& name) {
  return QDir(qEnvironmentVariable("CHRONODROME_SHOTS", QDir::tempPath())).filePath(name);
}

} // namespace

TEST_CASE("pictures of the figure", "[.shot]") {
  const auto result = test_support::sample_result();
  struct Shot {
    const char* name;
    double start, end;
    look::Mode mode;
    QSize size;
  };
  const Shot shots[] = {{"whole-light", 0, 1230, look::Mode::light, {900, 350}},
                        {"30s-light", 1015, 1045, look::Mode::light, {900, 350}},
                        {"beat-light", 1029, 1031.5, look::Mode::light, {1800, 700}},
                        {"beat-dark", 1029.9, 1030.1, look::Mode::dark, {900, 350}},
                        {"whole-dark", 0, 1230, look::Mode::dark, {1800, 700}}};
  for (const Shot& shot : shots) {
    evidence::EvidenceFigure figure;
    figure.resize(shot.size);
    figure.setTheme(look::Theme::of(shot.mode));
    figure.setScene(evidence::sceneOf(result));
    figure.setView(Seconds(shot.start), Seconds(shot.end));
    std::vector<recording::Channel> filtered;
    if (shot.end - shot.start < 60.0) {
      for (const auto& channel : result->channels)
        filtered.push_back(
            conditioning::condition_stretch(channel, {}, Seconds(shot.start), Seconds(shot.end)).value());
    }
    figure.setFiltered(filtered, QStringLiteral("filtered over raw"));
    evidence::Overlay overlay;
    overlay.reference = Seconds(1030.02);
    overlay.second = Seconds(1030.06);
    overlay.is_pinned = true;
    figure.setOverlay(overlay);
    figure.replot();
    figure.grab().save(
        place(QStringLiteral("evidence-") + QLatin1String(shot.name) + QStringLiteral(".png")));
  }
  QPdfWriter writer(place(QStringLiteral("evidence-traces.pdf")));
  writer.setResolution(96);
  writer.setPageSize(QPageSize(QPageSize::A4));
  QCPPainter painter;
  painter.begin(&writer);
  evidence::paintTraces(painter, QSize(680, 300), *result, Seconds(1028), Seconds(1032),
                        look::Theme::of(look::Mode::paper));
  painter.end();
}

TEST_CASE("pictures of the pane", "[.shot]") {
  struct Shot {
    const char* name;
    double start, end;
    look::Mode mode;
    QSize size;
  };
  const Shot shots[] = {{"whole", 0, 1230, look::Mode::light, {900, 350}},
                        {"30s", 1015, 1045, look::Mode::light, {900, 350}},
                        {"beats", 1029, 1032, look::Mode::light, {1800, 700}},
                        {"beats-dark", 1029, 1032, look::Mode::dark, {900, 420}},
                        {"200ms", 1030.1, 1030.3, look::Mode::dark, {1800, 700}}};
  test_support::OpenPane open;
  open.key(Qt::Key_S);
  open.document.addMark("RV", Seconds(1029.95));
  open.document.moveMark("RA", open.document.result()->activations[0].marks[2727].time,
                         open.document.result()->activations[0].marks[2727].time + Seconds(0.012));
  open.document.exclude("RV", Seconds(1031.2), Seconds(1031.7), QStringLiteral("loose contact"));
  open.settle();
  for (const Shot& shot : shots) {
    open.pane.resize(shot.size);
    open.pane.setTheme(look::Theme::of(shot.mode));
    QApplication::setPalette(look::Theme::of(shot.mode).palette());
    open.show(shot.start, shot.end);
    (void)QTest::qWaitFor([&] { return open.figure().mode() == QStringLiteral("filtered over raw"); },
                          shot.end - shot.start > 60 ? 200 : 5000);
    const double width = shot.end - shot.start;
    open.point(open.at(0, shot.start + 0.35 * width));
    open.key(Qt::Key_R);
    open.click(open.at(1, shot.start + 0.6 * width));
    open.figure().replot();
    open.pane.grab().save(place(QStringLiteral("pane-") + QLatin1String(shot.name) + QStringLiteral(".png")));
  }
  // The field for a reason, and eight rows in little room.
  open.drag(open.at(0, 1030.15), open.at(0, 1030.25), Qt::AltModifier);
  open.key(Qt::Key_X);
  open.figure().replot();
  open.pane.grab().save(place(QStringLiteral("pane-reason.png")));
}

TEST_CASE("a picture of eight rows in little room", "[.shot]") {
  auto inputs = test_support::sample_inputs("rabbit-heart");
  const auto result = session::analyse(inputs, 0).value();
  auto many = result;
  for (std::size_t i = 0; many.channels.size() < 8; ++i) {
    many.channels.push_back(result.channels[i % result.channels.size()]);
    many.channels.back().label += std::to_string(i);
    many.activations.push_back(result.activations[i % result.channels.size()]);
  }
  for (const auto& [name, size] :
       {std::pair{"eight-small.png", QSize(900, 350)}, {"eight-large.png", QSize(1600, 900)}}) {
    evidence::EvidenceFigure figure;
    figure.resize(size);
    figure.setScene(evidence::sceneOf(std::make_shared<const session::SessionResult>(many)));
    figure.setView(Seconds(400), Seconds(404));
    figure.replot();
    figure.grab().save(place(QLatin1String(name)));
  }
}

TEST_CASE("a picture of no recording, and of signals before an analysis", "[.shot]") {
  SessionDocument document;
  Focus focus;
  evidence::EvidencePane pane(document, focus);
  pane.resize(900, 350);
  pane.show();
  pane.grab().save(place(QStringLiteral("pane-empty.png")));
  evidence::EvidenceFigure figure;
  figure.resize(900, 350);
  figure.setScene(evidence::sceneOf(std::make_shared<const session::SessionResult>(
      session::unanalysed(test_support::sample_inputs("rabbit-heart").recording))));
  figure.setView(Seconds(100), Seconds(104));
  figure.replot();
  figure.grab().save(place(QStringLiteral("figure-unanalysed.png")));
}
