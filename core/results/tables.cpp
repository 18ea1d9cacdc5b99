// Chronodrome, GPL-3.0-or-later.
#include "results/tables.h"

#include <algorithm>

#include "results/csv_text.h"
#include "results/curves_json.h"
#include "results/dictionary.h"

namespace chronodrome::results {

using session::SessionResult;

std::string activations_csv(const SessionResult& result) {
  CsvTable table("channel,index,time_s,amplitude,confidence,origin");
  for (const auto& channel : result.activations) {
    std::size_t index = 0;
    for (const auto& mark : channel.marks) {
      table.text(channel.channel)
          .count(index++)
          .time(mark.time)
          .number(mark.amplitude)
          .number(mark.confidence);
      table.text(activation::name_of(mark.origin)).end_row();
    }
  }
  return table.take();
}

std::string intervals_csv(const SessionResult& result) {
  CsvTable table("channel,index,time_s,interval_s,rate_bpm,flag");
  for (std::size_t i = 0; i < result.intervals.size(); ++i) {
    for (const auto& interval : result.intervals[i]) {
      table.text(result.activations[i].channel).count(interval.index).time(interval.time);
      const bool known = interval.flag != rhythm::IntervalFlag::gap;
      table.time(known ? std::optional(interval.length) : std::nullopt);
      table.number(known ? std::optional(rate_of(interval.length).value()) : std::nullopt);
      table.text(rhythm::name_of(interval.flag)).end_row();
    }
  }
  return table.take();
}

std::string delays_csv(const SessionResult& result) {
  CsvTable table("pathway,index,from_time_s,to_time_s,delay_ms,state");
  for (const auto& pathway : result.pathways) {
    std::size_t index = 0;
    for (const auto& row : pathway.rows) {
      table.text(pathway.pathway).count(index++).time(row.from_time).time(row.to_time);
      table.number(row.delay ? std::optional(in_milliseconds(*row.delay)) : std::nullopt);
      table.text(conduction::name_of(row.state)).end_row();
    }
  }
  return table.take();
}

std::string rhythm_csv(const SessionResult& result) {
  CsvTable table("start_s,end_s,kind,detail");
  for (const auto& episode : result.rhythm.episodes) {
    table.time(episode.start).time(episode.end).text(episode.kind).text(episode.detail).end_row();
  }
  return table.take();
}

std::string responses_csv(const SessionResult& result) {
  CsvTable table("curve,agent,background,concentration_mol_per_l,measure,unit,value,sem,n_beats,window_start_"
                 "s,window_end_s,status,"
                 "limit,limit_side");
  for (const auto& row : result.responses.rows) {
    table.text(std::to_string(row.curve))
        .text(row.agent)
        .text(row.background)
        .number(row.concentration.value());
    table.text(row.measure).text(row.unit).number(row.value).number(row.sem).count(row.n_beats);
    table.time(row.window_start).time(row.window_end).text(response::name_of(row.status)).number(row.limit);
    table.text(row.limit_side).end_row();
  }
  return table.take();
}

std::string mechanics_csv(const SessionResult& result) {
  CsvTable table("channel,index,time_s,foot_s,peak_s,diastolic,systolic,developed,rate_of_rise,rate_of_fall,"
                 "time_to_peak_s,"
                 "half_relaxation_s");
  for (const auto& channel : result.activations) {
    std::size_t index = 0;
    for (const auto& beat : channel.beats) {
      table.text(channel.channel)
          .count(index++)
          .time(beat.time)
          .time(beat.foot)
          .time(beat.peak)
          .number(beat.diastolic);
      table.number(beat.systolic).number(beat.developed).number(beat.rate_of_rise).number(beat.rate_of_fall);
      table.time(beat.time_to_peak);
      const bool relaxed = beat.half_relaxation > Seconds(0.0);
      table.time(relaxed ? std::optional(beat.half_relaxation) : std::nullopt).end_row();
    }
  }
  return table.take();
}

std::string quality_csv(const SessionResult& result) {
  CsvTable table(
      "channel,start_s,end_s,signal_to_noise,noise_sd,mains_rms,clipped_share,unreadable_share,index");
  for (const auto& channel : result.activations) {
    for (const auto& window : channel.quality) {
      table.text(channel.channel)
          .time(window.span.start)
          .time(window.span.end)
          .number(window.signal_to_noise);
      table.number(window.noise_sd)
          .number(window.mains_rms)
          .number(window.clipped_share)
          .number(window.unreadable_share);
      table.text(std::to_string(window.index)).end_row();
    }
  }
  return table.take();
}

std::string conduction_csv(const SessionResult& result) {
  CsvTable table("pathway,measure,value,unit,ci_low,ci_high,n,detail");
  for (const auto& fact : result.conduction_facts) {
    table.text(fact.pathway)
        .text(fact.measure)
        .number(fact.value)
        .text(fact.unit)
        .number(fact.ci_low)
        .number(fact.ci_high);
    table.count(fact.n).text(fact.detail).end_row();
  }
  return table.take();
}

std::vector<OutputFile> result_files(const SessionResult& result, const std::string& program_version) {
  std::vector<OutputFile> files = {
      {"activations.csv", activations_csv(result)}, {"intervals.csv", intervals_csv(result)},
      {"delays.csv", delays_csv(result)},           {"rhythm.csv", rhythm_csv(result)},
      {"responses.csv", responses_csv(result)},     {"curves.json", curves_json(result.curves)},
      {"quality.csv", quality_csv(result)}};
  const bool mechanical =
      std::any_of(result.channels.begin(), result.channels.end(),
                  [](const auto& channel) { return recording::is_mechanical(channel.role); });
  if (mechanical) files.push_back({"mechanics.csv", mechanics_csv(result)});
  if (!result.conduction_facts.empty()) files.push_back({"conduction.csv", conduction_csv(result)});
  files.push_back({"dictionary.csv", dictionary_csv(files)});
  files.push_back({"summary.json", summary_json(result, program_version)});
  return files;
}

} // namespace chronodrome::results
