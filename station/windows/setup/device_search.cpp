#include "station/windows/setup/device_search.h"

#include <algorithm>

namespace probewright::windows {

DeviceSearch::DeviceSearch(SetupDoor& door, QObject* parent) : QObject(parent), door_(door) {
  pool_.setMaxThreadCount(1);
}

DeviceSearch::~DeviceSearch() {
  pool_.clear();
  pool_.waitForDone();
}

void DeviceSearch::look() {
  const auto ports = door_.ports();
  for (auto port = seen_.begin(); port != seen_.end();) {
    if (std::find(ports.begin(), ports.end(), *port) != ports.end()) {
      ++port;
      continue;
    }
    emit gone(*port);
    port = seen_.erase(port);
  }
  for (const std::string& port : ports) {
    if (!seen_.insert(port).second) continue;
    ++waiting_;
    pool_.start([this, port] {
      const auto device = door_.look_at(port);
      QMetaObject::invokeMethod(
          this,
          [this, device] {
            --waiting_;
            emit found(device);
          },
          Qt::QueuedConnection);
    });
  }
}

}  // namespace probewright::windows
