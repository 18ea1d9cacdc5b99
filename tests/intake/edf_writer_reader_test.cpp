// Chronodrome, GPL-3.0-or-later.
// What write_edf writes, read_recording reads. The independent check of both stands in
// tests/reference/intake.
#include <catch2/catch.hpp>
#include <cmath>

#include "reading_fixtures.h"

using namespace chronodrome;
using namespace chronodrome::intake;
using namespace chronodrome::intake::fixtures;
using Catch::Matchers::WithinAbs;
using Catch::Matchers::WithinRel;

namespace {

std::vector<double> wave(std::size_t count, double amplitude) {
  std::vector<double> samples(count);
  for (std::size_t i = 0; i < count; ++i)
    samples[i] = amplitude * std::sin(0.01 * static_cast<double>(i * i % 1000));
  return samples;
}

WrittenRecording heart() {
  WrittenRecording written;
  written.clock_start = "2026-03-04T09:30:00";
  written.recording_text = "invented heart 3";
  written.signals.push_back({"RA", "mV", Hertz(1000.0), wave(10'500, 3.0), 0.0, 0.0, "HP:0.1Hz LP:500Hz"});
  written.signals.push_back({"LVP", "mmHg", Hertz(200.0), wave(2100, 120.0), -150.0, 200.0, ""});
  written.annotations.push_back({Seconds(2.5), std::nullopt, "addition acetylcholine 3e-7 M"});
  written.annotations.push_back({Seconds(4.0), Seconds(1.25), "Spülung \xC2\xB5"});
  return written;
}

recording::Recording good(const std::string& bytes) {
  REQUIRE_FALSE(bytes.empty());
  auto read = read_bytes(bytes, "heart.edf");
  if (!read) FAIL(describe(read.error()));
  return *std::move(read);
}

} // namespace

TEST_CASE("signals keep their rates, values and units through EDF", "[edf]") {
  for (const EdfKind kind : {EdfKind::plain, EdfKind::continuous, EdfKind::discontinuous}) {
    WrittenRecording written = heart();
    if (kind == EdfKind::plain) written.annotations.clear();
    const auto read = good(edf_bytes(written, kind, "round.edf"));
    CHECK(read.files.at(0).kind == (kind == EdfKind::plain        ? "edf"
                                    : kind == EdfKind::continuous ? "edf+c"
                                                                  : "edf+d"));
    CHECK(read.clock_start == "2026-03-04T09:30:00");
    REQUIRE(read.signals.size() == 2);
    for (std::size_t s = 0; s < 2; ++s) {
      const WrittenSignal& before = written.signals[s];
      const recording::Signal& after = read.signals[s];
      CHECK(after.source == before.label);
      CHECK(after.unit == before.unit);
      CHECK(after.prefilter == before.prefilter);
      CHECK(after.time_base.rate() == before.rate);
      CHECK(after.time_base.runs().size() == 1);
      const auto samples = samples_of(after);
      REQUIRE(samples.size() == std::size_t(11 * before.rate.value())); // whole records
      REQUIRE(after.rails.has_value());
      CHECK_THAT(after.resolution, WithinRel(((*after.rails)[1] - (*after.rails)[0]) / 65535.0, 1e-12));
      for (std::size_t i = 0; i < before.samples.size();
           ++i) // half a step, and the rounding of its arithmetic
        REQUIRE(std::abs(samples[i] - before.samples[i]) <= 0.5000001 * after.resolution);
      for (std::size_t i = before.samples.size(); i < samples.size(); ++i)
        REQUIRE(samples[i] == samples[before.samples.size() - 1]); // padded with the last value
    }
    CHECK(read.duration == Seconds(11.0));
  }
}

TEST_CASE("annotations keep onset, duration and text through EDF+", "[edf]") {
  const auto read = good(edf_bytes(heart(), EdfKind::continuous, "notes.edf"));
  REQUIRE(read.annotations.size() == 2);
  CHECK(read.annotations[0].onset == Seconds(2.5));
  CHECK_FALSE(read.annotations[0].duration.has_value());
  CHECK(read.annotations[0].text == "addition acetylcholine 3e-7 M");
  CHECK(read.annotations[1].duration == Seconds(1.25));
  CHECK(read.annotations[1].text == "Spülung \xC2\xB5");
  CHECK(read.warnings.empty());
}

TEST_CASE("no annotation is lost, however many stand in one record, or outside", "[edf]") {
  WrittenRecording written = heart();
  written.annotations.clear();
  for (int i = 0; i < 500; ++i)
    written.annotations.push_back({Seconds(3.0 + i * 0.001), std::nullopt, "mark " + std::to_string(i)});
  written.annotations.push_back({Seconds(-1.5), std::nullopt, "before"});
  written.annotations.push_back({Seconds(99.0), std::nullopt, "after"});
  const auto read = good(edf_bytes(written, EdfKind::continuous, "many.edf"));
  REQUIRE(read.annotations.size() == 502);
  CHECK(read.annotations.front().text == "before");
  CHECK(read.annotations.front().onset == Seconds(-1.5));
  CHECK(read.annotations[250].text == "mark 249");
  CHECK_THAT(read.annotations[250].onset.value(), WithinAbs(3.249, 1e-9));
  CHECK(read.annotations.back().text == "after");
  CHECK(has_warning(read, "2 annotations lie before the first or behind the last sample"));
}

TEST_CASE("a start within a second is applied once, to samples and annotations alike", "[edf]") {
  WrittenRecording written = heart();
  written.clock_start = "2026-03-04T09:30:00.202312";
  written.record_duration = Seconds(0.1);
  written.signals[0].samples = wave(900'000, 3.0); // 9000 records
  written.signals[1].samples = wave(180'000, 100.0);
  written.annotations = {{Seconds(850.5), std::nullopt, "late mark"}};
  const auto read = good(edf_bytes(written, EdfKind::continuous, "subsecond.edf"));
  CHECK(read.clock_start == "2026-03-04T09:30:00.202312");
  CHECK_THAT(read.file_time_of_zero.value(), WithinAbs(0.202312, 1e-12));
  REQUIRE(read.signals[0].time_base.runs().size() == 1);
  CHECK(read.signals[0].time_base.start() == Seconds(0.0));
  REQUIRE(read.annotations.size() == 1);
  CHECK_THAT(read.annotations[0].onset.value(),
             WithinAbs(850.5, 1e-6)); // a tenth of a microsecond is written
}

TEST_CASE("records left out are gaps at their true times", "[edf]") {
  WrittenRecording written = heart();
  written.left_out = {{Seconds(3.0), Seconds(5.0)},
                      {Seconds(7.5), Seconds(9.2)}}; // 7.5 to 9.2 holds one record
  const auto read = good(edf_bytes(written, EdfKind::discontinuous, "gaps.edf"));
  for (const auto& signal : read.signals) {
    const auto gaps = signal.time_base.gaps();
    REQUIRE(gaps.size() == 2);
    CHECK_THAT(gaps[0].start.value(), WithinAbs(3.0, 1e-9));
    CHECK_THAT(gaps[0].end.value(), WithinAbs(5.0, 1e-9));
    CHECK_THAT(gaps[1].start.value(), WithinAbs(8.0, 1e-9));
    CHECK_THAT(gaps[1].end.value(), WithinAbs(9.0, 1e-9));
  }
  const auto samples = samples_of(read, "RA");
  const auto position = read.signals[0].time_base.position_at(Seconds(6.5));
  REQUIRE(position.has_value());
  CHECK_THAT(samples[static_cast<std::size_t>(*position + 0.5)],
             WithinAbs(written.signals[0].samples[6500], read.signals[0].resolution));
  REQUIRE(read.annotations.size() == 2); // one of them lay in the gap
  CHECK(read.annotations[1].onset == Seconds(4.0));
  CHECK(has_warning(read, "a gap of 2 s before 5 s"));
}

TEST_CASE("values go to the nearest step and clip at the rails", "[edf]") {
  WrittenRecording written;
  WrittenSignal signal{"A",  "mV", Hertz(10.0), {-5.0, -2.0, -0.26, -0.24, 0.0, 0.24, 0.26, 1.75, 9.0, 0.0},
                       -2.0, 1.75, ""};
  signal.digital_min = -4;
  signal.digital_max = 3; // steps of 3.75 / 7
  written.signals = {signal};
  const auto samples = samples_of(good(edf_bytes(written, EdfKind::plain, "rails.edf")), "A");
  const double step = 3.75 / 7.0;
  REQUIRE(samples.size() == 10);
  CHECK(samples[0] == -2.0);
  CHECK(samples[1] == -2.0);
  CHECK_THAT(samples[2], WithinAbs(-2.0 + 3 * step, 1e-12)); // (-0.26 + 2) / step = 3.25
  CHECK_THAT(samples[3], WithinAbs(-2.0 + 3 * step, 1e-12)); // 3.29
  CHECK_THAT(samples[4], WithinAbs(-2.0 + 4 * step, 1e-12)); // 3.73
  CHECK_THAT(samples[7], WithinAbs(1.75, 1e-12));
  CHECK_THAT(samples[8], WithinAbs(1.75, 1e-12));
}

TEST_CASE("a negative gain is kept as it is written", "[edf]") {
  WrittenRecording written;
  written.signals.push_back({"A", "mV", Hertz(4.0), {-1.0, 0.5, 0.75, 1.0}, 1.0, -1.0, ""});
  const auto read = good(edf_bytes(written, EdfKind::plain, "negative.edf"));
  const auto samples = samples_of(read, "A");
  CHECK(samples[0] == -1.0);
  CHECK(samples[3] == 1.0);
  CHECK_THAT(samples[1], WithinAbs(0.5, 2.0 / 65535.0));
  REQUIRE(read.signals[0].rails.has_value());
  CHECK((*read.signals[0].rails)[0] == -1.0);
  CHECK((*read.signals[0].rails)[1] == 1.0);
}

TEST_CASE("rates that are no whole numbers keep their exact ratio", "[edf]") {
  WrittenRecording written;
  written.record_duration = Seconds(0.9980469);
  written.signals.push_back({"A", "mV", Hertz(512.0 / 0.9980469), wave(5120, 1.0), 0.0, 0.0, ""});
  const auto read = good(edf_bytes(written, EdfKind::continuous, "ratio.edf"));
  CHECK(read.signals[0].time_base.rate() == Hertz(512.0 / 0.9980469));
  CHECK(read.signals[0].time_base.runs().size() == 1);
}

TEST_CASE("an unknown start stays unknown, and annotations may stand alone", "[edf]") {
  WrittenRecording written = heart();
  written.clock_start.clear();
  CHECK_FALSE(good(edf_bytes(written, EdfKind::continuous, "unknown.edf")).clock_start.has_value());
  written.annotations.clear();
  CHECK_FALSE(good(edf_bytes(written, EdfKind::plain, "unknown.edf")).clock_start.has_value());
  WrittenRecording events;
  events.annotations = heart().annotations;
  const auto read = good(edf_bytes(events, EdfKind::continuous, "events.edf"));
  CHECK(read.signals.empty());
  CHECK(read.annotations.size() == 2);
  CHECK(read.duration == Seconds(0.0));
}

TEST_CASE("the writer refuses what the file cannot hold", "[edf]") {
  const auto code = [](const WrittenRecording& written, EdfKind kind = EdfKind::continuous) {
    const auto done = write_edf(scratch_file("refused.edf"), written, kind);
    REQUIRE_FALSE(done.ok());
    return done.error().code;
  };
  WrittenRecording written = heart();
  written.signals[0].label = "a label of more than sixteen";
  CHECK(code(written) == ErrorCode::bad_usage);
  written = heart();
  written.signals[0].unit = "\xC2\xB5V";
  CHECK(code(written) == ErrorCode::bad_usage);
  written = heart();
  written.signals[0].rate = Hertz(1000.5);
  CHECK(code(written) == ErrorCode::bad_usage);
  written = heart();
  written.record_duration = Seconds(1.0 / 3.0);
  CHECK(code(written) == ErrorCode::bad_usage);
  written = heart();
  written.signals[0].samples[5] = std::nan("");
  CHECK(code(written) == ErrorCode::bad_usage);
  written = heart();
  written.annotations[0].text = "a\x14"
                                "b";
  CHECK(code(written) == ErrorCode::bad_usage);
  written = heart();
  written.clock_start = "yesterday";
  CHECK(code(written) == ErrorCode::bad_usage);
  CHECK(code(heart(), EdfKind::plain) == ErrorCode::bad_usage); // it would lose the annotations
  written = heart();
  written.left_out = {{Seconds(0.0), Seconds(99.0)}};
  CHECK(code(written, EdfKind::discontinuous) == ErrorCode::bad_usage);
  CHECK(code(written, EdfKind::continuous) == ErrorCode::bad_usage);
  const auto nowhere = write_edf("/nonexistent-folder/heart.edf", heart(), EdfKind::continuous);
  REQUIRE_FALSE(nowhere.ok());
  CHECK(nowhere.error().code == ErrorCode::cannot_write);
}

TEST_CASE("a table that is written is read again with the same samples", "[csv]") {
  WrittenRecording written;
  written.signals.push_back({"RA", "mV", Hertz(500.0), {0.5, -1.25, 3.0, 0.0625, 2.0}, 0, 0, ""});
  written.signals.push_back({"RV; left", "uV", Hertz(500.0), {1.5, 2.5, 3.5, 4.5, -5.5}, 0, 0, ""});
  written.annotations.push_back({Seconds(0.004), std::nullopt, "addition ISO, 1e-7 M"});
  for (const char decimal : {'.', ','}) {
    for (const char delimiter : {';', '\t'}) {
      for (const bool units_row : {false, true}) {
        CsvLayout layout;
        layout.decimal = decimal;
        layout.delimiter = delimiter;
        layout.units_row = units_row;
        layout.time_column = "time";
        layout.comment_column = "comment";
        layout.header_lines = {"invented heart"};
        const std::string path = scratch_file("table.csv");
        REQUIRE(write_csv(path, written, layout).ok());
        const auto read = read_recording(path, in_memory());
        if (!read) FAIL(describe(read.error()));
        CAPTURE(decimal, delimiter, units_row, all_warnings(*read));
        CHECK(samples_of(*read, "RA") == written.signals[0].samples);
        CHECK(samples_of(*read, "RV; left") == written.signals[1].samples);
        CHECK(read->signals[1].unit == "uV");
        CHECK(read->signals[0].time_base.rate() == Hertz(500.0));
        REQUIRE(read->annotations.size() == 1);
        CHECK(read->annotations[0].text == "addition ISO, 1e-7 M");
        CHECK(read->annotations[0].onset == Seconds(0.004));
        CHECK(read->file_notes == std::vector<std::string>{"invented heart"});
        CHECK(read->warnings.empty());
      }
    }
  }
}

TEST_CASE("rows left out of a table are a gap", "[csv]") {
  WrittenRecording written;
  written.signals.push_back({"RA", "mV", Hertz(1000.0), wave(1000, 2.0), 0, 0, ""});
  written.left_out = {{Seconds(0.2), Seconds(0.3)}};
  CsvLayout layout;
  layout.time_column = "time";
  const std::string path = scratch_file("gap.csv");
  REQUIRE(write_csv(path, written, layout).ok());
  const auto read = read_recording(path, in_memory());
  REQUIRE(read.ok());
  CHECK(read->signals[0].samples->size() == 900);
  REQUIRE(read->signals[0].time_base.gaps().size() == 1);
  CHECK_THAT(read->signals[0].time_base.gaps()[0].end.value(), WithinAbs(0.3, 1e-9));
  CsvLayout doubtful;
  doubtful.decimal = ',';
  CHECK_FALSE(write_csv(path, written, doubtful).ok());
  written.signals.push_back({"RV", "mV", Hertz(500.0), wave(500, 2.0), 0, 0, ""});
  CHECK_FALSE(write_csv(path, written, layout).ok());
}
