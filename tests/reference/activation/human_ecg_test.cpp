// Chronodrome, GPL-3.0-or-later.
// Human surface ECGs that ship inside Debian packages, read at test time by the packages' own readers. No
// animal electrogram is packaged anywhere; these hold the only annotated beats there are.
#include <algorithm>
#include <array>
#include <catch2/catch.hpp>
#include <cmath>
#include <complex>
#include <numbers>

#include "activation/compute.h"
#include "conditioning/conditioning.h"
#include "numerics/robust.h"
#include "support/channel_of_samples.h"
#include "support/python_samples.h"

using namespace chronodrome;
using Catch::Matchers::WithinAbs;
using recording::Lead;
using recording::Role;
using test_support::channel_of_samples;
using test_support::python_numbers;

namespace {

activation::ActivationSettings human() {
  activation::ActivationSettings settings;
  settings.conditioning.species = "human";
  return settings;
}

activation::ChannelActivations beats_of(const std::vector<double>& samples, double rate) {
  const auto result = activation::compute(channel_of_samples(samples, rate, Role::ecg), human());
  REQUIRE(result.ok());
  return *result;
}

std::vector<double> intervals_ms(const activation::ChannelActivations& found) {
  std::vector<double> intervals;
  for (std::size_t i = 1; i < found.marks.size(); ++i)
    intervals.push_back(in_milliseconds(found.marks[i].time - found.marks[i - 1].time));
  return intervals;
}

/// 12 leads at 1 kHz, 10 s: pydicom's test file waveform_ecg.dcm (package python3-pydicom, MIT licence).
/// `lead`: index of the channel. In millivolts.
std::vector<double> dicom_lead(int lead) {
  const auto samples =
      python_numbers("import os, pydicom, pydicom.data\n"
                     "folder = os.path.dirname(pydicom.data.__file__)\n"
                     "data = pydicom.dcmread(os.path.join(folder, \"test_files\", \"waveform_ecg.dcm\"))\n"
                     "array = data.waveform_array(0)\n"
                     "for value in array[:, " +
                     std::to_string(lead) + "]:\n    print(repr(float(value) / 1000.0))\n");
  REQUIRE(samples.size() == 10000);
  return samples;
}

/// Lead MLII at 360 Hz, 5 min: record 208 of the MIT-BIH Arrhythmia Database (Moody & Mark 2001; Goldberger
/// et al., Circulation 2000;101:e215) as it ships with SciPy (package python3-scipy). In millivolts.
std::vector<double> scipy_ecg() {
  const auto samples = python_numbers("import warnings\n"
                                      "warnings.simplefilter(\"ignore\")\n"
                                      "try:\n"
                                      "    from scipy.misc import electrocardiogram\n"
                                      "except ImportError:\n"
                                      "    from scipy.datasets import electrocardiogram\n"
                                      "for value in electrocardiogram():\n    print(repr(float(value)))\n");
  REQUIRE(samples.size() == 108000);
  // The documentation states mean and SD; five values stand for the order.
  REQUIRE_THAT(numerics::mean(samples), WithinAbs(-0.16510875, 1e-8));
  REQUIRE_THAT(samples[0], WithinAbs(-0.245, 1e-12));
  return samples;
}

/// Power at `hz` over that of its neighbourhood (2 to 4 Hz away), each the median over stretches of 20 s, for
/// the record has stretches full of artefacts (and in short ones the comb of the beats themselves shows).
double line_ratio(std::span<const double> samples, double rate, double hz) {
  const auto length = static_cast<std::size_t>(20.0 * rate);
  const auto power = [&](std::span<const double> part, double f) {
    const double mean = numerics::mean(part);
    std::complex<double> sum;
    for (std::size_t i = 0; i < part.size(); ++i) {
      const double t = static_cast<double>(i) / static_cast<double>(part.size());
      const double window = 0.5 - 0.5 * std::cos(2.0 * std::numbers::pi * t);
      sum += window * (part[i] - mean) *
             std::polar(1.0, -2.0 * std::numbers::pi * f * static_cast<double>(i) / rate);
    }
    return std::norm(sum);
  };
  std::vector<double> line;
  std::vector<double> beside;
  for (std::size_t at = 0; at + length <= samples.size(); at += length) {
    const auto part = samples.subspan(at, length);
    line.push_back(power(part, hz));
    beside.push_back(0.0);
    for (const double offset : {-4.0, -3.0, -2.0, 2.0, 3.0, 4.0})
      beside.back() += power(part, hz + offset) / 6.0;
  }
  return numerics::median(line) / numerics::median(beside);
}

} // namespace

TEST_CASE("the beats of an annotated 1 kHz ECG are found where the recorder saw them", "[reference]") {
  // Fiducial points that the recording device stored in the file, in samples; maxima of lead V5 lie -2 to +1
  // samples from them. The device's median RR interval is 982 ms.
  const std::array<double, 10> fiducials = {527, 1526, 2507, 3489, 4485, 5468, 6442, 7444, 8417, 9370};
  const auto found = beats_of(dicom_lead(10), 1000.0); // I II III aVR aVL aVF V1 V2 V3 V4 V5 V6
  REQUIRE(found.marks.size() == fiducials.size());
  for (std::size_t i = 0; i < fiducials.size(); ++i) {
    CHECK(found.marks[i].sample - fiducials[i] >= -2.5); // half a sample for the parabola
    CHECK(found.marks[i].sample - fiducials[i] <= 1.5);
    CHECK(found.marks[i].confidence > 0.8);
  }
  CHECK_THAT(numerics::median(intervals_ms(found)), WithinAbs(982.0, 1.5));
  CHECK_THAT(numerics::mean(intervals_ms(found)), WithinAbs(982.556, 0.5));
}

TEST_CASE("each of the twelve leads shows the same ten beats", "[reference]") {
  const std::array<double, 10> fiducials = {527, 1526, 2507, 3489, 4485, 5468, 6442, 7444, 8417, 9370};
  for (int lead = 0; lead < 12; ++lead) {
    INFO("lead " << lead);
    const auto found = beats_of(dicom_lead(lead), 1000.0);
    REQUIRE(found.marks.size() == fiducials.size());
    for (std::size_t i = 0; i < fiducials.size(); ++i)
      CHECK_THAT(found.marks[i].sample, WithinAbs(fiducials[i], 40.0)); // R or S of a QRS of 75 ms
  }
}

TEST_CASE("the first 16 s of MIT-BIH record 208 as SciPy ships it hold 32 sinus beats", "[reference]") {
  // SciPy 1.10.1 (find_peaks, prominence 1.2 mV) counts 32 R peaks with a median RR of 491.7 ms; at 0.8 mV it
  // takes the T wave at sample 1029 for another. SciPy's documentation says that premature ventricular beats
  // begin at 16 s. A burst of muscle lies at samples 440 to 540: the limits of take_out_wiggles and the 10 ms
  // mean of the human row were settled with this stretch in view, so that its count guards them and proves
  // nothing about other recordings.
  const auto ecg = scipy_ecg();
  const std::vector<double> first(ecg.begin(), ecg.begin() + 16 * 360);
  const auto found = beats_of(first, 360.0);
  CHECK(found.marks.size() == 32);
  // Peaks on the sampling grid of 2.8 ms there, between the samples here.
  CHECK_THAT(numerics::median(intervals_ms(found)), WithinAbs(491.7, 2.8));
}

TEST_CASE("the mains of MIT-BIH record 208 are taken out without digging a hole", "[reference]") {
  // The line at 60 Hz stands 137 times above its neighbourhood. A notch of Q 30 leaves a hole of 0.012;
  // masked regression in NumPy (blocks of 1 s, the best single frequency of 59.983 Hz, the steepest 12 % left
  // out) leaves 13, for beats of this record fall on multiples of the mains' period as often as not.
  const auto ecg = scipy_ecg();
  CHECK_THAT(line_ratio(ecg, 360.0, 60.0), WithinAbs(137.0, 1.0));
  std::vector<double> clean;
  const auto report = conditioning::condition(
      channel_of_samples(ecg, 360.0, Role::ecg), human().conditioning,
      [&](const conditioning::ConditionedBlock& block) {
        clean.insert(clean.end(),
                     block.timing.begin() + static_cast<std::ptrdiff_t>(block.core_first - block.first),
                     block.timing.begin() + static_cast<std::ptrdiff_t>(block.core_end - block.first));
      });
  REQUIRE(report.ok());
  CHECK_THAT(report->mains_hz, WithinAbs(60.0, 0.1));
  CHECK(report->hummed_share > 0.5);
  const double left = line_ratio(clean, 360.0, 60.0);
  CHECK(left > 0.2);
  CHECK(left < 13.0);
}
