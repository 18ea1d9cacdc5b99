// Chronodrome, GPL-3.0-or-later.
#include "ui/report/words.h"

#include <array>

#include "base/number_text.h"
#include "pharmacology/flags.h"
#include "results/fit_units.h"
#include "ui/look/number_text.h"

namespace chronodrome::ui::report {
namespace {

using pharmacology::Estimate;

QString number(double value, const Estimate& like) {
  return like.se ? look::plainText(value, *like.se) : look::plainText(value);
}

/// `157.4 beats/min (95\u00A0% interval 156.2 to 158.5)`; a bound where only a bound is known.
QString boundedText(const Estimate& estimate, const std::string& unit) {
  const QString name = look::unitText(unit);
  const QString behind = name.isEmpty() ? QString() : QChar(0x00A0) + name;
  if (!estimate.estimate) return QStringLiteral("not estimated");
  if (estimate.ci_method == "fixed")
    return number(*estimate.estimate, estimate) + behind + QStringLiteral(" (held fixed)");
  if (estimate.ci_low && estimate.ci_high)
    return number(*estimate.estimate, estimate) + behind + QStringLiteral(" (95\u00A0% interval ") +
           number(*estimate.ci_low, estimate) + QStringLiteral(" to ") + number(*estimate.ci_high, estimate) +
           QLatin1Char(')');
  if (estimate.ci_low)
    return QStringLiteral("at least ") + number(*estimate.ci_low, estimate) + behind +
           QStringLiteral(" (95\u00A0% limit; open above)");
  if (estimate.ci_high)
    return QStringLiteral("at most ") + number(*estimate.ci_high, estimate) + behind +
           QStringLiteral(" (95\u00A0% limit; open below)");
  return number(*estimate.estimate, estimate) + behind + QStringLiteral(" (no limits from these data)");
}

/// Whether the fit gave any number worth a sentence of its own.
bool isWithoutEstimate(const pharmacology::CurveFit& fit) {
  return fit.has_flag(pharmacology::flags::kDeclined) || fit.has_flag(pharmacology::flags::kNoResponse) ||
         fit.has_flag(pharmacology::flags::kNotConverged);
}

QString withoutStop(const std::string& sentence) {
  QString text = plain(sentence);
  while (text.endsWith(QLatin1Char('.')))
    text.chop(1);
  return text;
}

} // namespace

QString withoutControls(const QString& markup) {
  QString clean = markup;
  for (QChar& c : clean) {
    const ushort code = c.unicode();
    const bool is_blank = code == 0x09 || code == 0x0A || code == 0x0D;
    if ((code < 0x20 && !is_blank) || (code >= 0x7F && code < 0xA0) || code == 0xFFFE || code == 0xFFFF)
      c = QChar(0xFFFD);
  }
  return clean;
}

QString plain(const QString& text) {
  QString clean = withoutControls(text);
  for (QChar& c : clean) {
    const ushort code = c.unicode();
    if (code == 0x09 || code == 0x0A || code == 0x0D || code == 0x2028 || code == 0x2029)
      c = QLatin1Char(' ');
  }
  return clean;
}

QString plain(std::string_view text) {
  return plain(QString::fromUtf8(text.data(), static_cast<qsizetype>(text.size())));
}

QString statedOr(const std::string& text) {
  return text.empty() ? QStringLiteral("not stated") : plain(text);
}

QString valueText(const response::Response& response) {
  if (!response.value) return look::responseText(response);
  if (!response.sem) return look::plainText(*response.value);
  return look::plainText(*response.value, *response.sem) + QStringLiteral(" ± ") +
         look::plainText(*response.sem, *response.sem);
}

QString stretchText(Seconds start, Seconds end) {
  return look::timeText(start) + QStringLiteral(" to ") + look::timeText(end);
}

QString secondsText(Seconds time) {
  return QString::fromStdString(fixed_text(time.value(), 1));
}

QString rhythmText(const std::string& kind) {
  static const std::array<std::pair<const char*, const char*>, 12> words = {
      {{"regular", "regular"},
       {"first_degree_av_block", "first-degree A-V block"},
       {"wenckebach", "second-degree A-V block, Wenckebach"},
       {"second_degree_fixed", "second-degree A-V block, fixed delay"},
       {"two_to_one", "2:1 A-V block"},
       {"high_degree_av_block", "high-degree A-V block"},
       {"complete_av_block", "complete A-V block"},
       {"sinus_pause", "sinus pause"},
       {"arrest", "arrest"},
       {"undetermined", "undetermined"},
       {"unreadable", "unreadable"},
       {"preexcitation", "pre-excitation"}}};
  for (const auto& [word, text] : words) {
    if (kind == word) return QString::fromLatin1(text);
  }
  return plain(kind).replace(QLatin1Char('_'), QLatin1Char(' '));
}

QString detailText(const std::string& detail) {
  QString text = plain(detail);
  text.replace(QLatin1Char(';'), QStringLiteral(", "));
  text.replace(QLatin1Char('='), QLatin1Char(' '));
  text.replace(QStringLiteral("_ms "), QStringLiteral(" (ms) "));
  text.replace(QStringLiteral("_s "), QStringLiteral(" (s) "));
  return text.replace(QLatin1Char('_'), QLatin1Char(' '));
}

QString flagWord(const std::string& flag) {
  return plain(flag).replace(QLatin1Char('_'), QLatin1Char(' '));
}

QString fitSentence(const session::SessionResult& result, const session::FittedCurve& curve) {
  const auto& fit = curve.fit;
  if (isWithoutEstimate(fit)) {
    const QString why = fit.reason.empty() ? flagWord(fit.flags.front()) : withoutStop(fit.reason);
    return QStringLiteral("no pEC50 and no Emax: ") + why + QLatin1Char('.');
  }
  QStringList parts;
  for (const auto& one : fit.parameters) {
    const bool main = one.name == "pec50" || one.name == "emax";
    const bool other_model = fit.find("pec50") == nullptr && one.name != "basal";
    if (!main && !other_model) continue;
    parts.append(look::parameterText(one.name) + QLatin1Char(' ') +
                 boundedText(one.value, results::unit_of_parameter(result, curve, one.name)));
  }
  // The trade names the potency first.
  if (parts.size() == 2 && parts.at(1).startsWith(QStringLiteral("pEC50"))) parts.swapItemsAt(0, 1);
  if (const auto* basal = fit.find("basal"))
    parts.append(QStringLiteral("basal ") +
                 boundedText(*basal, results::unit_of_parameter(result, curve, "basal")));
  QString text =
      parts.join(QStringLiteral("; ")) + QStringLiteral("; n = %1 concentrations").arg(fit.n_points);
  if (fit.flags.empty()) return text + QLatin1Char('.');
  QStringList flags;
  for (const auto& flag : fit.flags)
    flags.append(flagWord(flag));
  return text + QStringLiteral(". Weakened by: ") + flags.join(QStringLiteral(", ")) + QLatin1Char('.');
}

QString curveName(int curve, const std::string& agent, const std::string& background) {
  QString text = QString::number(curve) + QStringLiteral(": ") + plain(agent);
  if (!background.empty()) text += QStringLiteral(" with ") + plain(background);
  return text;
}

QString settingText(const document::SettingValue& value) {
  if (const auto* number = std::get_if<double>(&value))
    return QString::fromStdString(chronodrome::number_text(*number));
  if (const auto* truth = std::get_if<bool>(&value))
    return *truth ? QStringLiteral("true") : QStringLiteral("false");
  return plain(std::get<std::string>(value));
}

} // namespace chronodrome::ui::report
