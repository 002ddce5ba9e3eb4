#pragma once
#include <QObject>
#include <QStringList>
#include <QTranslator>

namespace probewright::windows {

/// Languages of the screen. English is in the sources; the others are in the program's resources. Main thread only.
class Languages : public QObject {
  Q_OBJECT
 public:
  explicit Languages(QObject* parent = nullptr);

  /// "en", "de", "es": each with its own name by own_name.
  static QStringList all();
  static QString own_name(const QString& language);

  /// `wanted` one of all(), or empty: the first of the system's languages that there is, else English.
  void choose(const QString& wanted);
  QString current() const { return current_; }

 signals:
  void changed();

 private:
  QTranslator ours_, tool_kit_;
  QString current_ = QStringLiteral("en");
};

}  // namespace probewright::windows
