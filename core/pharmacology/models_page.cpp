// Chronodrome, GPL-3.0-or-later.
#include "pharmacology/models_page.h"

#include "pharmacology/flags.h"
#include "pharmacology/model.h"

namespace chronodrome::pharmacology {

namespace {

std::string row(const ParameterMeaning& one, const std::string& kind) {
  return "| `" + std::string(one.name) + "` | " + kind + " | " + std::string(one.unit) + " | " +
         std::string(one.meaning) + " |\n";
}

std::string model_text(const ModelMeaning& model) {
  std::string text = "## `" + std::string(model.name) + "`\n\n    " + std::string(model.equation) +
                     "\n\n| name | kind | unit | meaning |\n| --- | --- | --- | --- |\n";
  for (const ParameterMeaning& one : model.parameters)
    text += row(one, "parameter");
  for (const ParameterMeaning& one : model.derived)
    text += row(one, "derived");
  return text + "\nIntervals: " + std::string(model.intervals) + ".\n\n";
}

} // namespace

std::string models_page() {
  std::string page =
      "# Models and flags\n\n"
      "Models of one concentration-response curve. C is the bath concentration in mol/L; a unit `response` "
      "is "
      "that of the\n"
      "measure; a unit 1 is a pure number. Parameters and derived numbers stand in results in the order "
      "given "
      "here. Each is\n"
      "an estimate, its standard error and the two limits of its interval (95 % unless set otherwise); what "
      "the data do not\n"
      "give is missing. In a censored fit (likelihood `censored`: some responses known only as limits) all "
      "intervals are\n"
      "estimate +- t standard errors of the observed information, those of `nh` taken on ln nh. This page is "
      "made from the\n"
      "program's own tables (a test compares them).\n\n";
  for (const ModelMeaning& model : model_meanings())
    page += model_text(model);
  page += "## Flags\n\n"
          "The closed list of words that a fit may carry, gravest first; the flags of a fit stand in this "
          "order.\n\n"
          "| flag | meaning | what to do |\n| --- | --- | --- |\n";
  for (const FlagMeaning& flag : flag_meanings()) {
    page += "| `" + std::string(flag.flag) + "` | " + std::string(flag.meaning) + " | " +
            std::string(flag.advice) + " |\n";
  }
  return page;
}

} // namespace chronodrome::pharmacology
