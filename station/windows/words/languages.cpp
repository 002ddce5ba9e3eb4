#include "station/windows/words/languages.h"

#include <QCoreApplication>
#include <QLibraryInfo>
#include <QLocale>

// Files in a static library reach the program only when they are asked for, outside any namespace.
static void take_in_languages() { Q_INIT_RESOURCE(languages); }

namespace probewright::windows {
namespace {

QString of_the_system() {
  for (const QString& name : QLocale::system().uiLanguages())
    if (const QString language = name.left(2); Languages::all().contains(language)) return language;
  return QStringLiteral("en");
}

}  // namespace

Languages::Languages(QObject* parent) : QObject(parent) { take_in_languages(); }

QStringList Languages::all() { return {QStringLiteral("en"), QStringLiteral("de"), QStringLiteral("es")}; }

QString Languages::own_name(const QString& language) {
  if (language == QLatin1String("de")) return QStringLiteral("Deutsch");
  if (language == QLatin1String("es")) return QStringLiteral("Español");
  return QStringLiteral("English");
}

void Languages::choose(const QString& wanted) {
  const QString language = all().contains(wanted) ? wanted : of_the_system();
  if (language == current_) return;
  current_ = language;
  QCoreApplication::removeTranslator(&ours_);
  QCoreApplication::removeTranslator(&tool_kit_);
  if (ours_.load(QStringLiteral(":/languages/") + language)) QCoreApplication::installTranslator(&ours_);
  // The tool kit's own few words (a field's menu) come from the system, where they are installed.
  if (tool_kit_.load(QStringLiteral("qtbase_") + language, QLibraryInfo::path(QLibraryInfo::TranslationsPath)))
    QCoreApplication::installTranslator(&tool_kit_);
  emit changed();
}

}  // namespace probewright::windows
