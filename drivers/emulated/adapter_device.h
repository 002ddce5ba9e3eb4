#pragma once
#include <functional>
#include <memory>
#include <optional>

#include "drivers/emulated/device.h"
#include "drivers/emulated/front_end.h"
#include "drivers/emulated/nest.h"
#include "drivers/emulated/outbox.h"
#include "drivers/wire/crc.h"
#include "drivers/wire/frame.h"
#include "drivers/wire/le.h"
#include "drivers/wire/port.h"

namespace probewright::emulated {

/// A probe adapter behind a port, built from drivers/adapter/WIRE.md. It keeps its state while its cable is pulled.
/// Line thread only.
class AdapterDevice {
 public:
  struct Setup {
    DeviceId id{1, DeviceKind::adapter};
    DeviceIdentity identity;
    std::uint64_t seed = 1;
    int baud = 921600;
  };
  /// The observer may be null; it and the clock's line must outlive the device.
  AdapterDevice(Setup setup, DeviceClock clock, asio::any_io_executor executor, std::shared_ptr<Nest> nest,
                ActionObserver* observer);
  ~AdapterDevice();
  AdapterDevice(const AdapterDevice&) = delete;
  AdapterDevice& operator=(const AdapterDevice&) = delete;

  /// Serves what comes through `port` until the port is lost. A later call ends the one before.
  static asio::awaitable<void> serve(std::shared_ptr<AdapterDevice> self, std::shared_ptr<wire::Port> port);

  /// Power off and on: everything forgotten, LEDs off, another boot number.
  void power_cycle();

  /// Electronics with other errors from now on.
  void set_errors(const StationErrors& errors) { front_end_.set_errors(errors); }
  /// Another certificate number, as it is told from now on.
  void set_certificate(std::string number) { setup_.identity.certificate = std::move(number); }
  /// Called whenever a capture begins, with the device seconds of its first slot.
  void on_capture(std::function<void(double start_s)> began) { capture_began_ = std::move(began); }

  struct Drive {
    std::uint32_t red_uA = 0, infrared_uA = 0;
    bool operator==(const Drive&) const = default;
  };
  /// The drive in force now.
  Drive drive();

 private:
  /// The payload of a reply, or an error reply, after the device was busy for a while.
  struct Reply {
    Bytes payload;
    std::uint8_t error = 0;
    std::uint32_t detail = 0;
  };
  struct Capture {
    std::uint16_t number = 0;
    std::uint32_t cycles = 0;
    double start_s = 0.0;
    double cycle_s = 0.0;
    double end_s() const { return start_s + cycle_s * cycles; }
  };
  /// When an LED's drive was last set to something else, and how warm the LED was then.
  struct Change {
    double time_s = 0.0;
    Warmth warmth;
  };
  using Shared = std::shared_ptr<AdapterDevice>;

  static asio::awaitable<void> answer(Shared self, std::shared_ptr<Outbox> outbox, wire::Frame request);
  static asio::awaitable<Reply> carry_out(Shared self, std::shared_ptr<Outbox> outbox, wire::Frame request);
  static asio::awaitable<void> stream(Shared self, std::shared_ptr<Outbox> outbox, Capture capture, int captures);

  Reply hello();
  Reply set_drive(wire::LeReader fields);
  Reply set_timing(wire::LeReader fields);
  static asio::awaitable<Reply> forward_voltage(Shared self, wire::Frame request);
  static asio::awaitable<Reply> reverse_leakage(Shared self, wire::Frame request);
  static asio::awaitable<Reply> dark_current(Shared self, wire::Frame request);
  static asio::awaitable<Reply> id_resistance(Shared self);
  static asio::awaitable<Reply> mains_pickup(Shared self, wire::Frame request);
  static asio::awaitable<Reply> self_proof(Shared self, wire::Frame request);
  Reply presence();
  Reply state();
  Reply start_capture(wire::LeReader fields);
  Reply stop_capture();
  static void begin_stream(Shared self, std::shared_ptr<Outbox> outbox);

  /// Lets the watchdog and a pulled probe switch the LEDs off, as of `time_s`.
  void catch_up(double time_s);
  void apply_drive(double time_s, Drive drive);
  bool driven() const { return drive_ != Drive{}; }
  bool capturing(double time_s) const { return capture_ && time_s < capture_->end_s(); }
  int measured_uV(LedColour colour, double drive_mA, double from_s, double to_s);
  int first_uV(LedColour colour, std::uint32_t drive_uA);
  Bytes block_samples(const Capture& capture, std::uint32_t block, double& before_nA);
  asio::awaitable<void> busy(double for_s) const { return clock_.wait_until_s(clock_.now_s() + for_s); }

  Setup setup_;
  DeviceClock clock_;
  asio::any_io_executor executor_;
  std::shared_ptr<Nest> nest_;
  ActionObserver* observer_;
  FrontEnd front_end_;
  std::function<void(double)> capture_began_;

  Drive drive_;  ///< as set; off after a watchdog trip or a pulled probe
  Change red_change_, infrared_change_;
  double slot_s_ = 439e-6;
  double fed_s_ = 0.0;  ///< when the watchdog was last fed
  std::uint16_t trips_ = 0;
  std::optional<Capture> capture_;  ///< the latest one, running or over
  int captures_ = 0;                ///< a stream that began under an older number ends
  std::uint32_t removals_seen_ = 0;
  std::uint32_t insertions_before_ = 0;
  std::uint32_t boot_ = 1;
  double power_on_s_ = 0.0;
  int starts_ = 0;
  int line_ = 0;  ///< counts calls of serve(): an older one ends
  int work_ = 0;  ///< what began under an older number is given up
};

}  // namespace probewright::emulated
