#include "station/windows/words/check_words.h"

#include <QCoreApplication>

#include "station/base/catalogue.h"

namespace probewright::windows {

QString check_words(std::string_view slug) {
  const Check* check = find_check(slug);
  if (!check) return QString::fromUtf8(slug.data(), static_cast<qsizetype>(slug.size()));
  // The catalogue's views end with a zero byte: they are literals.
  return QCoreApplication::translate("Check", check->shown_as.data());
}

}  // namespace probewright::windows
