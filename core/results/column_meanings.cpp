// Chronodrome, GPL-3.0-or-later.
#include <array>

#include "results/dictionary.h"

namespace chronodrome::results {
namespace {

using enum ColumnKind;
using Row = ColumnMeaning;

constexpr std::string_view kChannelUnit = "of the channel";

constexpr std::array kRows{
    Row{"activations.csv", "channel", text, "", "label of the channel", "as in the session"},
    Row{"activations.csv", "index", count, "", "number of the activation on its channel", "from 0"},
    Row{"activations.csv", "time_s", number, "s",
        "time of the activation, from the first sample of the first file", "rising within a channel"},
    Row{"activations.csv", "amplitude", number, kChannelUnit,
        "peak to peak; for tension and pressure the developed value", ""},
    Row{"activations.csv", "confidence", number, "", "how surely this is an activation",
        "0 to 1; a mark set by hand has 1"},
    Row{"activations.csv", "origin", text, "", "who put the mark there", "detected added moved"},

    Row{"intervals.csv", "channel", text, "", "label of the channel", "as in the session"},
    Row{"intervals.csv", "index", count, "", "number of the later of the two activations", "from 1"},
    Row{"intervals.csv", "time_s", number, "s", "time of the later activation", ""},
    Row{"intervals.csv", "interval_s", number, "s", "from the activation before to this one",
        "empty where it crosses missing or unreadable signal"},
    Row{"intervals.csv", "rate_bpm", number, "bpm", "60 over the interval",
        "empty where there is no interval"},
    Row{"intervals.csv", "flag", text, "", "what is special about the interval, the first that applies",
        "empty gap excluded edited low_confidence premature after_pause"},

    Row{"delays.csv", "pathway", text, "", "label of the pathway", "as in the session"},
    Row{"delays.csv", "index", count, "", "number of the row within its pathway", "from 0"},
    Row{"delays.csv", "from_time_s", number, "s", "activation of the pathway's first electrode",
        "empty where unpaired"},
    Row{"delays.csv", "to_time_s", number, "s", "activation of the pathway's second electrode",
        "empty where blocked"},
    Row{"delays.csv", "delay_ms", number, "ms", "second minus first", "negative where retrograde"},
    Row{"delays.csv", "state", text, "", "what became of the impulse",
        "conducted blocked retrograde unpaired"},

    Row{"rhythm.csv", "start_s", number, "s", "begin of the episode", ""},
    Row{"rhythm.csv", "end_s", number, "s", "end of the episode", "episodes may overlap"},
    Row{"rhythm.csv", "kind", text, "", "kind of rhythm, by the rules of the settings",
        "regular first_degree_av_block wenckebach second_degree_fixed two_to_one high_degree_av_block "
        "complete_av_block sinus_pause arrest undetermined unreadable"},
    Row{"rhythm.csv", "detail", text, "", "numbers of the rule", "key=value, divided by semicolons"},

    Row{"responses.csv", "curve", count, "", "number of the concentration-response curve", "from 1, in time"},
    Row{"responses.csv", "agent", text, "", "what was added, as first written in the drug log", ""},
    Row{"responses.csv", "background", text, "", "other agents in the bath", "empty: none"},
    Row{"responses.csv", "concentration_mol_per_l", number, "mol/L",
        "bath concentration of the agent, as the drug log states it (nominal)",
        "0: control before the first addition"},
    Row{"responses.csv", "measure", text, "", "what was measured, and where", "KIND:LABEL as in the session"},
    Row{"responses.csv", "unit", text, "", "unit of value, sem and limit",
        "bpm ms m/s mN mmHg mmHg/s mL/min 1, or the channel's own"},
    Row{"responses.csv", "value", number, "in column unit", "the response on its plateau",
        "empty unless status is ok or not_steady"},
    Row{"responses.csv", "sem", number, "in column unit",
        "standard error over beats, corrected for correlation of neighbours; never over preparations", ""},
    Row{"responses.csv", "n_beats", count, "", "beats that the value is read from", ""},
    Row{"responses.csv", "window_start_s", number, "s", "begin of the plateau's window", ""},
    Row{"responses.csv", "window_end_s", number, "s", "end of the plateau's window", ""},
    Row{"responses.csv", "status", text, "", "what the value is worth",
        "ok not_steady censored arrested unreadable excluded"},
    Row{"responses.csv", "limit", number, "in column unit", "bound where only a bound is known",
        "empty: none"},
    Row{"responses.csv", "limit_side", text, "", "side on which the value lies", "empty at_least at_most"},

    Row{"mechanics.csv", "channel", text, "", "label of the channel", "tension and pressure only"},
    Row{"mechanics.csv", "index", count, "", "number of the contraction on its channel", "from 0"},
    Row{"mechanics.csv", "time_s", number, "s", "time of the steepest rise", ""},
    Row{"mechanics.csv", "foot_s", number, "s", "time of the upstroke's onset", ""},
    Row{"mechanics.csv", "peak_s", number, "s", "time of the highest value", ""},
    Row{"mechanics.csv", "diastolic", number, kChannelUnit, "value at the upstroke's onset", ""},
    Row{"mechanics.csv", "systolic", number, kChannelUnit, "highest value", ""},
    Row{"mechanics.csv", "developed", number, kChannelUnit, "systolic minus diastolic", ""},
    Row{"mechanics.csv", "rate_of_rise", number, "unit of the channel per s", "steepest rise", ""},
    Row{"mechanics.csv", "rate_of_fall", number, "unit of the channel per s", "steepest fall", "negative"},
    Row{"mechanics.csv", "time_to_peak_s", number, "s", "from the foot to the peak", ""},
    Row{"mechanics.csv", "half_relaxation_s", number, "s", "from the peak to half of the developed value",
        "empty where the next beat came first"},

    Row{"quality.csv", "channel", text, "", "label of the channel", "as in the session"},
    Row{"quality.csv", "start_s", number, "s", "begin of the stretch", ""},
    Row{"quality.csv", "end_s", number, "s", "end of the stretch",
        "10 s after its begin, or the signal's end"},
    Row{"quality.csv", "signal_to_noise", number, "", "median peak to peak of the beats over twice the noise",
        "0: no beats"},
    Row{"quality.csv", "noise_sd", number, kChannelUnit, "robust standard deviation between beats", ""},
    Row{"quality.csv", "mains_rms", number, kChannelUnit, "root mean square of the mains hum taken out", ""},
    Row{"quality.csv", "clipped_share", number, "", "share of the samples at a rail", "0 to 1"},
    Row{"quality.csv", "unreadable_share", number, "", "share of the time that cannot be read", "0 to 1"},
    Row{"quality.csv", "index", count, "", "quality in one number",
        "0 to 100; 80 and more good, 50 to 79 usable, below 50 poor"},

    Row{"conduction.csv", "pathway", text, "", "label of the pathway", "as in the session"},
    Row{"conduction.csv", "measure", text, "", "what the row states",
        "control_delay delay conducted velocity"},
    Row{"conduction.csv", "value", number, "in column unit", "over the whole recording",
        "empty where no beat was conducted"},
    Row{"conduction.csv", "unit", text, "", "unit of value, ci_low and ci_high", "ms m/s 1"},
    Row{"conduction.csv", "ci_low", number, "in column unit", "lower 95 % limit", "empty: not bounded"},
    Row{"conduction.csv", "ci_high", number, "in column unit", "upper 95 % limit", "empty: not bounded"},
    Row{"conduction.csv", "n", count, "", "beats behind the value", ""},
    Row{"conduction.csv", "detail", text, "", "in words, and further numbers", "key=value where it has any"},

    Row{"workbook.xlsx", "curve", count, "", "number of the concentration-response curve", "sheet fits"},
    Row{"workbook.xlsx", "agent", text, "", "what was added", "sheet fits"},
    Row{"workbook.xlsx", "background", text, "", "other agents in the bath", "sheet fits; empty: none"},
    Row{"workbook.xlsx", "preparation", text, "", "label of the preparation", "sheet fits"},
    Row{"workbook.xlsx", "measure", text, "", "what was fitted", "sheet fits; KIND:LABEL"},
    Row{"workbook.xlsx", "model", text, "", "equation", "sheet fits; a word of models.md"},
    Row{"workbook.xlsx", "likelihood", text, "", "how the responses enter", "sheet fits; gaussian censored"},
    Row{"workbook.xlsx", "n_points", count, "", "responses that entered", "sheet fits"},
    Row{"workbook.xlsx", "parameter", text, "", "parameter, or number derived from parameters",
        "sheet fits; models.md lists them"},
    Row{"workbook.xlsx", "unit", text, "", "unit of estimate, se and limits", "sheet fits; empty: none"},
    Row{"workbook.xlsx", "estimate", number, "in column unit", "least-squares optimum",
        "sheet fits; empty where the data do not give one"},
    Row{"workbook.xlsx", "se", number, "in column unit", "standard error", "sheet fits; empty: none"},
    Row{"workbook.xlsx", "ci_low", number, "in column unit", "lower 95 % limit", "sheet fits; empty: open"},
    Row{"workbook.xlsx", "ci_high", number, "in column unit", "upper 95 % limit", "sheet fits; empty: open"},
    Row{"workbook.xlsx", "ci_method", text, "", "how the limits were found",
        "sheet fits; profile wald fixed or empty"},
    Row{"workbook.xlsx", "converged", text, "", "whether the search reached a minimum", "sheet fits; yes no"},
    Row{"workbook.xlsx", "flags", text, "", "what weakens the fit", "sheet fits; words of models.md"},

    Row{"dictionary.csv", "file", text, "", "table file of the results folder", ""},
    Row{"dictionary.csv", "column", text, "", "column of that file", ""},
    Row{"dictionary.csv", "meaning", text, "", "what the column holds", ""},
    Row{"dictionary.csv", "unit", text, "", "unit of its numbers", "empty: none"},
    Row{"dictionary.csv", "values", text, "", "allowed words, range, or when a cell is empty", ""},
};

} // namespace

std::span<const ColumnMeaning> column_meanings() {
  return kRows;
}

} // namespace chronodrome::results
