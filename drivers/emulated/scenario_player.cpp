#include "drivers/emulated/scenario_player.h"

#include <boost/asio/co_spawn.hpp>
#include <cmath>

#include "drivers/emulated/bench.h"
#include "drivers/emulated/deviates.h"

namespace probewright::emulated {
namespace {

using enum BenchFault;

constexpr double ramp_step_s = 1.0;

bool is_of_bytes(BenchFault fault) { return fault == byte_lost || fault == byte_changed || fault == byte_doubled; }
bool is_of_line(BenchFault fault) { return fault <= noise_bytes; }
bool is_of_talk(BenchFault fault) { return fault == reply_late || fault == reply_missing; }
bool is_of_physics(BenchFault fault) { return fault >= band_drift; }

wire::FaultKind kind_of(BenchFault fault) {
  if (fault == byte_changed) return wire::FaultKind::change;
  return fault == byte_lost ? wire::FaultKind::lose : wire::FaultKind::twice;
}

wire::Unsteady unsteady_of(BenchFault fault) {
  switch (fault) {
    case bytes_split:
      return wire::Unsteady::split;
    case noise_bytes:
      return wire::Unsteady::noise;
    case reply_late:
      return wire::Unsteady::late;
    case reply_missing:
      return wire::Unsteady::missing;
    default:
      return wire::Unsteady::pause;
  }
}

std::vector<Way> ways(const ScenarioFault& fault) {
  if (is_of_talk(fault.fault)) return {Way::from_device};
  if (fault.way) return {*fault.way};
  return {Way::to_device, Way::from_device};
}

void add(StationErrors& errors, const ScenarioFault& fault, double strength) {
  const double red = strength * fault.red, infrared = strength * fault.infrared;
  switch (fault.fault) {
    case band_drift:
      errors.red_transmission += red;
      errors.infrared_transmission += infrared;
      break;
    case set_point_error:
      for (Depths& point : errors.set_points) point = {point.red + red, point.infrared + infrared};
      break;
    case gain_error:
      errors.converter_gain += strength * fault.gain;
      break;
    case wrong_temperature:
      errors.thermometer_K += strength * fault.shown_K;
      break;
    default:
      break;
  }
}

}  // namespace

ScenarioPlayer::ScenarioPlayer(asio::any_io_executor executor, DeviceClock clock, Bench& bench, std::uint64_t seed)
    : executor_(std::move(executor)),
      clock_(clock),
      bench_(bench),
      seed_(seed),
      self_(std::make_shared<ScenarioPlayer*>(this)) {}

ScenarioPlayer::~ScenarioPlayer() = default;

Result<void> ScenarioPlayer::known(const ScenarioFault& fault) const {
  const int nests = bench_.options().nests;
  if (!fault.nest || *fault.nest <= nests) return {};
  return Problem{"bench_no_such_nest", "", {{"nest", std::to_string(*fault.nest)}, {"nests", std::to_string(nests)}}};
}

Result<void> ScenarioPlayer::play(const Scenario& scenario, double zero_s) {
  for (const ScenarioFault& fault : scenario.faults) {
    if (auto possible = known(fault); !possible) return possible;
  }
  const std::uint64_t seed = scenario.seed.value_or(seed_);
  std::uint64_t number = 0;
  for (const ScenarioFault& fault : scenario.faults) begin(fault, derived_seed(seed, ++number), zero_s);
  return {};
}

Result<void> ScenarioPlayer::cause(const ScenarioFault& fault, double zero_s) {
  if (auto possible = known(fault); !possible) return possible;
  begin(fault, named_seed(seed_, "caused " + std::to_string(++caused_)), zero_s);
  return {};
}

/// The devices that a fault concerns; of a fault of a nest or of the room, one device of each nest stands for it.
std::vector<DeviceId> ScenarioPlayer::places(const ScenarioFault& fault) const {
  if (fault.fault == warm_room) return {{1, DeviceKind::phantom}};
  std::vector<DeviceId> found;
  const bool both = fault.fault <= wrong_certificate;
  for (const DeviceId& device : bench_.devices()) {
    if (fault.nest && device.nest != *fault.nest) continue;
    const bool right = fault.device ? device.kind == *fault.device : both || device.kind == DeviceKind::phantom;
    // Without a word which, it is the adapter that starts anew in its own capture.
    const bool adapter_only = fault.fault == BenchFault::restart_in_capture && !fault.device;
    if (right && !(adapter_only && device.kind == DeviceKind::phantom)) found.push_back(device);
  }
  return found;
}

void ScenarioPlayer::begin(const ScenarioFault& fault, std::uint64_t seed, double zero_s) {
  for (const DeviceId& place : places(fault)) {
    const Act next{fault, place, named_seed(seed, to_text(place)), zero_s, ++numbers_};
    const bool at_once = zero_s + fault.at_s <= clock_.now_s() && !(fault.per_minute > 0.0);
    const bool stays = !fault.for_s && std::isinf(fault.until_s) && fault.over_s <= 0.0;
    if (at_once && stays) {
      start(next);
    } else {
      asio::co_spawn(executor_, act(self_, clock_, season_, next), end_of_coroutine);
    }
  }
}

ScenarioPlayer* ScenarioPlayer::still(const Alive& alive, int season) {
  const auto self = alive.lock();
  return self && (*self)->season_ == season ? *self : nullptr;
}

asio::awaitable<void> ScenarioPlayer::act(Alive alive, DeviceClock clock, int season, Act act) {
  const ScenarioFault& fault = act.fault;
  co_await clock.wait_until_s(act.zero_s + fault.at_s);
  if (fault.per_minute > 0.0) {
    co_await at_random(alive, clock, season, act);
    co_return;
  }
  if (!still(alive, season)) co_return;
  co_await come(alive, clock, season, act);
  const double end_s = fault.for_s ? act.zero_s + fault.at_s + *fault.for_s : act.zero_s + fault.until_s;
  if (std::isinf(end_s)) co_return;
  co_await clock.wait_until_s(end_s);
  if (auto* player = still(alive, season)) player->stop(act);
}

/// At once, or in steps until it has its full size.
asio::awaitable<void> ScenarioPlayer::come(Alive alive, DeviceClock clock, int season, Act act) {
  const double start_s = clock.now_s(), over_s = act.fault.over_s;
  still(alive, season)->start(act);
  for (double past_s = 0.0; past_s < over_s;) {
    if (auto* player = still(alive, season)) player->set_strength(act.number, past_s / over_s);
    past_s = std::min(past_s + ramp_step_s, over_s);
    co_await clock.wait_until_s(start_s + past_s);
  }
  if (auto* player = still(alive, season); player && over_s > 0.0) player->set_strength(act.number, 1.0);
}

/// Again and again after pauses as those of a Poisson process.
asio::awaitable<void> ScenarioPlayer::at_random(Alive alive, DeviceClock clock, int season, Act act) {
  Deviates deviates(act.seed);
  double next_s = clock.now_s();
  for (;;) {
    next_s = std::max(next_s, clock.now_s()) - 60.0 / act.fault.per_minute * std::log(deviates.uniform());
    if (next_s > act.zero_s + act.fault.until_s) co_return;
    co_await clock.wait_until_s(next_s);
    auto* player = still(alive, season);
    if (!player) co_return;
    act.number = ++player->numbers_;
    act.seed = deviates.bits();
    player->start(act);
    if (!act.fault.for_s) continue;
    co_await clock.wait_until_s(next_s + *act.fault.for_s);
    player = still(alive, season);
    if (!player) co_return;
    player->stop(act);
  }
}

std::map<BenchFault, std::uint64_t> ScenarioPlayer::begun(int nest) const {
  std::map<BenchFault, std::uint64_t> counts;
  for (const auto& [what, count] : begun_) {
    if (what.first == nest) counts[what.second] += count;
  }
  return counts;
}

void ScenarioPlayer::start(const Act& act) {
  const ScenarioFault& fault = act.fault;
  if (is_of_line(fault.fault) || is_of_talk(fault.fault)) return start_on_line(act);
  ++begun_[{act.place.nest, fault.fault}];
  if (is_of_physics(fault.fault)) {
    lasting_.push_back({act.number, fault, act.place.nest, 1.0});
    return fault.fault == warm_room ? apply_room() : apply_physics(act.place.nest);
  }
  // What is so already (a cable that is out) stays so.
  switch (fault.fault) {
    case restart:
      static_cast<void>(bench_.restart(act.place));
      break;
    case BenchFault::restart_in_capture:
      restart_in_capture(act);
      break;
    case cable_pulled:
      static_cast<void>(bench_.pull(act.place));
      break;
    case wrong_certificate:
      bench_.set_certificate(act.place, fault.certificate);
      break;
    case lid_opened:
      static_cast<void>(bench_.lid(act.place.nest, true));
      break;
    default:
      break;
  }
}

void ScenarioPlayer::stop(const Act& act) {
  if (const auto ending = endings_.find(act.number); ending != endings_.end()) {
    for (const auto& end : ending->second) end();
    endings_.erase(ending);
  }
  lasting_.remove_if([&](const Lasting& lasting) { return lasting.number == act.number; });
  if (act.fault.fault == cable_pulled) static_cast<void>(bench_.plug(act.place));
  if (act.fault.fault == wrong_certificate) bench_.right_certificate(act.place);
  if (act.fault.fault == lid_opened) static_cast<void>(bench_.lid(act.place.nest, false));
  if (act.fault.fault == warm_room) apply_room();
  if (is_of_physics(act.fault.fault)) apply_physics(act.place.nest);
}

void ScenarioPlayer::start_on_line(const Act& act) {
  const ScenarioFault& fault = act.fault;
  if (fault.per_byte > 0.0 || fault.per_reply > 0.0 || !is_of_bytes(fault.fault)) return start_share(act);
  SeededEntropy entropy{act.seed};
  for (const Way way : ways(fault)) {
    for (int i = 0; i < fault.count; ++i) {
      const auto flip = static_cast<std::uint8_t>(1 + entropy.next() % 255);
      const SpoiltByte byte{way, static_cast<std::uint64_t>(i), kind_of(fault.fault), flip};
      static_cast<void>(bench_.spoil(act.place, byte));
    }
  }
}

void ScenarioPlayer::start_share(const Act& act) {
  const ScenarioFault& fault = act.fault;
  for (const Way way : ways(fault)) {
    const std::uint64_t seed = derived_seed(act.seed, way == Way::to_device ? 1 : 2);
    if (is_of_bytes(fault.fault)) {
      const int number = bench_.add_share(act.place, {way, fault.per_byte, {kind_of(fault.fault)}, seed});
      endings_[act.number].emplace_back([this, place = act.place, number] { bench_.end_share(place, number); });
      continue;
    }
    wire::UnsteadyShare share;
    share.kind = unsteady_of(fault.fault);
    share.direction = way == Way::from_device ? wire::Direction::out : wire::Direction::in;
    share.share = fault.per_byte + fault.per_reply;
    share.next = share.share > 0.0 ? 0 : fault.count;
    share.by = from_seconds(fault.by_s / clock_.speed());
    share.bytes = static_cast<std::size_t>(fault.bytes);
    share.seed = seed;
    wire::Unsteadiness& line = bench_.unsteadiness(act.place);
    const int number = line.add(share);
    endings_[act.number].emplace_back([&line, number] { line.end(number); });
  }
}

/// The next capture in the nest is its cue.
void ScenarioPlayer::restart_in_capture(const Act& act) {
  bench_.on_capture(act.place.nest, [this, act](double start_s) {
    bench_.on_capture(act.place.nest, {});
    asio::co_spawn(executor_, restart_later(self_, clock_, season_, act.place, start_s + act.fault.by_s),
                   end_of_coroutine);
  });
}

asio::awaitable<void> ScenarioPlayer::restart_later(Alive alive, DeviceClock clock, int season, DeviceId device,
                                                    double at_s) {
  co_await clock.wait_until_s(at_s);
  if (auto* player = still(alive, season)) static_cast<void>(player->bench_.restart(device));
}

void ScenarioPlayer::set_strength(int number, double strength) {
  for (Lasting& lasting : lasting_) {
    if (lasting.number != number) continue;
    lasting.strength = strength;
    if (lasting.fault.fault == warm_room) {
      apply_room();
    } else {
      apply_physics(lasting.nest);
    }
  }
}

void ScenarioPlayer::apply_physics(int nest) {
  StationErrors errors = bench_.own_errors(nest);
  Flicker flicker;
  for (const Lasting& lasting : lasting_) {
    if (lasting.nest != nest) continue;
    add(errors, lasting.fault, lasting.strength);
    if (lasting.fault.fault == mains_flicker) {
      flicker = {lasting.fault.level, lasting.fault.depth, lasting.fault.harmonics, bench_.options().mains_Hz};
    }
  }
  bench_.set_errors(nest, errors);
  bench_.set_flicker(nest, flicker);
}

void ScenarioPlayer::apply_room() {
  double degC = bench_.options().ambient_degC;
  for (const Lasting& lasting : lasting_) {
    if (lasting.fault.fault == warm_room) degC += lasting.strength * (lasting.fault.room_degC - degC);
  }
  bench_.room(degC);
}

void ScenarioPlayer::mend() {
  ++season_;
  endings_.clear();
  lasting_.clear();
  apply_room();
  for (const DeviceId& device : bench_.devices()) {
    static_cast<void>(bench_.heal(device));
    if (bench_.cable_pulled(device)) static_cast<void>(bench_.plug(device));
    bench_.right_certificate(device);
    if (device.kind == DeviceKind::adapter) continue;
    bench_.on_capture(device.nest, {});
    static_cast<void>(bench_.lid(device.nest, false));
    apply_physics(device.nest);
  }
}

}  // namespace probewright::emulated
