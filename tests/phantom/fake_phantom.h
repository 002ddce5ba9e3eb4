#pragma once
#include <boost/asio/awaitable.hpp>
#include <cmath>
#include <deque>
#include <functional>
#include <map>
#include <memory>
#include <optional>
#include <string>
#include <vector>

#include "drivers/wire/block.h"
#include "drivers/wire/checked_line.h"
#include "drivers/wire/crc.h"
#include "drivers/wire/le.h"
#include "drivers/wire/line_clock.h"
#include "drivers/wire/line_reader.h"
#include "drivers/wire/message.h"
#include "drivers/wire/port.h"
#include "station/base/numbers.h"

/// A phantom for the driver's tests, written from WIRE.md: it knows the short keywords that the driver sends, has no
/// optics, and can be told to misbehave.
class FakePhantom {
 public:
  std::string identity = "Alder Quay Sensors,PHANTOM,PH-01,1.0.0-emulated-x1";
  std::string certificate = "PHC-2026-0101", due = "2027-06-30";
  std::string wavelengths = "600,0.4402,-2e-07,-1e-10";
  std::string temperature = "25.12";
  int boot = 4711;
  bool lid_closed = true, present = true;
  unsigned insertions = 3;

  std::vector<std::string> executed;  ///< messages that passed the checksum, in order
  int damaged_messages = 0;
  /// Changes the bytes of an answer: message, answer with its LF. Not set: as it is.
  std::function<std::string(const std::string&, std::string)> spoil;
  /// How much later than due the answer to a message comes.
  std::function<probewright::Duration(const std::string&)> late;
  /// An error that a message meets instead of being executed.
  std::function<std::optional<std::string>(const std::string&)> refuse;

  void power_on() {
    checks_ = false;
    ++boot;
    readings_ = 0;
    errors.clear();
    reset();
  }
  std::deque<std::string> errors;

  boost::asio::awaitable<void> serve(std::shared_ptr<probewright::wire::Port> port,
                                     probewright::wire::LineClock& clock) {
    using namespace probewright;
    wire::LineReader reader{1024};
    std::array<std::byte, 512> bytes;
    try {
      for (;;) {
        const std::size_t got = co_await port->read_some(bytes, clock.steady_now() + std::chrono::hours(1000));
        reader.feed(std::span{bytes}.first(got));
        while (auto line = reader.next()) {
          std::string message;
          if (!accept(*line, message)) continue;
          busy_ = Duration{0};
          std::string answer = execute(message);
          if (late) busy_ += late(message);
          co_await clock.dwell(busy_);
          if (answer.empty()) continue;
          answer = checks_ ? wire::add_checksum(answer) : answer + "\n";
          if (spoil) answer = spoil(message, std::move(answer));
          co_await port->write_all(std::as_bytes(std::span{answer}), clock.steady_now() + std::chrono::hours(1000));
        }
      }
    } catch (const wire::PortLost&) {
    }
  }

 private:
  bool accept(const std::string& line, std::string& message) {
    using namespace probewright;
    if (line.empty()) return false;
    if (!checks_ && !wire::has_checksum(line)) {
      message = line;
    } else if (auto text = wire::strip_checksum(line)) {
      message = *std::move(text);
    } else {
      ++damaged_messages;
      error("-360,\"Communication error\"");
      return false;
    }
    executed.push_back(message);
    return true;
  }

  void error(std::string entry) {
    if (errors.size() < 16)
      errors.push_back(std::move(entry));
    else
      errors.back() = "-350,\"Queue overflow\"";
  }

  std::string execute(const std::string& message) {
    using namespace probewright;
    if (refuse)
      if (auto entry = refuse(message)) {
        error(*entry);
        return {};
      }
    const auto parsed = wire::parse_message(message);
    std::string answers;
    for (const auto& unit : parsed.units) {
      std::string key;
      for (const auto& word : unit.header) key += (key.empty() ? "" : ":") + word;
      const auto answer = unit.query ? query(key, unit) : command(key, unit);
      if (!answer) return answers;
      if (unit.query) answers += (answers.empty() ? "" : ";") + *answer;
    }
    return answers;
  }

  std::optional<std::string> fail(std::string entry) {
    error(std::move(entry));
    return std::nullopt;
  }

  /// "" when done, nothing after an error.
  std::optional<std::string> command(const std::string& key, const probewright::wire::Unit& unit) {
    using probewright::Duration;
    using std::chrono::milliseconds;
    if (key == "*RST") {
      reset();
      return "";
    }
    const auto setting = settings_.find(key);
    if (setting == settings_.end()) return fail("-113,\"Undefined header\"");
    if (unit.data.size() != 1) return fail("-109,\"Missing parameter\"");
    const auto& datum = unit.data[0];
    std::string value = datum.as_written;
    if (value == "ON" || value == "OFF") value = value == "ON" ? "1" : "0";
    const Setting& range = setting->second;
    if (range.words.empty()) {
      const double number = probewright::parse_double(value).value_or(NAN);
      if (!(number >= range.low && number <= range.high)) return fail("-222,\"Data out of range\"");
      value = probewright::shortest(number);
    }
    const bool changed = setting->second.value != value;
    setting->second.value = value;
    if (changed && key == "SPEC:SHUT") busy_ += milliseconds(20);
    if (changed && key == "PATH:OPAQ") busy_ += milliseconds(100);
    if (changed && key == "LINE:STAT") busy_ += milliseconds(50);
    if (key == "SYST:CHEC") checks_ = value == "1";
    return "";
  }

  std::optional<std::string> query(const std::string& key, const probewright::wire::Unit& unit) {
    using namespace probewright;
    using std::chrono::milliseconds;
    if (key == "*IDN") return identity;
    if (key == "*OPC") {
      busy_ += milliseconds(150);
      return "1";
    }
    if (key == "*TST") {
      busy_ += milliseconds(200);
      return "0";
    }
    if (key == "SYST:BOOT") return std::to_string(boot);
    if (key == "SYST:ECHO") return unit.data.at(0).as_written;
    if (key == "SYST:CHEC") return checks_ ? "1" : "0";
    if (key == "CERT:NUMB") return wire::quoted(certificate);
    if (key == "CERT:DUE") return wire::quoted(due);
    if (key == "SPEC:WAV") return wavelengths;
    if (key == "SPEC:READ") return spectrum();
    if (key == "MOD:SETT") return "1";
    if (key == "MOD:SETP:LIST") return "1,0.4,0.01,0.025,2,1,0.01,0.01,3,1.6,0.016,0.01";
    if (key == "LINE:LIST") return "696.543,763.511,811.531,912.297";
    if (key == "TEMP") return temperature;
    if (key == "LID") return lid_closed ? "CLOS" : "OPEN";
    if (key == "PROB") return present ? "1" : "0";
    if (key == "PROB:COUN") return std::to_string(insertions);
    if (key == "SYST:ERR") {
      if (errors.empty()) return "0,\"No error\"";
      const std::string oldest = errors.front();
      errors.pop_front();
      return oldest;
    }
    const auto setting = settings_.find(key);
    if (setting == settings_.end()) return fail("-113,\"Undefined header\"");
    return setting->second.value;
  }

  std::string spectrum() {
    using namespace probewright;
    const double exposure_s = parse_double(settings_["SPEC:EXP"].value).value();
    const auto frames = parse_integer(settings_["SPEC:AVER"].value).value();
    busy_ += from_seconds(exposure_s * static_cast<double>(frames)) + std::chrono::milliseconds(2);
    wire::LeWriter block;
    block.u32(++readings_).u32(static_cast<std::uint32_t>(std::lround(1e6 * exposure_s)));
    block.u16(static_cast<std::uint16_t>(frames)).u8(settings_["SPEC:SHUT"].value == "OPEN").u8(0);
    block.i16(2512).u16(1024);
    for (int pixel = 0; pixel < 1024; ++pixel) block.u16(pixel == 512 ? 0x0A7C : 1000);  // LF and | inside
    block.u32(wire::crc32(block.bytes()));
    return wire::encode_block(block.bytes());
  }

  struct Setting {
    std::string value;
    double low = 0.0, high = 1.0;
    std::string words = {};  ///< not empty: takes words
  };
  static std::map<std::string, Setting> reset_values() {
    return {{"SYST:CHEC", {"0"}},
            {"SPEC:EXP", {"0.02", 0.001, 2}},
            {"SPEC:AVER", {"1", 1, 64}},
            {"SPEC:SHUT", {"OPEN", 0, 0, "OPEN|CLOS"}},
            {"MOD:SETP", {"0", 0, 3}},
            {"MOD:RATE", {"5", 0.5, 10}},
            {"MOD:DEPT:RED", {"0.01", 0, 0.1}},
            {"MOD:DEPT:INFR", {"0.01", 0, 0.1}},
            {"MOD:STAT", {"0"}},
            {"PATH:OPAQ", {"0"}},
            {"LAMP:STAT", {"0"}},
            {"LAMP:LEV", {"0.5"}},
            {"LAMP:FLIC", {"0", 0, 120}},
            {"LINE:STAT", {"0"}}};
  }
  void reset() { settings_ = reset_values(); }

  bool checks_ = false;
  std::uint32_t readings_ = 0;
  probewright::Duration busy_{0};
  std::map<std::string, Setting> settings_ = reset_values();
};
