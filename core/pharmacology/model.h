// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <optional>
#include <span>
#include <string>
#include <string_view>

namespace chronodrome::pharmacology {

/// Models of one concentration-response curve. C is the bath concentration in mol/L, L = log10 EC50.
enum class Model {
  hill,            ///< basal + (emax - basal) C^nh / (C^nh + EC50^nh)
  hill_unit_slope, ///< the same with nh = 1
  richards,        ///< basal + (emax - basal) / (1 + 10^(nh (Lb - log10 C)))^s, fitted by its EC50
  biphasic,        ///< two components of unit slope, same direction
  bell,            ///< a rise and a fall, each a Hill curve
  linear,          ///< basal + slope C
  constant,        ///< basal
};

/// The word of the files and the command line for a model, and back; nothing for a word that is none.
std::string model_name(Model model);
std::optional<Model> model_named(const std::string& name);

/// How many parameters the model fits when none is fixed.
int parameter_count(Model model);

struct ParameterMeaning {
  std::string_view name;
  std::string_view unit; ///< "response": that of the measure
  std::string_view meaning;
};

/// What a model says and in which order its parameters and derived numbers stand in results.
struct ModelMeaning {
  Model model;
  std::string_view name;
  std::string_view equation;
  std::span<const ParameterMeaning> parameters;
  std::span<const ParameterMeaning> derived;
  std::string_view intervals; ///< how the 95 % limits are made
};

/// All models, in the order of the enumeration.
std::span<const ModelMeaning> model_meanings();

} // namespace chronodrome::pharmacology
