// Chronodrome, GPL-3.0-or-later.
// An atrial and a ventricular electrode that both see both chambers.
#include "activation/far_field.h"

#include <algorithm>
#include <catch2/catch.hpp>
#include <cmath>
#include <memory>
#include <string>

#include "activation/compute.h"
#include "support/beat_matching.h"
#include "support/channel_of_samples.h"
#include "support/electrogram_waves.h"

using namespace chronodrome;
using activation::ActivationSettings;
using activation::ChannelActivations;
using recording::Lead;
using recording::Role;
using test_support::channel_of_samples;
using test_support::match;
using test_support::NormalNoise;
using test_support::Trace;

namespace {

struct Heart {
  std::vector<double> atrial, ventricular;
};

struct View {
  double far_on_atrium = 0.6;    ///< ventricular far field over atrial amplitude
  double far_on_ventricle = 0.3; ///< atrial far field over ventricular amplitude
  double far_width = 6e-3;
  double near_width = 2e-3;
  double noise = 0.02;
};

struct Seen {
  ChannelActivations atrial, ventricular;
};

Seen look(const Heart& heart, double seconds, const View& view = {}, Lead lead = Lead::bipolar) {
  Trace ra(seconds, 1000.0);
  Trace rv(seconds, 1000.0);
  for (const double t : heart.atrial) {
    ra.add_front(t, 1.0, view.near_width);
    rv.add_front(t + 4e-3, 2.0 * view.far_on_ventricle, view.far_width);
  }
  for (const double t : heart.ventricular) {
    rv.add_front(t, 2.0, view.near_width);
    ra.add_front(t + 6e-3, view.far_on_atrium, view.far_width);
  }
  ra.add_noise(view.noise, 71);
  rv.add_noise(view.noise, 72);
  const std::vector<recording::Channel> channels = {
      channel_of_samples(ra.samples, 1000.0, Role::atrial, lead, {}, "RA"),
      channel_of_samples(rv.samples, 1000.0, Role::ventricular, lead, {}, "RV")};
  const auto results = activation::compute_all(channels, {}, 1);
  return {*results[0], *results[1]};
}

/// Marks within 12 ms of the truth, for a far field under a beat can pull a bipolar peak.
void check_exact(const ChannelActivations& found, const std::vector<double>& truth) {
  const auto matched = match(found.marks, truth, 0.012);
  INFO(found.channel);
  CHECK(matched.missed == 0);
  CHECK(matched.false_beats == 0);
}

} // namespace

TEST_CASE("a ventricular far field of 60 % is not counted in 1:1 conduction", "[far_field]") {
  const auto lead = GENERATE(Lead::bipolar, Lead::unipolar);
  View view;
  view.far_width = GENERATE(4e-3, 6e-3, 10e-3);
  Heart heart;
  for (double t = 0.3; t < 59.3; t += 0.2503) {
    heart.atrial.push_back(t);
    heart.ventricular.push_back(t + 0.09); // behind the refractory time of the atrium
  }
  const Seen seen = look(heart, 60.0, view, lead);
  check_exact(seen.atrial, heart.atrial);
  check_exact(seen.ventricular, heart.ventricular);
  CHECK(std::any_of(seen.atrial.warnings.begin(), seen.atrial.warnings.end(), [](const Warning& w) {
          return w.what.find("far field") != std::string::npos;
        }) == (view.far_width < 10e-3 || !seen.atrial.warnings.empty()));
}

TEST_CASE("block changes the far field's place and nothing else", "[far_field]") {
  Heart heart;
  for (std::size_t i = 0; i < 400; ++i) {
    const double t = 0.3 + 0.2103 * static_cast<double>(i);
    heart.atrial.push_back(t);
    if (i < 100 || i % 2 == 0) heart.ventricular.push_back(t + 0.09);
  }
  const Seen seen = look(heart, 86.0);
  check_exact(seen.atrial, heart.atrial);
  check_exact(seen.ventricular, heart.ventricular);
}

TEST_CASE("under dissociation atrial beats are neither blanked nor doubled", "[far_field]") {
  // Every phase between the two occurs: beats that fall together with a far field must stay.
  Heart heart;
  for (double t = 0.3; t < 119.0; t += 0.2003)
    heart.atrial.push_back(t);
  for (double t = 0.45; t < 119.0; t += 0.4717)
    heart.ventricular.push_back(t);
  const Seen seen = look(heart, 120.0);
  const auto atrial = match(seen.atrial.marks, heart.atrial, 0.012);
  CHECK(atrial.missed == 0);
  // Fewer than 0.5 % of the ventricular beats may be counted.
  CHECK(static_cast<double>(atrial.false_beats) < 0.005 * static_cast<double>(heart.ventricular.size()));
  const auto ventricular = match(seen.ventricular.marks, heart.ventricular, 0.012);
  CHECK(ventricular.missed == 0);
  CHECK(static_cast<double>(ventricular.false_beats) < 0.005 * static_cast<double>(heart.atrial.size()));
}

TEST_CASE("retrograde atrial beats close behind the ventricle are kept", "[far_field]") {
  Heart heart;
  for (double t = 0.3; t < 59.3; t += 0.3003) {
    heart.ventricular.push_back(t);
    heart.atrial.push_back(t + 0.03); // inside any blanking window
  }
  const Seen seen = look(heart, 60.0);
  check_exact(seen.atrial, heart.atrial);
  check_exact(seen.ventricular, heart.ventricular);
}

TEST_CASE("a ventricle that stands still is not kept alive by the atrium", "[far_field]") {
  // Conducted for 40 s; then no ventricular beat for 15 s, or to the end of two minutes.
  const double until = GENERATE(55.0, 200.0);
  Heart heart;
  for (double t = 0.3; t < 119.0; t += 0.2103) {
    heart.atrial.push_back(t);
    if (t < 40.0 || t > until) heart.ventricular.push_back(t + 0.06);
  }
  const auto lead = GENERATE(Lead::bipolar, Lead::unipolar);
  const Seen seen = look(heart, 120.0, {}, lead);
  check_exact(seen.atrial, heart.atrial);
  check_exact(seen.ventricular, heart.ventricular);
}

TEST_CASE("an atrium that stands still under an escape rhythm has no beats", "[far_field]") {
  Heart heart;
  for (double t = 0.3; t < 30.0; t += 0.2503) {
    heart.atrial.push_back(t);
    heart.ventricular.push_back(t + 0.07);
  }
  for (double t = 31.0; t < 119.0; t += 0.7)
    heart.ventricular.push_back(t);
  const Seen seen = look(heart, 120.0);
  check_exact(seen.atrial, heart.atrial);
  check_exact(seen.ventricular, heart.ventricular);
}

TEST_CASE("a far field is known by the own beats before the standstill", "[far_field]") {
  // Longer than the 25 s over which slopes are compared otherwise.
  View view;
  view.noise = 0.01; // at 0.02 noise alone is as steep as the broadest of these waves
  view.far_on_atrium = GENERATE(0.25, 0.4);
  view.far_width = GENERATE(4e-3, 8e-3, 12e-3);
  const auto lead = GENERATE(Lead::bipolar, Lead::unipolar);
  Heart heart;
  for (double t = 0.3; t < 60.0; t += 0.2703) {
    heart.atrial.push_back(t);
    heart.ventricular.push_back(t + 0.07);
  }
  for (double t = 61.5; t < 199.0; t += 1.6)
    heart.ventricular.push_back(t);
  const Seen seen = look(heart, 200.0, view, lead);
  check_exact(seen.atrial, heart.atrial);
  check_exact(seen.ventricular, heart.ventricular);
}

TEST_CASE("conducted and retrograde beats stay when they slowly lose nine tenths of their size",
          "[far_field]") {
  // 70 ms before the ventricle, or 20 ms behind it.
  const double delay = GENERATE(0.07, -0.02);
  Trace ra(200.0, 1000.0);
  Trace rv(200.0, 1000.0);
  Heart heart;
  for (double t = 0.3; t < 199.0; t += 0.3003) {
    heart.atrial.push_back(t);
    heart.ventricular.push_back(t + delay);
    ra.add_front(t, t < 60.0 ? 1.0 : std::max(0.1, std::exp((60.0 - t) / 40.0)), 2e-3);
    rv.add_front(t + delay, 2.0, 2e-3);
  }
  ra.add_noise(0.005, 5);
  rv.add_noise(0.005, 6);
  const std::vector<recording::Channel> channels = {
      channel_of_samples(ra.samples, 1000.0, Role::atrial, Lead::bipolar, {}, "RA"),
      channel_of_samples(rv.samples, 1000.0, Role::ventricular, Lead::bipolar, {}, "RV")};
  const auto results = activation::compute_all(channels, {}, 1);
  check_exact(*results[0], heart.atrial);
  check_exact(*results[1], heart.ventricular);
}

TEST_CASE("an inverted broad premature beat beside an atrial one is no far field", "[far_field]") {
  Heart heart;
  Trace ra(60.0, 1000.0);
  Trace rv(60.0, 1000.0);
  for (int k = 0; k < 200; ++k) {
    const double t = 0.3 + 0.29 * k;
    ra.add_front(t, 1.0, 2e-3);
    heart.atrial.push_back(t);
    const bool premature = k == 100;
    heart.ventricular.push_back(premature ? t + 0.005 : t + 0.07);
    if (premature) {
      // Steep rise, slow return: the fall alone is a tenth of the usual one.
      rv.add(heart.ventricular.back(), 0.1, [&](double at) {
        const double u = at - heart.ventricular.back();
        return 2.0 * (1.0 + std::tanh(u / 4e-3)) * std::exp(-std::max(u, 0.0) / 0.02);
      });
    } else {
      rv.add_front(t + 0.07, 2.0, 2e-3);
    }
  }
  ra.add_noise(0.01, 8);
  rv.add_noise(0.01, 9);
  const std::vector<recording::Channel> channels = {
      channel_of_samples(ra.samples, 1000.0, Role::atrial, Lead::bipolar, {}, "RA"),
      channel_of_samples(rv.samples, 1000.0, Role::ventricular, Lead::unipolar, {}, "RV")};
  const auto results = activation::compute_all(channels, {}, 1);
  // The fall of the premature wave, which is what is marked, lies behind its rise.
  const auto matched = match(results[1]->marks, heart.ventricular, 0.025);
  CHECK(matched.missed == 0);
  CHECK(matched.false_beats == 0);
}

TEST_CASE("an atrial and a ventricular channel with the same beats are warned of", "[far_field]") {
  const auto warned = [](const ChannelActivations& channel, const std::string& of) {
    return std::any_of(channel.warnings.begin(), channel.warnings.end(),
                       [&](const Warning& w) { return w.what.find(of) != std::string::npos; });
  };
  Trace both(60.0, 1000.0);
  Trace ventricle(60.0, 1000.0);
  for (double t = 0.3; t < 59.0; t += 0.3003) {
    both.add_front(t, 1.0, 2e-3);
    both.add_front(t + 0.1, 2.0, 2e-3);
    ventricle.add_front(t + 0.1, 2.0, 2e-3);
  }
  both.add_noise(0.01, 3);
  ventricle.add_noise(0.01, 4);
  auto atrial = channel_of_samples(both.samples, 1000.0, Role::atrial, Lead::bipolar, {}, "RA");
  auto shared = atrial;
  shared.role = Role::ventricular;
  shared.label = "RV";
  for (const auto& result : activation::compute_all(std::vector{atrial, shared}, {}, 1))
    CHECK(warned(*result, "RA and RV are one lead"));
  const auto own = channel_of_samples(ventricle.samples, 1000.0, Role::ventricular, Lead::bipolar, {}, "V");
  auto blind = own;
  blind.role = Role::atrial;
  blind.label = "A";
  blind.recording = std::make_shared<recording::Recording>(*own.recording); // other signal, same beats
  for (const auto& result : activation::compute_all(std::vector{blind, own}, {}, 1))
    CHECK(warned(*result, "% of the marks of A coincide with marks of V"));
  // A pair with beats of its own each is left alone.
  Heart heart;
  for (double t = 0.3; t < 59.0; t += 0.3003) {
    heart.atrial.push_back(t);
    heart.ventricular.push_back(t + 0.07);
  }
  const Seen seen = look(heart, 60.0);
  CHECK_FALSE(warned(seen.atrial, "coincide"));
  CHECK_FALSE(warned(seen.ventricular, "one lead"));
}

TEST_CASE("junctional beats of both chambers at once are all kept", "[far_field]") {
  Heart heart;
  for (double t = 0.3; t < 59.3; t += 0.3503) {
    heart.ventricular.push_back(t);
    heart.atrial.push_back(t + 0.01);
  }
  const Seen seen = look(heart, 60.0);
  CHECK(match(seen.atrial.marks, heart.atrial, 0.012).missed == 0);
  CHECK(match(seen.ventricular.marks, heart.ventricular, 0.012).missed == 0);
}

TEST_CASE("a beat that loses contact is not taken for a far field", "[far_field]") {
  Trace ra(60.0, 1000.0);
  std::vector<double> truth;
  for (double t = 0.3; t < 59.5; t += 0.2503) {
    truth.push_back(t);
    ra.add_front(t, t < 30.0 ? 1.0 : 0.2, 2e-3);
  }
  ra.add_noise(0.005, 1);
  const auto found =
      activation::compute(channel_of_samples(ra.samples, 1000.0, Role::atrial, Lead::unipolar), {});
  const auto matched = match(found->marks, truth, 0.010);
  CHECK(matched.false_beats == 0);
  CHECK(matched.missed <= 10); // the first 2 s, while the larger beats still set the local level
}

TEST_CASE("electrodes of one chamber do not judge each other", "[far_field]") {
  Trace near(60.0, 1000.0);
  Trace weak(60.0, 1000.0);
  for (double t = 0.3; t < 59.5; t += 0.3) {
    near.add_front(t, 1.0, 2e-3);
    weak.add_front(t + 5e-3, 0.3, 6e-3);
  }
  near.add_noise(0.01, 1);
  weak.add_noise(0.01, 2);
  const std::vector<recording::Channel> channels = {
      channel_of_samples(near.samples, 1000.0, Role::ventricular, Lead::unipolar, {}, "A"),
      channel_of_samples(weak.samples, 1000.0, Role::ventricular, Lead::unipolar, {}, "B")};
  const auto results = activation::compute_all(channels, {}, 1);
  CHECK(results[0]->marks.size() == 198);
  CHECK(results[1]->marks.size() == 198);
  // Both see each beat: the quality says so.
  CHECK(results[0]->quality[2].index >= results[1]->quality[2].index);
}

TEST_CASE("a His deflection stands between the far fields of both chambers", "[far_field]") {
  Trace his(60.0, 2000.0);
  Trace ra(60.0, 2000.0);
  Trace rv(60.0, 2000.0);
  std::vector<double> truth;
  for (double t = 0.3; t < 59.0; t += 0.4003) {
    ra.add_front(t, 1.0, 2e-3);
    rv.add_front(t + 0.12, 1.0, 2e-3);
    his.add_front(t, 0.2, 4e-3);
    his.add_front(t + 0.09, 0.2, 1e-3);
    his.add_front(t + 0.12, 0.3, 4e-3);
    truth.push_back(t + 0.09);
  }
  for (auto* trace : {&his, &ra, &rv})
    trace->add_noise(0.003, 9);
  ActivationSettings settings;
  settings.refractory_ventricular = milliseconds(25.0); // H and V on one lead lie closer than two beats
  const std::vector<recording::Channel> channels = {
      channel_of_samples(ra.samples, 2000.0, Role::atrial, Lead::bipolar, {}, "RA"),
      channel_of_samples(his.samples, 2000.0, Role::his, Lead::unipolar, {}, "H"),
      channel_of_samples(rv.samples, 2000.0, Role::ventricular, Lead::bipolar, {}, "RV")};
  const auto results = activation::compute_all(channels, settings, 1);
  const auto matched = match(results[1]->marks, truth, 0.005);
  CHECK(matched.missed == 0);
  CHECK(matched.false_beats == 0);
}

TEST_CASE("the order of the trains does not matter", "[far_field]") {
  activation::CandidateTrain a, v;
  a.role = Role::atrial;
  a.lead = Lead::unipolar;
  v.role = Role::ventricular;
  v.lead = Lead::unipolar;
  const auto candidate = [](double t, float fall) {
    activation::Candidate c;
    c.time = Seconds(t);
    c.fall = fall;
    c.amplitude = 1.0F;
    return c;
  };
  for (int k = 0; k < 30; ++k) {
    a.candidates.push_back(candidate(0.3 * k, 400.0F));
    a.candidates.push_back(candidate(0.3 * k + 0.11, 80.0F)); // far field of the ventricle
    v.candidates.push_back(candidate(0.3 * k + 0.1, 400.0F));
  }
  a.candidates.push_back(candidate(9.3, 80.0F)); // weak, but no ventricular beat there and nothing behind it
  std::vector<activation::CandidateTrain> one = {a, v};
  std::vector<activation::CandidateTrain> other = {v, a};
  activation::reject_far_field(one, milliseconds(30.0), {});
  activation::reject_far_field(other, milliseconds(30.0), {});
  CHECK(one[0].candidates.size() == 31);
  CHECK(one[0].rejected.size() == 30);
  CHECK(one[1].candidates.size() == 30);
  REQUIRE(other[1].candidates.size() == one[0].candidates.size());
  for (std::size_t i = 0; i < one[0].candidates.size(); ++i)
    CHECK(other[1].candidates[i].time == one[0].candidates[i].time);
}
