// Chronodrome, GPL-3.0-or-later.
#include "result_tables.h"

#include <algorithm>
#include <cmath>
#include <map>
#include <set>

#include "base/number_text.h"
#include "pharmacology/flags.h"
#include "text_table.h"

namespace chronodrome::cli {
namespace {

using pharmacology::Estimate;
using response::Response;
using response::Status;

/// An estimate with its interval; an open side reads "open".
std::string with_interval(const Estimate* estimate, int decimals) {
  if (estimate == nullptr || !estimate->estimate) return "-";
  const auto side = [&](const std::optional<double>& bound) {
    return bound ? fixed_text(*bound, decimals) : std::string("open");
  };
  return fixed_text(*estimate->estimate, decimals) + " (" + side(estimate->ci_low) + " to " +
         side(estimate->ci_high) + ")";
}

/// Decimals that show a number of this size with about four digits.
int decimals_for(double value) {
  const double size = std::abs(value);
  return size >= 1000 ? 0 : size >= 100 ? 1 : size >= 10 ? 2 : 3;
}

/// A response as read: value, or what its status says instead.
std::string response_cell(const Response& row) {
  if (row.value) {
    return fixed_text(*row.value, decimals_for(*row.value)) + (row.is_selected ? " #" : "") +
           (row.status == Status::not_steady ? " *" : "");
  }
  std::string cell = response::name_of(row.status);
  if (row.limit) cell += (row.limit_side == "at_most" ? " <= " : " >= ") + number_text(*row.limit, 4);
  return cell;
}

std::string curve_text(const session::SessionResult& result, int curve) {
  std::vector<std::string> measures;
  std::vector<double> concentrations;
  std::map<std::pair<double, std::string>, std::string> cells;
  std::string agent, background;
  bool not_steady = false;
  bool of_survivors = false;
  for (const Response& row : result.responses.rows) {
    if (row.curve != curve) continue;
    const std::string head = row.measure + (row.unit == "1" ? "" : ", " + row.unit);
    if (std::find(measures.begin(), measures.end(), head) == measures.end()) measures.push_back(head);
    const double concentration = row.concentration.value();
    if (std::find(concentrations.begin(), concentrations.end(), concentration) == concentrations.end()) {
      concentrations.push_back(concentration);
    }
    cells[{concentration, head}] = response_cell(row);
    agent = row.agent;
    background = row.background;
    not_steady = not_steady || row.status == Status::not_steady;
    of_survivors = of_survivors || (row.value && row.is_selected);
  }
  std::vector<std::string> head = {"mol/L"};
  head.insert(head.end(), measures.begin(), measures.end());
  TextTable table(head);
  for (const double concentration : concentrations) {
    std::vector<std::string> row = {number_text(concentration, 4)};
    for (const auto& measure : measures)
      row.push_back(cells[{concentration, measure}]);
    table.add(row);
  }
  std::string text = "\ncurve " + std::to_string(curve) + ": " + agent +
                     (background.empty() ? "" : " with " + background) + "\n";
  text += table.text();
  if (of_survivors)
    text += "  # beats were blocked: a delay is that of the conducted beats alone, a rate not that of the "
            "chamber above\n";
  if (not_steady) text += "  * not steady yet: the summary states what is left\n";
  return text;
}

std::string channels_text(const session::SessionResult& result) {
  TextTable table({"channel", "role", "activations", "timing SD, ms", "unreadable, s"});
  for (std::size_t i = 0; i < result.channels.size(); ++i) {
    const auto& found = result.activations[i];
    double lost = 0.0;
    for (const auto& bad : found.unreadable)
      lost += (bad.span.end - bad.span.start).value();
    table.add({result.channels[i].label, recording::name_of(result.channels[i].role),
               std::to_string(found.marks.size()),
               found.marks.empty() ? "" : fixed_text(in_milliseconds(found.timing_sd), 3),
               fixed_text(lost, 1)});
  }
  return table.text();
}

std::string rhythm_text(const session::SessionResult& result) {
  std::map<std::string, std::pair<std::size_t, double>> kinds;
  for (const auto& episode : result.rhythm.episodes) {
    auto& [count, seconds] = kinds[episode.kind];
    ++count;
    seconds += (episode.end - episode.start).value();
  }
  TextTable table({"rhythm", "episodes", "total, s"});
  for (const auto& kind : kinds) {
    table.add({kind.first, std::to_string(kind.second.first), fixed_text(kind.second.second, 1)});
  }
  return kinds.empty() ? std::string() : "\n" + table.text();
}

} // namespace

std::string fits_text(const std::vector<session::FittedCurve>& curves) {
  TextTable table({"curve", "measure", "n", "pEC50 (95 %)", "Emax (95 %)", "basal (95 %)",
                   "Hill coefficient (95 %)", "flags"});
  std::set<std::string> used;
  for (const auto& curve : curves) {
    std::string flags;
    for (const auto& flag : curve.fit.flags) {
      flags += (flags.empty() ? "" : " ") + flag;
      used.insert(flag);
    }
    const auto* basal = curve.fit.find("basal");
    const auto* emax = curve.fit.find("emax");
    const auto place = [](const Estimate* e) {
      return e != nullptr && e->estimate ? decimals_for(*e->estimate) : 2;
    };
    std::string name = std::to_string(curve.curve) + " " + curve.agent;
    if (!curve.background.empty()) name += " with " + curve.background;
    if (!curve.preparation.empty() && curve.agent.empty()) name += curve.preparation;
    const std::string measure = curve.measure + (curve.fit.likelihood == "censored" ? " (censored)" : "");
    table.add({name, measure, std::to_string(curve.fit.n_points), with_interval(curve.fit.find("pec50"), 2),
               with_interval(emax, place(emax)), with_interval(basal, place(basal)),
               with_interval(curve.fit.find("nh"), 2), flags});
  }
  std::string text = table.text();
  for (const auto& meaning : pharmacology::flag_meanings()) {
    if (used.count(std::string(meaning.flag)) == 0) continue;
    text += "  " + std::string(meaning.flag) + ": " + std::string(meaning.meaning) + "; " +
            std::string(meaning.advice) + "\n";
  }
  return text;
}

std::string session_text(const session::SessionResult& result) {
  const auto& preparation = result.session.preparation;
  std::string text = result.session.name;
  for (const auto& part : {preparation.species, preparation.tissue})
    text += part.empty() ? "" : ", " + part;
  text += "\n" + channels_text(result);
  std::set<int> curves;
  for (const auto& row : result.responses.rows)
    curves.insert(row.curve);
  for (const int curve : curves)
    text += curve_text(result, curve);
  text += rhythm_text(result);
  if (!result.curves.empty()) text += "\n" + fits_text(result.curves);
  if (!result.warnings.empty())
    text += "\n" + std::to_string(result.warnings.size()) +
            (result.warnings.size() == 1 ? " warning" : " warnings") +
            ", on standard error and in summary.json\n";
  return text + "\n";
}

} // namespace chronodrome::cli
