#include "drivers/emulated/scpi_status.h"

#include <utility>

namespace probewright::emulated {
namespace {

unsigned event_of(int number) {
  if (number <= -400) return ScpiStatus::query_error;
  if (number <= -300) return ScpiStatus::device_error;
  if (number <= -200) return ScpiStatus::execution_error;
  return ScpiStatus::command_error;
}

}  // namespace

std::string_view scpi_words(int number) {
  switch (number) {
    case 0:
      return "No error";
    case -101:
      return "Invalid character";
    case -102:
      return "Syntax error";
    case -103:
      return "Invalid separator";
    case -104:
      return "Data type error";
    case -108:
      return "Parameter not allowed";
    case -109:
      return "Missing parameter";
    case -112:
      return "Program mnemonic too long";
    case -113:
      return "Undefined header";
    case -120:
      return "Numeric data error";
    case -123:
      return "Exponent too large";
    case -131:
      return "Invalid suffix";
    case -151:
      return "Invalid string data";
    case -161:
      return "Invalid block data";
    case -200:
      return "Execution error";
    case -222:
      return "Data out of range";
    case -224:
      return "Illegal parameter value";
    case -240:
      return "Hardware error";
    case -310:
      return "System error";
    case -350:
      return "Queue overflow";
    case -360:
      return "Communication error";
    case -363:
      return "Input buffer overrun";
    default:
      return number <= -200 ? "Execution error" : "Command error";
  }
}

void ScpiStatus::push(int number) {
  events_ |= event_of(number);
  if (errors_.size() < depth) {
    errors_.push_back(number);
  } else {
    errors_.back() = -350;
    events_ |= device_error;
  }
}

std::string ScpiStatus::next() {
  int number = 0;
  if (!errors_.empty()) {
    number = errors_.front();
    errors_.pop_front();
  }
  return std::to_string(number) + ",\"" + std::string(scpi_words(number)) + "\"";
}

void ScpiStatus::clear() {
  errors_.clear();
  events_ = 0;
}

unsigned ScpiStatus::take_events() { return std::exchange(events_, 0u); }

unsigned ScpiStatus::status_byte() const {
  unsigned status = 0;
  if (!errors_.empty()) status |= 1u << 2;
  if ((events_ & event_enable) != 0) status |= 1u << 5;
  if ((status & service_enable & ~(1u << 6)) != 0) status |= 1u << 6;
  return status;
}

}  // namespace probewright::emulated
