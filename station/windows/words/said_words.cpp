#include "station/windows/words/said_words.h"

#include <QCoreApplication>
#include <QRegularExpression>
#include <array>

#include "station/windows/words/filled.h"

namespace probewright::windows {
namespace {

// What the line says beside problems. A sentence that is missing here is shown in English.
constexpr std::array patterns = {
    QT_TRANSLATE_NOOP("Said", "phantom of nest {nest}"),
    QT_TRANSLATE_NOOP("Said", "adapter of nest {nest}"),
    QT_TRANSLATE_NOOP("Said", "nest {nest}"),
    QT_TRANSLATE_NOOP("Said", "contact, ID and dark current"),
    QT_TRANSLATE_NOOP("Said", "forward voltages"),
    QT_TRANSLATE_NOOP("Said", "pulses at ratio {ratio}"),
    QT_TRANSLATE_NOOP("Said", "spectra"),
    QT_TRANSLATE_NOOP("Said", "the station stopped during this run; closed at the next start"),
    QT_TRANSLATE_NOOP("Said", "stopped by {who}"),
    // what is to be done with the probe
    QT_TRANSLATE_NOOP("Said", "take the probe out and apply its label"),
    QT_TRANSLATE_NOOP("Said", "apply its label"),
    QT_TRANSLATE_NOOP("Said", "take the probe out; this run releases no label"),
    QT_TRANSLATE_NOOP("Said", "this run releases no label"),
    QT_TRANSLATE_NOOP("Said", "take the probe out and put it on the tray for failed probes"),
    QT_TRANSLATE_NOOP("Said", "put it on the tray for failed probes"),
    QT_TRANSLATE_NOOP("Said", "take the probe out and put it on the tray for {rework}"),
    QT_TRANSLATE_NOOP("Said", "put it on the tray for {rework}"),
    QT_TRANSLATE_NOOP("Said", "take the probe out; nothing was decided about it"),
    QT_TRANSLATE_NOOP("Said", "nothing was decided about it"),
    QT_TRANSLATE_NOOP("Said", "take the probe out and keep it apart: this run is not on record"),
    QT_TRANSLATE_NOOP("Said", "keep it apart: this run is not on record"),
    // what a nest waits for
    QT_TRANSLATE_NOOP("Said", "put probe {serial} into nest {nest}"),
    QT_TRANSLATE_NOOP("Said", "plug probe {serial} into the adapter"),
    QT_TRANSLATE_NOOP("Said", "close the lid"),
    QT_TRANSLATE_NOOP("Said", "take the probe out of nest {nest}"),
    QT_TRANSLATE_NOOP("Said", "scan a probe"),
    QT_TRANSLATE_NOOP("Said", "testing {serial}"),
    // answers
    QT_TRANSLATE_NOOP("Said", "no answer in time"),
    QT_TRANSLATE_NOOP("Said", "nest {nest} is stopped"),
    QT_TRANSLATE_NOOP("Said", "{name}, {role}, is signed in"),
    QT_TRANSLATE_NOOP("Said", "{name} is signed out"),
    QT_TRANSLATE_NOOP("Said", "lot {lot} is closed"),
    QT_TRANSLATE_NOOP("Said", "lot {lot} is open: {quantity} of {model}"),
    QT_TRANSLATE_NOOP("Said", "scan the probe for nest {nest}"),
    QT_TRANSLATE_NOOP("Said", "{number} on {due}"),
    QT_TRANSLATE_NOOP("Said", "operator"),
    QT_TRANSLATE_NOOP("Said", "engineer"),
    QT_TRANSLATE_NOOP("Said", "quality"),
    QT_TRANSLATE_NOOP("Said", "auditor"),
    QT_TRANSLATE_NOOP("Said", "steward"),
};

struct Gaps {
  QRegularExpression form;
  QStringList names;
};

Gaps gaps_of(const QString& pattern) {
  Gaps gaps;
  QString form = QRegularExpression::escape(pattern);
  static const QRegularExpression gap{QStringLiteral(R"(\\\{(\w+)\\\})")};
  for (auto found = gap.globalMatch(form); found.hasNext();) gaps.names << found.next().captured(1);
  form.replace(gap, QStringLiteral("(.+)"));
  gaps.form = QRegularExpression{QRegularExpression::anchoredPattern(form)};
  return gaps;
}

/// `english` said by the pattern, or a null string.
QString by_pattern(const char* pattern, const QString& english) {
  const QString text = QString::fromUtf8(pattern);
  if (!text.contains(QLatin1Char('{')))
    return text == english ? QCoreApplication::translate("Said", pattern) : QString{};
  const qsizetype before = text.indexOf(QLatin1Char('{'));
  if (!english.startsWith(text.left(before))) return {};  // most end here
  const Gaps gaps = gaps_of(text);
  const auto match = gaps.form.match(english);
  if (!match.hasMatch()) return {};
  return filled(QCoreApplication::translate("Said", pattern), [&](const QString& name) {
    const qsizetype place = gaps.names.indexOf(name);
    return place < 0 ? QString{} : said(match.captured(static_cast<int>(place) + 1).toStdString());
  });
}

}  // namespace

QString said(const std::string& english) {
  const QString text = QString::fromStdString(english);
  for (const char* pattern : patterns)
    if (QString found = by_pattern(pattern, text); !found.isNull()) return found;
  return text;
}

}  // namespace probewright::windows
