#include "drivers/adapter/driver.h"

#include <algorithm>

#include "drivers/adapter/payloads.h"
#include "drivers/wire/crc.h"

namespace probewright::adapter {
namespace {

using std::chrono::milliseconds;

constexpr std::uint8_t protocol = 1;
// Device times of WIRE.md.
constexpr Duration longest_reply_delay = milliseconds(5);
constexpr Duration voltage_time = milliseconds(20);
constexpr Duration id_time = milliseconds(10);
constexpr Duration longest_work = milliseconds(1000);
constexpr Duration feeding_interval = milliseconds(500);  // the watchdog bites after 2 s
constexpr std::size_t frame_overhead = 8;                 // delimiters, type, sequence, check, COBS
constexpr std::size_t block_bytes = frame_overhead + 6 + cycles_per_block * bytes_per_cycle + 1;

Bytes payload_of(Drive drive) { return wire::LeWriter{}.u32(drive.red_uA).u32(drive.infrared_uA).take(); }

std::string in_words(Drive drive) {
  return std::to_string(drive.red_uA) + " uA red, " + std::to_string(drive.infrared_uA) + " uA infrared";
}

/// Runs `read` over a whole payload.
template <class T>
T read_all(const Bytes& payload, const std::function<T(wire::LeReader&)>& read) {
  wire::LeReader fields{payload};
  T value = read(fields);
  if (!fields.finished()) throw wire::Miss("the reply has the wrong length");
  return value;
}

}  // namespace

Driver::Driver(Settings settings, wire::PortSource source, wire::LineClock& clock, Entropy& entropy)
    : settings_(std::move(settings)),
      link_(settings_.link, std::move(source), clock),
      // Not from 0: replies to whoever used the line before must not look like ours.
      sequence_(static_cast<std::uint16_t>(entropy.next())),
      capture_number_(static_cast<std::uint16_t>(entropy.next())) {}

// --- one exchange

template <class T>
asio::awaitable<T> Driver::ask(Request request, Read<T> read) {
  const auto turn = co_await link_.turn();
  link_.require_ready();
  co_return co_await ask_in_turn<T>(std::move(request), std::move(read));
}

template <class T>
asio::awaitable<T> Driver::ask_in_turn(Request request, Read<T> read) {
  co_return co_await link_.tried<T>([&] { return ask_once<T>(request, read); });
}

template <class T>
asio::awaitable<T> Driver::ask_once(const Request& request, const Read<T>& read) {
  co_await make_sure();
  unsure_ = true;
  unsure_busy_ = request.busy;
  const Bytes payload = co_await reply_to(request);
  T value = read_all<T>(payload, read);
  unsure_ = false;
  co_return value;
}

asio::awaitable<Bytes> Driver::reply_to(const Request& request) {
  const std::uint16_t sequence = ++sequence_;
  Bytes bytes{std::byte{0}};  // ends whatever half a frame the line may have left at the device
  const Bytes frame = wire::encode_frame({request.type, sequence, request.payload});
  bytes.insert(bytes.end(), frame.begin(), frame.end());
  const auto deadline =
      link_.deadline(request.busy + longest_reply_delay, bytes.size() + frame_overhead + request.reply);
  frames_.clear();  // and what may be held here
  co_await link_.send(bytes, deadline);
  for (;;) {
    wire::Frame reply = co_await next_frame(deadline);
    if (reply.sequence != sequence) continue;  // an older reply, or a frame of a capture
    if (reply.type == type::reply_to(request.type)) co_return std::move(reply.payload);
    if (reply.type != type::error) continue;
    wire::LeReader fields{reply.payload};
    const std::uint8_t about = fields.u8(), code = fields.u8();
    const std::uint32_t detail = fields.u32();
    if (!fields.finished() || about != request.type) throw wire::Miss("an error reply makes no sense");
    unsure_ = false;
    throw ProblemError(refused(request.type, code, detail));
  }
}

asio::awaitable<wire::Frame> Driver::next_frame(SteadyTime deadline) {
  for (;;) {
    if (auto frame = frames_.next()) co_return *std::move(frame);
    const auto bytes = co_await link_.receive(deadline);
    frames_.feed(bytes);
  }
}

asio::awaitable<void> Driver::set_in_turn(std::uint8_t type, Bytes payload) {
  Request request{type, payload};
  Read<bool> repeated = [&payload](wire::LeReader& reply) {
    const auto found = reply.raw(reply.left());
    if (!std::equal(found.begin(), found.end(), payload.begin(), payload.end()))
      throw wire::Miss("a setting was not repeated as it was sent");
    return true;
  };
  co_await ask_in_turn<bool>(std::move(request), std::move(repeated));
}

Problem Driver::refused(std::uint8_t type, std::uint8_t code, std::uint32_t detail) const {
  return Problem{code == 5 ? "device_fault" : "device_refused",
                 settings_.link.device,
                 {{"request", std::string{name_of(type)}},
                  {"words", std::string{words_of(code)} + " (code " + std::to_string(code) + ", " +
                                std::to_string(detail) + ")"}}};
}

// --- after a miss

asio::awaitable<void> Driver::make_sure() {
  if (capture_may_run_) co_await stop_capture_once(unsure_busy_);
  if (unsure_ && link_.ready()) co_await state_once();
  unsure_ = false;
  unsure_busy_ = Duration{0};
}

asio::awaitable<void> Driver::stop_capture_once(Duration busy) {
  const Request stop{type::stop_capture, {}, busy};
  const Bytes payload = co_await reply_to(stop);
  const Read<bool> read = [](wire::LeReader& reply) {
    reply.raw(6);  // which, and how far it was: of no use
    return true;
  };
  read_all<bool>(payload, read);
  capture_may_run_ = false;
}

asio::awaitable<State> Driver::state_once() {
  const Request ask_state{type::state, {}, unsure_busy_};
  const Bytes payload = co_await reply_to(ask_state);
  const Read<State> read = read_state;
  const State found = read_all<State>(payload, read);
  if (found.boot != identity_.boot) throw wire::DeviceReset(settings_.link.device);
  co_return found;
}

// --- connecting

asio::awaitable<void> Driver::connect() {
  const auto turn = co_await link_.turn();
  if (link_.ready()) co_return;
  try {
    co_await connect_in_turn();
  } catch (const ProblemError& refusal) {
    link_.note_trouble(refusal.problem());
    throw;
  }
}

asio::awaitable<void> Driver::keep_connected() {
  return link_.keep([this] { return connect(); });
}

asio::awaitable<void> Driver::connect_in_turn() {
  const wire::Link::Opening opening{link_};
  co_await link_.open();
  frames_.clear();
  unsure_ = capture_may_run_ = false;
  co_await link_.tried<void>([this] { return stop_capture_once(longest_work); });
  co_await set_in_turn(type::set_drive, payload_of(Drive{}));
  drive_ = Drive{};
  co_await introduce();
  co_await set_in_turn(type::set_timing, wire::LeWriter{}.u32(settings_.slot_ns).take());
  slot_ns_ = settings_.slot_ns;
  link_.found();
}

asio::awaitable<void> Driver::introduce() {
  const auto& device = settings_.link.device;
  Request request{type::hello};
  request.reply = 256;
  Read<Hello> read = read_hello;
  const Hello hello = co_await ask_in_turn<Hello>(std::move(request), std::move(read));
  if (hello.protocol != protocol)
    throw ProblemError(Problem{"device_wrong_protocol",
                               device,
                               {{"found", std::to_string(hello.protocol)}, {"expected", std::to_string(protocol)}}});
  const double speed = link_.clock().speed();
  if (auto problem = wire::stranger(hello.identity, settings_.expected, "ADAPTER", speed, device))
    throw ProblemError(*std::move(problem));
  identity_ = hello.identity;
}

// --- drive

void Driver::require_below_ceiling(Drive drive) const {
  const DriveCeiling& ceiling = settings_.ceiling;
  if (drive.red_uA <= ceiling.red_uA && drive.infrared_uA <= ceiling.infrared_uA) return;
  throw ProblemError(
      Problem{"drive_above_ceiling",
              settings_.link.device,
              {{"asked", in_words(drive)}, {"ceiling", in_words({ceiling.red_uA, ceiling.infrared_uA})}}});
}

asio::awaitable<void> Driver::drive(Drive drive) {
  require_below_ceiling(drive);
  const auto turn = co_await link_.turn();
  link_.require_ready();
  require_below_ceiling(drive);  // the ceiling may have come down meanwhile
  co_await set_in_turn(type::set_drive, payload_of(drive));
  drive_ = drive;
}

asio::awaitable<bool> Driver::drive_off() {
  const auto turn = co_await link_.turn();
  if (!link_.ready()) co_return false;
  const Bytes off = payload_of(Drive{});
  const Request request{type::set_drive, off, unsure_busy_};
  for (int n = 0; n < 2 * link_.settings().tries; ++n) {
    try {
      // Nothing goes before it, neither stopping a capture nor looking at the boot number: off is off on any device.
      const bool was_unsure = unsure_;
      unsure_ = true;
      const Bytes found = co_await reply_to(request);
      if (found == off) {
        unsure_ = was_unsure || n > 0;
        drive_ = Drive{};
        co_return true;
      }
    } catch (const wire::Miss&) {
    } catch (const wire::DeadlinePassed&) {
    } catch (const wire::PortLost&) {
      break;
    } catch (const ProblemError&) {  // refused: ask again, there is nothing better to do
    }
    ++link_.counts().misses;
  }
  link_.note_trouble(wire::DeviceLost(settings_.link.device, 2 * link_.settings().tries, "drive not off").problem());
  link_.drop();  // connecting again switches it off first
  co_return false;
}

asio::awaitable<void> Driver::require_drive() {
  const auto turn = co_await link_.turn();
  link_.require_ready();
  co_await check_drive_in_turn();
}

asio::awaitable<void> Driver::dwell_driven(Duration physical) {
  wire::LineClock& clock = link_.clock();
  const auto scaled = [&clock](Duration d) { return from_seconds(seconds(d) / clock.speed()); };
  const SteadyTime end = clock.steady_now() + scaled(physical);
  while (clock.steady_now() < end) {
    co_await clock.wait_until(std::min(end, clock.steady_now() + scaled(feeding_interval)));
    co_await require_drive();
  }
}

asio::awaitable<void> Driver::check_drive_in_turn() {
  const State found = co_await link_.tried<State>([this] { return state_once(); });
  if (found.drive == drive_) co_return;
  throw ProblemError(
      Problem{"drive_lost", settings_.link.device, {{"found", in_words(found.drive)}, {"set", in_words(drive_)}}});
}

// --- functions of the device

asio::awaitable<void> Driver::set_timing(std::uint32_t slot_ns) {
  const auto turn = co_await link_.turn();
  link_.require_ready();
  co_await set_in_turn(type::set_timing, wire::LeWriter{}.u32(slot_ns).take());
  slot_ns_ = slot_ns;
}

asio::awaitable<ForwardVoltage> Driver::forward_voltage(Led led) { return ask_forward_voltage(led, 0); }

asio::awaitable<ForwardVoltage> Driver::forward_voltage_at(Led led, std::uint32_t drive_uA) {
  require_below_ceiling(led == Led::red ? Drive{drive_uA, 0} : Drive{0, drive_uA});
  return ask_forward_voltage(led, drive_uA);
}

asio::awaitable<ForwardVoltage> Driver::ask_forward_voltage(Led led, std::uint32_t drive_uA) {
  const auto number = static_cast<std::uint8_t>(led);
  Read<ForwardVoltage> read = [number, drive_uA](wire::LeReader& reply) {
    require_same(reply.u8(), number, "LED");
    ForwardVoltage voltage;
    voltage.drive_uA = reply.u32();
    require_same(voltage.drive_uA, drive_uA, "drive");
    voltage.delivered_nA = reply.u32();
    voltage.voltage_uV = reply.i32();
    voltage.first_uV = reply.i32();
    const std::uint8_t flags = reply.u8();
    voltage.at_compliance = (flags & 1u) != 0;
    voltage.no_drive = (flags & 2u) != 0;
    return voltage;
  };
  return ask<ForwardVoltage>({type::forward_voltage, wire::LeWriter{}.u8(number).u32(drive_uA).take(), voltage_time},
                             std::move(read));
}

asio::awaitable<ReverseLeakage> Driver::reverse_leakage(Led led, std::uint16_t reverse_mV) {
  const auto number = static_cast<std::uint8_t>(led);
  Read<ReverseLeakage> read = [number, reverse_mV](wire::LeReader& reply) {
    require_same(reply.u8(), number, "LED");
    require_same(reply.u16(), reverse_mV, "reverse voltage");
    ReverseLeakage leakage;
    leakage.leakage_pA = reply.u32();
    leakage.not_separate = (reply.u8() & 1u) != 0;
    return leakage;
  };
  return ask<ReverseLeakage>({type::reverse_leakage, wire::LeWriter{}.u8(number).u16(reverse_mV).take(), voltage_time},
                             std::move(read));
}

asio::awaitable<DarkCurrent> Driver::dark_current(std::uint16_t bias_mV, std::uint16_t time_ms, Input input) {
  const auto number = static_cast<std::uint8_t>(input);
  Read<DarkCurrent> read = [=](wire::LeReader& reply) {
    require_same(reply.u16(), bias_mV, "bias");
    require_same(reply.u16(), time_ms, "time");
    require_same(reply.u8(), number, "input");
    DarkCurrent dark;
    dark.current_pA = reply.i32();
    dark.sd_pA = reply.u32();
    return dark;
  };
  return ask<DarkCurrent>(
      {type::dark_current, wire::LeWriter{}.u16(bias_mV).u16(time_ms).u8(number).take(), milliseconds(time_ms)},
      std::move(read));
}

asio::awaitable<IdResistance> Driver::id_resistance() {
  Read<IdResistance> read = [](wire::LeReader& reply) {
    const std::uint32_t found = reply.u32();
    const bool open = found == 0xFFFFFFFF;
    return IdResistance{open, open ? 0 : found};
  };
  return ask<IdResistance>({type::id_resistance, {}, id_time}, std::move(read));
}

asio::awaitable<std::uint32_t> Driver::mains_pickup_pA(std::uint16_t time_ms) {
  Read<std::uint32_t> read = [time_ms](wire::LeReader& reply) {
    require_same(reply.u16(), time_ms, "time");
    return reply.u32();
  };
  return ask<std::uint32_t>({type::mains_pickup, wire::LeWriter{}.u16(time_ms).take(), milliseconds(time_ms)},
                            std::move(read));
}

asio::awaitable<Presence> Driver::presence() {
  Read<Presence> read = [](wire::LeReader& reply) {
    const bool present = reply.u8() != 0;
    return Presence{present, reply.u32()};
  };
  return ask<Presence>({type::presence}, std::move(read));
}

asio::awaitable<SelfProof> Driver::self_proof(Proof what) {
  const auto number = static_cast<std::uint8_t>(what);
  Read<SelfProof> read = [number](wire::LeReader& reply) {
    require_same(reply.u8(), number, "self-proof");
    const std::int32_t value = reply.i32();
    return SelfProof{value, reply.u8()};
  };
  return ask<SelfProof>({type::self_proof, wire::LeWriter{}.u8(number).take(), voltage_time}, std::move(read));
}

asio::awaitable<State> Driver::state() {
  const auto turn = co_await link_.turn();
  link_.require_ready();
  co_return co_await link_.tried<State>([this] { return state_once(); });
}

// --- captures

asio::awaitable<Capture> Driver::capture(std::uint32_t cycles) {
  if (cycles < cycles_per_block || cycles > 65536 || cycles % cycles_per_block != 0)
    throw ProblemError(Problem{"capture_length", settings_.link.device, {{"cycles", std::to_string(cycles)}}});
  const auto turn = co_await link_.turn();
  link_.require_ready();
  int started = 0;
  Capture capture = co_await link_.tried<Capture>([&] {
    ++started;
    return capture_once(cycles);
  });
  capture.asked_again = started - 1;
  co_await check_drive_in_turn();
  co_return capture;
}

asio::awaitable<Capture> Driver::capture_once(std::uint32_t cycles) {
  co_await make_sure();
  co_await start_capture(cycles);
  const double block_s = 4e-9 * slot_ns_ * cycles_per_block;
  const Duration block_time = std::max(from_seconds(block_s), link_.transfer_time(block_bytes));
  const Duration step = from_seconds(seconds(block_time) / link_.clock().speed());
  SteadyTime deadline = link_.deadline(longest_reply_delay, block_bytes + frame_overhead + 10);
  Capture capture;
  capture.slot_ns = slot_ns_;
  capture.drive = drive_;
  capture.cycles.reserve(cycles);
  wire::Crc32 check;
  const std::uint32_t blocks = cycles / cycles_per_block;
  for (std::uint32_t number = 0; number < blocks; ++number) {
    deadline = deadline + step;
    const wire::Frame block = co_await next_of_capture(deadline);
    if (block.type != type::block) throw wire::Miss("the capture ended early");
    wire::LeReader fields{block.payload};
    fields.u16();
    if (fields.u32() != number || block.sequence != static_cast<std::uint16_t>(number))
      throw wire::Miss("block " + std::to_string(number) + " of the capture is missing");
    const auto samples = fields.raw(cycles_per_block * bytes_per_cycle);
    if (!fields.finished()) throw wire::Miss("a block of the capture has the wrong length");
    check.add(samples);
    wire::LeReader reader{samples};
    for (std::uint32_t i = 0; i < cycles_per_block; ++i) capture.cycles.push_back(read_cycle(reader));
  }
  const wire::Frame end = co_await next_of_capture(deadline);
  wire::LeReader fields{end.payload};
  fields.u16();
  const std::uint32_t sent = fields.u32(), sum = fields.u32();
  if (end.type != type::end || !fields.finished() || end.sequence != static_cast<std::uint16_t>(blocks))
    throw wire::Miss("the end of the capture is odd");
  if (sent != cycles || sum != check.value()) throw wire::Miss("the check of the whole capture is wrong");
  unsure_ = capture_may_run_ = false;
  co_return capture;
}

// The request and its first reply only: a second try would be told that a capture runs.
asio::awaitable<void> Driver::start_capture(std::uint32_t cycles) {
  if (++capture_number_ == 0) ++capture_number_;
  const Request start{type::start_capture, wire::LeWriter{}.u16(capture_number_).u32(cycles).take()};
  unsure_ = capture_may_run_ = true;
  unsure_busy_ = Duration{0};
  const Bytes reply = co_await reply_to(start);
  if (reply != start.payload) throw wire::Miss("the start of a capture was not repeated as it was sent");
}

/// The next block or end of the capture that runs; what belongs to older ones is passed over.
asio::awaitable<wire::Frame> Driver::next_of_capture(SteadyTime deadline) {
  for (;;) {
    wire::Frame frame = co_await next_frame(deadline);
    if (frame.type != type::block && frame.type != type::end) continue;
    if (wire::LeReader{frame.payload}.u16() == capture_number_) co_return frame;
  }
}

}  // namespace probewright::adapter
