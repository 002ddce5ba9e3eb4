#include "drivers/emulated/deviates.h"

#include <cmath>

namespace probewright::emulated {

double Deviates::uniform() {
  return (static_cast<double>(entropy_.next() >> 11) + 0.5) * 0x1.0p-53;  // 53 bits, shifted by half a step off 0
}

double Deviates::normal() {
  if (has_spare_) {
    has_spare_ = false;
    return spare_;
  }
  double u = 0.0, v = 0.0, square = 0.0;
  do {
    u = 2.0 * uniform() - 1.0;
    v = 2.0 * uniform() - 1.0;
    square = u * u + v * v;
  } while (square >= 1.0 || square == 0.0);
  const double factor = std::sqrt(-2.0 * std::log(square) / square);
  spare_ = v * factor;
  has_spare_ = true;
  return u * factor;
}

double Deviates::log_normal(double median, double relative_sd) { return median * std::exp(relative_sd * normal()); }

std::uint64_t named_seed(std::uint64_t seed, std::string_view name) {
  std::uint64_t hash = 0xcbf29ce484222325u;
  for (const char c : name) {
    hash ^= static_cast<unsigned char>(c);
    hash *= 0x100000001b3u;
  }
  return derived_seed(seed, hash);
}

}  // namespace probewright::emulated
