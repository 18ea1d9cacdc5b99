// Chronodrome, GPL-3.0-or-later.
#include "simulation/scenario_fault.h"

#include <algorithm>
#include <cmath>
#include <set>

#include "base/number_text.h"
#include "protocol/concentration.h"
#include "simulation/conditions.h"
#include "simulation/signals.h"

namespace chronodrome::simulation {
namespace {

/// More than this many samples in all are refused before memory is asked for.
constexpr double kMostSamples = 4e8;
constexpr double kLongest = 7.0 * 86400.0;
/// No heart beats as fast.
constexpr double kFastest = 3000.0;
constexpr int kMostStimuli = 100000;

using Path = std::vector<std::string>;
using Found = std::optional<ScenarioFault>;

Path operator/(Path path, std::string part) {
  path.push_back(std::move(part));
  return path;
}

/// Collects the first fault.
class Checker {
public:
  explicit Checker(const Scenario& scenario) : scenario_(scenario) {}

  Found first() {
    check_file();
    check_heart();
    for (std::size_t i = 0; i < scenario_.agents.size(); ++i)
      check_agent(scenario_.agents[i], Path{"agents", std::to_string(i)});
    check_protocol();
    check_pacing();
    for (std::size_t i = 0; i < scenario_.channels.size(); ++i)
      check_channel(scenario_.channels[i], Path{"channels", std::to_string(i)});
    check_labels();
    check_measures();
    return found_;
  }

private:
  void require(bool holds, const Path& path, const std::string& what, const std::string& remedy) {
    if (!holds && !found_) found_ = ScenarioFault{path, what, remedy};
  }
  void require_positive(double value, const Path& path) {
    require(std::isfinite(value) && value > 0.0, path,
            "found " + number_text(value, 6) + ", expected a number above 0", "give a positive number");
  }
  void require_not_negative(double value, const Path& path) {
    require(std::isfinite(value) && value >= 0.0, path,
            "found " + number_text(value, 6) + ", expected 0 or more", "give 0 or a positive number");
  }

  void check_file() {
    require(!scenario_.name.empty() && scenario_.name.find_first_of("/\\") == std::string::npos &&
                scenario_.name.front() != '.',
            {"name"}, "'" + scenario_.name + "' cannot name a file", "give a plain name without slashes");
    require_positive(scenario_.duration.value(), {"duration_s"});
    require(scenario_.duration <= Seconds(kLongest), {"duration_s"}, "the recording is longer than a week",
            "shorten it");
    require(!scenario_.channels.empty(), {"channels"}, "there is no channel", "describe at least one");
    require_not_negative(scenario_.preparation.arrival_delay.value(), {"preparation", "arrival_delay_s"});
    const FilePlan& file = scenario_.file;
    require_positive(file.record_duration.value(), {"recording", "record_duration_s"});
    require(!file.protocol_in_annotations || file.kind == FileKind::edf_plus, {"recording", "protocol"},
            "only an edf+ file carries annotations", "set \"kind\" to \"edf+\" or \"protocol\" to \"file\"");
    require(file.gaps.empty() || file.kind != FileKind::edf, {"recording", "gaps"},
            "a plain edf file cannot have gaps", "set \"kind\" to \"edf+\" or \"csv\"");
    require(file.gaps.empty() || file.kind != FileKind::csv || !file.csv.time_column.value_or("").empty(),
            {"recording", "gaps"}, "a csv file without a time column cannot show its gaps",
            "set \"time_column\" of \"csv\" to a name, or \"kind\" to \"edf+\"");
    require(file.csv.delimiter != file.csv.decimal, {"recording", "csv", "delimiter"},
            "the delimiter is also the decimal mark", "choose ; as the delimiter");
    double samples = 0.0;
    for (const ChannelPlan& channel : scenario_.channels)
      samples += scenario_.duration.value() * channel.rate.value();
    require(samples < kMostSamples, {"duration_s"},
            number_text(samples, 3) + " samples are more than the limit of 4e8",
            "shorten the recording or lower the rates");
    for (std::size_t i = 0; i < scenario_.channels.size() && file.kind == FileKind::csv; ++i)
      require(scenario_.channels[i].rate == scenario_.channels.front().rate,
              {"channels", std::to_string(i), "rate_hz"}, "a csv file has one rate for all channels",
              "give all channels the same rate_hz, or write edf");
  }

  void check_node(const AvNode& node, const Path& path) {
    require_positive(node.delay_min.value(), path / "delay_min_s");
    require_not_negative(node.delay_span.value(), path / "delay_span_s");
    require_positive(node.recovery_tau.value(), path / "recovery_tau_s");
    require_not_negative(node.recovery_min.value(), path / "recovery_min_s");
  }

  void check_heart() {
    require_positive(scenario_.sinus.rate.value(), {"sinus", "rate_bpm"});
    require(scenario_.sinus.rate.value() <= kFastest, {"sinus", "rate_bpm"},
            "the rate exceeds " + number_text(kFastest) + " beats/min", "lower it");
    require_not_negative(scenario_.sinus.jitter_sd.value(), {"sinus", "jitter_sd_s"});
    require_positive(scenario_.sinus.slowest.value(), {"sinus", "slowest_bpm"});
    check_node(scenario_.node, {"av_node"});
    if (scenario_.retrograde) check_node(*scenario_.retrograde, {"av_node", "retrograde"});
    require_not_negative(scenario_.his_to_ventricle.value(), {"av_node", "his_to_ventricle_s"});
    require_positive(scenario_.fatigue.tau.value(), {"av_node", "fatigue", "tau_s"});
    require_positive(scenario_.atrial_refractory.value(), {"refractory", "atrial_s"});
    require_positive(scenario_.ventricular_refractory.value(), {"refractory", "ventricular_s"});
    require_not_negative(scenario_.escape.junctional.value(), {"escape", "junctional_s"});
    require_not_negative(scenario_.escape.ventricular.value(), {"escape", "ventricular_s"});
    const FluctuationPlan& slow = scenario_.fluctuation;
    require_not_negative(slow.rate_sd.value(), {"fluctuation", "rate_sd_bpm"});
    require_not_negative(slow.delay_sd.value(), {"fluctuation", "delay_sd_s"});
    require_not_negative(slow.force_sd_ratio, {"fluctuation", "force_sd_ratio"});
    require_positive(slow.rate_tau.value(), {"fluctuation", "rate_tau_s"});
    require_positive(slow.delay_tau.value(), {"fluctuation", "delay_tau_s"});
    require_positive(slow.force_tau.value(), {"fluctuation", "force_tau_s"});
  }

  void check_agent(const Agent& agent, const Path& path) {
    require(!agent.name.empty(), path / "name", "an agent has no name", "name it");
    std::set<EffectTarget> targets;
    for (std::size_t i = 0; i < agent.effects.size(); ++i) {
      const Effect& effect = agent.effects[i];
      const Path at = path / "effects" / std::to_string(i);
      require(targets.insert(effect.target).second, at / "target",
              agent.name + " has two effects on " + name_of(effect.target), "give one for each target");
      require_not_negative(effect.emax_ratio, at / "emax_ratio");
      require(std::isfinite(effect.pec50), at / "pec50", "the value is not finite", "give a number");
      require_positive(effect.nh, at / "nh");
      require_positive(effect.onset_tau.value(), at / "onset_tau_s");
      require_positive(effect.washout_tau.value(), at / "washout_tau_s");
      if (effect.target == EffectTarget::delay) {
        require(steady_delay(scenario_.node, Seconds(60.0 / scenario_.sinus.rate.value())).has_value(), at,
                "an effect on delay needs 1:1 conduction before any agent",
                "lower sinus.rate_bpm or the delays of av_node");
        require(!acts_on(scenario_, EffectTarget::delay_min), at / "target",
                "delay and delay_min cannot both be acted on", "take one of them out");
      }
    }
    for (std::size_t i = 0; i < agent.antagonisms.size(); ++i)
      require_positive(agent.antagonisms[i].slope, path / "antagonises" / std::to_string(i) / "slope");
  }

  void check_protocol() {
    using enum protocol::EventKind;
    Seconds last(0.0);
    for (std::size_t i = 0; i < scenario_.protocol.size(); ++i) {
      const LoggedEvent& event = scenario_.protocol[i];
      const Path at{"protocol", std::to_string(i)};
      require(event.time >= last, at / "time_s", "the event lies before the one above it",
              "order the log by time");
      last = event.time;
      require(event.time <= scenario_.duration, at / "time_s", "the event lies after the end",
              "lengthen duration_s");
      require(event.kind != pacing_start && event.kind != pacing_stop, at / "event",
              "trains of stimuli write their own lines", "describe them under \"pacing\"");
      if (event.kind != addition && event.kind != antagonist) continue;
      require(!event.agent.empty(), at / "agent", "no agent is named", "name what was added");
      require(event.concentration.has_value(), at / "concentration", "no concentration is given",
              "give the final concentration in the bath");
      require_not_negative(event.concentration.value_or(0.0), at / "concentration");
      require(protocol::concentration_in(1.0, event.unit).has_value(), at / "unit",
              "'" + event.unit + "' is no unit of concentration",
              "write one of " + protocol::concentration_units());
    }
  }

  void check_pacing() {
    for (std::size_t i = 0; i < scenario_.pacing.size(); ++i) {
      const PacingTrain& train = scenario_.pacing[i];
      const Path at{"pacing", std::to_string(i)};
      require_positive(train.cycle.value(), at / "cycle_s");
      require_not_negative(train.latency.value(), at / "latency_s");
      require(train.latency < train.cycle && (!train.premature || train.latency < *train.premature),
              at / "latency_s", "the latency is not shorter than the coupling of the stimuli",
              "shorten latency_s");
      require(train.beats >= 1 && train.beats <= kMostStimuli, at / "beats",
              "found " + std::to_string(train.beats) + " stimuli", "give 1 to 100000");
      require(train.chamber != Chamber::his, at / "chamber", "the His bundle cannot be paced",
              "choose atrial or ventricular");
    }
    for (std::size_t i = 0; i < scenario_.premature.size(); ++i)
      require(scenario_.premature[i].chamber != Chamber::his, {"premature", std::to_string(i), "chamber"},
              "the His bundle does not fire early", "choose atrial or ventricular");
  }

  void check_channel(const ChannelPlan& channel, const Path& path) {
    require(!channel.label.empty(), path / "label", "a channel has no label", "name it");
    require(channel.role != recording::Role::map, path / "role", "map channels are not simulated",
            "choose another role");
    require_positive(channel.rate.value(), path / "rate_hz");
    require_positive(channel.width.value(), path / "width_s");
    require_positive(channel.rise.value(), path / "rise_s");
    require_not_negative(channel.plateau.value(), path / "plateau_s");
    require_positive(channel.fall.value(), path / "fall_s");
    require(std::isfinite(channel.amplitude), path / "amplitude", "the value is not finite", "give a number");
    for (std::size_t i = 0; i < channel.far_fields.size(); ++i)
      require_positive(channel.far_fields[i].wave.width.value(),
                       path / "far_fields" / std::to_string(i) / "width_s");
    if (channel.repolarisation)
      require_positive(channel.repolarisation->width.value(), path / "repolarisation" / "width_s");
    if (channel.motion) require_positive(channel.motion->width.value(), path / "motion" / "width_s");
    require(recording::is_electrogram(channel.role) == (channel.lead != recording::Lead::none), path / "lead",
            "electrograms, and no other channels, are unipolar or bipolar", "set or remove \"lead\"");
    if (channel.range)
      require((*channel.range)[0] < (*channel.range)[1], path / "range",
              "the lower rail is not below the upper one", "give [low, high]");
    require(channel.bits >= 2 && channel.bits <= 16, path / "bits", "a converter has 2 to 16 bits",
            "give a number from 2 to 16");
    check_disturbance(channel.disturbance, path / "noise");
    require(scenario_.file.kind == FileKind::csv || sample_count(channel, scenario_.duration) > 0,
            path / "rate_hz", "the channel has no sample", "raise rate_hz or duration_s");
  }

  void check_disturbance(const Disturbance& noise, const Path& path) {
    require_not_negative(noise.white_sd, path / "white_sd");
    require_not_negative(noise.pink_sd, path / "pink_sd");
    require_positive((noise.mains + noise.mains_offset).value(), path / "mains_hz");
    require_positive(noise.artefact_tau.value(), path / "artefact_tau_s");
    const auto later = [](const Disturbance::Step& a, const Disturbance::Step& b) { return a.time < b.time; };
    require(std::is_sorted(noise.mains_steps.begin(), noise.mains_steps.end(), later), path / "mains_steps",
            "the steps are not in order of time", "order them");
  }

  void check_labels() {
    std::set<std::string> labels, sources;
    for (std::size_t i = 0; i < scenario_.channels.size(); ++i) {
      const ChannelPlan& channel = scenario_.channels[i];
      const Path at{"channels", std::to_string(i)};
      require(labels.insert(channel.label).second, at / "label",
              "two channels are called '" + channel.label + "'", "give each its own label");
      require(sources.insert(channel.source.empty() ? channel.label : channel.source).second, at / "source",
              "two channels have the same source", "give each its own");
    }
    std::set<std::string> pathways;
    for (std::size_t i = 0; i < scenario_.pathways.size(); ++i) {
      const PathwayPlan& pathway = scenario_.pathways[i];
      const Path at{"pathways", std::to_string(i)};
      require(!pathway.label.empty() && pathways.insert(pathway.label).second, at / "label",
              "the label is empty or used twice", "give each pathway its own label");
      for (const auto& [key, end] : {std::pair("from", &pathway.from), std::pair("to", &pathway.to)}) {
        const bool known = std::any_of(
            scenario_.channels.begin(), scenario_.channels.end(), [wanted = end](const ChannelPlan& channel) {
              return channel.label == *wanted && recording::is_electrogram(channel.role);
            });
        require(known, at / key, "'" + *end + "' is no electrogram channel", "name a channel's label");
      }
    }
  }

  void check_measures() {
    static const std::map<std::string, std::set<recording::Role>> kRoles = {
        {"force", {recording::Role::tension}},
        {"pressure", {recording::Role::pressure}},
        {"dpdt_max", {recording::Role::pressure, recording::Role::tension}},
        {"flow", {recording::Role::flow}}};
    for (std::size_t i = 0; i < scenario_.measures.size(); ++i) {
      const std::string& measure = scenario_.measures[i];
      const std::string kind = measure.substr(0, measure.find(':'));
      const std::string label = measure.find(':') == std::string::npos ? "" : measure.substr(kind.size() + 1);
      const bool of_pathway = kind == "delay" || kind == "conducted" || kind == "velocity";
      bool known = false;
      for (const PathwayPlan& pathway : scenario_.pathways)
        known = known || (of_pathway && pathway.label == label &&
                          (kind != "velocity" || pathway.distance_mm.has_value()));
      for (const ChannelPlan& channel : scenario_.channels) {
        if (channel.label != label || of_pathway) continue;
        const auto roles = kRoles.find(kind);
        known = known || (roles != kRoles.end() && roles->second.count(channel.role) > 0) ||
                (kind == "rate" &&
                 (recording::is_electrogram(channel.role) || recording::is_mechanical(channel.role)));
      }
      require(known, {"measures", std::to_string(i)}, "'" + measure + "' cannot be measured here",
              "write KIND:LABEL of a channel or pathway of this scenario");
    }
  }

  const Scenario& scenario_;
  Found found_;
};

} // namespace

std::optional<ScenarioFault> fault_in(const Scenario& scenario) {
  return Checker(scenario).first();
}

} // namespace chronodrome::simulation
