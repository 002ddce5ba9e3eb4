#pragma once
#include <boost/asio/any_io_executor.hpp>
#include <functional>
#include <map>
#include <memory>
#include <optional>
#include <string>
#include <vector>

#include "drivers/emulated/adapter_device.h"
#include "drivers/emulated/device.h"
#include "drivers/emulated/hands.h"
#include "drivers/emulated/nest.h"
#include "drivers/emulated/phantom_device.h"
#include "drivers/emulated/station_errors.h"
#include "drivers/emulated/truth.h"
#include "drivers/wire/fault_port.h"
#include "drivers/wire/line_clock.h"
#include "drivers/wire/port.h"
#include "drivers/wire/unsteady_port.h"

namespace probewright::emulated {

class ScenarioPlayer;

struct BenchOptions {
  int nests = 1;
  double speed = 1.0;  ///< device time over the clock's time
  std::uint64_t seed = 1;
  bool perfect = false;                 ///< certificates exactly true; noise and seating stay
  std::optional<StationErrors> errors;  ///< of every nest, instead of those drawn from the seed; not with `perfect`
  double ambient_degC = 25.0;
  int baud = 921600;  ///< bytes take their time at baud x speed; 0: none
  double mains_Hz = 50.0;
  std::vector<DeviceId> wrong_certificate;  ///< these announce another number than the documents'
};

/// All devices of a station in software. Line thread only.
///
/// Nest n has the phantom PH-0n (certificate PHC-2026-010n) and the adapter AD-0n (ADC-2026-010n), due 2027-06-30. What
/// their certificates say stands in spectrometer_certificate, stored_set_points and adapter_certificate.
///
/// The devices' coroutines run on the executor and keep what they need alive; only the clock and the observer must
/// outlive them. Declare the bench after the clock and destroy (or run out) the io_context before the clock goes.
class Bench final : public Hands {
 public:
  /// `observer` may be null.
  Bench(asio::any_io_executor executor, wire::LineClock& clock, BenchOptions options,
        ActionObserver* observer = nullptr);
  ~Bench() override;
  Bench(const Bench&) = delete;
  Bench& operator=(const Bench&) = delete;

  const BenchOptions& options() const { return options_; }
  std::vector<DeviceId> devices() const;

  /// The station's end of a new in-memory line to the device. An older line of it is lost, as by re-plugging. Throws
  /// PortLost while hands have pulled the cable, std::out_of_range for a device that the bench has not.
  std::unique_ptr<wire::Port> open(const DeviceId& device);
  /// The same in the form that the drivers take: call it once for each connection. The bench must outlive it.
  std::function<asio::awaitable<std::unique_ptr<wire::Port>>()> source(const DeviceId& device);

  /// How plug() makes the device's end of a line that others host (a pseudo-terminal, a tty). `plug` is called at once
  /// for each device whose cable is in.
  using MakeLine = std::function<Result<std::unique_ptr<wire::Port>>(const DeviceId&)>;
  Result<void> host(MakeLine make_line);
  /// Called when a hosted line was lost though nobody pulled the cable.
  void on_lost(std::function<void(const DeviceId&)> lost) { on_lost_ = std::move(lost); }

  // Hands.
  Result<void> seat(int nest, std::string_view serial, std::string_view model) override;
  Result<void> seat(int nest, std::string_view serial, std::string_view model, PlantedFault fault) override;
  Result<void> remove(int nest) override;
  Result<void> lid(int nest, bool open) override;
  void room(double degC) override;
  Result<void> pull(const DeviceId& device) override;
  Result<void> plug(const DeviceId& device) override;
  Result<void> restart(const DeviceId& device) override;
  Result<void> spoil(const DeviceId& device, const SpoiltByte& byte) override;
  Result<void> spoil(const DeviceId& device, const SpoiltShare& share) override;
  Result<void> heal(const DeviceId& device) override;
  Result<void> cause(const ScenarioFault& fault) override;
  void mend() override;

  /// Plays a scenario; its times count from the start of the bench. Errors: bench_no_such_nest.
  Result<void> play(const Scenario& scenario);
  /// How often each fault of the bench has happened, in all or in one nest (the room counts to nest 1).
  std::map<BenchFault, std::uint64_t> troubles() const;
  std::map<BenchFault, std::uint64_t> troubles(int nest) const;

  // What scenarios turn at. Devices and nests are those of the bench.
  int add_share(const DeviceId& device, const SpoiltShare& share);  ///< beside others; the number ends it
  void end_share(const DeviceId& device, int number);
  wire::Unsteadiness& unsteadiness(const DeviceId& device) { return *lines_.at(device).unsteadiness; }
  void set_certificate(const DeviceId& device, std::string number);  ///< empty: one of other years
  void right_certificate(const DeviceId& device);
  /// Called with the device seconds of the start of each capture; one at a time.
  void on_capture(int nest, std::function<void(double start_s)> began);
  StationErrors own_errors(int nest) const;  ///< as drawn from the seed
  void set_errors(int nest, const StationErrors& errors);
  void set_flicker(int nest, const Flicker& flicker);

  bool cable_pulled(const DeviceId& device) const { return lines_.at(device).pulled; }

  /// Seats a probe made by the caller instead of one drawn by its serial. From then on the serial is this probe.
  Result<void> seat(int nest, Probe probe);

  /// Truth of every probe that was ever seated, by serial.
  const std::map<std::string, Truth>& truths() const { return truths_; }
  /// Called after a serial was seated for the first time.
  void on_first_seat(std::function<void(const std::string& serial)> seated) { on_first_seat_ = std::move(seated); }

  /// The drive that an adapter has in force now.
  AdapterDevice::Drive drive(int nest);
  /// Bytes that went over a device's line since the bench began, before any fault.
  std::uint64_t bytes(const DeviceId& device, Way way) const;
  /// Bytes spoilt so far on a device's line.
  std::uint64_t spoilt(const DeviceId& device) const;

 private:
  struct Line {
    std::shared_ptr<wire::Port> port;    ///< the device's end of the line in use
    wire::FaultPort* spoiler = nullptr;  ///< inside it
    std::shared_ptr<wire::Unsteadiness> unsteadiness = std::make_shared<wire::Unsteadiness>();
    bool pulled = false;
    std::uint64_t sent_before[2] = {0, 0};       ///< by lines before this one, by Way
    std::uint64_t spoilt_before[3] = {0, 0, 0};  ///< by FaultKind
    std::vector<SpoiltByte> plan;                ///< indices counted since the bench began
    std::map<int, SpoiltShare> shares;           ///< by number
  };
  struct Station {
    std::shared_ptr<Nest> nest;
    std::shared_ptr<PhantomDevice> phantom;
    std::shared_ptr<AdapterDevice> adapter;
    StationErrors own_errors;
  };

  Station make_station(int nest);
  DeviceIdentity identity(const DeviceId& device) const;
  void set_rates(const Line& line, wire::FaultPort& port) const;
  std::uint64_t spoilt(const Line& line, wire::FaultKind kind) const;
  void attach(const DeviceId& device, std::unique_ptr<wire::Port> device_end);
  void detach(Line& line);
  Result<void> make_hosted_line(const DeviceId& device);
  static asio::awaitable<void> serve(std::shared_ptr<PhantomDevice> phantom, std::shared_ptr<AdapterDevice> adapter,
                                     std::shared_ptr<wire::Port> port, std::weak_ptr<Bench*> bench, DeviceId device);
  void lost(const DeviceId& device, const wire::Port* port);
  Result<Nest*> nest_at(int nest);
  Station& station(int nest) { return stations_.at(static_cast<std::size_t>(nest - 1)); }
  const Probe* known(std::string_view serial, std::string_view model) const;
  Result<Line*> line_of(const DeviceId& device);
  double now_s() const { return clock_.now_s(); }
  double bytes_per_s() const { return options_.baud > 0 ? 0.1 * options_.baud * options_.speed : 0.0; }

  asio::any_io_executor executor_;
  wire::LineClock& line_clock_;
  BenchOptions options_;
  ActionObserver* observer_;
  DeviceClock clock_;
  std::vector<Station> stations_;
  std::map<DeviceId, Line> lines_;
  MakeLine make_line_;
  std::map<std::string, Truth> truths_;
  std::function<void(const DeviceId&)> on_lost_;
  std::function<void(const std::string&)> on_first_seat_;
  int shares_ = 0;
  std::unique_ptr<ScenarioPlayer> player_;
  std::shared_ptr<Bench*> self_;  ///< empty for coroutines that outlive the bench
};

}  // namespace probewright::emulated
