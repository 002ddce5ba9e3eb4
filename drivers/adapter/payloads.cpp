#include "drivers/adapter/payloads.h"

#include <string>

#include "drivers/wire/link.h"

namespace probewright::adapter {

std::string_view name_of(std::uint8_t request) {
  switch (request) {
    case type::hello:
      return "hello";
    case type::set_drive:
      return "set drive";
    case type::set_timing:
      return "set timing";
    case type::forward_voltage:
      return "forward voltage";
    case type::reverse_leakage:
      return "reverse leakage";
    case type::dark_current:
      return "dark current";
    case type::id_resistance:
      return "ID resistance";
    case type::mains_pickup:
      return "mains pick-up";
    case type::presence:
      return "presence";
    case type::self_proof:
      return "self-proof";
    case type::state:
      return "state";
    case type::start_capture:
      return "start capture";
    case type::stop_capture:
      return "stop capture";
    default:
      return "unknown request";
  }
}

std::string_view words_of(std::uint8_t code) {
  switch (code) {
    case 1:
      return "unknown request type";
    case 2:
      return "payload has the wrong length";
    case 3:
      return "a value is out of range";
    case 4:
      return "not in this state";
    case 5:
      return "hardware fault";
    default:
      return "unknown error code";
  }
}

void require_same(std::uint64_t found, std::uint64_t asked, std::string_view what) {
  if (found == asked) return;
  throw wire::Miss("asked for " + std::string{what} + " " + std::to_string(asked) + ", got " + std::to_string(found));
}

Hello read_hello(wire::LeReader& payload) {
  Hello hello;
  hello.protocol = payload.u8();
  const std::uint8_t flags = payload.u8();
  const std::uint32_t speed_thousandths = payload.u32();
  wire::Identity& identity = hello.identity;
  identity.boot = payload.u32();
  identity.maker = payload.short_text();
  identity.model = payload.short_text();
  identity.serial = payload.short_text();
  if (!wire::read_firmware(payload.short_text(), identity)) throw wire::Miss("the firmware's name is odd");
  identity.certificate = payload.short_text();
  identity.due = payload.short_text();
  identity.emulated = (flags & 1u) != 0;  // these two stand in fields of their own here
  identity.speed = 1e-3 * speed_thousandths;
  return hello;
}

State read_state(wire::LeReader& payload) {
  State state;
  state.boot = payload.u32();
  state.uptime_ms = payload.u32();
  state.watchdog_trips = payload.u16();
  state.drive.red_uA = payload.u32();
  state.drive.infrared_uA = payload.u32();
  state.capture = payload.u16();
  state.temperature_mdegC = payload.i32();
  return state;
}

Cycle read_cycle(wire::LeReader& samples) {
  Cycle cycle;
  cycle.red = samples.i24();
  cycle.dark_after_red = samples.i24();
  cycle.infrared = samples.i24();
  cycle.dark_after_infrared = samples.i24();
  return cycle;
}

}  // namespace probewright::adapter
