// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <cstdint>
#include <random>
#include <string_view>

#include "base/quantity.h"

namespace chronodrome::simulation {

/// Random numbers that are the same on every machine: std::mt19937_64, whose sequence the C++ standard fixes,
/// with mappings of our own. Each purpose draws from its own stream, so that another channel or another
/// disturbance does not change the beats.
class Random {
public:
  Random(std::uint64_t seed, std::string_view stream);

  /// In [0, 1), 53 bits.
  double uniform();
  double uniform(double low, double high) { return low + (high - low) * uniform(); }
  /// Mean 0, standard deviation 1, by stacked layers of equal area with rejection.
  /// Source: Marsaglia & Tsang 2000, doi:10.18637/jss.v005.i08.
  double normal();

private:
  double beyond_base_layer();

  std::mt19937_64 engine_;
};

/// A slow random fluctuation about 0 (Ornstein-Uhlenbeck process): normal with standard deviation `sd`,
/// correlation exp(-lag / tau). Exact at whatever times it is asked for.
class Fluctuation {
public:
  Fluctuation(std::uint64_t seed, std::string_view stream, double sd, Seconds tau);
  /// An earlier time than the last one asked for gives the last value.
  double at(Seconds time);

private:
  Random random_;
  double sd_, tau_;
  double last_time_ = 0.0, value_ = 0.0;
};

} // namespace chronodrome::simulation
