// Chronodrome, GPL-3.0-or-later.
#include <catch2/catch.hpp>
#include <cmath>
#include <numbers>
#include <random>

#include "activation/upstroke.h"
#include "numerics/robust.h"

using namespace chronodrome;
using activation::Twitch;

namespace {

/// Normal deviates by Box and Muller from a seeded engine.
class Noise {
public:
  double operator()() {
    const double u = (static_cast<double>(engine_() >> 11U) + 0.5) * 0x1p-53;
    const double v = (static_cast<double>(engine_() >> 11U) + 0.5) * 0x1p-53;
    return std::sqrt(-2.0 * std::log(u)) * std::cos(2.0 * std::numbers::pi * v);
  }

private:
  std::mt19937_64 engine_{7};
};

struct Train {
  std::vector<double> x;
  std::vector<double> centres; ///< sample position of each steepest rise
  std::vector<Twitch> twitches;
};

/// Half cosines up in `rise` s and down in 100 ms, height 80, every 0.4013 s at `fs`.
Train train(double fs, double rise, double noise_sd, std::size_t count) {
  Train made;
  made.x.assign(static_cast<std::size_t>(fs * 0.4013 * static_cast<double>(count + 1)), 0.0);
  for (std::size_t k = 0; k < count; ++k)
    made.centres.push_back(fs * (0.2 + 0.4013 * static_cast<double>(k)));
  Noise noise;
  for (std::size_t n = 0; n < made.x.size(); ++n) {
    for (const double centre : made.centres) {
      const double t = (static_cast<double>(n) - centre) / fs;
      if (std::abs(t) <= 0.5 * rise) made.x[n] += 40.0 * (1.0 + std::sin(std::numbers::pi * t / rise));
      const double down = t - 0.5 * rise;
      if (down > 0.0 && down < 0.1) made.x[n] += 40.0 * (1.0 + std::cos(std::numbers::pi * down / 0.1));
    }
    made.x[n] += noise_sd * noise();
  }
  std::size_t first = 1;
  for (const double centre : made.centres) {
    const auto near = static_cast<std::size_t>(std::llround(centre));
    std::size_t steepest = near;
    for (std::size_t n = near - static_cast<std::size_t>(0.5 * rise * fs);
         n <= near + static_cast<std::size_t>(0.5 * rise * fs); ++n)
      if (made.x[n + 1] - made.x[n - 1] > made.x[steepest + 1] - made.x[steepest - 1]) steepest = n;
    made.twitches.push_back(activation::measure_twitch(
        made.x, steepest, first, std::min(made.x.size() - 2, near + static_cast<std::size_t>(0.3 * fs)),
        Hertz(fs), true));
    first = near + static_cast<std::size_t>(0.15 * fs);
  }
  return made;
}

std::vector<double> errors_ms(const Train& made, const std::vector<double>& found, double fs) {
  std::vector<double> errors;
  for (std::size_t i = 0; i < found.size(); ++i)
    errors.push_back(1e3 * (found[i] - made.centres[i]) / fs);
  return errors;
}

} // namespace

TEST_CASE("without noise the steepest rise of a symmetric upstroke is its middle", "[activation]") {
  const double fs = GENERATE(250.0, 500.0, 1000.0);
  const Train made = train(fs, 0.06, 0.0, 60);
  for (const double error :
       errors_ms(made, activation::time_upstrokes(made.x, made.twitches, Hertz(fs)), fs)) {
    // The half cosine is sampled where it meets the baseline; interpolation leaves a hundredth of a sample.
    CHECK(std::abs(error) < 0.02e3 / fs);
  }
}

TEST_CASE("neighbours steady the steepest rise of a noisy slow upstroke", "[activation]") {
  const double fs = 250.0;
  const Train made = train(fs, 0.06, 80.0 / 240.0, 400);
  std::vector<double> single;
  for (const Twitch& twitch : made.twitches)
    single.push_back(twitch.rise_at);
  const double alone = numerics::sd(errors_ms(made, single, fs));
  const auto together = errors_ms(made, activation::time_upstrokes(made.x, made.twitches, Hertz(fs)), fs);
  CAPTURE(alone, numerics::sd(together), numerics::mean(together));
  CHECK(alone > 1.0);
  CHECK(numerics::sd(together) < 0.3); // within 1 ms in 99.9 % of a normal scatter
  CHECK(std::abs(numerics::mean(together)) < 0.05);
}

TEST_CASE("a contraction among too few of its kind keeps its own steepest rise", "[activation]") {
  const Train made = train(500.0, 0.06, 0.1, 4);
  const auto found = activation::time_upstrokes(made.x, made.twitches, Hertz(500.0));
  for (std::size_t i = 0; i < found.size(); ++i)
    CHECK(found[i] == made.twitches[i].rise_at);
}
