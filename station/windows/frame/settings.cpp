#include "station/windows/frame/settings.h"

#include <algorithm>

namespace probewright::windows {

Settings::Settings(const QString& file) : file_(file, QSettings::IniFormat) {}

Scheme Settings::scheme() const {
  const QString word = file_.value("colours").toString();
  return word == QLatin1String("light") ? Scheme::light : word == QLatin1String("dark") ? Scheme::dark : Scheme::system;
}

void Settings::keep_scheme(Scheme scheme) {
  file_.setValue("colours", scheme == Scheme::light ? "light" : scheme == Scheme::dark ? "dark" : "system");
}

int Settings::text_percent() const { return std::clamp(file_.value("text_percent", 100).toInt(), 100, 200); }
void Settings::keep_text_percent(int percent) { file_.setValue("text_percent", percent); }

QString Settings::language() const { return file_.value("language").toString(); }
void Settings::keep_language(const QString& language) { file_.setValue("language", language); }

bool Settings::sound() const { return file_.value("sound", false).toBool(); }
void Settings::keep_sound(bool on) { file_.setValue("sound", on); }

QString Settings::workspace() const { return file_.value("workspace").toString(); }
void Settings::keep_workspace(const QString& name) { file_.setValue("workspace", name); }

QByteArray Settings::geometry() const { return file_.value("geometry").toByteArray(); }
void Settings::keep_geometry(const QByteArray& geometry) { file_.setValue("geometry", geometry); }

}  // namespace probewright::windows
