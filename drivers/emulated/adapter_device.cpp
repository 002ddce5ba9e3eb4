#include "drivers/emulated/adapter_device.h"

#include <array>
#include <boost/asio/co_spawn.hpp>

#include "drivers/emulated/adapter_requests.h"
#include "drivers/wire/wait_queue.h"

namespace probewright::emulated {
namespace {

constexpr double watchdog_s = 2.0;
constexpr std::uint32_t block_cycles = 32;
constexpr std::uint8_t block_frame = 0x50, end_frame = 0x51, error_frame = 0xFF, reply_bit = 0x80;
constexpr std::uint8_t first_request = 0x01, last_request = 0x3F;

Bytes framed(std::uint8_t type, std::uint16_t sequence, Bytes payload) {
  return wire::encode_frame({type, sequence, std::move(payload)});
}

}  // namespace

AdapterDevice::AdapterDevice(Setup setup, DeviceClock clock, asio::any_io_executor executor, std::shared_ptr<Nest> nest,
                             ActionObserver* observer)
    : setup_(std::move(setup)),
      clock_(clock),
      executor_(std::move(executor)),
      nest_(std::move(nest)),
      observer_(observer),
      front_end_(nest_->errors(), named_seed(setup_.seed, "front end of nest " + std::to_string(setup_.id.nest))) {
  nest_->on_look([this](double time_s) { catch_up(time_s); });
  power_cycle();
}

AdapterDevice::~AdapterDevice() { nest_->on_look({}); }

void AdapterDevice::power_cycle() {
  const double now_s = clock_.now_s();
  ++work_;
  ++captures_;
  if (driven()) apply_drive(now_s, {});
  drive_ = {};
  red_change_ = infrared_change_ = {now_s, {}};
  slot_s_ = 439e-6;
  fed_s_ = power_on_s_ = now_s;
  trips_ = 0;
  capture_.reset();
  removals_seen_ = nest_->removals();
  insertions_before_ = nest_->insertions();
  boot_ = boot_number(setup_.seed, setup_.id, ++starts_);
}

AdapterDevice::Drive AdapterDevice::drive() {
  catch_up(clock_.now_s());
  return drive_;
}

asio::awaitable<void> AdapterDevice::serve(std::shared_ptr<AdapterDevice> self, std::shared_ptr<wire::Port> port) {
  const int line_number = ++self->line_;
  ++self->work_;
  auto outbox = std::make_shared<Outbox>(self->executor_, self->clock_.line(), port);
  wire::FrameReader frames;
  std::array<std::byte, 2048> bytes{};
  try {
    while (true) {
      const std::size_t count = co_await port->read_some(bytes, wire::WaitQueue::never);
      self->catch_up(self->clock_.now_s());
      frames.feed(std::span{bytes}.first(count));
      while (auto frame = frames.next()) {
        self->fed_s_ = self->clock_.now_s();
        const bool request = frame->type >= first_request && frame->type <= last_request;
        if (request) co_await answer(self, outbox, *std::move(frame));
        if (self->line_ != line_number) co_return;
      }
    }
  } catch (const wire::PortLost&) {  // the cable; the device stays as it is
  }
}

asio::awaitable<void> AdapterDevice::answer(Shared self, std::shared_ptr<Outbox> outbox, wire::Frame request) {
  const double start_s = self->clock_.now_s();
  const int work = self->work_;
  const std::uint8_t type = request.type;
  const std::uint16_t sequence = request.sequence;
  const std::size_t request_bytes = request.payload.size() + wire::Frame::overhead + 2;
  Reply reply = co_await carry_out(self, outbox, std::move(request));
  if (self->work_ != work) co_return;
  const double busy_s = self->clock_.now_s() - start_s;
  const bool started = type == request::start_capture && reply.error == 0;
  Bytes bytes;
  if (reply.error == 0) {
    bytes = framed(type | reply_bit, sequence, std::move(reply.payload));
  } else {
    bytes = framed(error_frame, sequence, wire::LeWriter{}.u8(type).u8(reply.error).u32(reply.detail).take());
  }
  if (self->observer_ != nullptr) {
    const double on_line_s = line_seconds(request_bytes + bytes.size(), self->setup_.baud);
    self->observer_->done(
        {self->setup_.id, std::string(request::name(type)), start_s, busy_s + on_line_s, self->clock_.moment(start_s)});
  }
  outbox->put(std::move(bytes));
  if (started && self->capture_) begin_stream(self, outbox);
}

void AdapterDevice::begin_stream(Shared self, std::shared_ptr<Outbox> outbox) {
  const Capture capture = *self->capture_;
  asio::co_spawn(self->executor_, stream(self, std::move(outbox), capture, self->captures_), end_of_coroutine);
  if (const auto began = self->capture_began_) began(capture.start_s);  // a copy: who hears may take it back meanwhile
}

asio::awaitable<void> AdapterDevice::stream(Shared self, std::shared_ptr<Outbox> outbox, Capture capture,
                                            int captures) {
  wire::Crc32 check;
  std::uint16_t sequence = 0;
  double before_nA = 0.0;
  std::size_t last_bytes = 0;
  const std::uint32_t blocks = capture.cycles / block_cycles;
  for (std::uint32_t block = 0; block < blocks; ++block) {
    co_await self->clock_.wait_until_s(capture.start_s + capture.cycle_s * block_cycles * (block + 1));
    if (self->captures_ != captures || outbox->lost()) co_return;
    const Bytes samples = self->block_samples(capture, block, before_nA);
    check.add(samples);
    Bytes frame = framed(block_frame, sequence++, wire::LeWriter{}.u16(capture.number).u32(block).raw(samples).take());
    last_bytes = frame.size();
    outbox->put(std::move(frame));
  }
  outbox->put(
      framed(end_frame, sequence, wire::LeWriter{}.u16(capture.number).u32(capture.cycles).u32(check.value()).take()));
  if (self->observer_ != nullptr) {
    const double busy_s = capture.end_s() - capture.start_s + line_seconds(last_bytes, self->setup_.baud);
    self->observer_->done({self->setup_.id, "capture", capture.start_s, busy_s, self->clock_.moment(capture.start_s)});
  }
}

Bytes AdapterDevice::block_samples(const Capture& capture, std::uint32_t block, double& before_nA) {
  constexpr std::array slots{Slot::red, Slot::dark, Slot::infrared, Slot::dark};
  const double slot_s = 0.25 * capture.cycle_s;
  catch_up(capture.start_s + capture.cycle_s * block_cycles * (block + 1));
  wire::LeWriter samples;
  for (std::uint32_t cycle = block * block_cycles; cycle < (block + 1) * block_cycles; ++cycle) {
    const double cycle_start_s = capture.start_s + capture.cycle_s * cycle;
    for (std::size_t i = 0; i < slots.size(); ++i) {
      const auto current = nest_->photocurrent(slots[i], cycle_start_s + slot_s * (static_cast<double>(i) + 0.5));
      samples.i24(front_end_.code(current.light_nA, current.background_nA, before_nA, slot_s));
      before_nA = current.total_nA();
    }
  }
  return samples.take();
}

void AdapterDevice::catch_up(double time_s) {
  if (removals_seen_ != nest_->removals()) {  // the nest has darkened the LEDs already
    removals_seen_ = nest_->removals();
    drive_ = {};
  }
  if (capture_) fed_s_ = std::max(fed_s_, std::min(time_s, capture_->end_s()));
  if (!driven() || time_s <= fed_s_ + watchdog_s) return;
  apply_drive(fed_s_ + watchdog_s, {});
  ++trips_;
}

void AdapterDevice::apply_drive(double time_s, Drive drive) {
  const auto before = nest_->leds().at(time_s);
  if (drive.red_uA != drive_.red_uA) red_change_ = {time_s, before.red};
  if (drive.infrared_uA != drive_.infrared_uA) infrared_change_ = {time_s, before.infrared};
  drive_ = drive;
  nest_->drive(time_s, front_end_.delivered_mA(1e-3 * drive.red_uA), front_end_.delivered_mA(1e-3 * drive.infrared_uA));
}

}  // namespace probewright::emulated
