#include "station/base/times.h"

#include "station/base/clock.h"

namespace probewright {
namespace {

constexpr std::int64_t us_per_second = 1'000'000;
constexpr std::int64_t us_per_day = 86'400 * us_per_second;

std::string padded(std::int64_t value, std::size_t width) {
  std::string digits = std::to_string(value);  // of an integer: no locale in it
  return digits.size() < width ? std::string(width - digits.size(), '0') + digits : digits;
}

/// Takes fixed-width pieces off the front of a text; `ok` turns false at the first that is not as expected.
class Cursor {
 public:
  explicit Cursor(std::string_view text) : rest_(text) {}

  int digits(std::size_t count) {
    int value = 0;
    for (std::size_t i = 0; i < count; ++i) value = value * 10 + digit();
    return value;
  }
  void expect(char wanted) {
    if (!skip(wanted)) ok_ = false;
  }
  bool skip(char wanted) {
    if (!rest_.starts_with(wanted)) return false;
    rest_.remove_prefix(1);
    return true;
  }
  /// Digits after the point, 1 to 6 of them, as microseconds.
  int fraction_us() {
    int value = 0, count = 0;
    for (; count < 6 && starts_with_digit(); ++count) value = value * 10 + digit();
    if (count == 0) ok_ = false;
    for (; count < 6; ++count) value *= 10;
    return value;
  }
  bool all_read() const { return ok_ && rest_.empty(); }

 private:
  bool starts_with_digit() const { return !rest_.empty() && rest_.front() >= '0' && rest_.front() <= '9'; }
  int digit() {
    if (!starts_with_digit()) {
      ok_ = false;
      return 0;
    }
    const int value = rest_.front() - '0';
    rest_.remove_prefix(1);
    return value;
  }

  std::string_view rest_;
  bool ok_ = true;
};

}  // namespace

std::string to_text(UtcTime time) {
  using namespace std::chrono;
  std::int64_t days_since = time.microseconds / us_per_day, in_day = time.microseconds % us_per_day;
  if (in_day < 0) --days_since, in_day += us_per_day;
  const year_month_day date{sys_days{days{days_since}}};
  const std::int64_t second = in_day / us_per_second;
  return padded(int{date.year()}, 4) + "-" + padded(unsigned{date.month()}, 2) + "-" + padded(unsigned{date.day()}, 2) +
         "T" + padded(second / 3600, 2) + ":" + padded(second / 60 % 60, 2) + ":" + padded(second % 60, 2) + "." +
         padded(in_day % us_per_second, 6) + "Z";
}

Result<UtcTime> parse_utc(std::string_view text) {
  using namespace std::chrono;
  Cursor cursor{text};
  const int y = cursor.digits(4);
  cursor.expect('-');
  const int m = cursor.digits(2);
  cursor.expect('-');
  const int d = cursor.digits(2);
  cursor.expect('T');
  const int hour = cursor.digits(2);
  cursor.expect(':');
  const int minute = cursor.digits(2);
  cursor.expect(':');
  const int second = cursor.digits(2);
  const int fraction_us = cursor.skip('.') ? cursor.fraction_us() : 0;
  cursor.expect('Z');
  const year_month_day date{year{y}, month{static_cast<unsigned>(m)}, day{static_cast<unsigned>(d)}};
  if (!cursor.all_read() || !date.ok() || hour > 23 || minute > 59 || second > 59)
    return Problem{"time_malformed", "", {{"text", std::string{text}}}};
  const std::int64_t days_since = sys_days{date}.time_since_epoch().count();
  const std::int64_t seconds_in_day = hour * 3600 + minute * 60 + second;
  return UtcTime{days_since * us_per_day + seconds_in_day * us_per_second + fraction_us};
}

UtcTime SystemClock::utc_now() const {
  using namespace std::chrono;
  return {duration_cast<microseconds>(system_clock::now().time_since_epoch()).count()};
}

SteadyTime SystemClock::steady_now() const {
  return {std::chrono::duration_cast<Duration>(std::chrono::steady_clock::now().time_since_epoch())};
}

}  // namespace probewright
