// Chronodrome, GPL-3.0-or-later.
#include <algorithm>
#include <cmath>
#include <numbers>

#include "numerics/robust.h"
#include "protocol/concentration.h"
#include "simulation/conditions.h"
#include "simulation/truth.h"

namespace chronodrome::simulation {
namespace {

/// One bath concentration of a curve.
struct Step {
  double concentration = 0.0;
  Bath bath;
  Seconds start, end;
};

struct CurveSteps {
  int number = 0;
  std::string agent, background;
  std::vector<Step> steps;
};

bool ends_step(protocol::EventKind kind) {
  using enum protocol::EventKind;
  return kind == addition || kind == vehicle || kind == antagonist || kind == washout || kind == pacing_start;
}

std::string background_text(const Bath& bath, const std::string& agent) {
  std::string text;
  for (const auto& [other, concentration] : bath) {
    if (other == agent || concentration <= 0.0) continue;
    text += (text.empty() ? "" : " + ") + other + " " + protocol::concentration_text(Molar(concentration));
  }
  return text;
}

std::vector<CurveSteps> curves_of(const Scenario& scenario) {
  const auto& events = scenario.protocol;
  const Seconds arrival = scenario.preparation.arrival_delay;
  std::vector<CurveSteps> curves;
  bool running = false;
  Seconds control_start(0.0);
  const auto end_after = [&](std::size_t i) {
    Seconds end = scenario.duration;
    for (std::size_t k = i + 1; k < events.size(); ++k) {
      if (ends_step(events[k].kind)) {
        end = events[k].time;
        break;
      }
    }
    for (const PacingTrain& train : scenario.pacing) {
      if (train.start > events[i].time) end = std::min(end, train.start);
    }
    return end;
  };
  for (std::size_t i = 0; i < events.size(); ++i) {
    const LoggedEvent& event = events[i];
    const std::string agent = protocol::agent_key(event.agent);
    const Bath bath = bath_after(events, i + 1);
    if (event.kind == protocol::EventKind::addition) {
      const std::string background = background_text(bath, agent);
      if (!running || protocol::agent_key(curves.back().agent) != agent ||
          curves.back().background != background) {
        Bath before = bath;
        before.erase(agent);
        curves.push_back({static_cast<int>(curves.size()) + 1, event.agent, background, {}});
        curves.back().steps.push_back({0.0, before, control_start, event.time});
        running = true;
      }
      curves.back().steps.push_back({bath.at(agent), bath, event.time + arrival, end_after(i)});
    }
    const bool of_everything = agent.empty();
    if (event.kind == protocol::EventKind::washout && running &&
        (of_everything || agent == protocol::agent_key(curves.back().agent)))
      running = false;
    if (ends_step(event.kind)) control_start = event.time + arrival;
  }
  return curves;
}

/// The heart in the long run in one bath.
struct Settled {
  bool atrium_beats = false, ventricle_beats = false;
  double atrial_rate = 0.0, ventricular_rate = 0.0; ///< beats/min
  std::optional<Seconds> delay;                     ///< median over conducted beats
  double conducted = 0.0;                           ///< share of atrial beats
  bool one_to_one = false;
};

Settled settle(const Scenario& scenario, const Conditions& conditions, const Bath& bath) {
  Settled settled;
  const BeatsPerMinute rate = conditions.settled_rate(bath);
  const AvNode node = conditions.settled_node(bath);
  settled.atrium_beats = rate >= scenario.sinus.slowest;
  if (settled.atrium_beats) {
    settled.atrial_rate = rate.value();
    settled.delay = steady_delay(node, Seconds(60.0 / rate.value()));
  }
  if (settled.delay && scenario.fatigue.most <= Seconds(0.0)) {
    settled.ventricle_beats = settled.one_to_one = true;
    settled.ventricular_rate = rate.value();
    settled.conducted = 1.0;
    return settled;
  }
  // Block or a tired node: run a heart without chance for long enough, and leave out its first quarter.
  Scenario still = scenario;
  still.sinus.jitter_sd = still.escape.jitter_sd = Seconds(0.0);
  still.sinus.pauses.clear();
  still.premature.clear();
  still.pacing.clear();
  const Seconds length(std::max(800.0, settled.atrium_beats ? 120000.0 / rate.value() : 0.0));
  const HeartState state{[&](Seconds) { return rate; }, [&](Seconds) { return node; }};
  const Beats beats = run_heart(still, state, length);
  std::vector<double> delays, firings;
  double atrial = 0.0, conducted = 0.0;
  for (const AtrialBeat& beat : beats.atrial) {
    if (beat.time < length * 0.25 || beat.origin == AtrialOrigin::retrograde) continue;
    atrial += 1.0;
    if (!beat.ventricular) continue;
    conducted += 1.0;
    delays.push_back((beats.ventricular[*beat.ventricular].time - beat.time).value());
  }
  for (const VentricularBeat& beat : beats.ventricular) {
    if (beat.time >= length * 0.25) firings.push_back(beat.time.value());
  }
  settled.delay.reset();
  if (!delays.empty()) settled.delay = Seconds(numerics::median(delays));
  settled.conducted = atrial > 0.0 ? conducted / atrial : 0.0;
  settled.one_to_one = atrial > 0.0 && conducted >= atrial - 1.0; // the last may still be under way
  settled.ventricle_beats = firings.size() >= 2;
  if (settled.ventricle_beats)
    settled.ventricular_rate =
        60.0 * static_cast<double>(firings.size() - 1) / (firings.back() - firings.front());
  return settled;
}

/// Writes the responses and the curve of one measure over the steps of one drug curve.
class MeasureTruth {
public:
  MeasureTruth(const Scenario& scenario, const Conditions& conditions, const CurveSteps& curve,
               const std::vector<Settled>& settled, const std::string& measure)
      : scenario_(scenario), conditions_(conditions), curve_(curve), settled_(settled), measure_(measure),
        kind_(measure.substr(0, measure.find(':'))), label_(measure.substr(measure.find(':') + 1)) {
    for (const ChannelPlan& channel : scenario.channels) {
      if (channel.label == label_ && !is_of_pathway()) channel_ = &channel;
    }
    for (const PathwayPlan& pathway : scenario.pathways) {
      if (pathway.label != label_ || !is_of_pathway()) continue;
      pathway_ = &pathway;
      for (const ChannelPlan& channel : scenario.channels) {
        if (channel.label == pathway.from) from_ = &channel;
        if (channel.label == pathway.to) to_ = &channel;
      }
    }
  }

  void add_to(Truth& truth) const {
    for (std::size_t i = 0; i < curve_.steps.size(); ++i) {
      const Step& step = curve_.steps[i];
      TrueResponse row{curve_.number, curve_.agent, curve_.background, step.concentration,
                       measure_,      unit(),       std::nullopt,      "ok",
                       step.start,    step.end};
      row.status = status_of(settled_[i]);
      if (row.status == "ok") row.value = value_of(settled_[i], step.bath);
      truth.responses.push_back(row);
    }
    if (const auto curve = hill()) truth.curves.push_back(*curve);
  }

private:
  [[nodiscard]] bool is_of_pathway() const {
    return kind_ == "delay" || kind_ == "conducted" || kind_ == "velocity";
  }
  [[nodiscard]] bool crosses_node() const {
    return pathway_ != nullptr && chamber_of(*from_) == Chamber::atrial &&
           chamber_of(*to_) != Chamber::atrial;
  }

  [[nodiscard]] std::string unit() const {
    if (kind_ == "rate") return "bpm";
    if (kind_ == "delay") return "ms";
    if (kind_ == "conducted") return "1";
    if (kind_ == "velocity") return "m/s";
    if (kind_ == "dpdt_max") return channel_->unit + "/s";
    return channel_->unit;
  }

  [[nodiscard]] std::string status_of(const Settled& settled) const {
    if (kind_ == "flow") return "ok";
    const Chamber chamber = pathway_ != nullptr ? chamber_of(*from_) : chamber_of(*channel_);
    const bool beats = chamber == Chamber::atrial ? settled.atrium_beats : settled.ventricle_beats;
    if (!beats) return "arrested";
    if (crosses_node() && kind_ != "conducted" && !settled.delay) return "censored";
    return "ok";
  }

  [[nodiscard]] Seconds lag_difference() const {
    Seconds lag = to_->offset - from_->offset;
    // Between His bundle and ventricle the delay is fixed; towards the His bundle it is left out.
    if (chamber_of(*to_) == Chamber::his && chamber_of(*from_) == Chamber::atrial)
      lag -= scenario_.his_to_ventricle;
    if (chamber_of(*from_) == Chamber::his && chamber_of(*to_) == Chamber::ventricular)
      lag += scenario_.his_to_ventricle;
    return lag;
  }

  [[nodiscard]] double value_of(const Settled& settled, const Bath& bath) const {
    if (kind_ == "rate")
      return chamber_of(*channel_) == Chamber::atrial ? settled.atrial_rate : settled.ventricular_rate;
    if (kind_ == "conducted") return crosses_node() ? settled.conducted : 1.0;
    if (pathway_ != nullptr) {
      const Seconds delay = lag_difference() + (crosses_node() ? *settled.delay : Seconds(0.0));
      return kind_ == "delay" ? in_milliseconds(delay)
                              : std::abs(*pathway_->distance_mm * 1e-3 / delay.value());
    }
    if (kind_ == "flow") return channel_->baseline;
    return mechanical_basal() * conditions_.effects().settled_ratio(mechanical_target(), bath);
  }

  [[nodiscard]] double mechanical_basal() const {
    if (kind_ != "dpdt_max") return channel_->amplitude;
    return channel_->amplitude * std::numbers::pi / (2.0 * channel_->rise.value()); // of a half cosine
  }
  [[nodiscard]] EffectTarget mechanical_target() const {
    return channel_->role == recording::Role::tension ? EffectTarget::force : EffectTarget::pressure;
  }

  /// Which effect shapes the measure; nothing where no Hill curve does.
  [[nodiscard]] std::optional<EffectTarget> target() const {
    if (kind_ == "rate") return EffectTarget::rate;
    if (kind_ == "delay" && crosses_node() && conditions_.basal_delay()) return EffectTarget::delay;
    if (kind_ == "force" || kind_ == "pressure" || kind_ == "dpdt_max") return mechanical_target();
    return std::nullopt;
  }

  /// Which steps follow the curve: all but those that block or arrest takes away from it.
  [[nodiscard]] bool follows(const Settled& settled) const {
    if (status_of(settled) != "ok") return false;
    const bool needs_conduction =
        crosses_node() || (kind_ == "rate" && chamber_of(*channel_) != Chamber::atrial);
    return !needs_conduction || settled.one_to_one;
  }

  [[nodiscard]] std::optional<TrueCurve> hill() const {
    const auto shaped_by = target();
    if (!shaped_by || !follows(settled_.front())) return std::nullopt;
    for (const Agent& agent : scenario_.agents) {
      if (protocol::agent_key(agent.name) != protocol::agent_key(curve_.agent)) continue;
      for (const Effect& effect : agent.effects) {
        if (effect.target != *shaped_by) continue;
        TrueCurve curve{curve_.number, curve_.agent, curve_.background, measure_, unit()};
        curve.basal = value_of(settled_.front(), curve_.steps.front().bath);
        const double offset = *shaped_by == EffectTarget::delay ? in_milliseconds(lag_difference()) : 0.0;
        curve.emax = offset + (curve.basal - offset) * effect.emax_ratio;
        curve.pec50 = pec50_in(effect, agent.name, scenario_, curve_.steps.front().bath);
        curve.nh = effect.nh;
        curve.holds = std::all_of(settled_.begin(), settled_.end(),
                                  [&](const Settled& settled) { return follows(settled); });
        return curve;
      }
    }
    return std::nullopt;
  }

  const Scenario& scenario_;
  const Conditions& conditions_;
  const CurveSteps& curve_;
  const std::vector<Settled>& settled_;
  std::string measure_, kind_, label_;
  const ChannelPlan* channel_ = nullptr;
  const PathwayPlan* pathway_ = nullptr;
  const ChannelPlan* from_ = nullptr;
  const ChannelPlan* to_ = nullptr;
};

} // namespace

void add_true_responses(const Scenario& scenario, Truth& truth) {
  const Conditions conditions(scenario);
  for (const CurveSteps& curve : curves_of(scenario)) {
    std::vector<Settled> settled;
    for (const Step& step : curve.steps)
      settled.push_back(settle(scenario, conditions, step.bath));
    for (const std::string& measure : measures_of(scenario))
      MeasureTruth(scenario, conditions, curve, settled, measure).add_to(truth);
  }
}

} // namespace chronodrome::simulation
