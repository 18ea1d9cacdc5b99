// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <compare>

namespace chronodrome {

/// A number with a unit in its type: seconds cannot be added to volts, and a plain double becomes a quantity
/// only by saying so. Eight bytes, passed by value. One scale a kind inside core: SI units, except where the
/// trade's unit is the scale (beats/min, mmHg, mL/min).
template <class Unit>
class Quantity {
public:
  constexpr Quantity() = default;
  explicit constexpr Quantity(double value) : value_(value) {}
  [[nodiscard]] constexpr double value() const { return value_; }

  constexpr Quantity operator-() const { return Quantity(-value_); }
  constexpr Quantity& operator+=(Quantity other) { return value_ += other.value_, *this; }
  constexpr Quantity& operator-=(Quantity other) { return value_ -= other.value_, *this; }
  friend constexpr Quantity operator+(Quantity a, Quantity b) { return Quantity(a.value_ + b.value_); }
  friend constexpr Quantity operator-(Quantity a, Quantity b) { return Quantity(a.value_ - b.value_); }
  friend constexpr Quantity operator*(Quantity a, double k) { return Quantity(a.value_ * k); }
  friend constexpr Quantity operator*(double k, Quantity a) { return Quantity(a.value_ * k); }
  friend constexpr Quantity operator/(Quantity a, double k) { return Quantity(a.value_ / k); }
  friend constexpr double operator/(Quantity a, Quantity b) { return a.value_ / b.value_; }
  friend constexpr auto operator<=>(Quantity, Quantity) = default;

private:
  double value_ = 0.0;
};

using Seconds = Quantity<struct SecondsUnit>;
using Hertz = Quantity<struct HertzUnit>;
using BeatsPerMinute = Quantity<struct BeatsPerMinuteUnit>;
using Volts = Quantity<struct VoltsUnit>;
using Molar = Quantity<struct MolarUnit>;       ///< mol/L
using LogMolar = Quantity<struct LogMolarUnit>; ///< log10 of (concentration / (1 mol/L))
using Litres = Quantity<struct LitresUnit>;
using Metres = Quantity<struct MetresUnit>;
using MetresPerSecond = Quantity<struct MetresPerSecondUnit>;
using Newtons = Quantity<struct NewtonsUnit>;
using MillimetresOfMercury = Quantity<struct MillimetresOfMercuryUnit>;
using MillilitresPerMinute = Quantity<struct MillilitresPerMinuteUnit>;

constexpr Seconds milliseconds(double ms) {
  return Seconds(ms * 1e-3);
}
constexpr double in_milliseconds(Seconds t) {
  return t.value() * 1e3;
}
constexpr Seconds minutes(double min) {
  return Seconds(min * 60.0);
}
constexpr Molar nanomolar(double c) {
  return Molar(c * 1e-9);
}
constexpr Molar micromolar(double c) {
  return Molar(c * 1e-6);
}
constexpr Metres millimetres(double mm) {
  return Metres(mm * 1e-3);
}
constexpr double in_millimetres(Metres d) {
  return d.value() * 1e3;
}
constexpr Seconds period_of(Hertz f) {
  return Seconds(1.0 / f.value());
}
/// Rate whose cycle length is `cycle`. Requires: cycle > 0.
constexpr BeatsPerMinute rate_of(Seconds cycle) {
  return BeatsPerMinute(60.0 / cycle.value());
}

namespace literals {
constexpr Seconds operator""_s(long double v) {
  return Seconds(static_cast<double>(v));
}
constexpr Seconds operator""_ms(long double v) {
  return milliseconds(static_cast<double>(v));
}
constexpr Hertz operator""_Hz(long double v) {
  return Hertz(static_cast<double>(v));
}
constexpr Molar operator""_M(long double v) {
  return Molar(static_cast<double>(v));
}
constexpr Molar operator""_nM(long double v) {
  return nanomolar(static_cast<double>(v));
}
} // namespace literals

} // namespace chronodrome
