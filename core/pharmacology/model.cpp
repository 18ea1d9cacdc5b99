// Chronodrome, GPL-3.0-or-later.
#include "pharmacology/model.h"

#include <array>

namespace chronodrome::pharmacology {

namespace {

constexpr ParameterMeaning kBasal{"basal", "response", "response without agonist"};
constexpr ParameterMeaning kEmax{"emax", "response",
                                 "asymptote at high concentration, on the axis of the response"};
constexpr ParameterMeaning kPec50{"pec50", "1", "-log10 (EC50 / (1 mol/L)); EC50 halves emax - basal"};
constexpr ParameterMeaning kNh{"nh", "1", "Hill coefficient, above 0; emax - basal carries the direction"};
constexpr ParameterMeaning kUnitNh{"nh", "1", "Hill coefficient, fixed at 1"};
constexpr ParameterMeaning kEc50{"ec50_mol_per_l", "mol/L", "10^-pec50, limits from those of pec50"};
constexpr ParameterMeaning kEffect{"effect_max", "response", "emax - basal: negative for slowing"};

constexpr std::array kHill{kBasal, kEmax, kPec50, kNh};
constexpr std::array kUnitSlope{kBasal, kEmax, kPec50, kUnitNh};
constexpr std::array kHillDerived{kEc50, kEffect};

constexpr std::array kRichards{
    kBasal, kEmax, kPec50, kNh,
    ParameterMeaning{"asymmetry", "1", "exponent s of the curve, between e^-3 and e^3; 1 is a Hill curve"}};
constexpr std::array kRichardsDerived{
    kEc50, kEffect,
    ParameterMeaning{"inflection_mol_per_l", "mol/L", "concentration of the steepest slope against log C"}};

constexpr std::array kBiphasic{
    kBasal, kEmax,
    ParameterMeaning{"fraction_1", "1", "share of emax - basal that the component with the lower EC50 makes"},
    ParameterMeaning{"pec50_1", "1", "of the component with the lower EC50"},
    ParameterMeaning{"pec50_2", "1", "of the component with the higher EC50"}};
constexpr std::array kBiphasicDerived{ParameterMeaning{"ec50_1_mol_per_l", "mol/L", "10^-pec50_1"},
                                      ParameterMeaning{"ec50_2_mol_per_l", "mol/L", "10^-pec50_2"}, kEffect};

constexpr std::array kBell{
    kBasal,
    ParameterMeaning{"effect_1", "response", "asymptote of the first limb, as a difference from basal"},
    ParameterMeaning{"pec50_1", "1", "of the first limb"},
    ParameterMeaning{"nh_1", "1", "Hill coefficient of the first limb"},
    ParameterMeaning{"effect_2", "response", "asymptote of the opposing limb, with its sign"},
    ParameterMeaning{"pec50_2", "1", "of the opposing limb"},
    ParameterMeaning{"nh_2", "1", "Hill coefficient of the opposing limb"}};
constexpr std::array kBellDerived{
    ParameterMeaning{"extremum_mol_per_l", "mol/L", "concentration of the extreme response"}};

constexpr std::array kLinear{kBasal,
                             ParameterMeaning{"slope", "response L/mol", "change of the response per mol/L"}};
constexpr std::array kConstant{ParameterMeaning{"basal", "response", "weighted mean of all responses"}};

constexpr std::string_view kProfile = "profile likelihood; a side that the data leave open has no limit";
constexpr std::string_view kWald =
    "estimate +- t standard errors: too narrow where a plateau is missing, so look at the curve";
constexpr std::string_view kExactT = "exact t intervals (profile and standard-error limits coincide)";

constexpr std::array kMeanings{
    ModelMeaning{Model::hill, "hill", "basal + (emax - basal) C^nh / (C^nh + EC50^nh)", kHill, kHillDerived,
                 kProfile},
    ModelMeaning{Model::hill_unit_slope, "hill_unit_slope", "basal + (emax - basal) C / (C + EC50)",
                 kUnitSlope, kHillDerived, kProfile},
    ModelMeaning{Model::richards, "richards",
                 "basal + (emax - basal) / (1 + (2^(1/s) - 1) (EC50 / C)^nh)^s, s = asymmetry", kRichards,
                 kRichardsDerived, kWald},
    ModelMeaning{Model::biphasic, "biphasic",
                 "basal + (emax - basal) (f C / (C + EC50_1) + (1 - f) C / (C + EC50_2)), f = fraction_1",
                 kBiphasic, kBiphasicDerived, kWald},
    ModelMeaning{
        Model::bell, "bell",
        "basal + effect_1 C^nh_1 / (C^nh_1 + EC50_1^nh_1) + effect_2 C^nh_2 / (C^nh_2 + EC50_2^nh_2)", kBell,
        kBellDerived, kWald},
    ModelMeaning{Model::linear, "linear", "basal + slope C", kLinear, {}, kExactT},
    ModelMeaning{Model::constant, "constant", "basal", kConstant, {}, kExactT},
};

} // namespace

std::span<const ModelMeaning> model_meanings() {
  return kMeanings;
}

std::string model_name(Model model) {
  for (const ModelMeaning& meaning : kMeanings) {
    if (meaning.model == model) return std::string(meaning.name);
  }
  return "";
}

std::optional<Model> model_named(const std::string& name) {
  for (const ModelMeaning& meaning : kMeanings) {
    if (meaning.name == name) return meaning.model;
  }
  return std::nullopt;
}

int parameter_count(Model model) {
  for (const ModelMeaning& meaning : kMeanings) {
    if (meaning.model != model) continue;
    const int listed = static_cast<int>(meaning.parameters.size());
    return model == Model::hill_unit_slope ? listed - 1 : listed;
  }
  return 0;
}

} // namespace chronodrome::pharmacology
