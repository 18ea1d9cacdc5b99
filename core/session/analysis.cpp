// Chronodrome, GPL-3.0-or-later.
#include "session/analysis.h"

#include <algorithm>
#include <array>

#include "activation/corrections.h"
#include "base/parallel.h"
#include "conduction/pairing.h"
#include "protocol/curve_plan.h"
#include "session/channels.h"
#include "session/conduction_facts.h"
#include "session/curves.h"
#include "session/detection.h"
#include "session/exclusions.h"
#include "session/progress.h"
#include "session/response_inputs.h"

namespace chronodrome::session {
namespace {

using activation::ChannelActivations;
using recording::Channel;
using recording::Role;

/// Runs the stages one after the other and keeps what each gave.
class Analysis {
public:
  Analysis(const SessionInputs& inputs, unsigned threads, Detection& detection, const Watch& watch)
      : in_(inputs), threads_(threads), detection_(detection), progress_(watch) {}

  Result<SessionResult> run() {
    take_inputs();
    for (const Stage& stage : kStages) {
      auto error = run_stage(stage);
      if (!error) continue;
      if (error->file.empty()) error->file = in_.session.path;
      return *error;
    }
    progress_.tell(1.0, "done");
    return std::move(out_);
  }

private:
  struct Stage {
    double share; ///< of the work that is done when it begins
    const char* doing;
    std::optional<Error> (Analysis::*run)();
  };
  static const std::array<Stage, 6> kStages;

  std::optional<Error> run_stage(const Stage& stage) {
    progress_.tell(stage.share, stage.doing);
    if (progress_.is_stopped()) return conditioning::stopped();
    if (auto error = (this->*stage.run)()) return error;
    if (progress_.is_stopped()) return conditioning::stopped();
    return std::nullopt;
  }

  void take_inputs() {
    out_.session = in_.session;
    out_.session_sha256 = in_.session_sha256;
    out_.recording = in_.recording;
    out_.protocol = in_.protocol;
    out_.settings = in_effect(in_.settings);
    out_.settings_changed = in_.settings_changed;
    out_.warnings = in_.warnings;
  }

  void warn(std::vector<Warning> more) {
    for (auto& warning : more) {
      if (warning.file.empty()) warning.file = in_.session.path;
      out_.warnings.push_back(std::move(warning));
    }
  }

  std::optional<Error> find_activations() {
    auto channels = channels_of(in_.session, in_.recording);
    if (!channels) return channels.error();
    warn(channels->warnings);
    out_.channels = channels->channels;
    if (auto error =
            bring_up_to_date(detection_, out_.channels, in_.settings.activation, threads_, progress_))
      return error;
    const auto excluded = all_exclusions();
    for (std::size_t i = 0; i < out_.channels.size(); ++i) {
      const Channel& channel = out_.channels[i];
      ChannelActivations marks = detection_.found[i]; // kept as it is for the next run
      const std::size_t before = marks.marks.size();
      activation::apply_corrections(marks, in_.session.review, channel, in_.settings.activation);
      warn(marks.warnings);
      out_.corrections.push_back(counts_of(marks, before));
      out_.intervals.push_back(
          rhythm::intervals_of(marks, excluded_spans(excluded, channel.label), in_.settings.intervals));
      out_.activations.push_back(std::move(marks));
    }
    return std::nullopt;
  }

  /// What was applied: a correction that met no mark is not counted. `before`: marks before the corrections.
  [[nodiscard]] static CorrectionCounts counts_of(const ChannelActivations& marks, std::size_t before) {
    CorrectionCounts counts;
    for (const auto& mark : marks.marks) {
      if (mark.origin == activation::Origin::added) ++counts.added;
      if (mark.origin == activation::Origin::moved) ++counts.moved;
    }
    counts.removed = before + counts.added - marks.marks.size();
    return counts;
  }

  /// The user's exclusions and those of the drug log.
  [[nodiscard]] std::vector<response::Exclusion> all_exclusions() const {
    std::vector<response::Exclusion> all = exclusions_of(in_.session.review);
    for (const auto& stretch : out_.plan.excluded)
      all.push_back({"", {stretch.start, stretch.end}});
    return all;
  }

  [[nodiscard]] std::optional<std::size_t> index_of(const std::string& label) const {
    for (std::size_t i = 0; i < out_.channels.size(); ++i) {
      if (out_.channels[i].label == label) return i;
    }
    return std::nullopt;
  }

  std::optional<Error> pair_electrodes() {
    for (const auto& entry : in_.session.pathways) {
      const auto from = index_of(entry.from);
      const auto to = index_of(entry.to);
      if (!from || !to) {
        return Error{ErrorCode::bad_value,
                     in_.session.path,
                     {},
                     "pathway \"" + entry.label + "\" runs between channels that the session does not list",
                     "name two labels of channels"};
      }
      auto paired = conduction::pair(entry.label, electrode(*from), electrode(*to), in_.settings.conduction);
      if (!paired) return paired.error();
      const auto distance = entry.distance_mm ? std::optional(millimetres(*entry.distance_mm)) : std::nullopt;
      const auto facts = conduction_facts(*paired, distance);
      out_.conduction_facts.insert(out_.conduction_facts.end(), facts.begin(), facts.end());
      out_.pathways.push_back(std::move(paired).value());
    }
    return std::nullopt;
  }

  [[nodiscard]] conduction::Electrode electrode(std::size_t i) const {
    const Channel& channel = out_.channels[i];
    return {&out_.activations[i], channel.role, channel.time_base().end() + channel.skew};
  }

  /// First channel of a role, in the session's order.
  [[nodiscard]] const ChannelActivations* first_of(std::initializer_list<Role> roles) const {
    for (const Role role : roles) {
      for (std::size_t i = 0; i < out_.channels.size(); ++i) {
        if (out_.channels[i].role == role) return &out_.activations[i];
      }
    }
    return nullptr;
  }

  std::optional<Error> read_rhythm() {
    rhythm::RhythmInputs inputs;
    inputs.atrial = first_of({Role::atrial, Role::sinus});
    inputs.ventricular = first_of({Role::ventricular, Role::ecg});
    inputs.end = in_.recording->duration;
    for (const auto& pathway : out_.pathways) {
      const Role from = out_.channels[*index_of(pathway.from)].role;
      const Role to = out_.channels[*index_of(pathway.to)].role;
      const bool atrioventricular =
          (from == Role::atrial || from == Role::sinus) && (to == Role::ventricular || to == Role::ecg);
      if (atrioventricular && inputs.av == nullptr) inputs.av = &pathway;
    }
    auto settings = in_.settings.rhythm;
    settings.timing_tolerance = std::max(settings.timing_tolerance, timing_tolerance(inputs));
    out_.settings["rhythm.timing_tolerance_s"] = settings.timing_tolerance.value();
    auto rhythm = rhythm::compute(inputs, settings);
    if (!rhythm) return rhythm.error();
    out_.rhythm = std::move(rhythm).value();
    return std::nullopt;
  }

  /// Two delays that differ by less than three timing SDs, or 1.5 sample periods, are equal.
  [[nodiscard]] Seconds timing_tolerance(const rhythm::RhythmInputs& inputs) const {
    Seconds tolerance(0.0);
    if (inputs.av == nullptr) return tolerance;
    for (const auto& label : {inputs.av->from, inputs.av->to}) {
      const std::size_t i = *index_of(label);
      tolerance = std::max({tolerance, 3.0 * out_.activations[i].timing_sd,
                            1.5 * period_of(out_.channels[i].time_base().rate())});
    }
    return tolerance;
  }

  std::optional<Error> plan_steps() {
    protocol::BathConditions bath;
    bath.volume_ml = in_.session.preparation.bath_volume_ml;
    bath.arrival_delay = in_.session.preparation.arrival_delay;
    auto plan = protocol::plan_curves(in_.protocol, bath, in_.recording->duration);
    if (!plan) return plan.error();
    out_.plan = std::move(plan).value();
    warn(out_.plan.warnings);
    return std::nullopt;
  }

  std::optional<Error> read_responses() {
    auto responses = response::compute(response_inputs(out_, in_.session.measures), in_.settings.response);
    if (!responses) return responses.error();
    out_.responses = std::move(responses).value();
    warn(out_.responses.warnings);
    return std::nullopt;
  }

  std::optional<Error> fit() {
    out_.curves = fit_curves(out_.responses, in_.session.preparation.label, in_.settings.model,
                             in_.settings.fit, threads_);
    return std::nullopt;
  }

  const SessionInputs& in_;
  unsigned threads_;
  Detection& detection_;
  Progress progress_;
  SessionResult out_;
};

const std::array<Analysis::Stage, 6> Analysis::kStages = {
    {{0.0, "reading the drug log", &Analysis::plan_steps},
     {0.0, "finding activations", &Analysis::find_activations},
     {stages::kPairing, "pairing electrodes", &Analysis::pair_electrodes},
     {stages::kRhythm, "reading the rhythm", &Analysis::read_rhythm},
     {stages::kResponses, "reading responses", &Analysis::read_responses},
     {stages::kFits, "fitting curves", &Analysis::fit}}};

} // namespace

Result<SessionResult> analyse(const SessionInputs& inputs, unsigned threads) {
  Detection detection;
  return analyse(inputs, threads, detection, Watch());
}

Result<SessionResult> analyse(const SessionInputs& inputs, unsigned threads, Detection& detection,
                              const Watch& watch) {
  return Analysis(inputs, threads, detection, watch).run();
}

} // namespace chronodrome::session
