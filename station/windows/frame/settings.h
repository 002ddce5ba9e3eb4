#pragma once
#include <QByteArray>
#include <QSettings>
#include <QString>

#include "station/windows/look/look.h"

namespace probewright::windows {

/// What the windows remember from one start to the next, in a file of its own. What the file does not hold, or holds in
/// a form that nobody wrote, is as on the first start. Main thread only.
class Settings {
 public:
  /// `file` is made when something is first kept.
  explicit Settings(const QString& file);

  Scheme scheme() const;
  void keep_scheme(Scheme scheme);
  int text_percent() const;
  void keep_text_percent(int percent);
  QString language() const;  ///< empty: the system's
  void keep_language(const QString& language);
  bool sound() const;
  void keep_sound(bool on);
  QString workspace() const;
  void keep_workspace(const QString& name);
  QByteArray geometry() const;
  void keep_geometry(const QByteArray& geometry);

 private:
  QSettings file_;
};

}  // namespace probewright::windows
