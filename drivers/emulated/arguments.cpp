#include "drivers/emulated/arguments.h"

#include <algorithm>
#include <cmath>

namespace probewright::emulated {

const wire::Datum* Arguments::take() {
  if (taken_ < unit_.data.size()) return &unit_.data[taken_++];
  fail(-109);
  return nullptr;
}

double Arguments::number(std::string_view unit, double low, double high) {
  const wire::Datum* datum = take();
  if (datum == nullptr) return low;
  if (datum->kind != wire::Datum::Kind::number) return fail(-104), low;
  const auto value = wire::number_in(*datum, unit);
  if (!value) return fail(-131), low;
  if (!(*value >= low && *value <= high)) return fail(-222), low;
  return *value;
}

long Arguments::integer(long low, long high) {
  const double value = number("", static_cast<double>(low), static_cast<double>(high));
  if (value != std::floor(value)) return fail(-224), low;
  return static_cast<long>(value);
}

bool Arguments::truth() {
  const wire::Datum* datum = take();
  if (datum == nullptr) return false;
  if (datum->kind == wire::Datum::Kind::word) {
    if (datum->text == "ON") return true;
    if (datum->text != "OFF") fail(-224);
    return false;
  }
  if (datum->kind != wire::Datum::Kind::number) return fail(-104), false;
  if (!datum->suffix.empty()) return fail(-131), false;
  if (datum->number != 0.0 && datum->number != 1.0) fail(-224);
  return datum->number == 1.0;
}

std::size_t Arguments::word(const std::vector<std::string_view>& words) {
  const wire::Datum* datum = take();
  if (datum == nullptr) return 0;
  if (datum->kind != wire::Datum::Kind::word) return fail(-104), 0;
  for (std::size_t i = 0; i < words.size(); ++i) {
    if (wire::keyword_matches(words[i], datum->text)) return i;
  }
  fail(-224);
  return 0;
}

std::string Arguments::text(std::size_t shortest, std::size_t longest) {
  const wire::Datum* datum = take();
  if (datum == nullptr) return {};
  if (datum->kind != wire::Datum::Kind::text) return fail(-104), std::string{};
  const bool printable =
      std::all_of(datum->text.begin(), datum->text.end(), [](char c) { return c >= 0x20 && c <= 0x7e; });
  if (!printable) fail(-151);
  if (datum->text.size() < shortest || datum->text.size() > longest) fail(-222);
  return datum->text;
}

int Arguments::fault() const {
  if (fault_ != 0) return fault_;
  return taken_ < unit_.data.size() ? -108 : 0;
}

}  // namespace probewright::emulated
