// Chronodrome, GPL-3.0-or-later.
#include "simulation/random.h"

#include <array>
#include <cmath>
#include <numbers>

namespace chronodrome::simulation {
namespace {

constexpr std::size_t kLayers = 256;
/// Where the base layer's rectangle ends for 256 layers of equal area (Marsaglia & Tsang 2000).
constexpr double kBaseEdge = 3.6541528853610088;

double bell(double x) {
  return std::exp(-0.5 * x * x);
}

struct Layers {
  std::array<double, kLayers + 1> edge{}, height{};
};

Layers make_layers() {
  // Area of each layer: the base rectangle and the tail beyond it.
  const double tail = std::sqrt(std::numbers::pi / 2.0) * std::erfc(kBaseEdge / std::numbers::sqrt2);
  const double area = kBaseEdge * bell(kBaseEdge) + tail;
  Layers layers;
  layers.edge[0] = area / bell(kBaseEdge);
  layers.edge[1] = kBaseEdge;
  for (std::size_t i = 2; i < kLayers; ++i)
    layers.edge[i] = std::sqrt(-2.0 * std::log(area / layers.edge[i - 1] + bell(layers.edge[i - 1])));
  layers.edge[kLayers] = 0.0;
  for (std::size_t i = 0; i <= kLayers; ++i)
    layers.height[i] = bell(layers.edge[i]);
  return layers;
}

/// Spreads every bit of `x` over the result (a 64-bit mixing function of odd multipliers and shifts).
std::uint64_t mixed(std::uint64_t x) {
  x ^= x >> 32U;
  x *= 0x9E3779B97F4A7C15ULL;
  x ^= x >> 29U;
  x *= 0xD1B54A32D192ED03ULL;
  x ^= x >> 32U;
  return x;
}

std::uint64_t seed_of(std::uint64_t seed, std::string_view stream) {
  std::uint64_t state = mixed(seed + 0x632BE59BD9B4E019ULL);
  for (const char c : stream)
    state = mixed(state ^ static_cast<unsigned char>(c)) + 0x9E3779B97F4A7C15ULL;
  return mixed(state);
}

} // namespace

Random::Random(std::uint64_t seed, std::string_view stream) : engine_(seed_of(seed, stream)) {}

double Random::uniform() {
  return static_cast<double>(engine_() >> 11U) * 0x1.0p-53;
}

double Random::beyond_base_layer() {
  for (;;) {
    const double a = -std::log(1.0 - uniform()) / kBaseEdge;
    const double b = -std::log(1.0 - uniform());
    if (b + b > a * a) return kBaseEdge + a;
  }
}

double Random::normal() {
  static const Layers layers = make_layers();
  for (;;) {
    const std::uint64_t bits = engine_();
    const std::size_t i = bits & 0xFFU;
    const double sign = (bits & 0x100U) != 0 ? -1.0 : 1.0;
    const double x = static_cast<double>(bits >> 11U) * 0x1.0p-53 * layers.edge[i];
    if (x < layers.edge[i + 1]) return sign * x;
    if (i == 0) return sign * beyond_base_layer();
    const double y = layers.height[i] + uniform() * (layers.height[i + 1] - layers.height[i]);
    if (y < bell(x)) return sign * x;
  }
}

Fluctuation::Fluctuation(std::uint64_t seed, std::string_view stream, double sd, Seconds tau)
    : random_(seed, stream), sd_(sd), tau_(tau.value()) {
  if (sd_ > 0.0) value_ = sd_ * random_.normal();
}

double Fluctuation::at(Seconds time) {
  if (sd_ <= 0.0) return 0.0;
  if (time.value() <= last_time_) return value_;
  const double kept = std::exp(-(time.value() - last_time_) / tau_);
  value_ = kept * value_ + sd_ * std::sqrt(1.0 - kept * kept) * random_.normal();
  last_time_ = time.value();
  return value_;
}

} // namespace chronodrome::simulation
