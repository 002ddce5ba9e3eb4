#pragma once
#include <array>
#include <boost/asio/awaitable.hpp>
#include <boost/asio/co_spawn.hpp>
#include <boost/asio/this_coro.hpp>
#include <functional>
#include <map>
#include <memory>
#include <optional>
#include <string>
#include <vector>

#include "drivers/wire/crc.h"
#include "drivers/wire/frame.h"
#include "drivers/wire/le.h"
#include "drivers/wire/line_clock.h"
#include "drivers/wire/port.h"

/// An adapter for the driver's tests, written from WIRE.md: it answers with fixed values, has no electronics, and can
/// be told to misbehave.
class FakeAdapter {
 public:
  using Frame = probewright::wire::Frame;
  struct Names {
    std::string maker = "Alder Quay Sensors", model = "ADAPTER", serial = "AD-01", firmware = "1.0.0-emulated-x1",
                certificate = "ADC-2026-0101", due = "2027-06-30";
  } names;
  std::uint8_t protocol = 1, flags = 1;
  std::uint32_t speed_thousandths = 1000, boot = 815;
  std::uint32_t red_uA = 0, infrared_uA = 0, slot_ns = 439000;
  std::uint32_t highest_red_uA = 0, highest_infrared_uA = 0;  ///< that were ever set or asked for
  std::uint16_t watchdog_trips = 0, capture = 0;
  std::vector<Frame> requests;  ///< in order

  /// Changes or drops (empty) an encoded frame to the station.
  std::function<probewright::Bytes(const Frame&, probewright::Bytes)> spoil;
  /// How much later than due a reply comes.
  std::function<probewright::Duration(const Frame&)> late;
  /// Code of an error reply to a request, instead of serving it.
  std::function<std::optional<std::uint8_t>(const Frame&)> refuse;

  void power_on() {
    ++boot;
    red_uA = infrared_uA = 0;
    slot_ns = 439000;
    capture = 0;
  }

  static std::int32_t code(std::uint32_t cycle, int slot) {
    constexpr std::array<std::int32_t, 4> base{1'600'000, -2'000, 2'500'000, -2'001};
    return base[static_cast<std::size_t>(slot)] + static_cast<std::int32_t>(cycle);
  }

  boost::asio::awaitable<void> serve(std::shared_ptr<probewright::wire::Port> port,
                                     probewright::wire::LineClock& clock) {
    using namespace probewright;
    const auto executor = co_await boost::asio::this_coro::executor;
    wire::FrameReader reader;
    std::array<std::byte, 512> bytes;
    try {
      for (;;) {
        const std::size_t got = co_await port->read_some(bytes, clock.steady_now() + std::chrono::hours(1000));
        reader.feed(std::span{bytes}.first(got));
        while (auto request = reader.next()) {
          requests.push_back(*request);
          busy_ = Duration{0};
          Frame reply = answer(*request);
          if (late) busy_ += late(*request);
          co_await clock.dwell(busy_);
          co_await send(port, std::move(reply), clock);
          if (request->type == 0x10 && capture != 0)
            boost::asio::co_spawn(executor, stream(port, capture, cycles_, clock), [](std::exception_ptr thrown) {
              if (thrown) std::rethrow_exception(thrown);
            });
        }
      }
    } catch (const wire::PortLost&) {
    }
  }

 private:
  boost::asio::awaitable<void> send(std::shared_ptr<probewright::wire::Port> port, Frame frame,
                                    probewright::wire::LineClock& clock) {
    probewright::Bytes bytes = probewright::wire::encode_frame(frame);
    if (spoil) bytes = spoil(frame, std::move(bytes));
    if (!bytes.empty()) co_await port->write_all(bytes, clock.steady_now() + std::chrono::hours(1000));
  }

  boost::asio::awaitable<void> stream(std::shared_ptr<probewright::wire::Port> port, std::uint16_t number,
                                      std::uint32_t cycles, probewright::wire::LineClock& clock) {
    using namespace probewright;
    wire::Crc32 check;
    std::uint16_t sequence = 0;
    try {
      for (std::uint32_t block = 0; block < cycles / 32; ++block) {
        co_await clock.dwell(std::chrono::nanoseconds(4LL * slot_ns * 32));
        if (capture != number) co_return;
        wire::LeWriter samples;
        for (std::uint32_t i = 0; i < 32; ++i)
          for (int slot = 0; slot < 4; ++slot) samples.i24(code(32 * block + i, slot));
        check.add(samples.bytes());
        Frame frame{0x50, sequence, wire::LeWriter{}.u16(number).u32(block).raw(samples.bytes()).take()};
        ++sequence;
        co_await send(port, std::move(frame), clock);
      }
      capture = 0;
      co_await send(port, {0x51, sequence, wire::LeWriter{}.u16(number).u32(cycles).u32(check.value()).take()}, clock);
    } catch (const wire::PortLost&) {
    }
  }

  Frame error(const Frame& request, std::uint8_t code, std::uint32_t detail = 0) {
    return {0xFF, request.sequence, probewright::wire::LeWriter{}.u8(request.type).u8(code).u32(detail).take()};
  }

  Frame answer(const Frame& request) {
    using namespace probewright;
    using std::chrono::milliseconds;
    if (refuse)
      if (const auto code = refuse(request)) return error(request, *code);
    static const std::map<std::uint8_t, std::size_t> lengths{{0x01, 0}, {0x02, 8}, {0x03, 4}, {0x04, 5}, {0x05, 3},
                                                             {0x06, 5}, {0x07, 0}, {0x08, 2}, {0x09, 0}, {0x0A, 1},
                                                             {0x0B, 0}, {0x10, 6}, {0x11, 0}};
    const auto length = lengths.find(request.type);
    if (length == lengths.end()) return error(request, 1);
    if (request.payload.size() != length->second) return error(request, 2, static_cast<std::uint32_t>(length->second));
    wire::LeReader fields{request.payload};
    wire::LeWriter reply;
    switch (request.type) {
      case 0x01:
        reply.u8(protocol).u8(flags).u32(speed_thousandths).u32(boot);
        for (const auto& name : {names.maker, names.model, names.serial, names.firmware, names.certificate, names.due})
          reply.short_text(name);
        break;
      case 0x02: {
        const std::uint32_t red = fields.u32(), infrared = fields.u32();
        if (red > 50000 || infrared > 50000) return error(request, 3, red > 50000 ? 0 : 1);
        note_drive(red, infrared);
        red_uA = red;
        infrared_uA = infrared;
        reply.u32(red).u32(infrared);
        break;
      }
      case 0x03:
        if (red_uA != 0 || infrared_uA != 0 || capture != 0) return error(request, 4);
        if (const std::uint32_t asked = fields.u32(); asked < 100'000 || asked > 2'000'000)
          return error(request, 3);
        else
          slot_ns = asked;
        reply.u32(slot_ns);
        break;
      case 0x04: {
        busy_ = milliseconds(20);
        const std::uint8_t led = fields.u8();
        const std::uint32_t drive_uA = fields.u32();
        note_drive(led == 1 ? drive_uA : 0, led == 2 ? drive_uA : 0);
        const bool driven = drive_uA != 0 || (led == 1 ? red_uA : infrared_uA) != 0;
        reply.u8(led).u32(drive_uA).u32(driven ? 20'012'000 : 0).i32(led == 1 ? 1'951'000 : 1'302'000);
        reply.i32(drive_uA == 0 ? 1'958'900 : 0).u8(driven ? 0 : 2);
        break;
      }
      case 0x05: {
        busy_ = milliseconds(20);
        const std::uint8_t led = fields.u8();
        reply.u8(led).u16(fields.u16()).u32(1234).u8(led == 2 ? 1 : 0);
        break;
      }
      case 0x06: {
        const std::uint16_t bias = fields.u16(), time_ms = fields.u16();
        busy_ = milliseconds(time_ms);
        const std::uint8_t input = fields.u8();
        reply.u16(bias).u16(time_ms).u8(input).i32(input == 1 ? 812 : -11).u32(9);
        break;
      }
      case 0x07:
        busy_ = milliseconds(10);
        reply.u32(id_milliohm);
        break;
      case 0x08: {
        const std::uint16_t time_ms = fields.u16();
        busy_ = milliseconds(time_ms);
        reply.u16(time_ms).u32(321);
        break;
      }
      case 0x09:
        reply.u8(1).u32(17);
        break;
      case 0x0A: {
        busy_ = milliseconds(20);
        const std::uint8_t what = fields.u8();
        reply.u8(what).i32(what == 1 ? 10'000'000 : what == 2 ? 20'000'000 : 2'000'000).u8(0);
        break;
      }
      case 0x0B:
        reply.u32(boot).u32(123456).u16(watchdog_trips).u32(red_uA).u32(infrared_uA).u16(capture).i32(31250);
        break;
      case 0x10: {
        const std::uint16_t number = fields.u16();
        cycles_ = fields.u32();
        if (capture != 0) return error(request, 4);
        capture = number;
        reply.u16(number).u32(cycles_);
        break;
      }
      case 0x11:
        reply.u16(capture).u32(0);
        capture = 0;
        break;
    }
    return {static_cast<std::uint8_t>(request.type + 0x80), request.sequence, reply.take()};
  }

  void note_drive(std::uint32_t red, std::uint32_t infrared) {
    highest_red_uA = std::max(highest_red_uA, red);
    highest_infrared_uA = std::max(highest_infrared_uA, infrared);
  }

  std::uint32_t cycles_ = 0;
  probewright::Duration busy_{0};

 public:
  std::uint32_t id_milliohm = 13'700'000;
};
