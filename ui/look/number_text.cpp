// Chronodrome, GPL-3.0-or-later.
#include "ui/look/number_text.h"

#include <algorithm>
#include <array>
#include <cmath>

#include "base/number_text.h"
#include "document/measure.h"

namespace chronodrome::ui::look {
namespace {

const QString kMinus = QStringLiteral("\u2212");

QString signedText(const std::string& digits) {
  QString text = QString::fromStdString(digits);
  if (text.startsWith(QLatin1Char('-'))) text.replace(0, 1, kMinus);
  // Minus zero is no news.
  if (text.startsWith(kMinus) &&
      text.mid(1).count(QLatin1Char('0')) + text.count(QLatin1Char('.')) == text.size() - 1)
    text.remove(0, 1);
  return text;
}

/// Power of ten of the first digit.
int magnitude(double value) {
  return value == 0.0 ? 0 : static_cast<int>(std::floor(std::log10(std::abs(value)) + 1e-12));
}

QString powerText(double value, int digits) {
  const int power = magnitude(value);
  static const QString raised = QStringLiteral("⁰¹²³⁴⁵⁶⁷⁸⁹");
  QString exponent = power < 0 ? QStringLiteral("⁻") : QString();
  for (const QChar digit : QString::number(std::abs(power)))
    exponent += raised.at(digit.digitValue());
  return signedText(fixed_text(value / std::pow(10.0, power), digits - 1)) + QStringLiteral(" × 10") +
         exponent;
}

QString withDecimals(double value, int decimals, int digits) {
  if (value != 0.0 && (std::abs(value) < 1e-4 || std::abs(value) >= 1e6)) return powerText(value, digits);
  return signedText(fixed_text(value, std::clamp(decimals, 0, 9)));
}

QString secondsPart(double seconds, int decimals) {
  QString text = QString::fromStdString(fixed_text(seconds, decimals));
  if (seconds < 10.0 && text.indexOf(QLatin1Char('.')) != 2 &&
      text.size() < (decimals > 0 ? decimals + 3 : 2))
    text.prepend(QLatin1Char('0'));
  return text;
}

QString joined(const std::string& what, const std::string& remedy) {
  QString text = QString::fromStdString(what);
  if (!remedy.empty()) text += QStringLiteral("; ") + QString::fromStdString(remedy);
  return text;
}

} // namespace

QString plainText(double value) {
  return withDecimals(value, 3 - magnitude(value), 4);
}

QString plainText(double value, double error) {
  if (!(error > 0.0)) return plainText(value);
  const int decimals = std::min(1 - magnitude(error), 5 - magnitude(value));
  // Beside an ordinary error a tiny value is zero, not a power of ten.
  if (error >= 1e-4 && std::abs(value) < 1e6)
    return signedText(fixed_text(value, std::clamp(decimals, 0, 9)));
  return withDecimals(value, decimals, 4);
}

QString unitText(const std::string& unit) {
  if (unit == "bpm") return QStringLiteral("beats/min");
  if (unit == "1") return {};
  QString text = QString::fromStdString(unit);
  if (text.startsWith(QLatin1Char('u')) && text.size() > 1 && text.at(1).isUpper())
    text.replace(0, 1, QStringLiteral("µ"));
  return text;
}

QString withUnit(double value, const std::string& unit) {
  const QString name = unitText(unit);
  return name.isEmpty() ? plainText(value) : plainText(value) + QChar(0x00A0) + name;
}

QString concentrationText(Molar concentration) {
  const double value = concentration.value();
  if (value == 0.0) return QStringLiteral("0");
  struct Prefix {
    double scale;
    const char* unit;
  };
  static constexpr std::array<Prefix, 5> prefixes{
      {{1.0, "M"}, {1e-3, "mM"}, {1e-6, "µM"}, {1e-9, "nM"}, {1e-12, "pM"}}};
  for (const auto& prefix : prefixes) {
    // A hair below 1 is 1: 1e-9 / 1e-9 may be 0.99999.
    if (value < prefix.scale * (1.0 - 1e-9) && prefix.scale != prefixes.back().scale) continue;
    return QString::fromStdString(chronodrome::number_text(value / prefix.scale, 3)) + QChar(0x00A0) +
           QString::fromUtf8(prefix.unit);
  }
  return {};
}

QString timeText(Seconds time, int decimals) {
  const double scale = std::pow(10.0, decimals);
  const double rounded = std::round(std::abs(time.value()) * scale) / scale;
  const double hours = std::floor(rounded / 3600.0);
  const double minutes = std::floor((rounded - hours * 3600.0) / 60.0);
  const double seconds = std::max(0.0, rounded - hours * 3600.0 - minutes * 60.0);
  QString text = time.value() < 0.0 && rounded > 0.0 ? kMinus : QString();
  if (hours > 0.0) {
    text += QStringLiteral("%1:%2:").arg(hours).arg(minutes, 2, 'f', 0, QLatin1Char('0'));
  } else {
    text += QStringLiteral("%1:").arg(minutes);
  }
  return text + secondsPart(seconds, decimals);
}

QString durationText(Seconds duration) {
  const double s = std::abs(duration.value());
  if (s < 1.0) return signedText(fixed_text(duration.value() * 1e3, s < 0.1 ? 2 : 1)) + QStringLiteral(" ms");
  if (s < 60.0) return signedText(fixed_text(duration.value(), s < 10.0 ? 2 : 1)) + QStringLiteral(" s");
  const auto whole = static_cast<long long>(std::llround(s));
  const QString sign = duration.value() < 0.0 ? kMinus : QString();
  if (whole < 3600) return sign + QStringLiteral("%1 min %2 s").arg(whole / 60).arg(whole % 60);
  return sign + QStringLiteral("%1 h %2 min").arg(whole / 3600).arg(whole % 3600 / 60);
}

QString estimateText(const pharmacology::Estimate& estimate) {
  if (!estimate.estimate) return QStringLiteral("not estimated");
  return estimate.se ? plainText(*estimate.estimate, *estimate.se) : plainText(*estimate.estimate);
}

QString intervalText(const pharmacology::Estimate& estimate) {
  if (estimate.ci_method == "fixed") return QStringLiteral("held fixed");
  const auto text = [&](double bound) {
    return estimate.se ? plainText(bound, *estimate.se) : plainText(bound);
  };
  if (estimate.ci_low && estimate.ci_high)
    return text(*estimate.ci_low) + QStringLiteral(" to ") + text(*estimate.ci_high);
  if (estimate.ci_low) return QStringLiteral("at least ") + text(*estimate.ci_low);
  if (estimate.ci_high) return QStringLiteral("at most ") + text(*estimate.ci_high);
  return estimate.estimate ? QStringLiteral("not bounded") : QString();
}

QString methodText(const pharmacology::Estimate& estimate) {
  if (estimate.ci_method == "profile") return QStringLiteral("profile likelihood");
  if (estimate.ci_method == "wald") return QStringLiteral("standard error");
  if (estimate.ci_method == "fixed") return QStringLiteral("held fixed");
  return QString::fromStdString(estimate.ci_method);
}

QString parameterText(const std::string& name) {
  if (name == "pec50") return QStringLiteral("pEC50");
  if (name == "emax") return QStringLiteral("Emax");
  if (name == "nh") return QStringLiteral("nH");
  if (name == "ec50_mol_per_l") return QStringLiteral("EC50");
  if (name == "effect_max") return QStringLiteral("Emax − basal");
  return QString::fromStdString(name).replace(QLatin1Char('_'), QLatin1Char(' '));
}

QString statusText(response::Status status) {
  switch (status) {
  case response::Status::ok:
    return QStringLiteral("steady");
  case response::Status::not_steady:
    return QStringLiteral("not steady");
  case response::Status::censored:
    return QStringLiteral("censored");
  case response::Status::arrested:
    return QStringLiteral("arrested");
  case response::Status::unreadable:
    return QStringLiteral("unreadable");
  case response::Status::excluded:
    return QStringLiteral("excluded");
  }
  return {};
}

QString responseText(const response::Response& response) {
  if (response.value) {
    const QString number =
        response.sem ? plainText(*response.value, *response.sem) : plainText(*response.value);
    const QString unit = unitText(response.unit);
    return unit.isEmpty() ? number : number + QChar(0x00A0) + unit;
  }
  if (response.limit) {
    const QString side = response.limit_side == "at_least" ? QStringLiteral("≥ ") : QStringLiteral("≤ ");
    return side + withUnit(*response.limit, response.unit);
  }
  return statusText(response.status);
}

QString measureText(const std::string& measure) {
  const auto parsed = document::measure_named(measure);
  if (!parsed) return QString::fromStdString(measure);
  const QString label = QString::fromStdString(parsed->label);
  switch (parsed->kind) {
  case document::MeasureKind::rate:
    return QStringLiteral("rate ") + label;
  case document::MeasureKind::delay:
    return QStringLiteral("conduction delay ") + label;
  case document::MeasureKind::conducted:
    return QStringLiteral("conducted share ") + label;
  case document::MeasureKind::velocity:
    return QStringLiteral("apparent velocity ") + label;
  case document::MeasureKind::force:
    return QStringLiteral("developed force ") + label;
  case document::MeasureKind::pressure:
    return QStringLiteral("developed pressure ") + label;
  case document::MeasureKind::dpdt_max:
    return QStringLiteral("dP/dt max ") + label;
  case document::MeasureKind::flow:
    return QStringLiteral("flow ") + label;
  }
  return label;
}

QString messageText(const Error& error) {
  return joined(error.what, error.remedy);
}

QString messageText(const Warning& warning) {
  return joined(warning.what, warning.remedy);
}

std::optional<double> typedNumber(const QString& text) {
  QString plain = text.trimmed();
  plain.replace(kMinus, QStringLiteral("-"));
  if (plain.contains(QLatin1Char(',')) && plain.contains(QLatin1Char('.'))) return std::nullopt;
  if (plain.count(QLatin1Char(',')) > 1) return std::nullopt;
  plain.replace(QLatin1Char(','), QLatin1Char('.'));
  return parse_number(plain.toStdString());
}

std::optional<Seconds> typedTime(const QString& text) {
  QString plain = text.trimmed().toLower();
  double scale = 1.0;
  const std::pair<const char*, double> units[] = {{"min", 60.0}, {"ms", 1e-3}, {"h", 3600.0}, {"s", 1.0}};
  for (const auto& [unit, factor] : units) {
    if (!plain.endsWith(QLatin1String(unit))) continue;
    plain.chop(static_cast<int>(QLatin1String(unit).size()));
    scale = factor;
    break;
  }
  const QStringList parts = plain.split(QLatin1Char(':'));
  if (parts.size() > 3 || (parts.size() > 1 && scale != 1.0)) return std::nullopt;
  double total = 0.0;
  for (qsizetype i = 0; i < parts.size(); ++i) {
    const auto number = typedNumber(parts.at(i));
    const bool leads = i == 0;
    if (!number || (!leads && (*number < 0.0 || *number >= 60.0))) return std::nullopt;
    if (i + 1 < parts.size() && *number != std::floor(*number)) return std::nullopt;
    total = total * 60.0 + *number;
  }
  return Seconds(total * scale);
}

} // namespace chronodrome::ui::look
