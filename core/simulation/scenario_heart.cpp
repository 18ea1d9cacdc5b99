// Chronodrome, GPL-3.0-or-later.
//
// Keys of a scenario that describe the preparation, its heart and what is added to the bath.
#include "simulation/scenario_parts.h"

namespace chronodrome::simulation {

using intake::JsonNotes;
using intake::JsonObject;
using intake::JsonValue;

void set(JsonObject& object, const std::string& key, std::string& value) {
  if (auto text = object.optional_text(key)) value = *std::move(text);
}

void set(JsonObject& object, const std::string& key, double& value) {
  if (const auto number = object.number(key)) value = *number;
}

void set(JsonObject& object, const std::string& key, int& value) {
  if (const auto number = object.whole_number(key)) value = *number;
}

void set(JsonObject& object, const std::string& key, bool& value) {
  if (object.find(key) != nullptr) value = object.truth(key);
}

void set(JsonObject& object, const std::string& key, char& value) {
  const JsonValue* found = object.find(key);
  if (found == nullptr) return;
  if (found->kind == JsonValue::Kind::text && found->text.size() == 1)
    value = found->text[0];
  else
    object.refuse(key, *found, "write one character in quotes");
}

void set(JsonObject& object, const std::string& key, std::optional<double>& value) {
  if (const auto number = object.number(key)) value = *number;
}

void set(JsonObject& object, const std::string& key, Chamber& value) {
  if (object.find(key) == nullptr) return;
  if (const auto chamber = object.one_of<Chamber>(key, chamber_named, "atrial, his, ventricular"))
    value = *chamber;
}

void read_preparation(JsonObject& top, PreparationPlan& plan, JsonNotes& notes) {
  with_object(top, "preparation", notes, [&](JsonObject& object) {
    set(object, "label", plan.label);
    set(object, "species", plan.species);
    set(object, "tissue", plan.tissue);
    set(object, "animal", plan.animal);
    set(object, "sex", plan.sex);
    set(object, "date", plan.date);
    set(object, "group", plan.group);
    set(object, "notes", plan.notes);
    set(object, "temperature_c", plan.temperature_c);
    set(object, "bath_volume_ml", plan.bath_volume_ml);
    set(object, "mass_g", plan.mass_g);
    set(object, "arrival_delay_s", plan.arrival_delay);
  });
}

namespace {

void read_node(JsonObject& object, AvNode& node) {
  set(object, "delay_min_s", node.delay_min);
  set(object, "delay_span_s", node.delay_span);
  set(object, "recovery_tau_s", node.recovery_tau);
  set(object, "recovery_min_s", node.recovery_min);
}

void read_overdrive(JsonObject& parent, Overdrive& overdrive, JsonNotes& notes) {
  with_object(parent, "overdrive", notes, [&](JsonObject& object) {
    set(object, "strength", overdrive.strength);
    set(object, "beats", overdrive.beats);
  });
}

void read_pacemaker(JsonObject& top, Scenario& scenario, JsonNotes& notes) {
  with_object(top, "sinus", notes, [&](JsonObject& object) {
    set(object, "rate_bpm", scenario.sinus.rate);
    set(object, "jitter_sd_s", scenario.sinus.jitter_sd);
    set(object, "slowest_bpm", scenario.sinus.slowest);
    append_each(object, "pauses", scenario.sinus.pauses, notes,
                [](JsonObject& item, SinusClock::Pause& pause) {
                  set(item, "time_s", pause.time);
                  set(item, "length_s", pause.length);
                });
    read_overdrive(object, scenario.sinus.overdrive, notes);
  });
  with_object(top, "escape", notes, [&](JsonObject& object) {
    set(object, "junctional_s", scenario.escape.junctional);
    set(object, "ventricular_s", scenario.escape.ventricular);
    set(object, "jitter_sd_s", scenario.escape.jitter_sd);
    read_overdrive(object, scenario.escape.overdrive, notes);
  });
}

void read_conduction(JsonObject& top, Scenario& scenario, JsonNotes& notes) {
  with_object(top, "av_node", notes, [&](JsonObject& object) {
    read_node(object, scenario.node);
    set(object, "his_to_ventricle_s", scenario.his_to_ventricle);
    with_object(object, "fatigue", notes, [&](JsonObject& item) {
      set(item, "most_s", scenario.fatigue.most);
      set(item, "tau_s", scenario.fatigue.tau);
      set(item, "below_recovery_s", scenario.fatigue.below_recovery);
    });
    with_object(object, "retrograde", notes, [&](JsonObject& item) {
      scenario.retrograde = AvNode{};
      read_node(item, *scenario.retrograde);
    });
  });
  with_object(top, "refractory", notes, [&](JsonObject& object) {
    set(object, "atrial_s", scenario.atrial_refractory);
    set(object, "ventricular_s", scenario.ventricular_refractory);
  });
}

void read_train(JsonObject& object, PacingTrain& train) {
  set(object, "start_s", train.start);
  set(object, "cycle_s", train.cycle);
  set(object, "beats", train.beats);
  if (const auto coupling = object.number("premature_s")) train.premature = Seconds(*coupling);
  set(object, "chamber", train.chamber);
  set(object, "latency_s", train.latency);
}

void read_effect(JsonObject& object, Effect& effect) {
  const auto target = object.one_of<EffectTarget>(
      "target", effect_target_named,
      "rate, delay, force, pressure, delay_min, delay_span, recovery_tau, recovery_min");
  if (target) effect.target = *target;
  set(object, "emax_ratio", effect.emax_ratio);
  set(object, "pec50", effect.pec50);
  set(object, "nh", effect.nh);
  set(object, "onset_tau_s", effect.onset_tau);
  set(object, "washout_tau_s", effect.washout_tau);
}

} // namespace

void read_heart(JsonObject& top, Scenario& scenario, JsonNotes& notes) {
  read_pacemaker(top, scenario, notes);
  read_conduction(top, scenario, notes);
  with_object(top, "fluctuation", notes, [&](JsonObject& object) {
    set(object, "rate_sd_bpm", scenario.fluctuation.rate_sd);
    set(object, "rate_tau_s", scenario.fluctuation.rate_tau);
    set(object, "delay_sd_s", scenario.fluctuation.delay_sd);
    set(object, "delay_tau_s", scenario.fluctuation.delay_tau);
    set(object, "force_sd_ratio", scenario.fluctuation.force_sd_ratio);
    set(object, "force_tau_s", scenario.fluctuation.force_tau);
  });
  append_each(top, "premature", scenario.premature, notes, [](JsonObject& object, PrematureBeat& beat) {
    set(object, "time_s", beat.time);
    set(object, "chamber", beat.chamber);
    set(object, "resets_sinus", beat.resets_sinus);
  });
  append_each(top, "pacing", scenario.pacing, notes, read_train);
}

void read_drugs(JsonObject& top, Scenario& scenario, JsonNotes& notes) {
  append_each(top, "agents", scenario.agents, notes, [&](JsonObject& object, Agent& agent) {
    set(object, "name", agent.name);
    append_each(object, "effects", agent.effects, notes, read_effect);
    append_each(object, "antagonises", agent.antagonisms, notes,
                [](JsonObject& item, Antagonism& antagonism) {
                  set(item, "agent", antagonism.against);
                  set(item, "pkb", antagonism.pkb);
                  set(item, "slope", antagonism.slope);
                });
  });
  append_each(top, "protocol", scenario.protocol, notes, [](JsonObject& object, LoggedEvent& event) {
    set(object, "time_s", event.time);
    const auto kind =
        object.one_of<protocol::EventKind>("event", protocol::event_named, protocol::event_names());
    if (kind) event.kind = *kind;
    set(object, "agent", event.agent);
    set(object, "concentration", event.concentration);
    set(object, "unit", event.unit);
    set(object, "note", event.note);
  });
}

} // namespace chronodrome::simulation
