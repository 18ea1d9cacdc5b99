// Chronodrome, GPL-3.0-or-later.
#include "session/detection.h"

#include "activation/compute.h"
#include "base/digest.h"
#include "base/number_text.h"

namespace chronodrome::session {
namespace {

/// Fields one after the other, each with its length before it, so that no two lists give the same text.
class KeyText {
public:
  KeyText& add(const std::string& text) {
    text_ += std::to_string(text.size()) + ':' + text;
    return *this;
  }
  KeyText& add(double value) { return add(exact_text(value)); }
  KeyText& add(std::size_t value) { return add(std::to_string(value)); }
  KeyText& add(int value) { return add(std::to_string(value)); }
  template <class Unit>
  KeyText& add(Quantity<Unit> value) {
    return add(value.value());
  }
  template <class T>
  KeyText& add(const std::optional<T>& value) {
    return value ? add(*value) : add(std::string("-"));
  }
  [[nodiscard]] const std::string& text() const { return text_; }

private:
  std::string text_;
};

// The bindings below name every field: a new one does not compile until it has its place in the key.

void add_conditioning(KeyText& key, const conditioning::ConditioningSettings& settings) {
  const auto& [species, mains, timing, high, low, clip, recovery, context, block, blanked] = settings;
  const auto& [nominal, harmonics, presence, quantile, medians, margin] = mains;
  key.add(species).add(timing).add(high).add(low).add(clip).add(recovery).add(context).add(block);
  key.add(blanked.size());
  for (const auto& span : blanked)
    key.add(span.start).add(span.end);
  key.add(static_cast<int>(nominal)).add(harmonics.size());
  for (const int harmonic : harmonics)
    key.add(harmonic);
  key.add(presence).add(quantile).add(medians).add(margin);
}

void add_settings(KeyText& key, const activation::ActivationSettings& settings) {
  const auto& [conditioning, atrial, ventricular, threshold, noise, strong, near, far, lead, twitch] =
      settings;
  add_conditioning(key, conditioning);
  key.add(atrial).add(ventricular).add(threshold).add(noise).add(strong).add(near).add(far).add(lead);
  key.add(twitch);
}

/// The same bytes read with another delimiter or rate are another recording.
void add_recording(KeyText& key, const recording::Recording& recording) {
  key.add(recording.files.size());
  for (const auto& file : recording.files)
    key.add(file.sha256).add(file.start);
  key.add(recording.convention);
}

void add_signal(KeyText& key, const recording::Signal& signal) {
  key.add(signal.source_as_written).add(signal.unit).add(signal.resolution);
  if (signal.rails) key.add((*signal.rails)[0]).add((*signal.rails)[1]);
  key.add(signal.time_base.rate()).add(signal.time_base.runs().size());
  for (const auto& run : signal.time_base.runs())
    key.add(run.first).add(run.count).add(run.start);
}

void add_channel(KeyText& key, const recording::Channel& channel) {
  // Positions of electrodes are for later stages.
  const auto& [label, role, lead, unit, recording, signal, gain, offset, skew, position_mm] = channel;
  key.add(label).add(recording::name_of(role)).add(recording::name_of(lead)).add(unit).add(signal);
  key.add(gain).add(offset).add(skew);
  add_signal(key, channel.raw());
}

} // namespace

std::string detection_key(const std::vector<recording::Channel>& channels,
                          const activation::ActivationSettings& settings) {
  KeyText key;
  key.add(std::string("detection")).add(kDetectionVersion);
  if (!channels.empty()) {
    const auto& recording = *channels.front().recording;
    if (recording.files.empty()) return "";
    for (const auto& file : recording.files) {
      if (file.sha256.empty()) return "";
    }
    add_recording(key, recording);
  }
  key.add(channels.size());
  for (const auto& channel : channels)
    add_channel(key, channel);
  add_settings(key, settings);
  return sha256_of(key.text());
}

std::optional<Error> bring_up_to_date(Detection& detection, const std::vector<recording::Channel>& channels,
                                      const activation::ActivationSettings& settings, unsigned threads,
                                      Progress& progress) {
  std::string key = detection_key(channels, settings);
  if (!key.empty() && key == detection.key) return std::nullopt;
  progress.expect(channels);
  auto found = activation::compute_all(channels, settings, threads,
                                       [&](const recording::Channel& channel, std::size_t samples) {
                                         return progress.read_on(channel, samples);
                                       });
  for (const auto& one : found) {
    if (!one) return one.error();
  }
  detection.key = std::move(key);
  detection.found.clear();
  for (auto& one : found)
    detection.found.push_back(std::move(one).value());
  return std::nullopt;
}

} // namespace chronodrome::session
