#pragma once
#include <QTimer>
#include <QWidget>

#include "station/windows/setup/device_search.h"
#include "station/windows/setup/pairing.h"

class QGridLayout;
class QPushButton;

namespace probewright::windows {

class Label;
class Look;

/// The first start: finds devices, gives each a nest, keeps that, or opens the emulated bench. Plugging in nest by nest
/// needs no further thought: what appears goes to the lowest nest that lacks it. Each number can be changed.
class SetupPage : public QWidget {
  Q_OBJECT
 public:
  SetupPage(SetupDoor& door, const Look& look, QWidget* parent = nullptr);

 signals:
  /// A station file was written there.
  void kept(const QString& path);
  void emulated_wanted();

 private:
  void place(const sequence::FoundDevice& device);
  void take_away(const std::string& port);
  void show_devices();
  void add_row(std::size_t index);
  void show_state();
  void keep();

  SetupDoor& door_;
  const Look& look_;
  DeviceSearch search_;
  QTimer again_;
  std::vector<Placed> placed_;
  QWidget* list_;
  QGridLayout* rows_;
  Label* state_;
  QPushButton *keep_, *emulated_;
};

}  // namespace probewright::windows
