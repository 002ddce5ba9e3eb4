#pragma once
#include <QObject>
#include <QThreadPool>
#include <memory>
#include <set>

#include "station/windows/setup/setup_door.h"

namespace probewright::windows {

/// Looks at each new port in a thread of its own, one after the other. Main thread only.
class DeviceSearch : public QObject {
  Q_OBJECT
 public:
  /// `door` outlives the search; the destructor waits for the port that is being looked at.
  explicit DeviceSearch(SetupDoor& door, QObject* parent = nullptr);
  ~DeviceSearch() override;

  /// Begins with all ports that were not looked at yet, or are there again.
  void look();
  /// The port is looked at anew by the next look().
  void forget(const std::string& port) { seen_.erase(port); }
  int waiting() const { return waiting_; }

 signals:
  void found(const probewright::sequence::FoundDevice& device);
  void gone(const std::string& port);

 private:
  SetupDoor& door_;
  QThreadPool pool_;
  std::set<std::string> seen_;
  int waiting_ = 0;
};

}  // namespace probewright::windows
