#include "station/windows/words/filled.h"

namespace probewright::windows {

QString filled(const QString& sentence, const std::function<QString(const QString& name)>& value_of) {
  QString whole;
  qsizetype from = 0;
  for (;;) {
    const qsizetype open = sentence.indexOf(QLatin1Char('{'), from);
    const qsizetype close = open < 0 ? -1 : sentence.indexOf(QLatin1Char('}'), open);
    if (close < 0) return whole + sentence.mid(from);
    const QString value = value_of(sentence.mid(open + 1, close - open - 1));
    whole += sentence.mid(from, open - from);
    whole += value.isNull() ? sentence.mid(open, close - open + 1) : value;
    from = close + 1;
  }
}

QString as_sentence(QString words) {
  if (words.isEmpty()) return words;
  words[0] = words[0].toUpper();
  const QChar last = words.back();
  if (last != QLatin1Char('.') && last != QLatin1Char('?') && last != QLatin1Char('!')) words += QLatin1Char('.');
  return words;
}

}  // namespace probewright::windows
