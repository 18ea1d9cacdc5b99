// Chronodrome, GPL-3.0-or-later.
// The coefficients and gains below follow from the bilinear transform on paper; SciPy 1.10.1 (signal.butter,
// sosfilt_zi) gives the same digits.
#include "numerics/butterworth.h"

#include <algorithm>
#include <catch2/catch.hpp>
#include <cmath>
#include <numbers>

using namespace chronodrome;
using Catch::Matchers::WithinAbs;
using Catch::Matchers::WithinRel;
using numerics::butterworth;
using numerics::Pass;
using numerics::Section;

namespace {

std::vector<Section> made(Pass pass, int order, double cutoff, double rate) {
  const auto sections = butterworth(pass, order, Hertz(cutoff), Hertz(rate));
  REQUIRE(sections.ok());
  return *sections;
}

/// Half of the last digit that the reference prints.
constexpr double kTwelveDigits = 6e-13;
constexpr double kNineDigits = 6e-10;

void check_section(const Section& s, const std::vector<double>& b, const std::vector<double>& a,
                   double within) {
  CHECK_THAT(s.b0, WithinAbs(b[0], within));
  CHECK_THAT(s.b1, WithinAbs(b[1], within));
  CHECK_THAT(s.b2, WithinAbs(b[2], within));
  CHECK_THAT(s.a1, WithinAbs(a[0], within));
  CHECK_THAT(s.a2, WithinAbs(a[1], within));
}

std::vector<double> pulse_train(std::size_t n) {
  std::vector<double> x(n);
  for (std::size_t i = 0; i < n; ++i) {
    const double t = static_cast<double>(i);
    x[i] = std::exp(-0.5 * std::pow((t - 0.4 * static_cast<double>(n)) / 6.0, 2)) +
           0.3 * std::sin(0.11 * t) * std::exp(-std::pow((t - 0.6 * static_cast<double>(n)) / 40.0, 2));
  }
  return x;
}

} // namespace

TEST_CASE("a quarter-rate low-pass of second order has the coefficients of the textbook", "[butterworth]") {
  const auto s = made(Pass::low, 2, 250.0, 1000.0);
  REQUIRE(s.size() == 1);
  check_section(s[0], {0.292893218813, 0.585786437627, 0.292893218813}, {0.0, 0.171572875254}, kTwelveDigits);
  const auto state = numerics::settled_state(s[0]);
  CHECK_THAT(state[0], WithinAbs(0.707106781187, kTwelveDigits));
  CHECK_THAT(state[1], WithinAbs(0.121320343560, kTwelveDigits));
}

TEST_CASE("a fourth-order low-pass has its two sections, lowest quality factor first", "[butterworth]") {
  const auto s = made(Pass::low, 4, 150.0, 1000.0);
  REQUIRE(s.size() == 2);
  check_section(s[0], {0.117948572, 0.235897144, 0.117948572}, {-0.672740911, 0.144535200}, kNineDigits);
  check_section(s[1], {0.157382241, 0.314764482, 0.157382241}, {-0.897657940, 0.527186905}, kNineDigits);
  const auto gain = [&](double f) { return numerics::gain_at(s, Hertz(f), Hertz(1000.0)); };
  CHECK_THAT(gain(0.0), WithinAbs(1.0, 1e-12));
  CHECK_THAT(gain(50.0), WithinAbs(0.9999564172, 1e-10));
  CHECK_THAT(gain(150.0), WithinAbs(0.7071067812, 1e-10));
  CHECK_THAT(gain(300.0), WithinAbs(0.0187772120, 1e-10));
  CHECK(numerics::customary_padding(s) == 15);
}

TEST_CASE("high-pass and low-pass sections agree with the reference", "[butterworth]") {
  check_section(made(Pass::high, 2, 0.5, 1000.0)[0], {0.997781024103, -1.995562048206, 0.997781024103},
                {-1.995557124346, 0.995566972066}, kTwelveDigits);
  const Section hp = made(Pass::high, 2, 30.0, 1000.0)[0];
  CHECK_THAT(hp.b0, WithinAbs(0.875183092, kNineDigits));
  CHECK_THAT(hp.a1, WithinAbs(-1.734725769, kNineDigits));
  CHECK_THAT(hp.a2, WithinAbs(0.766006601, kNineDigits));
  const Section lp = made(Pass::low, 2, 300.0, 1000.0)[0];
  CHECK_THAT(lp.b0, WithinAbs(0.391335773, kNineDigits));
  CHECK_THAT(lp.a1, WithinAbs(0.369527377, kNineDigits));
  CHECK_THAT(lp.a2, WithinAbs(0.195815713, kNineDigits));
}

TEST_CASE("every order has the gain that the formula gives at every frequency", "[butterworth]") {
  const int order = GENERATE(1, 2, 3, 4, 5, 8);
  const Pass pass = GENERATE(Pass::low, Pass::high);
  const double fs = 2000.0;
  const double fc = 120.0;
  const auto s = made(pass, order, fc, fs);
  CHECK(s.size() == static_cast<std::size_t>((order + 1) / 2));
  for (const double f : {5.0, 60.0, 120.0, 300.0, 700.0}) {
    const double ratio = std::tan(std::numbers::pi * f / fs) / std::tan(std::numbers::pi * fc / fs);
    const double power = std::pow(pass == Pass::low ? ratio : 1.0 / ratio, 2 * order);
    // Rounding of a few operations in double.
    CHECK_THAT(numerics::gain_at(s, Hertz(f), Hertz(fs)), WithinRel(1.0 / std::sqrt(1.0 + power), 1e-9));
  }
}

TEST_CASE("the corrected cut-off keeps half the power after two passes", "[butterworth]") {
  const Hertz designed = numerics::cutoff_for_two_passes(Pass::low, 2, Hertz(100.0), Hertz(1000.0));
  CHECK_THAT(designed.value(), WithinAbs(122.4924, 5e-5));
  const auto s = made(Pass::low, 2, designed.value(), 1000.0);
  CHECK_THAT(std::pow(numerics::gain_at(s, Hertz(100.0), Hertz(1000.0)), 2), WithinAbs(0.7071068, 5e-8));
  const Hertz high = numerics::cutoff_for_two_passes(Pass::high, 3, Hertz(40.0), Hertz(1000.0));
  const auto h = made(Pass::high, 3, high.value(), 1000.0);
  CHECK_THAT(std::pow(numerics::gain_at(h, Hertz(40.0), Hertz(1000.0)), 2),
             WithinAbs(std::numbers::sqrt2 / 2.0, 1e-12));
}

TEST_CASE("the gain of a filtered sine is that of two passes and its phase is zero", "[butterworth]") {
  const double fs = 1000.0;
  const double f = 150.0;
  const auto s = made(Pass::low, 4, 150.0, fs);
  std::vector<double> x(2000);
  for (std::size_t i = 0; i < x.size(); ++i)
    x[i] = std::sin(2.0 * std::numbers::pi * f * static_cast<double>(i) / fs);
  const std::vector<double> before = x;
  numerics::filter_zero_phase(s, x);
  // -6 dB at the cut-off; away from the edges the transient is below the rounding.
  for (std::size_t i = 500; i < 1500; ++i)
    REQUIRE_THAT(x[i], WithinAbs(0.5 * before[i], 1e-12));
}

TEST_CASE("a constant passes a low-pass and vanishes in a high-pass", "[butterworth]") {
  std::vector<double> low(500, 3.7);
  numerics::filter_zero_phase(made(Pass::low, 4, 20.0, 1000.0), low);
  std::vector<double> high(500, 3.7);
  numerics::filter_zero_phase(made(Pass::high, 2, 30.0, 1000.0), high);
  for (std::size_t i = 0; i < 500; ++i) {
    REQUIRE_THAT(low[i], WithinAbs(3.7, 1e-12));
    REQUIRE_THAT(high[i], WithinAbs(0.0, 1e-12));
  }
}

TEST_CASE("zero phase: a time-reversed input gives the time-reversed output", "[butterworth]") {
  const auto s = made(Pass::high, 3, 15.0, 1000.0);
  std::vector<double> x = pulse_train(2000);
  std::vector<double> reversed(x.rbegin(), x.rend());
  numerics::filter_zero_phase(s, x);
  numerics::filter_zero_phase(s, reversed);
  std::reverse(reversed.begin(), reversed.end());
  // The transients of the ends differ; they are gone 400 samples (over 35 time constants) further in.
  for (std::size_t i = 400; i < 1600; ++i)
    REQUIRE_THAT(x[i], WithinAbs(reversed[i], 1e-12));
}

TEST_CASE("a symmetric pulse keeps its peak sample", "[butterworth]") {
  std::vector<double> x(1001);
  for (std::size_t i = 0; i < x.size(); ++i)
    x[i] = std::exp(-0.5 * std::pow((static_cast<double>(i) - 500.0) / 4.0, 2));
  for (const double cutoff : {20.0, 60.0, 150.0}) {
    std::vector<double> y = x;
    numerics::filter_zero_phase(made(Pass::low, 2, cutoff, 1000.0), y);
    CHECK(std::max_element(y.begin(), y.end()) - y.begin() == 500);
  }
}

TEST_CASE("one causal pass delays by what its phase says, which is why two are used", "[butterworth]") {
  // Group delay of a causal 30 Hz high-pass and 300 Hz low-pass at 1 kHz in samples: 2.7787 at 60 Hz and
  // 1.3516 at 100 Hz (SciPy 1.10.1: derivative of the phase of signal.sosfreqz).
  const double fs = 1000.0;
  auto band = made(Pass::high, 2, 30.0, fs);
  for (const Section& s : made(Pass::low, 2, 300.0, fs))
    band.push_back(s);
  const auto delay = [&](double f) {
    // Group delay of a narrow burst: centre of energy of the output minus that of the input.
    std::vector<double> x(4000);
    for (std::size_t i = 0; i < x.size(); ++i) {
      const double t = static_cast<double>(i) - 2000.0;
      x[i] = std::exp(-0.5 * std::pow(t / 300.0, 2)) * std::cos(2.0 * std::numbers::pi * f * t / fs);
    }
    numerics::filter_forward(band, x);
    double energy = 0.0;
    double moment = 0.0;
    for (std::size_t i = 0; i < x.size(); ++i) {
      energy += x[i] * x[i];
      moment += (static_cast<double>(i) - 2000.0) * x[i] * x[i];
    }
    return moment / energy;
  };
  // The burst has a width of 0.5 Hz, over which the delay bends by less than 0.001 samples.
  CHECK_THAT(delay(60.0), WithinAbs(2.7787, 1e-3));
  CHECK_THAT(delay(100.0), WithinAbs(1.3516, 1e-3));
}

TEST_CASE("a slow high-pass is padded over three time constants", "[butterworth]") {
  const auto s = made(Pass::high, 2, 0.5, 1000.0);
  // Second-order Butterworth: real part of the poles is w/sqrt(2), so tau = sqrt(2) / (2 pi 0.5 Hz) = 0.45 s.
  CHECK_THAT(static_cast<double>(numerics::settling_samples(s)), WithinAbs(3.0 * 450.2, 2.0));
}

TEST_CASE("a filter that cannot exist is refused with a reason", "[butterworth]") {
  for (const double cutoff : {0.0, -3.0, 500.0, 600.0, std::nan("")}) {
    const auto refused = butterworth(Pass::low, 2, Hertz(cutoff), Hertz(1000.0));
    REQUIRE_FALSE(refused.ok());
    CHECK(refused.error().code == ErrorCode::bad_usage);
    CHECK_FALSE(refused.error().remedy.empty());
  }
  CHECK_FALSE(butterworth(Pass::low, 0, Hertz(10.0), Hertz(1000.0)).ok());
  CHECK_FALSE(butterworth(Pass::high, 17, Hertz(10.0), Hertz(1000.0)).ok());
}

TEST_CASE("one sample or none is left alone", "[butterworth]") {
  const auto s = made(Pass::low, 2, 100.0, 1000.0);
  std::vector<double> none;
  numerics::filter_zero_phase(s, none);
  CHECK(none.empty());
  std::vector<double> one = {4.0};
  numerics::filter_zero_phase(s, one);
  CHECK(one[0] == 4.0);
  std::vector<double> two = {4.0, 4.0};
  numerics::filter_zero_phase(s, two);
  CHECK_THAT(two[1], WithinAbs(4.0, 1e-12));
}
