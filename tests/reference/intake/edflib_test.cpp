// Chronodrome, GPL-3.0-or-later.
// EDF in both directions against EDFlib (T. van Beelen, version 1.23), an independent implementation of Kemp
// & Olivan 2003, doi:10.1016/S1388-2457(03)00123-8. EDFlib is not safe to use from two threads: these tests
// use one.
#include <catch2/catch.hpp>
#include <cmath>
#include <edflib.h>
#include <random>

#include "intake/reading_fixtures.h"

using namespace chronodrome;
using namespace chronodrome::intake;
using namespace chronodrome::intake::fixtures;
using Catch::Matchers::WithinAbs;
using Catch::Matchers::WithinRel;

namespace {

struct Lead {
  const char* label;
  const char* unit;
  int per_record;
  double physical_min, physical_max;
  int digital_min, digital_max;
};

const std::vector<Lead> kLeads = {{"RA", "mV", 1000, -5.0, 5.0, -32768, 32767},
                                  {"RV", "uV", 500, 3200.0, -3200.0, -2048, 2047}, // negative gain
                                  {"LVP", "mmHg", 200, -20.0, 250.0, 0, 4095},
                                  {"T", "mN", 57, 0.0, 60.5, -100, 30000}};
constexpr int kRecords = 12;

std::vector<int> digital_samples(const Lead& lead, std::uint64_t seed) {
  std::mt19937_64 random(seed);
  std::vector<int> samples(static_cast<std::size_t>(kRecords * lead.per_record));
  for (int& sample : samples)
    sample = lead.digital_min +
             static_cast<int>(random() % static_cast<std::uint64_t>(lead.digital_max - lead.digital_min + 1));
  samples[0] = lead.digital_min;
  samples[1] = lead.digital_max;
  return samples;
}

struct Mark {
  long long onset; // 100 us
  long long duration;
  const char* text;
};
const std::vector<Mark> kMarks = {{0, -1, "start"},
                                  {12'345, -1, "addition acetylcholine 3e-7 M"},
                                  {25'000, 15'000, "Sp\xC3\xBClung \xC2\xB5"},
                                  {119'999, -1, "last"}};

/// A file that EDFlib writes.
std::string written_by_edflib(double subsecond) {
  const std::string path = scratch_file("edflib.edf");
  const int handle =
      edfopen_file_writeonly(path.c_str(), EDFLIB_FILETYPE_EDFPLUS, static_cast<int>(kLeads.size()));
  REQUIRE(handle >= 0);
  for (int s = 0; s < static_cast<int>(kLeads.size()); ++s) {
    const Lead& lead = kLeads[static_cast<std::size_t>(s)];
    REQUIRE(edf_set_samplefrequency(handle, s, lead.per_record) == 0);
    REQUIRE(edf_set_physical_minimum(handle, s, lead.physical_min) == 0);
    REQUIRE(edf_set_physical_maximum(handle, s, lead.physical_max) == 0);
    REQUIRE(edf_set_digital_minimum(handle, s, lead.digital_min) == 0);
    REQUIRE(edf_set_digital_maximum(handle, s, lead.digital_max) == 0);
    REQUIRE(edf_set_label(handle, s, lead.label) == 0);
    REQUIRE(edf_set_physical_dimension(handle, s, lead.unit) == 0);
    REQUIRE(edf_set_prefilter(handle, s, "HP:0.1Hz LP:500Hz") == 0);
  }
  REQUIRE(edf_set_startdatetime(handle, 2026, 3, 4, 9, 30, 15) == 0);
  REQUIRE(edf_set_subsecond_starttime(handle, static_cast<int>(std::lround(subsecond * 1e7))) == 0);
  REQUIRE(edf_set_number_of_annotation_signals(handle, 2) == 0);
  std::vector<std::vector<int>> samples;
  for (std::size_t s = 0; s < kLeads.size(); ++s)
    samples.push_back(digital_samples(kLeads[s], s));
  for (int r = 0; r < kRecords; ++r) {
    for (std::size_t s = 0; s < kLeads.size(); ++s)
      REQUIRE(edfwrite_digital_samples(handle, samples[s].data() + r * kLeads[s].per_record) == 0);
  }
  for (const Mark& mark : kMarks)
    REQUIRE(edfwrite_annotation_utf8(handle, mark.onset, mark.duration, mark.text) == 0);
  REQUIRE(edfclose_file(handle) == 0);
  return path;
}

} // namespace

TEST_CASE("a file that EDFlib writes is read sample by sample and annotation by annotation",
          "[edf][reference]") {
  for (const double subsecond : {0.0, 0.2023}) {
    const auto read = read_recording(written_by_edflib(subsecond), in_memory());
    if (!read) FAIL(describe(read.error()));
    CAPTURE(all_warnings(*read));
    CHECK(read->warnings.empty());
    CHECK(read->files[0].kind == "edf+c");
    CHECK(read->clock_start == (subsecond == 0.0 ? "2026-03-04T09:30:15" : "2026-03-04T09:30:15.2023"));
    CHECK_THAT(read->file_time_of_zero.value(), WithinAbs(subsecond, 1e-9));
    REQUIRE(read->signals.size() == kLeads.size());
    for (std::size_t s = 0; s < kLeads.size(); ++s) {
      const Lead& lead = kLeads[s];
      const recording::Signal& signal = read->signals[s];
      CHECK(signal.source == lead.label);
      CHECK(signal.unit == lead.unit);
      CHECK(signal.prefilter == "HP:0.1Hz LP:500Hz");
      CHECK(signal.time_base.rate() == Hertz(lead.per_record));
      const auto samples = samples_of(signal);
      const auto digital = digital_samples(lead, s);
      REQUIRE(samples.size() == digital.size());
      const double gain = (lead.physical_max - lead.physical_min) / (lead.digital_max - lead.digital_min);
      for (std::size_t i = 0; i < samples.size(); ++i) {
        const double exact = lead.physical_min + (digital[i] - lead.digital_min) * gain;
        REQUIRE(std::abs(samples[i] - exact) <= 1e-12 * std::abs(gain) * 65536.0);
      }
    }
    REQUIRE(read->annotations.size() == kMarks.size());
    for (std::size_t i = 0; i < kMarks.size(); ++i) {
      CHECK_THAT(read->annotations[i].onset.value(),
                 WithinAbs(static_cast<double>(kMarks[i].onset) * 1e-4, 1e-9));
      CHECK(read->annotations[i].duration.has_value() == (kMarks[i].duration >= 0));
      if (read->annotations[i].duration)
        CHECK_THAT(read->annotations[i].duration->value(),
                   WithinAbs(static_cast<double>(kMarks[i].duration) * 1e-4, 1e-9));
      CHECK(read->annotations[i].text == kMarks[i].text);
    }
  }
}

TEST_CASE("EDFlib reads the EDF and EDF+ files that we write", "[edf][reference]") {
  for (const EdfKind kind : {EdfKind::plain, EdfKind::continuous}) {
    for (const double fraction : {0.0, 0.5}) {
      if (kind == EdfKind::plain && fraction != 0.0) continue;
      WrittenRecording written;
      written.clock_start = fraction == 0.0 ? "2026-03-04T09:30:15" : "2026-03-04T09:30:15.5";
      written.recording_text = "invented heart";
      std::mt19937_64 random(5);
      for (const Lead& lead : kLeads) {
        WrittenSignal signal{lead.label,        lead.unit, Hertz(lead.per_record), {}, lead.physical_min,
                             lead.physical_max, "LP:500Hz"};
        signal.digital_min = lead.digital_min;
        signal.digital_max = lead.digital_max;
        for (int i = 0; i < kRecords * lead.per_record; ++i) // a little beyond the rails, too
          signal.samples.push_back(lead.physical_min +
                                   (lead.physical_max - lead.physical_min) *
                                       (static_cast<double>(random() >> 11U) * 0x1p-53 * 1.1 - 0.05));
        written.signals.push_back(std::move(signal));
      }
      if (kind != EdfKind::plain) {
        for (const Mark& mark : kMarks) {
          WrittenAnnotation annotation{Seconds(static_cast<double>(mark.onset) * 1e-4), std::nullopt,
                                       mark.text};
          if (mark.duration >= 0) annotation.duration = Seconds(static_cast<double>(mark.duration) * 1e-4);
          written.annotations.push_back(std::move(annotation));
        }
      }
      const std::string path = scratch_file("ours.edf");
      REQUIRE(write_edf(path, written, kind).ok());

      edf_hdr_struct header;
      const int opened = edfopen_file_readonly(path.c_str(), &header, EDFLIB_READ_ALL_ANNOTATIONS);
      CAPTURE(header.filetype);
      REQUIRE(opened == 0);
      CHECK(header.filetype == (kind == EdfKind::plain ? EDFLIB_FILETYPE_EDF : EDFLIB_FILETYPE_EDFPLUS));
      CHECK(header.edfsignals == static_cast<int>(kLeads.size()));
      CHECK(header.file_duration == kRecords * EDFLIB_TIME_DIMENSION);
      CHECK(header.startdate_year == 2026);
      CHECK(header.startdate_month == 3);
      CHECK(header.startdate_day == 4);
      CHECK(header.starttime_second == 15);
      CHECK(header.starttime_subsecond == std::llround(fraction * 1e7));
      for (int s = 0; s < header.edfsignals; ++s) {
        const WrittenSignal& signal = written.signals[static_cast<std::size_t>(s)];
        const edf_param_struct& about = header.signalparam[s];
        CHECK(std::string(about.label).substr(0, signal.label.size()) == signal.label);
        CHECK(about.phys_min == signal.physical_min);
        CHECK(about.phys_max == signal.physical_max);
        REQUIRE(about.smp_in_file == static_cast<long long>(signal.samples.size()));
        std::vector<double> samples(signal.samples.size());
        REQUIRE(edfread_physical_samples(header.handle, s, static_cast<int>(samples.size()),
                                         samples.data()) == static_cast<int>(samples.size()));
        const double step =
            std::abs(signal.physical_max - signal.physical_min) / (signal.digital_max - signal.digital_min);
        const double low = std::min(signal.physical_min, signal.physical_max);
        const double high = std::max(signal.physical_min, signal.physical_max);
        for (std::size_t i = 0; i < samples.size(); ++i) // half a step is the nearest digital value
          REQUIRE(std::abs(samples[i] - std::clamp(signal.samples[i], low, high)) <= 0.5000001 * step);
      }
      REQUIRE(header.annotations_in_file == static_cast<long long>(written.annotations.size()));
      for (int i = 0; i < static_cast<int>(written.annotations.size()); ++i) {
        const WrittenAnnotation& expected = written.annotations[static_cast<std::size_t>(i)];
        edf_annotation_struct found;
        REQUIRE(edf_get_annotation(header.handle, i, &found) == 0);
        CHECK(found.onset == std::llround(expected.onset.value() * 1e7));
        CHECK(found.duration_l ==
              (expected.duration ? std::llround(expected.duration->value() * 1e7) : -10'000'000LL));
        CHECK(std::string(found.annotation) == expected.text);
      }
      CHECK(edfclose_file(header.handle) == 0);
    }
  }
}

TEST_CASE("EDFlib and our reader read the same values from the same file", "[edf][reference]") {
  const std::string path = written_by_edflib(0.0);
  const auto read = read_recording(path, in_memory());
  REQUIRE(read.ok());
  edf_hdr_struct header;
  REQUIRE(edfopen_file_readonly(path.c_str(), &header, EDFLIB_DO_NOT_READ_ANNOTATIONS) == 0);
  for (int s = 0; s < header.edfsignals; ++s) {
    const recording::Signal& signal = read->signals[static_cast<std::size_t>(s)];
    std::vector<double> theirs(signal.samples->size());
    REQUIRE(edfread_physical_samples(header.handle, s, static_cast<int>(theirs.size()), theirs.data()) ==
            static_cast<int>(theirs.size()));
    const auto ours = samples_of(signal);
    for (std::size_t i = 0; i < ours.size(); ++i) // the same line, rounded in another order
      REQUIRE(std::abs(ours[i] - theirs[i]) <= 1e-11 * signal.resolution * 65536.0);
  }
  CHECK(edfclose_file(header.handle) == 0);
}
