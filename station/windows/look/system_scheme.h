#pragma once
#include <QObject>
#include <QString>

class QDBusVariant;

namespace probewright::windows {

/// Whether the desktop asks for dark colours, now and whenever that changes. Told by the desktop portal
/// (org.freedesktop.portal.Settings, key org.freedesktop.appearance color-scheme); where nobody answers there, by the
/// palette that the application started with. Asks without waiting. Main thread only.
class SystemScheme : public QObject {
  Q_OBJECT
 public:
  /// `ask_portal` false: the palette alone.
  explicit SystemScheme(bool ask_portal, QObject* parent = nullptr);
  bool dark() const { return dark_; }
  /// The portal's value: 1 dark, 2 light, else no wish.
  void take(unsigned value);

 signals:
  void changed();

 private slots:
  void setting_changed(const QString& space, const QString& key, const QDBusVariant& value);

 private:
  void ask();
  bool dark_ = false, dark_palette_ = false;
};

}  // namespace probewright::windows
