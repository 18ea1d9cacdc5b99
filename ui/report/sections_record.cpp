// Chronodrome, GPL-3.0-or-later.
#include <algorithm>

#include "base/number_text.h"
#include "results/report_facts.h"
#include "session/analysis_settings.h"
#include "ui/look/number_text.h"
#include "ui/report/sections.h"
#include "ui/report/words.h"

namespace chronodrome::ui::report {
namespace {

using session::SessionResult;
using session::SettingRow;

QString shareText(double share) {
  return QString::fromStdString(fixed_text(100.0 * share, share > 0.0 && share < 0.001 ? 3 : 1)) +
         QStringLiteral("\u00A0%");
}

QString mainsText(const results::ChannelQuality& one, const std::string& unit) {
  if (one.mains_hz == 0.0) return QStringLiteral("none removed");
  QString text = QString::fromStdString(fixed_text(one.mains_hz, 2)) + QStringLiteral("\u00A0Hz");
  if (one.mains_rms) text += QStringLiteral(", ") + look::withUnit(*one.mains_rms, unit);
  return text;
}

/// What the setting would be if the session did not say.
document::SettingValue defaultOf(const SettingRow& row, const std::string& species) {
  session::AnalysisSettings defaults;
  defaults.activation.conditioning.species = species;
  defaults.conduction.species = species;
  return row.get(defaults);
}

Table settingsTable(const SessionResult& result, const std::function<bool(const SettingRow&)>& wanted) {
  Table table;
  table.columns = {{QStringLiteral("setting"), false},
                   {QStringLiteral("value"), true},
                   {QStringLiteral("default"), true},
                   {QStringLiteral("unit"), false},
                   {QStringLiteral("meaning"), false}};
  for (const auto& row : session::setting_rows()) {
    const auto value = result.settings.find(row.key);
    if (!wanted(row) || value == result.settings.end()) continue;
    table.rows.push_back({{plain(row.key), settingText(value->second),
                           settingText(defaultOf(row, result.session.preparation.species)), plain(row.unit),
                           plain(row.meaning)},
                          false});
  }
  return table;
}

bool isRule(const SettingRow& row) {
  return row.key.rfind("rhythm.", 0) == 0 || row.key.rfind("intervals.", 0) == 0;
}

} // namespace

void addQuality(Content& content, const SessionResult& result) {
  content.blocks.emplace_back(Heading{1, QStringLiteral("Signal quality")});
  Table table;
  table.columns = {{QStringLiteral("channel"), false},
                   {QStringLiteral("rate,\u00A0Hz"), true},
                   {QStringLiteral("beats"), true},
                   {QStringLiteral("below 0.5 confidence"), true},
                   {QStringLiteral("signal to noise"), true},
                   {QStringLiteral("clipped"), true},
                   {QStringLiteral("unreadable"), true},
                   {QStringLiteral("mains removed, rms"), false},
                   {QStringLiteral("timing SD,\u00A0ms"), true},
                   {QStringLiteral("lowest quality, at"), true}};
  const double limit = std::get<double>(result.settings.at("intervals.low_confidence"));
  table.columns[3].head =
      QStringLiteral("confidence below ") + QString::fromStdString(chronodrome::number_text(limit));
  const auto qualities = results::channel_qualities(result);
  for (std::size_t i = 0; i < qualities.size(); ++i) {
    const auto& one = qualities[i];
    const auto& channel = result.channels[i];
    table.rows.push_back(
        {{plain(one.channel) + QStringLiteral(" (") + plain(recording::name_of(channel.role)) +
              QLatin1Char(')'),
          QString::fromStdString(chronodrome::number_text(channel.time_base().rate().value(), 6)),
          QString::number(one.activations), QString::number(one.low_confidence),
          one.signal_to_noise ? look::plainText(*one.signal_to_noise) : QStringLiteral("no beats"),
          shareText(one.clipped_share), shareText(one.unreadable_share), mainsText(one, channel.unit),
          one.timing_sd ? QString::fromStdString(fixed_text(in_milliseconds(*one.timing_sd), 3))
                        : QStringLiteral("–"),
          one.lowest_index ? QString::fromStdString(fixed_text(*one.lowest_index, 0)) + QStringLiteral(", ") +
                                 look::timeText(one.lowest_start, 0)
                           : QStringLiteral("–")},
         false});
  }
  content.blocks.emplace_back(std::move(table));
  content.blocks.emplace_back(Paragraph{
      QStringLiteral(
          "Signal to noise: median over windows of 10 s of the beats' peak to peak over twice the noise. "
          "Quality runs from 0 to 100: 80 and more good, 50 to 79 usable, below 50 poor. quality.csv holds "
          "every window."),
      Tone::quiet});
}

void addWarnings(Content& content, const SessionResult& result) {
  content.blocks.emplace_back(Heading{1, QStringLiteral("Warnings")});
  if (result.warnings.empty()) {
    content.blocks.emplace_back(Paragraph{QStringLiteral("None."), Tone::normal});
    return;
  }
  Bullets bullets;
  for (const auto& warning : result.warnings)
    bullets.items.push_back({{}, plain(describe(warning))});
  content.blocks.emplace_back(std::move(bullets));
}

void addSettings(Content& content, const SessionResult& result) {
  content.blocks.emplace_back(Heading{1, QStringLiteral("Settings")});
  content.blocks.emplace_back(Heading{2, QStringLiteral("That differ from the defaults")});
  const auto& changed = result.settings_changed;
  if (changed.empty()) {
    content.blocks.emplace_back(Paragraph{QStringLiteral("None."), Tone::normal});
  } else {
    content.blocks.emplace_back(settingsTable(result, [&](const SettingRow& row) {
      return std::find(changed.begin(), changed.end(), row.key) != changed.end();
    }));
  }
  content.blocks.emplace_back(Heading{2, QStringLiteral("Thresholds of the rhythm and interval rules")});
  content.blocks.emplace_back(settingsTable(result, isRule));
  content.blocks.emplace_back(
      Paragraph{QStringLiteral("The timing tolerance in effect is never below three timing SDs and 1.5 "
                               "samples. summary.json lists every setting with the value in effect."),
                Tone::quiet});
}

void addDefinitions(Content& content, const SessionResult& result) {
  content.blocks.emplace_back(Heading{1, QStringLiteral("Definitions")});
  Bullets bullets;
  for (std::size_t i = 0; i < result.channels.size(); ++i) {
    if (result.activations[i].method.empty()) continue;
    bullets.items.push_back(
        {QStringLiteral("Activation on ") + plain(result.channels[i].label) + QStringLiteral(" – "),
         plain(result.activations[i].method) + QLatin1Char('.')});
  }
  const auto add = [&](const char* lead, const char* text) {
    bullets.items.push_back({QString::fromUtf8(lead), QString::fromUtf8(text)});
  };
  add("Rate – ",
      "60 times the number of intervals over their sum, of all activations of the window, over intervals "
      "that cross no gap and no exclusion; beats/min.");
  add("Conduction delay – ",
      "from the activation of the first electrode to that of the second; the value is the median "
      "over conducted beats, ms.");
  add("Conducted share – ",
      "conducted activations over those that could conduct and whose answer could be seen.");
  add("Developed force or pressure – ",
      "highest value minus the value at the upstroke's onset; median over beats.");
  add("Window – ", "the last part of a step, as the settings response.window_s, response.window_beats and "
                   "response.max_share say, or as placed by hand.");
  add("SEM – ",
      "standard error over the beats of the window, corrected for the correlation of neighbours; it says how "
      "well this plateau was read, and is never an n of preparations.");
  add("pEC50 – ",
      "−log10 of the concentration, in mol/L, of half the effect between basal and Emax (relative, not "
      "absolute 50 %).");
  add("Emax – ", "asymptote at high concentration, on the axis of the response.");
  add("Status – ",
      "steady: measured on a plateau. Not steady: measured, but still moving. Censored or arrested: only a "
      "bound is known. Unreadable or excluded: no value.");
  content.blocks.emplace_back(std::move(bullets));
}

void addProvenance(Content& content, const SessionResult& result, const std::string& version) {
  content.blocks.emplace_back(Heading{1, QStringLiteral("Origin")});
  Facts facts;
  facts.rows = {{QStringLiteral("Program"), QStringLiteral("Chronodrome ") + plain(version)},
                {QStringLiteral("Session"), plain(result.session.path)},
                {QStringLiteral("SHA-256"), plain(result.session_sha256)}};
  for (const auto& file : result.recording->files) {
    facts.rows.emplace_back(QStringLiteral("Recording"), plain(file.path));
    facts.rows.emplace_back(QStringLiteral("SHA-256"), plain(file.sha256));
  }
  if (!result.protocol.file.empty())
    facts.rows.emplace_back(QStringLiteral("Drug log"), plain(result.protocol.file));
  for (const auto& note : result.recording->file_notes)
    facts.rows.emplace_back(QStringLiteral("Note of the file"), plain(note));
  content.blocks.emplace_back(std::move(facts));
  content.blocks.emplace_back(Paragraph{
      QStringLiteral(
          "The same files, session and version give the same numbers. The tables beside this report "
          "hold each beat; dictionary.csv says what each column means."),
      Tone::quiet});
}

void addCautions(Content& content) {
  content.blocks.emplace_back(Heading{1, QStringLiteral("Cautions")});
  Bullets bullets;
  for (const char* text :
       {"For research and teaching only; not for diagnosis or treatment.",
        "Work with animals and their tissues needs a local licence and the approval of an ethics committee.",
        "Handle agents, gases and solutions by their safety data sheets and local rules; keep mains, "
        "stimulators and "
        "amplifiers away from fluids and tested by local rules.",
        "A number here is as good as the signal behind it: look at the traces before you build on it."})
    bullets.items.push_back({{}, QString::fromLatin1(text)});
  content.blocks.emplace_back(std::move(bullets));
  content.blocks.emplace_back(Signatures{{QStringLiteral("Analysed by"), QStringLiteral("Checked by")}});
}

} // namespace chronodrome::ui::report
