// Chronodrome, GPL-3.0-or-later.
// How long a frame takes: eight rows of an hour at 2 kHz on 1600 x 900. Prints its figures.
#include <QImage>
#include <algorithm>
#include <catch2/catch.hpp>
#include <cmath>
#include <ctime>
#include <iostream>
#include <random>

#include "ui/evidence/evidence_figure.h"
#include "ui/evidence/made_scene.h"

using namespace chronodrome;
using namespace chronodrome::ui;

namespace {

/// Time that this thread has worked: the figures are those of an idle machine, also on a busy one.
double worked_ms() {
  timespec now{};
  clock_gettime(CLOCK_THREAD_CPUTIME_ID, &now);
  return static_cast<double>(now.tv_sec) * 1e3 + static_cast<double>(now.tv_nsec) * 1e-6;
}

/// Spikes four times a second on noise and wander.
std::vector<double> electrogram(unsigned seed) {
  std::mt19937 engine(seed);
  std::normal_distribution<double> noise(0.0, 0.05);
  std::vector<double> samples(3600 * 2000);
  for (std::size_t i = 0; i < samples.size(); ++i) {
    const double phase = static_cast<double>(i % 500) - 100.0;
    samples[i] = noise(engine) + 0.3 * std::sin(static_cast<double>(i) * 1e-3) +
                 2.0 * std::exp(-phase * phase / 50.0) * std::cos(phase * 0.4);
  }
  return samples;
}

std::shared_ptr<session::SessionResult> hour() {
  std::vector<std::vector<double>> signals;
  for (unsigned c = 0; c < 8; ++c)
    signals.push_back(electrogram(c));
  auto result = test_support::result_of(std::move(signals), 2000.0);
  for (auto& channel : result->activations) {
    for (double time = 0.05; time < 3600.0; time += 0.25) {
      activation::Activation mark;
      mark.time = Seconds(time);
      channel.marks.push_back(mark);
    }
  }
  return result;
}

} // namespace

TEST_CASE("frames of eight rows of an hour", "[.long]") {
  evidence::EvidenceFigure figure;
  figure.resize(1600, 900);
  figure.setScene(evidence::sceneOf(hour()));
  figure.show();
  QImage image(figure.size(), QImage::Format_RGB32);
  for (const double width : {3600.0, 600.0, 60.0, 10.0, 3.0, 1.0, 0.2}) {
    std::vector<double> times;
    for (int frame = 0; frame < 60; ++frame) {
      const double start = (3600.0 - width) * frame / 60.0;
      figure.setView(Seconds(start), Seconds(start + width));
      const double before = worked_ms();
      figure.replot();
      figure.render(&image);
      times.push_back(worked_ms() - before);
    }
    std::sort(times.begin(), times.end());
    std::cout << width << " s across: median " << times[30] << " ms, 95th percentile " << times[57]
              << " ms\n";
    CHECK(times[30] < 100.0);
  }
  std::vector<double> cursor;
  for (int step = 0; step < 200; ++step) {
    evidence::Overlay overlay;
    overlay.second = Seconds(figure.timeFrame().timeOf(200.0 + step).value());
    const double before = worked_ms();
    figure.setOverlay(overlay);
    figure.render(&image);
    cursor.push_back(worked_ms() - before);
  }
  std::sort(cursor.begin(), cursor.end());
  std::cout << "cursor alone: median " << cursor[100] << " ms, 95th percentile " << cursor[190] << " ms\n";
  CHECK(cursor[100] < 50.0);
}
