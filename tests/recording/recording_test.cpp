// Chronodrome, GPL-3.0-or-later.
#include <catch2/catch.hpp>
#include <memory>

#include "recording/recording.h"
#include "recording/stores.h"

using namespace chronodrome;
using namespace chronodrome::recording;

namespace {

Signal named(const std::string& source, const std::string& written, std::vector<double> samples) {
  Signal signal;
  signal.source = source;
  signal.source_as_written = written;
  signal.time_base = TimeBase(Hertz(10.0), {{0, samples.size(), Seconds(0.0)}});
  signal.samples = store_of(std::move(samples));
  return signal;
}

} // namespace

TEST_CASE("a signal is found with or without its bracketed unit", "[recording]") {
  Recording recording;
  recording.signals = {named("T", "T (mN)", {1.0}), named("T 2", "T", {2.0})};
  REQUIRE(recording.find("T (mN)") != nullptr);
  CHECK(recording.find("T (mN)") == &recording.signals[0]);
  CHECK(recording.find("T") == &recording.signals[1]); // as it stands in the file wins
  CHECK(recording.find("T 2") == &recording.signals[1]);
  CHECK(recording.find("t") == nullptr);
}

TEST_CASE("a channel reads values in its unit, inverted and shifted, with its skew", "[recording]") {
  auto recording = std::make_shared<Recording>();
  recording->signals = {named("EG1", "EG1", {1.0, 2.0, -3.0})};
  Channel channel;
  channel.recording = recording;
  std::vector<double> values(3);
  channel.read(0, values);
  CHECK(values == std::vector<double>{1.0, 2.0, -3.0});
  channel.gain = -2.0;
  channel.offset = 0.5;
  channel.read(0, values);
  CHECK(values == std::vector<double>{-1.5, -3.5, 6.5});
  channel.skew = milliseconds(0.5);
  CHECK(channel.time_at(1.0) == Seconds(0.1005));
}

TEST_CASE("roles and leads have the names of the contract", "[recording]") {
  const std::vector<std::string> names = {"sinus",    "atrial", "his",         "ventricular",
                                          "ecg",      "map",    "stimulus",    "tension",
                                          "pressure", "flow",   "temperature", "other"};
  for (const std::string& name : names) {
    const auto role = role_named(name);
    REQUIRE(role.has_value());
    CHECK(name_of(*role) == name);
    const bool electrical = name == "sinus" || name == "atrial" || name == "his" || name == "ventricular" ||
                            name == "ecg" || name == "map";
    CHECK(is_electrogram(*role) == electrical);
    CHECK(is_mechanical(*role) == (name == "tension" || name == "pressure"));
  }
  CHECK_FALSE(role_named("Atrial").has_value());
  CHECK(lead_named("unipolar") == Lead::unipolar);
  CHECK(lead_named("bipolar") == Lead::bipolar);
  CHECK(lead_named("") == Lead::none);
  CHECK_FALSE(lead_named("tripolar").has_value());
  CHECK(name_of(Lead::bipolar) == "bipolar");
}
