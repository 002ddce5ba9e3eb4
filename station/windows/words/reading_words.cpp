#include "station/windows/words/reading_words.h"

#include <QCoreApplication>
#include <algorithm>
#include <cmath>

#include "station/base/numbers.h"
#include "station/windows/words/check_words.h"
#include "station/windows/words/filled.h"

namespace probewright::windows {
namespace {

struct Say {
  Q_DECLARE_TR_FUNCTIONS(Reading)
};

QString with_unit(const QString& number, const std::string& unit) {
  const QString shown = unit_words(unit);
  return shown.isEmpty() ? number : number + QChar(0x00A0) + shown;
}

/// The slug of a missing reading in words.
QString reason_words(const std::string& reason) {
  constexpr std::string_view blocked = "blocked_by:";
  if (reason.starts_with(blocked))
    return Say::tr("no reading, because of %1").arg(check_words(reason.substr(blocked.size())));
  if (reason == "clipped") return Say::tr("no reading: too much light");
  if (reason == "too_dark") return Say::tr("no reading: too little light");
  if (reason == "no_peak") return Say::tr("no reading: no line in the spectrum");
  if (reason == "cut_off") return Say::tr("no reading: the line runs out of the spectrum");
  if (reason == "no_modulation") return Say::tr("no reading: no pulse");
  if (reason == "id_open") return Say::tr("no reading: the ID resistor is open");
  if (reason == "not_captured") return Say::tr("not measured");
  return Say::tr("no reading (%1)").arg(QString::fromStdString(reason));
}

}  // namespace

QString unit_words(const std::string& unit) {
  if (unit == "1" || unit == "yes/no") return {};
  if (unit == "ohm") return QStringLiteral("Ω");
  if (unit == "uA") return QStringLiteral("µA");
  if (unit == "%SpO2") return Say::tr("points");
  return QString::fromStdString(unit);
}

QString number_words(double value, const std::optional<double>& expanded_uncertainty) {
  const double scale =
      expanded_uncertainty && *expanded_uncertainty > 0.0 ? *expanded_uncertainty : std::abs(value) * 1e-3;
  if (!(scale > 0.0)) return QString::fromStdString(shortest(value));
  const int decimals = 1 - static_cast<int>(std::floor(std::log10(scale)));
  return QString::fromStdString(fixed(value, std::clamp(decimals, 0, 9)));
}

QString value_words(const measure::Reading& reading) {
  if (!reading.value) return reason_words(reading.none_reason);
  if (reading.unit == "yes/no") return *reading.value != 0.0 ? Say::tr("yes") : Say::tr("no");
  return with_unit(number_words(*reading.value, reading.expanded_uncertainty), reading.unit);
}

QString acceptance_words(const sequence::JudgedReading& judged) {
  const auto& [lower, upper] = judged.judgement.acceptance;
  const auto number = [&](double value) { return number_words(value, judged.reading.expanded_uncertainty); };
  if (judged.reading.unit == "yes/no") return {};
  if (lower && upper)
    return Say::tr("accepted from %1 to %2").arg(number(*lower), with_unit(number(*upper), judged.reading.unit));
  if (upper) return Say::tr("accepted up to %1").arg(with_unit(number(*upper), judged.reading.unit));
  if (lower) return Say::tr("accepted from %1 up").arg(with_unit(number(*lower), judged.reading.unit));
  return {};
}

QString failing_words(const sequence::JudgedReading& judged) {
  QString words = check_words(judged.reading.check) + QLatin1Char(' ') + value_words(judged.reading);
  const QString accepted = acceptance_words(judged);
  if (!accepted.isEmpty()) words += QStringLiteral(", ") + accepted;
  return as_sentence(words);
}

}  // namespace probewright::windows
