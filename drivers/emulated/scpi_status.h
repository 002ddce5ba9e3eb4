#pragma once
#include <cstdint>
#include <deque>
#include <string>
#include <string_view>

namespace probewright::emulated {

/// Error queue and event registers of a message-based device after IEEE 488.2 and SCPI-1999.
class ScpiStatus {
 public:
  /// Bits of the event register.
  static constexpr unsigned operation_complete = 1u << 0, query_error = 1u << 2, device_error = 1u << 3,
                            execution_error = 1u << 4, command_error = 1u << 5, power_on = 1u << 7;

  void push(int number);  ///< an error by its number, e.g. -113
  std::string next();     ///< oldest error, taken out: -113,"Undefined header"
  void clear();           ///< error queue and event register
  void raise(unsigned bits) { events_ |= bits; }
  unsigned take_events();  ///< event register, then cleared
  unsigned status_byte() const;

  unsigned event_enable = 0;
  unsigned service_enable = 0;

 private:
  static constexpr std::size_t depth = 16;
  std::deque<int> errors_;
  unsigned events_ = power_on;
};

/// The standard's words for an error number.
std::string_view scpi_words(int number);

}  // namespace probewright::emulated
