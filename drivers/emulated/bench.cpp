#include "drivers/emulated/bench.h"

#include <algorithm>
#include <boost/asio/co_spawn.hpp>

#include "drivers/emulated/model_nominals.h"
#include "drivers/emulated/scenario_player.h"
#include "drivers/wire/memory_port.h"
#include "drivers/wire/paced_port.h"
#include "station/base/entropy.h"
#include "station/base/numbers.h"

namespace probewright::emulated {
namespace {

std::string two_digits(int number) { return (number < 10 ? "0" : "") + std::to_string(number); }

wire::Direction direction_of(Way way) { return way == Way::from_device ? wire::Direction::out : wire::Direction::in; }
std::size_t index_of(Way way) { return way == Way::to_device ? 0 : 1; }

wire::FaultRate rate_of(const SpoiltShare& share, std::uint64_t bytes_before) {
  wire::FaultRate rate;
  rate.per_byte = share.per_byte;
  if (!share.kinds.empty()) rate.kinds = share.kinds;
  rate.seed = derived_seed(share.seed, bytes_before);  // each line its own faults
  rate.only = direction_of(share.way);
  return rate;
}

std::string certificate_number(const DeviceId& device, bool right) {
  const std::string kind = device.kind == DeviceKind::phantom ? "PHC-" : "ADC-";
  return kind + (right ? "2026-01" : "2024-09") + two_digits(device.nest);
}

std::string faults_text(const Probe& probe) {
  std::string text;
  for (const PlantedFault& planted : probe.faults) {
    if (!text.empty()) text += ", ";
    text += std::string(slug_of(planted.fault)) + " " + shortest(planted.severity);
  }
  return text.empty() ? "no fault" : text;
}

asio::awaitable<std::unique_ptr<wire::Port>> open_later(Bench* bench, DeviceId device) {
  co_return bench->open(device);
}

}  // namespace

std::optional<std::string_view> model_of_serial(std::string_view serial) {
  for (const ModelNominals& nominals : all_models()) {
    std::string prefix(nominals.model);
    std::erase(prefix, '-');
    if (serial.starts_with(prefix + "-")) return nominals.model;
  }
  return std::nullopt;
}

Bench::Bench(asio::any_io_executor executor, wire::LineClock& clock, BenchOptions options, ActionObserver* observer)
    : executor_(std::move(executor)),
      line_clock_(clock),
      options_(std::move(options)),
      observer_(observer),
      clock_(clock, options_.speed),
      self_(std::make_shared<Bench*>(this)) {
  for (int nest = 1; nest <= options_.nests; ++nest) {
    stations_.push_back(make_station(nest));
    lines_[{nest, DeviceKind::phantom}];
    lines_[{nest, DeviceKind::adapter}];
  }
  player_ = std::make_unique<ScenarioPlayer>(executor_, clock_, *this, options_.seed);
}

Bench::~Bench() {
  player_.reset();
  self_.reset();
  for (auto& [device, line] : lines_) detach(line);
}

DeviceIdentity Bench::identity(const DeviceId& device) const {
  const bool phantom = device.kind == DeviceKind::phantom;
  const std::string number = two_digits(device.nest);
  const auto& wrong = options_.wrong_certificate;
  const bool right = std::find(wrong.begin(), wrong.end(), device) == wrong.end();
  DeviceIdentity identity;
  identity.maker = "Alder Quay Sensors";
  identity.serial = (phantom ? "PH-" : "AD-") + number;
  identity.firmware = "1.0.0-emulated-x" + shortest(options_.speed);
  identity.certificate = certificate_number(device, right);
  identity.due = "2027-06-30";
  return identity;
}

Bench::Station Bench::make_station(int number) {
  const int baud = options_.baud > 0 ? options_.baud : 921600;
  Station station;
  station.nest = std::make_shared<Nest>(
      Nest::Setup{number, options_.seed, options_.ambient_degC, options_.mains_Hz, options_.perfect, options_.errors});
  const DeviceId phantom{number, DeviceKind::phantom}, adapter{number, DeviceKind::adapter};
  station.phantom = std::make_shared<PhantomDevice>(
      PhantomDevice::Setup{phantom, identity(phantom), options_.seed, baud}, clock_, station.nest, observer_);
  station.adapter =
      std::make_shared<AdapterDevice>(AdapterDevice::Setup{adapter, identity(adapter), options_.seed, baud}, clock_,
                                      executor_, station.nest, observer_);
  station.own_errors = station.nest->errors();
  return station;
}

std::vector<DeviceId> Bench::devices() const {
  std::vector<DeviceId> devices;
  for (const auto& [device, line] : lines_) devices.push_back(device);
  return devices;
}

// --- lines

std::unique_ptr<wire::Port> Bench::open(const DeviceId& device) {
  Line& line = lines_.at(device);
  if (line.pulled) throw wire::PortLost(to_text(device), "the cable is pulled");
  auto pair = wire::make_memory_pair(line_clock_, to_text(device), {.bytes_per_s = bytes_per_s()});
  attach(device, std::move(pair.device));
  return std::move(pair.station);
}

std::function<asio::awaitable<std::unique_ptr<wire::Port>>()> Bench::source(const DeviceId& device) {
  return [this, device] { return open_later(this, device); };
}

void Bench::attach(const DeviceId& device, std::unique_ptr<wire::Port> device_end) {
  Line& line = lines_.at(device);
  detach(line);
  auto spoiler = std::make_unique<wire::FaultPort>(std::move(device_end));
  for (const SpoiltByte& byte : line.plan) {
    const std::uint64_t before = line.sent_before[index_of(byte.way)];
    if (byte.index >= before) spoiler->add({direction_of(byte.way), byte.index - before, byte.kind, byte.flip});
  }
  line.spoiler = spoiler.get();
  set_rates(line, *spoiler);
  line.port = std::make_shared<wire::UnsteadyPort>(std::move(spoiler), line_clock_, line.unsteadiness);
  const Station& station = stations_.at(static_cast<std::size_t>(device.nest - 1));
  const bool phantom = device.kind == DeviceKind::phantom;
  asio::co_spawn(
      executor_,
      serve(phantom ? station.phantom : nullptr, phantom ? nullptr : station.adapter, line.port, self_, device),
      end_of_coroutine);
}

/// Rates are drawn anew for each port, from what has passed before it.
void Bench::set_rates(const Line& line, wire::FaultPort& port) const {
  port.set_rate({});
  for (const auto& [number, share] : line.shares) {
    const std::uint64_t now = line.spoiler ? line.spoiler->count(direction_of(share.way)) : 0;
    port.add_rate(rate_of(share, line.sent_before[index_of(share.way)] + now));
  }
}

void Bench::detach(Line& line) {
  if (!line.port) return;
  line.sent_before[index_of(Way::to_device)] += line.spoiler->count(wire::Direction::in);
  line.sent_before[index_of(Way::from_device)] += line.spoiler->count(wire::Direction::out);
  for (const auto kind : {wire::FaultKind::lose, wire::FaultKind::change, wire::FaultKind::twice}) {
    line.spoilt_before[static_cast<std::size_t>(kind)] += line.spoiler->faults(kind);
  }
  line.port->close();
  line.spoiler = nullptr;
  line.port.reset();
}

asio::awaitable<void> Bench::serve(std::shared_ptr<PhantomDevice> phantom, std::shared_ptr<AdapterDevice> adapter,
                                   std::shared_ptr<wire::Port> port, std::weak_ptr<Bench*> bench, DeviceId device) {
  if (phantom) {
    co_await PhantomDevice::serve(phantom, port);
  } else {
    co_await AdapterDevice::serve(adapter, port);
  }
  if (const auto alive = bench.lock()) (*alive)->lost(device, port.get());
}

void Bench::lost(const DeviceId& device, const wire::Port* port) {
  Line& line = lines_.at(device);
  if (line.port.get() != port) return;  // another line is in use already
  detach(line);
  if (!line.pulled && make_line_ && on_lost_) on_lost_(device);
}

Result<void> Bench::host(MakeLine make_line) {
  make_line_ = std::move(make_line);
  for (const auto& [device, line] : lines_) {
    if (line.pulled) continue;
    if (auto made = make_hosted_line(device); !made) return made.error();
  }
  return {};
}

Result<void> Bench::make_hosted_line(const DeviceId& device) {
  auto port = make_line_(device);
  if (!port) return port.error();
  if (bytes_per_s() > 0.0) {
    attach(device, std::make_unique<wire::PacedPort>(*std::move(port), line_clock_, bytes_per_s()));
  } else {
    attach(device, *std::move(port));
  }
  return {};
}

// --- hands

Result<Nest*> Bench::nest_at(int nest) {
  if (nest < 1 || nest > options_.nests) {
    return Problem{
        "bench_no_such_nest", "", {{"nest", std::to_string(nest)}, {"nests", std::to_string(options_.nests)}}};
  }
  return stations_[static_cast<std::size_t>(nest - 1)].nest.get();
}

Result<Bench::Line*> Bench::line_of(const DeviceId& device) {
  const auto found = lines_.find(device);
  if (found == lines_.end()) return Problem{"bench_no_such_device", "", {{"device", to_text(device)}}};
  return &found->second;
}

Result<void> Bench::seat(int nest, std::string_view serial, std::string_view model) {
  if (!knows_model(model)) {
    return Problem{"bench_unknown_model", "", {{"model", std::string(model)}, {"models", known_models()}}};
  }
  const Probe* before = known(serial, model);
  return seat(nest, before != nullptr ? *before : draw_probe(options_.seed, serial, model));
}

Result<void> Bench::seat(int nest, std::string_view serial, std::string_view model, PlantedFault fault) {
  if (!knows_model(model)) {
    return Problem{"bench_unknown_model", "", {{"model", std::string(model)}, {"models", known_models()}}};
  }
  if (!(fault.severity > 0.0 && fault.severity <= 1.0)) {
    return Problem{"bench_severity", "", {{"severity", shortest(fault.severity)}}};
  }
  Probe probe = with_fault(draw_probe(options_.seed, serial, model), fault, options_.seed);
  const Probe* before = known(serial, model);
  if (before != nullptr && before->faults != probe.faults) {
    return Problem{"bench_other_probe", "", {{"serial", probe.serial}, {"found", faults_text(*before)}}};
  }
  return seat(nest, before != nullptr ? *before : std::move(probe));
}

const Probe* Bench::known(std::string_view serial, std::string_view model) const {
  const auto found = truths_.find(std::string(serial));
  return found == truths_.end() || found->second.probe.model != model ? nullptr : &found->second.probe;
}

Result<void> Bench::seat(int nest, Probe probe) {
  auto place = nest_at(nest);
  if (!place) return place.error();
  for (int other = 1; other <= options_.nests; ++other) {
    const auto& there = stations_[static_cast<std::size_t>(other - 1)].nest->probe();
    if (!there) continue;
    if (other == nest) {
      return Problem{"bench_nest_occupied", "", {{"nest", std::to_string(nest)}, {"serial", there->serial}}};
    }
    if (there->serial == probe.serial) {
      return Problem{"bench_probe_elsewhere", "", {{"serial", probe.serial}, {"nest", std::to_string(other)}}};
    }
  }
  const std::string serial = probe.serial;
  const bool first = !truths_.contains(serial);
  truths_.insert_or_assign(serial, truth_of(probe));
  (*place)->seat(now_s(), std::move(probe));
  if (first && on_first_seat_) on_first_seat_(serial);
  return {};
}

Result<void> Bench::remove(int nest) {
  auto place = nest_at(nest);
  if (!place) return place.error();
  if (!(*place)->probe()) return Problem{"bench_nest_empty", "", {{"nest", std::to_string(nest)}}};
  (*place)->remove(now_s());
  return {};
}

Result<void> Bench::lid(int nest, bool open) {
  auto place = nest_at(nest);
  if (!place) return place.error();
  (*place)->set_lid(now_s(), open);
  return {};
}

void Bench::room(double degC) {
  for (Station& station : stations_) station.nest->set_ambient(degC);
}

Result<void> Bench::pull(const DeviceId& device) {
  auto line = line_of(device);
  if (!line) return line.error();
  if ((*line)->pulled) return Problem{"bench_cable_pulled", "", {{"device", to_text(device)}}};
  (*line)->pulled = true;
  detach(**line);
  return {};
}

Result<void> Bench::plug(const DeviceId& device) {
  auto line = line_of(device);
  if (!line) return line.error();
  const bool hosted_and_lost = make_line_ && !(*line)->port;
  if (!(*line)->pulled && !hosted_and_lost) {
    return Problem{"bench_cable_plugged", "", {{"device", to_text(device)}}};
  }
  if (make_line_) {
    if (auto made = make_hosted_line(device); !made) return made.error();
  }
  (*line)->pulled = false;
  return {};
}

Result<void> Bench::restart(const DeviceId& device) {
  if (auto line = line_of(device); !line) return line.error();
  const Station& station = stations_[static_cast<std::size_t>(device.nest - 1)];
  if (device.kind == DeviceKind::phantom) {
    station.phantom->power_cycle();
  } else {
    station.adapter->power_cycle();
  }
  return {};
}

Result<void> Bench::spoil(const DeviceId& device, const SpoiltByte& byte) {
  auto line = line_of(device);
  if (!line) return line.error();
  SpoiltByte planned = byte;
  planned.index += bytes(device, byte.way);
  (*line)->plan.push_back(planned);
  if (auto* port = (*line)->spoiler) {
    const std::uint64_t before = (*line)->sent_before[index_of(byte.way)];
    port->add({direction_of(byte.way), planned.index - before, byte.kind, byte.flip});
  }
  return {};
}

Result<void> Bench::spoil(const DeviceId& device, const SpoiltShare& share) {
  auto line = line_of(device);
  if (!line) return line.error();
  (*line)->shares.clear();
  add_share(device, share);
  return {};
}

int Bench::add_share(const DeviceId& device, const SpoiltShare& share) {
  Line& line = lines_.at(device);
  line.shares.emplace(++shares_, share);
  if (line.spoiler) set_rates(line, *line.spoiler);
  return shares_;
}

void Bench::end_share(const DeviceId& device, int number) {
  Line& line = lines_.at(device);
  line.shares.erase(number);
  if (line.spoiler) set_rates(line, *line.spoiler);
}

Result<void> Bench::heal(const DeviceId& device) {
  auto line = line_of(device);
  if (!line) return line.error();
  (*line)->plan.clear();
  (*line)->shares.clear();
  (*line)->unsteadiness->end_all();
  if ((*line)->spoiler) (*line)->spoiler->heal();
  return {};
}

// --- scenarios

Result<void> Bench::play(const Scenario& scenario) { return player_->play(scenario, 0.0); }
Result<void> Bench::cause(const ScenarioFault& fault) { return player_->cause(fault, now_s()); }
void Bench::mend() { player_->mend(); }

std::map<BenchFault, std::uint64_t> Bench::troubles() const {
  std::map<BenchFault, std::uint64_t> all;
  for (int nest = 1; nest <= options_.nests; ++nest) {
    for (const auto& [fault, count] : troubles(nest)) all[fault] += count;
  }
  return all;
}

std::map<BenchFault, std::uint64_t> Bench::troubles(int nest) const {
  std::map<BenchFault, std::uint64_t> counts = player_->begun(nest);
  for (const auto& [device, line] : lines_) {
    if (device.nest != nest) continue;
    counts[BenchFault::byte_lost] += spoilt(line, wire::FaultKind::lose);
    counts[BenchFault::byte_changed] += spoilt(line, wire::FaultKind::change);
    counts[BenchFault::byte_doubled] += spoilt(line, wire::FaultKind::twice);
    counts[BenchFault::bytes_paused] += line.unsteadiness->count(wire::Unsteady::pause);
    counts[BenchFault::bytes_split] += line.unsteadiness->count(wire::Unsteady::split);
    counts[BenchFault::noise_bytes] += line.unsteadiness->count(wire::Unsteady::noise);
    counts[BenchFault::reply_late] += line.unsteadiness->count(wire::Unsteady::late);
    counts[BenchFault::reply_missing] += line.unsteadiness->count(wire::Unsteady::missing);
  }
  std::erase_if(counts, [](const auto& entry) { return entry.second == 0; });
  return counts;
}

void Bench::set_certificate(const DeviceId& device, std::string number) {
  if (number.empty()) number = certificate_number(device, false);
  if (device.kind == DeviceKind::phantom) {
    station(device.nest).phantom->set_certificate(std::move(number));
  } else {
    station(device.nest).adapter->set_certificate(std::move(number));
  }
}

void Bench::right_certificate(const DeviceId& device) { set_certificate(device, identity(device).certificate); }

void Bench::on_capture(int nest, std::function<void(double)> began) {
  station(nest).adapter->on_capture(std::move(began));
}

StationErrors Bench::own_errors(int nest) const { return stations_.at(static_cast<std::size_t>(nest - 1)).own_errors; }

void Bench::set_errors(int nest, const StationErrors& errors) {
  station(nest).nest->set_errors(now_s(), errors);
  station(nest).adapter->set_errors(errors);
}

void Bench::set_flicker(int nest, const Flicker& flicker) { station(nest).nest->set_flicker(now_s(), flicker); }

// --- what trials look at

AdapterDevice::Drive Bench::drive(int nest) {
  return stations_.at(static_cast<std::size_t>(nest - 1)).adapter->drive();
}

std::uint64_t Bench::bytes(const DeviceId& device, Way way) const {
  const Line& line = lines_.at(device);
  const std::uint64_t now = line.spoiler ? line.spoiler->count(direction_of(way)) : 0;
  return line.sent_before[index_of(way)] + now;
}

std::uint64_t Bench::spoilt(const Line& line, wire::FaultKind kind) const {
  return line.spoilt_before[static_cast<std::size_t>(kind)] + (line.spoiler ? line.spoiler->faults(kind) : 0);
}

std::uint64_t Bench::spoilt(const DeviceId& device) const {
  const Line& line = lines_.at(device);
  return spoilt(line, wire::FaultKind::lose) + spoilt(line, wire::FaultKind::change) +
         spoilt(line, wire::FaultKind::twice);
}

}  // namespace probewright::emulated
