// Chronodrome, GPL-3.0-or-later.
#include "activation/corrections.h"

#include <algorithm>
#include <cmath>
#include <optional>

#include "activation/deflection.h"
#include "activation/mark_measure.h"
#include "activation/mechanics.h"
#include "base/number_text.h"

namespace chronodrome::activation {
namespace {

using document::Correction;
using document::CorrectionKind;

class Corrector {
public:
  Corrector(ChannelActivations& activations, const recording::Channel& channel,
            const ActivationSettings& settings)
      : activations_(activations), channel_(channel), settings_(settings),
        mechanical_(recording::is_mechanical(channel.role)) {}

  void apply(const Correction& correction) {
    if (!correction.time || (correction.what == CorrectionKind::move && !correction.to_time)) {
      leave_out(correction, "lacks a time", "delete the correction, or complete it");
      return;
    }
    if (correction.what == CorrectionKind::add) {
      add(correction, *correction.time, Origin::added);
      return;
    }
    const auto found = nearest(*correction.time);
    if (!found) {
      leave_out(correction, "finds no mark within 5 ms", "make it again on the marks as they are now");
      return;
    }
    if (correction.what == CorrectionKind::remove) {
      erase(*found);
      return;
    }
    const Activation old = activations_.marks[*found];
    std::optional<MechanicalBeat> old_beat;
    if (mechanical_) old_beat = activations_.beats[*found];
    erase(*found);
    // Where the new place will not do, the mark stays where it was.
    if (!add(correction, *correction.to_time, Origin::moved)) insert(old, old_beat);
  }

private:
  bool add(const Correction& correction, Seconds time, Origin origin) {
    const auto position = channel_.time_base().position_at(time - channel_.skew);
    if (!position) {
      leave_out(correction, "lies outside the signal", "delete the correction");
      return false;
    }
    if (nearest(time)) {
      leave_out(correction, "would put two marks within 5 ms", "delete one of the two");
      return false;
    }
    Activation mark;
    mark.time = time;
    mark.sample = *position;
    mark.confidence = 1.0;
    mark.origin = origin;
    std::optional<MechanicalBeat> beat;
    if (mechanical_) {
      beat = beat_about(channel_, time, settings_);
      if (!beat) {
        leave_out(correction, "finds no rise to measure", "set the mark on the upstroke");
        return false;
      }
      mark.amplitude = beat->developed;
    } else {
      mark.amplitude = peak_to_peak_about(channel_, *position, settings_);
    }
    insert(mark, beat);
    return true;
  }

  void insert(const Activation& mark, const std::optional<MechanicalBeat>& beat) {
    auto& marks = activations_.marks;
    const auto place = std::upper_bound(marks.begin(), marks.end(), mark.time,
                                        [](Seconds t, const Activation& m) { return t < m.time; });
    const auto index = place - marks.begin();
    marks.insert(place, mark);
    if (beat) activations_.beats.insert(activations_.beats.begin() + index, *beat);
  }

  void erase(std::size_t index) {
    const auto offset = static_cast<std::ptrdiff_t>(index);
    activations_.marks.erase(activations_.marks.begin() + offset);
    if (mechanical_) activations_.beats.erase(activations_.beats.begin() + offset);
  }

  [[nodiscard]] std::optional<std::size_t> nearest(Seconds time) const {
    const auto& marks = activations_.marks;
    const auto after =
        std::partition_point(marks.begin(), marks.end(), [&](const Activation& m) { return m.time < time; });
    std::optional<std::size_t> best;
    double distance = kCorrectionReach.value() + 1e-12; // 5 ms as written in a file counts as 5 ms
    const auto consider = [&](std::size_t i) {
      const double d = std::abs((marks[i].time - time).value());
      if (d <= distance) best = i, distance = d;
    };
    const auto at = static_cast<std::size_t>(after - marks.begin());
    if (at < marks.size()) consider(at);
    if (at > 0) consider(at - 1);
    return best;
  }

  void leave_out(const Correction& correction, const std::string& why, const std::string& remedy) {
    const char* what = correction.what == CorrectionKind::add      ? "add"
                       : correction.what == CorrectionKind::remove ? "delete"
                                                                   : "move";
    const std::string time =
        correction.time ? " at " + number_text(correction.time->value(), 9) + " s" : std::string();
    activations_.warnings.push_back({"",
                                     {},
                                     "correction " + std::to_string(correction.seq) + " (" + what + time +
                                         " on " + channel_.label + ") " + why + " and is not applied",
                                     remedy});
  }

  ChannelActivations& activations_;
  const recording::Channel& channel_;
  const ActivationSettings& settings_;
  bool mechanical_;
};

} // namespace

void apply_corrections(ChannelActivations& activations, std::span<const Correction> corrections,
                       const recording::Channel& channel, const ActivationSettings& settings) {
  std::vector<Correction> own;
  for (const Correction& correction : corrections) {
    const bool is_mark = correction.what == CorrectionKind::add ||
                         correction.what == CorrectionKind::remove || correction.what == CorrectionKind::move;
    if (is_mark && correction.channel == channel.label) own.push_back(correction);
  }
  std::stable_sort(own.begin(), own.end(),
                   [](const Correction& a, const Correction& b) { return a.seq < b.seq; });
  Corrector corrector(activations, channel, settings);
  for (const Correction& correction : own)
    corrector.apply(correction);
}

} // namespace chronodrome::activation
