#pragma once
#include <string>
#include <string_view>
#include <vector>

#include "drivers/wire/message.h"

namespace probewright::emulated {

/// Takes the parameters of a unit one after the other; the first fault counts. Ask fault() when all are taken.
class Arguments {
 public:
  explicit Arguments(const wire::Unit& unit) : unit_(unit) {}

  /// A number in `unit` ("S", "HZ" or none) from `low` to `high`.
  double number(std::string_view unit, double low, double high);
  /// A whole number from `low` to `high`.
  long integer(long low, long high);
  /// ON, OFF, 1 or 0.
  bool truth();
  /// Which of `words` ("OPEN", "CLOSed") it is.
  std::size_t word(const std::vector<std::string_view>& words);
  /// A string of printable ASCII with `shortest` to `longest` characters.
  std::string text(std::size_t shortest, std::size_t longest);

  /// SCPI number of what is wrong, surplus parameters included; 0 when all is well.
  int fault() const;

 private:
  const wire::Datum* take();
  void fail(int number) {
    if (fault_ == 0) fault_ = number;
  }

  const wire::Unit& unit_;
  std::size_t taken_ = 0;
  int fault_ = 0;
};

/// Fault of a unit that takes no parameters: 0 or -108.
inline int no_parameters(const wire::Unit& unit) { return Arguments{unit}.fault(); }

/// A truth value in an answer.
inline std::string truth_text(bool value) { return value ? "1" : "0"; }

}  // namespace probewright::emulated
