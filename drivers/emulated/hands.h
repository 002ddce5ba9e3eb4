#pragma once
#include <cstdint>
#include <optional>
#include <string_view>
#include <vector>

#include "drivers/emulated/device.h"
#include "drivers/emulated/probe_fault.h"
#include "drivers/emulated/scenario.h"
#include "drivers/wire/fault_port.h"
#include "station/base/result.h"

namespace probewright::emulated {

/// A byte that a line spoils. `index` counts the bytes that go this way from now on; 0 is the next one.
struct SpoiltByte {
  Way way = Way::to_device;
  std::uint64_t index = 0;
  wire::FaultKind kind = wire::FaultKind::lose;
  std::uint8_t flip = 0x01;  ///< change: the bits that turn over, not 0
};

/// Bytes that a line spoils at random.
struct SpoiltShare {
  Way way = Way::to_device;
  double per_byte = 0.0;
  std::vector<wire::FaultKind> kinds;  ///< each alike; empty: all
  std::uint64_t seed = 1;
};

/// What a person at the bench can do with their hands, and what they can do to its cables. The same in-process and over
/// the control socket. Line thread only. Errors are sentences in Problems: bench_no_such_nest, bench_nest_occupied,
/// bench_nest_empty, bench_unknown_model, bench_probe_elsewhere, bench_no_such_device, bench_cable_pulled,
/// bench_cable_plugged.
class Hands {
 public:
  virtual ~Hands() = default;

  /// Puts the probe `serial` of `model` into a nest, plugged into its adapter. A serial is always the same probe.
  virtual Result<void> seat(int nest, std::string_view serial, std::string_view model) = 0;
  /// The same with a fault in it, for as long as the bench lives: seated again without naming one, it has it still. A
  /// serial that was seated before as another probe is refused (bench_other_probe), and so is a severity that is not
  /// above 0 and at most 1 (bench_severity).
  virtual Result<void> seat(int nest, std::string_view serial, std::string_view model, PlantedFault fault) = 0;
  /// Takes the probe out.
  virtual Result<void> remove(int nest) = 0;
  virtual Result<void> lid(int nest, bool open) = 0;
  /// Room temperature.
  virtual void room(double degC) = 0;

  /// Pulls a device's cable. The device keeps its power.
  virtual Result<void> pull(const DeviceId& device) = 0;
  virtual Result<void> plug(const DeviceId& device) = 0;
  /// Switches a device's power off and on; its cable stays.
  virtual Result<void> restart(const DeviceId& device) = 0;

  virtual Result<void> spoil(const DeviceId& device, const SpoiltByte& byte) = 0;
  /// Replaces the device's earlier share.
  virtual Result<void> spoil(const DeviceId& device, const SpoiltShare& share) = 0;
  /// The device's line is good again: what spoils, delays or loses there ends.
  virtual Result<void> heal(const DeviceId& device) = 0;

  /// Makes a fault of a scenario happen; its times count from now. Errors: bench_no_such_nest.
  virtual Result<void> cause(const ScenarioFault& fault) = 0;
  /// Ends all that scenarios and cause() began: lines are good, cables in, lids closed, devices as they were made, the
  /// room as warm as at the start. What devices have forgotten stays forgotten.
  virtual void mend() = 0;
};

/// The model that a serial like "AQ20-048-00137" belongs to ("AQ-20"); nothing when the bench knows none.
std::optional<std::string_view> model_of_serial(std::string_view serial);

}  // namespace probewright::emulated
