#include "drivers/emulated/adapter_requests.h"

#include <algorithm>
#include <array>
#include <cmath>

#include "drivers/emulated/adapter_device.h"

namespace probewright::emulated {

namespace request {
namespace {

struct Row {
  std::uint8_t type;
  std::string_view name;
  int payload;
};
constexpr std::array rows{Row{hello, "hello", 0},
                          Row{set_drive, "set drive", 8},
                          Row{set_timing, "set timing", 4},
                          Row{forward_voltage, "forward voltage", 5},
                          Row{reverse_leakage, "reverse leakage", 3},
                          Row{dark_current, "dark current", 5},
                          Row{id_resistance, "ID resistance", 0},
                          Row{mains_pickup, "mains pick-up", 2},
                          Row{presence, "presence", 0},
                          Row{self_proof, "self-proof", 1},
                          Row{state, "state", 0},
                          Row{start_capture, "start capture", 6},
                          Row{stop_capture, "stop capture", 0}};

}  // namespace

std::string_view name(std::uint8_t type) {
  const auto row = std::find_if(rows.begin(), rows.end(), [type](const Row& r) { return r.type == type; });
  return row == rows.end() ? "unknown" : row->name;
}

int payload_size(std::uint8_t type) {
  const auto row = std::find_if(rows.begin(), rows.end(), [type](const Row& r) { return r.type == type; });
  return row == rows.end() ? -1 : row->payload;
}

}  // namespace request

namespace {

constexpr std::uint8_t unknown_type = 1, wrong_length = 2, out_of_range = 3, wrong_state = 4;
constexpr double electrical_s = 0.020;
constexpr std::uint32_t most_drive_uA = 50000;

std::int32_t whole(double value) { return static_cast<std::int32_t>(std::llround(value)); }
std::uint32_t whole_unsigned(double value) { return static_cast<std::uint32_t>(std::llround(std::max(0.0, value))); }

bool is_led(std::uint8_t led) { return led == 1 || led == 2; }
LedColour colour_of(std::uint8_t led) { return led == 1 ? LedColour::red : LedColour::infrared; }

}  // namespace

asio::awaitable<AdapterDevice::Reply> AdapterDevice::carry_out(Shared self, std::shared_ptr<Outbox> outbox,
                                                               wire::Frame request) {
  const int size = request::payload_size(request.type);
  if (size < 0) co_return Reply{{}, unknown_type, 0};
  if (static_cast<std::size_t>(size) != request.payload.size()) {
    co_return Reply{{}, wrong_length, static_cast<std::uint32_t>(size)};
  }
  const wire::LeReader fields{request.payload};
  switch (request.type) {
    case request::hello:
      co_return self->hello();
    case request::set_drive:
      co_return self->set_drive(fields);
    case request::set_timing:
      co_return self->set_timing(fields);
    case request::forward_voltage:
      co_return co_await forward_voltage(self, request);
    case request::reverse_leakage:
      co_return co_await reverse_leakage(self, request);
    case request::dark_current:
      co_return co_await dark_current(self, request);
    case request::id_resistance:
      co_return co_await id_resistance(self);
    case request::mains_pickup:
      co_return co_await mains_pickup(self, request);
    case request::presence:
      co_return self->presence();
    case request::self_proof:
      co_return co_await self_proof(self, request);
    case request::state:
      co_return self->state();
    case request::start_capture:
      co_return self->start_capture(fields);
    case request::stop_capture:
      co_return self->stop_capture();
    default:
      co_return Reply{{}, unknown_type, 0};
  }
}

AdapterDevice::Reply AdapterDevice::hello() {
  const DeviceIdentity& identity = setup_.identity;
  constexpr std::uint8_t protocol = 1, emulated = 1;
  wire::LeWriter reply;
  reply.u8(protocol).u8(emulated).u32(whole_unsigned(1000.0 * clock_.speed())).u32(boot_);
  for (const std::string_view text :
       {std::string_view{identity.maker}, std::string_view{"ADAPTER"}, std::string_view{identity.serial},
        std::string_view{identity.firmware}, std::string_view{identity.certificate}, std::string_view{identity.due}}) {
    reply.short_text(text);
  }
  return {reply.take()};
}

AdapterDevice::Reply AdapterDevice::set_drive(wire::LeReader fields) {
  const Drive wanted{fields.u32(), fields.u32()};
  if (wanted.red_uA > most_drive_uA) return {{}, out_of_range, 0};
  if (wanted.infrared_uA > most_drive_uA) return {{}, out_of_range, 1};
  const double now_s = clock_.now_s();
  catch_up(now_s);
  if (wanted != drive_) apply_drive(now_s, wanted);
  return {wire::LeWriter{}.u32(drive_.red_uA).u32(drive_.infrared_uA).take()};
}

AdapterDevice::Reply AdapterDevice::set_timing(wire::LeReader fields) {
  const std::uint32_t slot_ns = fields.u32();
  if (slot_ns < 100000 || slot_ns > 2000000) return {{}, out_of_range, 0};
  if (driven() || capturing(clock_.now_s())) return {{}, wrong_state, 0};
  slot_s_ = 1e-9 * slot_ns;
  return {wire::LeWriter{}.u32(slot_ns).take()};
}

int AdapterDevice::measured_uV(LedColour colour, double drive_mA, double from_s, double to_s) {
  return whole(1e6 * front_end_.measured_V(nest_->forward_V(colour, drive_mA, from_s, to_s)));
}

int AdapterDevice::first_uV(LedColour colour, std::uint32_t drive_uA) {
  const bool red = colour == LedColour::red;
  const Led& led = red ? nest_->probe()->red : nest_->probe()->infrared;
  const Change& change = red ? red_change_ : infrared_change_;
  const double drive_mA = front_end_.delivered_mA(1e-3 * drive_uA);
  const Warmth early = warmed(led.heating, change.warmth, drive_mA / led.standard_drive_mA, 0.005);
  const double voltage_V = forward_voltage_V(led, drive_mA, excess_K(led, nest_->degC(), early));
  return whole(1e6 * front_end_.measured_V(voltage_V));
}

asio::awaitable<AdapterDevice::Reply> AdapterDevice::forward_voltage(Shared self, wire::Frame request) {
  wire::LeReader fields{request.payload};
  const std::uint8_t led = fields.u8();
  const std::uint32_t asked_uA = fields.u32();
  if (!is_led(led)) co_return Reply{{}, out_of_range, 0};
  if (asked_uA > most_drive_uA) co_return Reply{{}, out_of_range, 1};
  constexpr std::uint8_t at_compliance = 1, no_drive = 2;
  const LedColour colour = colour_of(led);
  const bool red = colour == LedColour::red;
  const double start_s = self->clock_.now_s(), end_s = start_s + electrical_s;
  const std::uint32_t now_uA = red ? self->drive_.red_uA : self->drive_.infrared_uA;
  const std::uint32_t drive_uA = asked_uA == 0 ? now_uA : asked_uA;
  const double drive_mA = self->front_end_.delivered_mA(1e-3 * drive_uA);
  const bool other_drive = drive_uA != now_uA;
  const int work = self->work_;
  if (other_drive) {
    const auto now = self->nest_->leds().at(start_s);
    self->nest_->drive(start_s, red ? drive_mA : now.red_mA, red ? now.infrared_mA : drive_mA);
  }
  co_await self->clock_.wait_until_s(end_s);
  if (self->work_ != work) co_return Reply{};
  self->catch_up(end_s);
  const auto& probe = self->nest_->probe();
  const bool flows = probe && conducts(red ? probe->red : probe->infrared);
  wire::LeWriter reply;
  reply.u8(led).u32(asked_uA);
  if (drive_uA == 0) {
    reply.u32(0).i32(0).i32(0).u8(no_drive);
  } else if (!flows) {
    reply.u32(0).i32(whole(1e6 * FrontEnd::compliance_V)).i32(0).u8(at_compliance);
  } else {
    const int voltage = self->measured_uV(colour, drive_mA, start_s, end_s);
    const int first = asked_uA == 0 ? self->first_uV(colour, drive_uA) : 0;
    reply.u32(whole_unsigned(1e6 * self->front_end_.reported_mA(drive_mA))).i32(voltage).i32(first).u8(0);
  }
  if (other_drive) self->apply_drive(end_s, self->drive_);
  co_return Reply{reply.take()};
}

asio::awaitable<AdapterDevice::Reply> AdapterDevice::reverse_leakage(Shared self, wire::Frame request) {
  wire::LeReader fields{request.payload};
  const std::uint8_t led = fields.u8();
  const std::uint16_t reverse_mV = fields.u16();
  if (!is_led(led)) co_return Reply{{}, out_of_range, 0};
  if (reverse_mV > 5000) co_return Reply{{}, out_of_range, 1};
  if (self->driven()) co_return Reply{{}, wrong_state, 0};
  co_await self->busy(electrical_s);
  const auto& probe = self->nest_->probe();
  const bool inseparable = probe && probe->wiring == Wiring::antiparallel;
  double leakage_uA = 0.0;
  if (probe && !inseparable) {
    const Led& part = led == 1 ? probe->red : probe->infrared;
    leakage_uA = self->front_end_.measured_leakage_uA(reverse_leakage_uA(part, 1e-3 * reverse_mV));
  }
  co_return Reply{
      wire::LeWriter{}.u8(led).u16(reverse_mV).u32(whole_unsigned(1e6 * leakage_uA)).u8(inseparable ? 1 : 0).take()};
}

asio::awaitable<AdapterDevice::Reply> AdapterDevice::dark_current(Shared self, wire::Frame request) {
  wire::LeReader fields{request.payload};
  const std::uint16_t bias_mV = fields.u16(), time_ms = fields.u16();
  const std::uint8_t input = fields.u8();
  if (bias_mV > 5000) co_return Reply{{}, out_of_range, 0};
  if (time_ms < 20 || time_ms > 1000) co_return Reply{{}, out_of_range, 1};
  if (input > 1) co_return Reply{{}, out_of_range, 2};
  const double start_s = self->clock_.now_s(), time_s = 1e-3 * time_ms;
  if (self->driven() || self->capturing(start_s)) co_return Reply{{}, wrong_state, 0};
  co_await self->busy(time_s);
  const double current_nA = input == 1 ? self->nest_->dark_nA(1e-3 * bias_mV, start_s, time_s) : 0.0;
  const FrontEnd::Mean mean = self->front_end_.mean_current(current_nA, time_s);
  co_return Reply{wire::LeWriter{}
                      .u16(bias_mV)
                      .u16(time_ms)
                      .u8(input)
                      .i32(whole(1e3 * mean.current_nA))
                      .u32(whole_unsigned(1e3 * mean.sd_nA))
                      .take()};
}

asio::awaitable<AdapterDevice::Reply> AdapterDevice::id_resistance(Shared self) {
  co_await self->busy(0.010);
  constexpr std::uint32_t open = 0xFFFFFFFF;
  constexpr double most_ohm = 4e6;
  std::uint32_t milliohm = open;
  if (const auto& probe = self->nest_->probe()) {
    const double ohm = self->front_end_.measured_ohm(probe->id_ohm);
    if (ohm <= most_ohm) milliohm = whole_unsigned(1e3 * ohm);
  }
  co_return Reply{wire::LeWriter{}.u32(milliohm).take()};
}

asio::awaitable<AdapterDevice::Reply> AdapterDevice::mains_pickup(Shared self, wire::Frame request) {
  const std::uint16_t time_ms = wire::LeReader{request.payload}.u16();
  if (time_ms < 20 || time_ms > 1000) co_return Reply{{}, out_of_range, 0};
  if (self->driven() || self->capturing(self->clock_.now_s())) co_return Reply{{}, wrong_state, 0};
  co_await self->busy(1e-3 * time_ms);
  const auto& probe = self->nest_->probe();
  const double pickup_nA = self->front_end_.measured_pickup_nA(probe ? probe->mains_pickup_nA : 0.0);
  co_return Reply{wire::LeWriter{}.u16(time_ms).u32(whole_unsigned(1e3 * pickup_nA)).take()};
}

asio::awaitable<AdapterDevice::Reply> AdapterDevice::self_proof(Shared self, wire::Frame request) {
  const std::uint8_t what = wire::LeReader{request.payload}.u8();
  if (what < 1 || what > 3) co_return Reply{{}, out_of_range, 0};
  if (self->driven()) co_return Reply{{}, wrong_state, 0};
  co_await self->busy(electrical_s);
  namespace certificate = adapter_certificate;
  FrontEnd& front_end = self->front_end_;
  double value = 1e3 * front_end.measured_ohm(certificate::reference_ohm);
  if (what == 2) value = 1e6 * front_end.reported_mA(front_end.delivered_mA(certificate::proof_current_mA));
  if (what == 3) value = 1e6 * front_end.measured_V(certificate::dummy_load_V);
  co_return Reply{wire::LeWriter{}.u8(what).i32(whole(value)).u8(0).take()};
}

AdapterDevice::Reply AdapterDevice::presence() {
  return {wire::LeWriter{}.u8(nest_->probe() ? 1 : 0).u32(nest_->insertions() - insertions_before_).take()};
}

AdapterDevice::Reply AdapterDevice::state() {
  constexpr double board_above_nest_K = 8.0;
  const double now_s = clock_.now_s();
  catch_up(now_s);
  const auto uptime_ms = static_cast<std::uint32_t>(std::llround(1e3 * (now_s - power_on_s_)) & 0xFFFFFFFF);
  return {wire::LeWriter{}
              .u32(boot_)
              .u32(uptime_ms)
              .u16(trips_)
              .u32(drive_.red_uA)
              .u32(drive_.infrared_uA)
              .u16(capturing(now_s) ? capture_->number : 0)
              .i32(whole(1e3 * (nest_->degC() + board_above_nest_K)))
              .take()};
}

AdapterDevice::Reply AdapterDevice::start_capture(wire::LeReader fields) {
  const std::uint16_t number = fields.u16();
  const std::uint32_t cycles = fields.u32();
  if (number == 0) return {{}, out_of_range, 0};
  if (cycles < 32 || cycles > 65536 || cycles % 32 != 0) return {{}, out_of_range, 1};
  const double now_s = clock_.now_s();
  if (capturing(now_s)) return {{}, wrong_state, 0};
  ++captures_;
  capture_ = Capture{number, cycles, now_s, 4.0 * slot_s_};
  return {wire::LeWriter{}.u16(number).u32(cycles).take()};
}

AdapterDevice::Reply AdapterDevice::stop_capture() {
  const double now_s = clock_.now_s();
  Capture stopped;
  if (capturing(now_s)) stopped = *capture_;
  if (capture_) fed_s_ = std::max(fed_s_, std::min(now_s, capture_->end_s()));
  capture_.reset();
  ++captures_;
  return {wire::LeWriter{}.u16(stopped.number).u32(stopped.cycles).take()};
}

}  // namespace probewright::emulated
