#include "drivers/emulated/phantom_device.h"

#include "drivers/wire/block.h"
#include "drivers/wire/checked_line.h"
#include "drivers/wire/line_reader.h"
#include "drivers/wire/wait_queue.h"

namespace probewright::emulated {
namespace {

constexpr std::size_t longest_line = 1024;

std::string header_text(const wire::Unit& unit) {
  std::string text;
  for (const std::string& keyword : unit.header) text += (text.empty() ? "" : ":") + keyword;
  return text + (unit.query ? "?" : "");
}

}  // namespace

PhantomDevice::PhantomDevice(Setup setup, DeviceClock clock, std::shared_ptr<Nest> nest, ActionObserver* observer)
    : setup_(std::move(setup)), clock_(clock), nest_(std::move(nest)), observer_(observer) {
  power_cycle();
}

void PhantomDevice::power_cycle() {
  ++work_;  // what is still going on gives no answer
  settings_ = {};
  status_ = {};
  checksum_mode_ = false;
  complete_at_s_.reset();
  readings_ = 0;
  insertions_before_ = nest_->insertions();
  boot_ = boot_number(setup_.seed, setup_.id, ++starts_);
  const double now_s = clock_.now_s();
  apply_modulation();
  nest_->set_blade(now_s, false);
  nest_->set_lamp(now_s, settings_.lamp);
  optics_changed(now_s);
}

asio::awaitable<void> PhantomDevice::serve(std::shared_ptr<PhantomDevice> self, std::shared_ptr<wire::Port> port) {
  const int line_number = ++self->line_;
  ++self->work_;
  wire::LineReader lines(longest_line);
  std::uint64_t overlong = 0;
  std::array<std::byte, 4096> bytes{};
  try {
    while (true) {
      const std::size_t count = co_await port->read_some(bytes, wire::WaitQueue::never);
      lines.feed(std::span{bytes}.first(count));
      while (true) {
        auto line = lines.next();
        for (; overlong < lines.overlong(); ++overlong) self->status_.push(-363);
        if (!line) break;
        co_await answer_line(self, port, *std::move(line));
        if (self->line_ != line_number) co_return;
      }
    }
  } catch (const wire::PortLost&) {  // the cable; the device stays as it is
  }
}

asio::awaitable<void> PhantomDevice::answer_line(std::shared_ptr<PhantomDevice> self, std::shared_ptr<wire::Port> port,
                                                 std::string line) {
  const std::size_t line_bytes = line.size() + 1;
  const auto text = self->admitted(std::move(line));
  if (!text || text->empty()) co_return;
  const double start_s = self->clock_.now_s();
  const wire::Message message = wire::parse_message(*text);
  const int work = self->work_;
  std::vector<std::string> answers;
  double busy_s = 0.0;
  bool broken = false;
  for (const wire::Unit& unit : message.units) {
    Outcome outcome = self->execute(unit);
    if (outcome.busy_s > 0.0) {
      busy_s += outcome.busy_s;
      co_await self->clock_.wait_until_s(start_s + busy_s);
      if (self->work_ != work) co_return;
    }
    if (outcome.answer_at_end) outcome.answer = outcome.answer_at_end(start_s + busy_s);
    broken = outcome.fault != 0;
    if (broken) {
      self->status_.push(outcome.fault);
      break;
    }
    if (outcome.answer) answers.push_back(*std::move(outcome.answer));
  }
  if (message.fault && !broken) self->status_.push(message.fault->number);
  std::string answer = answers.empty() ? std::string{} : self->framed(answers);
  if (self->observer_ != nullptr && !message.units.empty()) {
    const double on_line_s = line_seconds(line_bytes + answer.size(), self->setup_.baud);
    self->observer_->done({self->setup_.id, header_text(message.units.front()), start_s, busy_s + on_line_s,
                           self->clock_.moment(start_s)});
  }
  if (!answer.empty()) co_await send_or_drop(*port, self->clock_.line(), std::as_bytes(std::span{answer}));
}

/// The text of a line that may be executed; nothing when its checksum forbids.
std::optional<std::string> PhantomDevice::admitted(std::string line) {
  if (!line.empty() && line.back() == '\r') line.pop_back();
  if (line.empty()) return line;
  if (!checksum_mode_ && !wire::has_checksum(line)) return line;
  auto text = wire::strip_checksum(line);
  if (text) return *std::move(text);
  status_.push(-360);
  return std::nullopt;
}

PhantomDevice::Outcome PhantomDevice::execute(const wire::Unit& unit) {
  settle_events();
  for (const Command& command : commands()) {
    if (!wire::header_matches(command.pattern, unit)) continue;
    return (this->*command.handler)(unit);
  }
  return {.fault = -113};
}

std::string PhantomDevice::framed(const std::vector<std::string>& answers) const {
  std::string text;
  for (std::size_t i = 0; i < answers.size(); ++i) text += (i == 0 ? "" : ";") + answers[i];
  return checksum_mode_ ? wire::add_checksum(text) : text + "\n";
}

void PhantomDevice::settle_events() {
  if (!complete_at_s_ || clock_.now_s() < *complete_at_s_) return;
  complete_at_s_.reset();
  status_.raise(ScpiStatus::operation_complete);
}

}  // namespace probewright::emulated
