#include "station/sequence/find_devices.h"

#include <algorithm>
#include <boost/asio/co_spawn.hpp>
#include <boost/asio/io_context.hpp>

#include "drivers/wire/asio_clock.h"
#include "drivers/wire/serial_source.h"
#include "station/sequence/device_settings.h"

namespace probewright::sequence {
namespace {

namespace fs = std::filesystem;

std::vector<std::string> names_in(const fs::path& folder, std::initializer_list<std::string_view> starts) {
  std::vector<std::string> names;
  std::error_code error;
  for (const auto& entry : fs::directory_iterator{folder, error}) {
    const std::string name = entry.path().filename().string();
    if (std::any_of(starts.begin(), starts.end(), [&](std::string_view start) { return name.starts_with(start); }))
      names.push_back(entry.path().string());
  }
  std::sort(names.begin(), names.end());
  return names;
}

/// Asks at one port, with clock and context of its own.
class Looker {
 public:
  Looker(const std::string& port, const Configuration& configuration)
      : port_(port), station_(configuration.station.value), clock_(io_.get_executor(), station_.speed) {}

  /// Nothing: the device is the one of the certificate.
  std::optional<Problem> ask(const measure::PhantomCertificate& certificate) {
    phantom::Driver driver{phantom_settings(certificate, station_, 1), source(), clock_, entropy_};
    return connect(driver);
  }
  std::optional<Problem> ask(const measure::AdapterCertificate& certificate) {
    adapter::Driver driver{adapter_settings(certificate, station_, 1), source(), clock_, entropy_};
    return connect(driver);
  }

 private:
  wire::PortSource source() { return wire::serial_source(io_.get_executor(), clock_, port_, station_.baud); }

  template <class Driver>
  std::optional<Problem> connect(Driver& driver) {
    std::exception_ptr failed;
    boost::asio::co_spawn(io_, driver.connect(), [&failed](const std::exception_ptr& error) { failed = error; });
    io_.restart();
    io_.run();
    if (!failed) return std::nullopt;
    try {
      std::rethrow_exception(failed);
    } catch (const ProblemError& known) {
      return known.problem();
    }
  }

  std::string port_;
  const StationFile& station_;
  boost::asio::io_context io_{1};
  wire::AsioClock clock_;
  SystemEntropy entropy_;
};

/// The serial that a stranger gave instead of the one that was asked for; empty: it said something else.
std::string serial_of_stranger(const Problem& problem) {
  if (problem.id != "device_stranger") return {};
  std::string what, found;
  for (const auto& [name, value] : problem.arguments) {
    if (name == "what") what = value;
    if (name == "found") found = value;
  }
  return what == "serial" ? found : std::string{};
}

/// Asks with the first certificate; a device with another serial is asked again with its own. Nothing: nobody of this
/// kind answered.
template <class Certificates>
std::optional<FoundDevice> found_by(Looker& looker, const std::string& port, DeviceKind kind, bool emulated,
                                    const Certificates& certificates) {
  if (certificates.empty()) return std::nullopt;
  const auto* certificate = &certificates.begin()->second.value;
  auto problem = looker.ask(*certificate);
  if (const std::string serial = problem ? serial_of_stranger(*problem) : std::string{}; !serial.empty()) {
    const auto own = std::find_if(certificates.begin(), certificates.end(),
                                  [&](const auto& known) { return known.second.value.head.device_serial == serial; });
    if (own == certificates.end()) return FoundDevice{port, std::nullopt, serial, {}, false, problem};
    certificate = &own->second.value;
    problem = looker.ask(*certificate);
  }
  if (problem && (problem->id == "device_lost" || problem->id == "device_stranger")) return std::nullopt;
  if (problem) return FoundDevice{port, std::nullopt, certificate->head.device_serial, {}, false, problem};
  return FoundDevice{port, kind, certificate->head.device_serial, certificate->head.number, emulated, {}};
}

}  // namespace

std::vector<std::string> serial_ports(const fs::path& devices) {
  auto ports = names_in(devices / "serial" / "by-id", {""});
  return ports.empty() ? names_in(devices, {"ttyUSB", "ttyACM"}) : ports;
}

FoundDevice look_at_port(const std::string& port, const Configuration& configuration) {
  Looker looker{port, configuration};
  const bool emulated = configuration.station.value.emulated;
  if (auto found = found_by(looker, port, DeviceKind::phantom, emulated, configuration.phantom_certificates))
    return *found;
  if (auto found = found_by(looker, port, DeviceKind::adapter, emulated, configuration.adapter_certificates))
    return *found;
  return {port, std::nullopt, {}, {}, false, Problem{"port_unknown_device", port}};
}

}  // namespace probewright::sequence
