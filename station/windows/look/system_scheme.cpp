#include "station/windows/look/system_scheme.h"

#include <QDBusConnection>
#include <QDBusMessage>
#include <QDBusPendingCallWatcher>
#include <QDBusPendingReply>
#include <QDBusVariant>
#include <QGuiApplication>
#include <QPalette>

namespace probewright::windows {
namespace {

constexpr const char* service = "org.freedesktop.portal.Desktop";
constexpr const char* path = "/org/freedesktop/portal/desktop";
constexpr const char* interface = "org.freedesktop.portal.Settings";
constexpr const char* space = "org.freedesktop.appearance";
constexpr const char* key = "color-scheme";

/// The value may be wrapped more than once.
unsigned number_in(QVariant value) {
  while (value.canConvert<QDBusVariant>()) value = value.value<QDBusVariant>().variant();
  return value.toUInt();
}

}  // namespace

SystemScheme::SystemScheme(bool ask_portal, QObject* parent)
    : QObject(parent), dark_palette_(QGuiApplication::palette().color(QPalette::Window).lightness() < 128) {
  dark_ = dark_palette_;
  if (ask_portal) ask();
}

void SystemScheme::ask() {
  auto bus = QDBusConnection::sessionBus();
  if (!bus.isConnected()) return;
  bus.connect(service, path, interface, "SettingChanged", this, SLOT(setting_changed(QString, QString, QDBusVariant)));
  auto message = QDBusMessage::createMethodCall(service, path, interface, "Read");
  message << QString{space} << QString{key};
  auto* watcher = new QDBusPendingCallWatcher(bus.asyncCall(message), this);
  connect(watcher, &QDBusPendingCallWatcher::finished, this, [this, watcher] {
    const QDBusPendingReply<QVariant> reply = *watcher;
    if (!reply.isError()) take(number_in(reply.value()));
    watcher->deleteLater();
  });
}

void SystemScheme::setting_changed(const QString& changed_space, const QString& changed_key,
                                   const QDBusVariant& value) {
  if (changed_space == space && changed_key == key) take(number_in(value.variant()));
}

void SystemScheme::take(unsigned value) {
  const bool dark = value == 1 || (value != 2 && dark_palette_);
  if (dark == dark_) return;
  dark_ = dark;
  emit changed();
}

}  // namespace probewright::windows
