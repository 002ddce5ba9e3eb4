#pragma once
#include <array>
#include <functional>
#include <memory>
#include <optional>
#include <string>
#include <vector>

#include "drivers/emulated/device.h"
#include "drivers/emulated/nest.h"
#include "drivers/emulated/scpi_status.h"
#include "drivers/wire/message.h"
#include "drivers/wire/port.h"

namespace probewright::emulated {

/// An optical phantom behind a port, built from drivers/phantom/WIRE.md. It keeps its state while its cable is pulled.
/// Line thread only.
class PhantomDevice {
 public:
  struct Setup {
    DeviceId id;
    DeviceIdentity identity;
    std::uint64_t seed = 1;
    int baud = 921600;
  };
  /// The observer may be null; it and the clock's line must outlive the device.
  PhantomDevice(Setup setup, DeviceClock clock, std::shared_ptr<Nest> nest, ActionObserver* observer);

  /// Answers what comes through `port` until the port is lost. A later call ends the one before.
  static asio::awaitable<void> serve(std::shared_ptr<PhantomDevice> self, std::shared_ptr<wire::Port> port);

  /// Power off and on: everything forgotten, another boot number.
  void power_cycle();
  /// Another certificate number, as it is told from now on.
  void set_certificate(std::string number) { setup_.identity.certificate = std::move(number); }

 private:
  /// What a unit does: how long it keeps the device busy, what it answers, or the error that it makes.
  struct Outcome {
    int fault = 0;
    double busy_s = 0.0;
    std::optional<std::string> answer;
    std::function<std::string(double end_s)> answer_at_end;  ///< for work whose result stands at the end only
  };
  using Handler = Outcome (PhantomDevice::*)(const wire::Unit&);
  struct Command {
    std::string_view pattern;
    Handler handler;
  };
  struct Settings {
    double exposure_s = 0.02;
    int frames = 1;
    bool shutter_open = true;
    int set_point = 0;
    double rate_Hz = 5.0;
    Depths depths{0.01, 0.01};
    bool modulating = false;
    bool blade_in = false;
    Lamp lamp;
    bool line_lamp = false;
  };

  static const std::vector<Command>& commands();
  static asio::awaitable<void> answer_line(std::shared_ptr<PhantomDevice> self, std::shared_ptr<wire::Port> port,
                                           std::string line);
  std::optional<std::string> admitted(std::string line);
  Outcome execute(const wire::Unit& unit);
  std::string framed(const std::vector<std::string>& answers) const;
  void settle_events();
  double settled_at_s() const { return optics_changed_s_ + Modulator::settling_s; }
  void optics_changed(double time_s) { optics_changed_s_ = time_s; }
  void apply_modulation();
  std::string read_block(double start_s);

  Outcome set_flag(const wire::Unit& unit, bool& flag, double busy_s);

  Outcome identify(const wire::Unit&);
  Outcome reset(const wire::Unit&);
  Outcome clear_status(const wire::Unit&);
  Outcome event_enable(const wire::Unit&);
  Outcome ask_event_enable(const wire::Unit&);
  Outcome ask_events(const wire::Unit&);
  Outcome service_enable(const wire::Unit&);
  Outcome ask_service_enable(const wire::Unit&);
  Outcome ask_status(const wire::Unit&);
  Outcome operation_complete(const wire::Unit&);
  Outcome ask_operation_complete(const wire::Unit&);
  Outcome wait_to_continue(const wire::Unit&);
  Outcome self_test(const wire::Unit&);
  Outcome ask_error(const wire::Unit&);
  Outcome checksum(const wire::Unit&);
  Outcome ask_checksum(const wire::Unit&);
  Outcome ask_echo(const wire::Unit&);
  Outcome ask_version(const wire::Unit&);
  Outcome ask_boot(const wire::Unit&);
  Outcome ask_certificate(const wire::Unit&);
  Outcome ask_due(const wire::Unit&);
  Outcome exposure(const wire::Unit&);
  Outcome ask_exposure(const wire::Unit&);
  Outcome average(const wire::Unit&);
  Outcome ask_average(const wire::Unit&);
  Outcome shutter(const wire::Unit&);
  Outcome ask_shutter(const wire::Unit&);
  Outcome ask_reading(const wire::Unit&);
  Outcome ask_wavelength(const wire::Unit&);
  Outcome set_point(const wire::Unit&);
  Outcome ask_set_point(const wire::Unit&);
  Outcome ask_set_points(const wire::Unit&);
  Outcome rate(const wire::Unit&);
  Outcome ask_rate(const wire::Unit&);
  Outcome red_depth(const wire::Unit&);
  Outcome ask_red_depth(const wire::Unit&);
  Outcome infrared_depth(const wire::Unit&);
  Outcome ask_infrared_depth(const wire::Unit&);
  Outcome modulate(const wire::Unit&);
  Outcome ask_modulate(const wire::Unit&);
  Outcome ask_settled(const wire::Unit&);
  Outcome blade(const wire::Unit&);
  Outcome ask_blade(const wire::Unit&);
  Outcome lamp(const wire::Unit&);
  Outcome ask_lamp(const wire::Unit&);
  Outcome lamp_level(const wire::Unit&);
  Outcome ask_lamp_level(const wire::Unit&);
  Outcome lamp_flicker(const wire::Unit&);
  Outcome ask_lamp_flicker(const wire::Unit&);
  Outcome line_lamp(const wire::Unit&);
  Outcome ask_line_lamp(const wire::Unit&);
  Outcome ask_lines(const wire::Unit&);
  Outcome ask_temperature(const wire::Unit&);
  Outcome ask_lid(const wire::Unit&);
  Outcome ask_probe(const wire::Unit&);
  Outcome ask_probe_count(const wire::Unit&);

  Setup setup_;
  DeviceClock clock_;
  std::shared_ptr<Nest> nest_;
  ActionObserver* observer_;
  Settings settings_;
  ScpiStatus status_;
  bool checksum_mode_ = false;
  double optics_changed_s_ = -1e9;
  std::optional<double> complete_at_s_;  ///< a pending *OPC
  std::uint32_t readings_ = 0;
  std::uint32_t insertions_before_ = 0;  ///< of the nest, when the power came on
  std::uint32_t boot_ = 1;
  int starts_ = 0;
  int line_ = 0;  ///< counts calls of serve(): an older one ends
  int work_ = 0;  ///< what began under an older number is given up
};

}  // namespace probewright::emulated
